"""Laws of the likelihood ratio; its published and reference numbers are in tests/published."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.estimates import Counts
from revinf.stats.ratio import (
    DEFAULT_LIMIT,
    likelihood_ratio,
    likelihood_ratios,
    log_ratio_quantiles,
    observed_ratio,
)
from tests.strategies import BILLION, full_tables, levels, tables

PRIORS = ("shared", "independent")
LEVELS = np.array([0.025, 0.25, 0.5, 0.75, 0.975])
BROCA = Counts(166, 703, 199, 2154)
EMPTY_SIDES = [Counts(0, 0, 3, 5), Counts(3, 5, 0, 0), Counts(0, 0, 0, 0)]

few = settings(max_examples=25)


@few
@given(full_tables(BILLION), st.sampled_from(PRIORS))
def test_swapping_term_and_other_negates_and_reverses_every_log_quantile_bit_for_bit(table, prior):
    forward = log_ratio_quantiles([table], LEVELS, prior=prior)[0]
    backward = log_ratio_quantiles([table.swapped()], LEVELS, prior=prior)[0]
    assert np.array_equal(forward, -backward[::-1])


@few
@given(st.lists(full_tables(), min_size=1, max_size=6), st.sampled_from(PRIORS))
def test_swapping_is_exact_among_other_tables_too(tables, prior):
    both = [*tables, *(table.swapped() for table in tables)]
    found = log_ratio_quantiles(both, LEVELS, prior=prior)
    assert np.array_equal(found[: len(tables)], -found[len(tables) :, ::-1])


@few
@given(full_tables(BILLION), st.sampled_from(PRIORS))
def test_intervals_are_ordered_and_finite_up_to_a_billion_studies(table, prior):
    ratio = likelihood_ratio(table, prior=prior)
    assert 0 < ratio.low < ratio.estimate < ratio.high < math.inf


@pytest.mark.parametrize("prior", PRIORS)
@pytest.mark.parametrize("table", EMPTY_SIDES)
def test_without_a_side_there_is_no_ratio(table, prior):
    assert likelihood_ratio(table, prior=prior) is None
    assert observed_ratio(table) is None


@few
@given(st.integers(1, 10**6), st.integers(1, 10**6))
def test_without_hits_on_either_side_the_prior_comes_back(n_term, n_other):
    # Not to the last digit: p0 < 1 and p1 < 1 cut a corner off the prior; more studies, less of it.
    ratio = likelihood_ratio(Counts(0, n_term, 0, n_other))
    slack = 0.45 / min(n_term, n_other) ** 0.5
    assert abs(math.log(ratio.estimate)) < slack
    assert abs(math.log(ratio.low * DEFAULT_LIMIT)) < slack
    assert abs(math.log(ratio.high / DEFAULT_LIMIT)) < slack


@pytest.mark.parametrize("limit", [1.5, 20, 100, 1e4, 1e9])
def test_without_hits_the_limits_of_the_prior_are_those_asked_for(limit):
    ratio = likelihood_ratio(Counts(0, 10**6, 0, 10**6), limit=limit)
    assert ratio.estimate == 1.0
    assert ratio.low == pytest.approx(1 / limit, rel=1e-4)
    assert ratio.high == pytest.approx(limit, rel=1e-4)


@pytest.mark.parametrize("n", [1, 63, 10**6])
@pytest.mark.parametrize("prior", PRIORS)
def test_equal_sides_give_a_ratio_of_exactly_one(prior, n):
    for table in (Counts(n, n, n, n), Counts(0, n, 0, n), Counts(n, 0, n, 0)):
        ratio = likelihood_ratio(table, prior=prior)
        assert ratio.estimate == 1.0
        assert ratio.low * ratio.high == pytest.approx(1, rel=1e-15)


@few
@given(full_tables(), levels(), levels(), st.sampled_from(PRIORS))
def test_a_wider_level_has_the_wider_interval(table, one, other, prior):
    narrow, wide = (likelihood_ratio(table, level=level, prior=prior) for level in sorted((one, other)))
    assert math.log(wide.low) <= math.log(narrow.low) + 1e-9
    assert math.log(wide.high) >= math.log(narrow.high) - 1e-9
    assert wide.estimate == narrow.estimate


def test_a_level_clearly_wider_gives_a_clearly_wider_interval():
    narrow, wide = (likelihood_ratio(BROCA, level=level) for level in (0.5, 0.95))
    assert wide.low < narrow.low < narrow.high < wide.high


@few
@given(full_tables(10**5))
def test_one_more_hit_for_the_term_raises_the_ratio_of_independent_rates(table):
    n11, n10, n01, n00 = table.as_tuple()
    fewer, more = log_ratio_quantiles(
        [Counts(n11, n10 + 1, n01, n00), Counts(n11 + 1, n10, n01, n00)], LEVELS, prior="independent"
    )
    assert np.all(more > fewer)


def test_one_more_hit_can_lower_an_upper_end_where_the_rates_share_a_prior():
    """A hit raises the pooled rate too, and with it what is thought of the other side: found by search.

    A plain sum over a fine grid gives 3.62729 and 3.62592 for the two 97.5 % points.
    """
    fewer, more = log_ratio_quantiles([Counts(14, 1, 0, 1), Counts(15, 0, 0, 1)], LEVELS, prior="shared")
    assert np.all(more[:3] > fewer[:3])
    assert fewer[-1] == pytest.approx(3.62729, abs=2e-5)
    assert more[-1] == pytest.approx(3.62592, abs=2e-5)


@few
@given(st.lists(tables(), min_size=1, max_size=8), st.randoms(use_true_random=False), st.sampled_from(PRIORS))
def test_the_order_of_a_list_does_not_matter(tables, random, prior):
    order = list(range(len(tables)))
    random.shuffle(order)
    shuffled = likelihood_ratios([tables[i] for i in order], prior=prior)
    found = likelihood_ratios(tables, prior=prior)
    assert shuffled == [found[i] for i in order]


@few
@given(st.lists(tables(), min_size=1, max_size=8), st.sampled_from(PRIORS))
def test_a_table_has_the_same_digits_alone_and_in_company(tables, prior):
    assert likelihood_ratios(tables, prior=prior) == [likelihood_ratio(table, prior=prior) for table in tables]


def test_company_that_is_hard_to_solve_leaves_the_digits_alone():
    # More than the 64 tables that are solved together, among them extremes that need other panels.
    easy = [Counts(k, 40, 3, 300) for k in range(80)]
    hard = [
        Counts(5 * 10**8, 5 * 10**8, 5 * 10**8, 5 * 10**8),
        Counts(0, BILLION, BILLION, 0),
        Counts(1, 0, 0, 1),
    ]
    assert likelihood_ratios(easy + hard)[: len(easy)] == likelihood_ratios(easy)


def test_equal_tables_have_equal_digits():
    twice = likelihood_ratios([BROCA, Counts(0, 0, 1, 1), Counts(1, 2, 3, 4), BROCA])
    assert twice[0] == twice[3] == likelihood_ratio(BROCA)
    assert twice[1] is None
    assert likelihood_ratios([]) == []


def test_a_narrower_prior_draws_the_ratio_towards_one():
    few_studies = Counts(3, 0, 0, 448)
    narrow, default, wide = (likelihood_ratio(few_studies, limit=limit) for limit in (5, 20, 1000))
    assert 1 < narrow.estimate < default.estimate < wide.estimate
    assert default == likelihood_ratio(few_studies)


def test_the_prior_hardly_matters_where_there_are_many_studies():
    shared, independent = (likelihood_ratio(BROCA, prior=prior) for prior in PRIORS)
    assert shared != independent
    assert independent.estimate == pytest.approx(shared.estimate, rel=0.01)
    assert likelihood_ratio(BROCA) == shared


def test_independent_rates_see_an_effect_where_there_is_no_evidence():
    # The reason why the shared prior is the default: 0/63 v 0/388 says nothing about the ratio.
    assert likelihood_ratio(Counts(0, 63, 0, 388), prior="independent").estimate > 6
    assert likelihood_ratio(Counts(0, 63, 0, 388)).estimate == pytest.approx(1, abs=1e-3)


def test_the_limit_of_the_prior_does_not_touch_independent_rates():
    assert likelihood_ratio(BROCA, prior="independent", limit=5) == likelihood_ratio(BROCA, prior="independent")


@given(full_tables())
def test_the_observed_ratio_is_that_of_the_two_rates(table):
    observed = observed_ratio(table)
    if table.other_active == 0:
        assert observed is None
    else:
        rates = table.term_active / table.term_total, table.other_active / table.other_total
        assert observed == pytest.approx(rates[0] / rates[1], rel=1e-12)


@few
@given(st.integers(200, 10**6), st.integers(200, 10**6), st.floats(0.2, 0.8), st.floats(0.2, 0.8))
def test_with_many_studies_the_estimate_nears_the_observed_ratio(n_term, n_other, p1, p0):
    n11, n01 = round(p1 * n_term), round(p0 * n_other)
    table = Counts(n11, n_term - n11, n01, n_other - n01)
    for prior in PRIORS:
        ratio = likelihood_ratio(table, prior=prior)
        assert ratio.covers(observed_ratio(table))
        assert math.log(ratio.estimate / observed_ratio(table)) == pytest.approx(0, abs=3 / min(n_term, n_other))


@pytest.mark.parametrize("limit", [1, 0.05, -20, 2e9, math.inf, math.nan])
def test_a_limit_outside_is_refused(limit):
    message = f"^the limit of the ratio's prior must be above 1 and at most 1e9, but got {limit}; use 20$"
    for table in (BROCA, EMPTY_SIDES[0]):
        with pytest.raises(InvalidCountError, match=message.replace("+", r"\+")):
            likelihood_ratio(table, limit=limit)


def test_an_unknown_prior_is_refused():
    with pytest.raises(
        InvalidProbabilityError,
        match=r"^the ratio's prior must be one of shared, independent, but got 'flat'; use shared$",
    ):
        likelihood_ratio(BROCA, prior="flat")


@pytest.mark.parametrize("level", [0, 1, 95, math.nan])
def test_a_level_outside_is_refused(level):
    with pytest.raises(InvalidProbabilityError, match=rf"^level must .* but got {level}; use 0\.95 for a 95 %"):
        likelihood_ratio(BROCA, level=level)


def test_lopsided_levels_are_refused_since_swapping_would_not_mirror_them():
    with pytest.raises(
        InvalidProbabilityError,
        match=r"^levels must be symmetric about 1/2, but got \[0\.025, 0\.5, 0\.9\]; use 0\.025, 0\.5 and",
    ):
        log_ratio_quantiles([BROCA], np.array([0.025, 0.5, 0.9]))
