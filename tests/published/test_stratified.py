"""The Mantel-Haenszel ratio against statsmodels, its interval against the log method.

Estimate: statsmodels StratifiedTable.riskratio_pooled. Interval: with one stratum the variance of
Greenland & Robins 1985 (Biometrics 41:55-68) is that of the log method, 1/a - 1/n1 + 1/c - 1/n0, which
statsmodels has as confint_proportions_2indep(compare="ratio", method="log").
"""

from __future__ import annotations

from math import log, sqrt

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from statsmodels.stats.contingency_tables import StratifiedTable
from statsmodels.stats.proportion import confint_proportions_2indep

from revinf.stats.estimates import Counts
from revinf.stats.stratified import mantel_haenszel_ratio

POSITIVE = st.integers(1, 500)
STRATA = st.lists(st.builds(Counts, *(POSITIVE,) * 4), min_size=2, max_size=6)


def two_by_two(stratum):
    return np.array(stratum.as_tuple(), dtype=float).reshape(2, 2)


@given(STRATA)
def test_the_estimate_is_that_of_statsmodels(strata):
    reference = StratifiedTable([two_by_two(stratum) for stratum in strata]).riskratio_pooled
    assert mantel_haenszel_ratio(strata).estimate == pytest.approx(reference, rel=1e-10)


@given(st.builds(Counts, *(POSITIVE,) * 4), st.sampled_from([0.8, 0.95, 0.99]))
def test_with_one_stratum_the_interval_is_that_of_the_log_method(table, level):
    ratio = mantel_haenszel_ratio([table], level=level, minimum_strata=1)
    low, high = confint_proportions_2indep(
        table.term_active,
        table.term_total,
        table.other_active,
        table.other_total,
        compare="ratio",
        method="log",
        alpha=1 - level,
        correction=False,
    )
    assert (ratio.low, ratio.high) == pytest.approx((low, high), rel=1e-10)


def test_the_aspirin_trial_has_its_log_method_interval():
    # 189/11034 against 104/11037: 1.82, 1.433-2.306; Agresti, Categorical Data Analysis (from memory).
    ratio = mantel_haenszel_ratio([Counts(189, 10845, 104, 10933)], minimum_strata=1)
    assert [round(value, 3) for value in (ratio.low, ratio.high)] == [1.433, 2.306]
    assert round(ratio.estimate, 2) == 1.82


@given(STRATA)
def test_the_variance_is_that_of_greenland_and_robins(strata):
    # Their formula written out with arrays; 1.959964 standard errors at 95 %.
    a, b, c, d = np.array([stratum.as_tuple() for stratum in strata], dtype=float).T
    n1, n0, n = a + b, c + d, a + b + c + d
    variance = ((a + c) * n1 * n0 / n**2 - a * c / n).sum() / ((a * n0 / n).sum() * (c * n1 / n).sum())
    ratio = mantel_haenszel_ratio(strata)
    assert log(ratio.high) - log(ratio.estimate) == pytest.approx(1.959963985 * sqrt(variance), rel=1e-7)
    assert ratio.low * ratio.high == pytest.approx(ratio.estimate**2, rel=1e-10)


def test_the_interval_covers_a_known_ratio_as_often_as_it_says():
    rng = np.random.default_rng(5)
    n_term, n_other, base = np.array([60, 40, 80]), np.array([90, 120, 50]), np.array([0.1, 0.2, 0.35])
    covered = 0
    for hits_term, hits_other in zip(
        rng.binomial(n_term, 1.8 * base, (2000, 3)).tolist(),
        rng.binomial(n_other, base, (2000, 3)).tolist(),
        strict=True,
    ):
        strata = [
            Counts(h1, n1 - h1, h0, n0 - h0)
            for h1, n1, h0, n0 in zip(hits_term, n_term.tolist(), hits_other, n_other.tolist(), strict=True)
        ]
        covered += mantel_haenszel_ratio(strata).covers(1.8)
    # 95 % of 2000, four standard errors either way.
    assert 1861 <= covered <= 1939
