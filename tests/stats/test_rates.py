"""Rates from counts: Jeffreys posteriors, against scipy's beta law; statsmodels' are in tests/published."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.rates import beta_quantiles, jeffreys_rate, jeffreys_rates
from tests.strategies import BILLION, hits_of_studies, levels

few = settings(max_examples=40)
LEVELS = np.array([0.005, 0.025, 0.5, 0.975, 0.995])


@given(hits_of_studies(BILLION))
def test_quantiles_agree_with_scipy_up_to_a_billion_studies(pair):
    hits, total = pair
    a, b = hits + 0.5, total - hits + 0.5
    if hits > total - hits:
        # A rate next to 1 cannot be told from 1 by a double, so the misses are looked at instead.
        a, b = b, a
    found = beta_quantiles(np.array([a]), np.array([b]), LEVELS)[0]
    np.testing.assert_allclose(stats.beta.cdf(found, a, b), LEVELS, rtol=0, atol=5e-8)
    np.testing.assert_allclose(found, stats.beta.ppf(LEVELS, a, b), rtol=2e-6, atol=0)


@few
@given(hits_of_studies(BILLION), levels())
def test_intervals_are_ordered_inside_0_and_1(pair, level):
    rate = jeffreys_rate(*pair, level=level)
    assert 0 < rate.low < rate.estimate < rate.high <= 1


@few
@given(hits_of_studies(), levels(), levels())
def test_a_wider_level_has_the_wider_interval(pair, one, other):
    narrow, wide = (jeffreys_rate(*pair, level=level) for level in sorted((one, other)))
    assert wide.low <= narrow.low * (1 + 1e-9)
    assert wide.high >= narrow.high * (1 - 1e-9)
    assert wide.estimate == pytest.approx(narrow.estimate, rel=1e-9)


@few
@given(hits_of_studies(10**5))
def test_counting_misses_instead_of_hits_mirrors_the_rate(pair):
    hits, total = pair
    rate, mirrored = jeffreys_rate(hits, total), jeffreys_rate(total - hits, total)
    assert rate.low == pytest.approx(1 - mirrored.high, abs=1e-8)
    assert rate.estimate == pytest.approx(1 - mirrored.estimate, abs=1e-8)


@few
@given(hits_of_studies(10**5))
def test_one_hit_more_raises_the_rate(pair):
    hits, total = pair
    fewer, more = jeffreys_rate(hits, total + 1), jeffreys_rate(hits + 1, total + 1)
    assert fewer.low < more.low
    assert fewer.estimate < more.estimate
    assert fewer.high < more.high


def test_the_interval_does_not_snap_to_0_or_1():
    none, every = jeffreys_rates([(0, 388), (388, 388)])
    assert 0 < none.low < none.estimate
    assert every.estimate < every.high < 1


@few
@given(st.lists(hits_of_studies(), min_size=1, max_size=10))
def test_a_rate_has_the_same_digits_alone_and_in_company(pairs):
    assert jeffreys_rates(pairs) == [jeffreys_rate(*pair) for pair in pairs]


def test_without_studies_there_is_no_rate():
    assert jeffreys_rate(0, 0) is None
    assert jeffreys_rates([]) == []
    assert [rate is None for rate in jeffreys_rates([(0, 0), (1, 2), (0, 0)])] == [True, False, True]


@pytest.mark.parametrize(("active", "total"), [(-1, 5), (6, 5), (1, 0), (0, -1)])
def test_counts_that_do_not_fit_are_refused(active, total):
    with pytest.raises(
        InvalidCountError,
        match=f"^active must lie between 0 and total, but got {active} of {total}; check the counts$",
    ):
        jeffreys_rates([(1, 2), (active, total)])


def test_a_level_outside_is_refused():
    with pytest.raises(InvalidProbabilityError, match=r"^level must .* but got 1\.0; use 0\.95"):
        jeffreys_rate(1, 2, level=1.0)
