"""The product of single-region ratios and the posterior it implies; the reference is in tests/published."""

from __future__ import annotations

from math import prod

import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.bayes import posterior_probability
from revinf.stats.estimates import Counts
from revinf.stats.product import naive_bayes_posterior, product_of_ratios
from tests.strategies import priors, tables

PATTERN = st.lists(tables(), min_size=1, max_size=6)


@given(PATTERN)
def test_the_product_is_that_of_rates_with_half_a_hit_added(pattern):
    expected = prod(
        (t.term_active + 0.5) / (t.term_total + 1) / ((t.other_active + 0.5) / (t.other_total + 1)) for t in pattern
    )
    assert product_of_ratios(pattern) == pytest.approx(expected, rel=1e-12)


@given(PATTERN, PATTERN)
def test_the_product_of_two_patterns_is_the_product_of_their_products(one, other):
    expected = product_of_ratios(one) * product_of_ratios(other)
    assert product_of_ratios(one + other) == pytest.approx(expected, rel=1e-12)


@given(PATTERN)
def test_swapping_term_and_other_inverts_the_product(pattern):
    swapped = product_of_ratios([table.swapped() for table in pattern])
    assert swapped == pytest.approx(1 / product_of_ratios(pattern), rel=1e-12)


@given(PATTERN, priors())
def test_the_posterior_of_a_full_pattern_is_bayes_rule_with_the_product(pattern, prior):
    expected = posterior_probability(prior, product_of_ratios(pattern))
    assert naive_bayes_posterior(pattern, prior) == pytest.approx(expected, rel=1e-9)


@given(PATTERN, st.floats(1e-3, 0.999), st.data())
def test_the_posteriors_of_term_and_other_sum_to_1(pattern, prior, data):
    hit = data.draw(st.lists(st.booleans(), min_size=len(pattern), max_size=len(pattern)))
    swapped = [table.swapped() for table in pattern]
    total = naive_bayes_posterior(pattern, prior, hit) + naive_bayes_posterior(swapped, 1 - prior, hit)
    assert total == pytest.approx(1, abs=1e-9)


@given(PATTERN, priors())
def test_a_region_that_tells_nothing_changes_nothing(pattern, prior):
    blank = Counts(3, 9, 3, 9)
    assert product_of_ratios([*pattern, blank]) == pytest.approx(product_of_ratios(pattern), rel=1e-12)
    assert naive_bayes_posterior([*pattern, blank], prior) == pytest.approx(
        naive_bayes_posterior(pattern, prior), rel=1e-9
    )


def test_a_hundred_strong_regions_do_not_overflow_the_posterior():
    assert naive_bayes_posterior([Counts(10**6, 0, 0, 10**6)] * 100, 0.5) == 1.0
    assert naive_bayes_posterior([Counts(0, 10**6, 10**6, 0)] * 100, 0.5) == 0.0


def test_no_studies_at_all_leave_the_prior():
    assert product_of_ratios([Counts(0, 0, 0, 0)]) == 1.0
    assert naive_bayes_posterior([Counts(0, 0, 0, 0)], 0.3) == pytest.approx(0.3, rel=1e-12)


def test_a_pattern_without_regions_is_refused():
    for call in (product_of_ratios, lambda tables: naive_bayes_posterior(tables, 0.5)):
        with pytest.raises(InvalidCountError, match=r"^tables must hold at least one region, but got none"):
            call([])


def test_a_pattern_of_another_length_is_refused():
    with pytest.raises(InvalidCountError, match=r"^hit must be as many as the tables, but got 2 for 1"):
        naive_bayes_posterior([Counts(1, 2, 3, 4)], 0.5, [True, False])


def test_a_prior_outside_is_refused():
    with pytest.raises(InvalidProbabilityError, match=r"^prior must .* but got 1\.0; use 0\.5 for even odds$"):
        naive_bayes_posterior([Counts(1, 2, 3, 4)], 1.0)
