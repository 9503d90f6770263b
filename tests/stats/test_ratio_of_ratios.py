"""The quotient of two likelihood ratios: limits, laws, and a plain simulation."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from revinf.exceptions import InvalidProbabilityError
from revinf.stats.estimates import Counts
from revinf.stats.ratio import log_ratio_quantiles
from revinf.stats.ratio_of_ratios import ratio_of_ratios

TABLES = st.builds(Counts, *(st.integers(0, 40) for _ in range(4))).filter(
    lambda c: bool(c.term_total and c.other_total)
)


@settings(max_examples=15, deadline=None)
@given(TABLES, TABLES)
def test_swapping_inverts(first: Counts, second: Counts) -> None:
    one, two = ratio_of_ratios(first, second), ratio_of_ratios(second, first)
    assert one is not None
    assert two is not None
    assert one.probability_larger == pytest.approx(1 - two.probability_larger, abs=1e-12)
    assert one.ratio.estimate == pytest.approx(1 / two.ratio.estimate, rel=1e-6)
    assert one.ratio.low == pytest.approx(1 / two.ratio.high, rel=1e-6)


def test_equal_tables_differ_in_nothing() -> None:
    found = ratio_of_ratios(Counts(15, 48, 17, 371), Counts(15, 48, 17, 371))
    assert found is not None
    assert found.probability_larger == 0.5
    assert found.ratio.estimate == pytest.approx(1)


def test_quotient_equals_a_simulation_from_both_posteriors() -> None:
    first, second = Counts(15, 48, 17, 371), Counts(6, 40, 30, 200)
    random = np.random.default_rng(4)
    fine = (np.arange(20_001) + 0.5) / 20_001
    one, two = log_ratio_quantiles([first, second], fine)
    drawn = random.choice(one, 400_000) - random.choice(two, 400_000)
    found = ratio_of_ratios(first, second)
    assert found is not None
    assert found.probability_larger == pytest.approx(float((drawn > 0).mean()), abs=3e-3)
    ends = np.exp(np.quantile(drawn, [0.025, 0.5, 0.975]))
    assert [found.ratio.low, found.ratio.estimate, found.ratio.high] == pytest.approx(ends.tolist(), rel=0.02)


def test_a_side_without_studies_is_none_and_a_wrong_level_refused() -> None:
    assert ratio_of_ratios(Counts(0, 0, 1, 2), Counts(1, 2, 3, 4)) is None
    with pytest.raises(InvalidProbabilityError):
        ratio_of_ratios(Counts(1, 2, 3, 4), Counts(1, 2, 3, 4), level=0.0)
