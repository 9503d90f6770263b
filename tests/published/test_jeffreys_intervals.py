"""Jeffreys intervals of a rate, against statsmodels' proportion_confint(method="jeffreys").

Method: Brown, Cai & DasGupta 2001, Statistical Science 16:101-133, section 3. statsmodels does not snap
the ends at no hits or all hits either, which is why it can be compared there.
"""

from __future__ import annotations

import pytest
from statsmodels.stats.proportion import proportion_confint

from revinf.stats.rates import jeffreys_rate

CASES = [
    (0, 1),
    (1, 1),
    (0, 63),
    (15, 63),
    (63, 63),
    (17, 388),
    (166, 869),
    (199, 2353),
    (0, 10**6),
    (1, 10**6),
    (500_000, 10**6),
    (10**6, 10**6),
]


@pytest.mark.parametrize("level", [0.5, 0.9, 0.95, 0.99])
@pytest.mark.parametrize(("hits", "total"), CASES)
def test_interval_agrees_with_statsmodels(hits, total, level):
    low, high = proportion_confint(hits, total, alpha=1 - level, method="jeffreys")
    rate = jeffreys_rate(hits, total, level=level)
    assert rate.low == pytest.approx(low, rel=1e-6)
    assert rate.high == pytest.approx(high, rel=1e-6)
    assert 1 - rate.high == pytest.approx(1 - high, rel=1e-5, abs=1e-15)
