"""A term against its rival; the reference integrals are in tests/published."""

from __future__ import annotations

import time

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.estimates import Counts
from revinf.stats.head_to_head import head_to_head, heads_to_head
from revinf.stats.ratio import likelihood_ratio
from tests.strategies import MILLION, hits_of_studies

SIDE = hits_of_studies(MILLION)
PRIORS = st.sampled_from(["shared", "independent"])


def as_counts(term_only, rival_only):
    return Counts(term_only[0], term_only[1] - term_only[0], rival_only[0], rival_only[1] - rival_only[0])


@settings(max_examples=60, deadline=None)
@given(SIDE, SIDE, PRIORS)
def test_the_ratio_is_formula_2_to_the_last_digit(term_only, rival_only, prior):
    found = head_to_head(term_only, rival_only, level=0.9, prior=prior, limit=10.0)
    assert found.ratio == likelihood_ratio(as_counts(term_only, rival_only), level=0.9, prior=prior, limit=10.0)


@settings(max_examples=150, deadline=None)
@given(SIDE, SIDE, PRIORS)
@example((1, 900), (17, 388), "shared")
@example((0, 10**6), (10**6, 10**6), "shared")
def test_exchanging_the_two_gives_one_minus_the_probability_to_the_last_bit(term_only, rival_only, prior):
    ahead = head_to_head(term_only, rival_only, prior=prior).probability_ahead
    behind = head_to_head(rival_only, term_only, prior=prior).probability_ahead
    assert ahead == 1 - behind
    assert behind == 1 - ahead
    assert 0 <= ahead <= 1


@settings(max_examples=60, deadline=None)
@given(st.integers(1, MILLION), st.integers(1, MILLION), PRIORS)
def test_without_a_hit_on_either_side_neither_is_ahead(n_term, n_rival, prior):
    assert head_to_head((0, n_term), (0, n_rival), prior=prior).probability_ahead == 0.5


@settings(max_examples=60, deadline=None)
@given(SIDE, PRIORS)
def test_equal_counts_put_neither_ahead(side, prior):
    assert head_to_head(side, side, prior=prior).probability_ahead == 0.5


@settings(max_examples=100, deadline=None)
@given(SIDE, SIDE, PRIORS)
def test_the_probability_and_the_interval_tell_the_same(term_only, rival_only, prior):
    found = head_to_head(term_only, rival_only, prior=prior)
    if not (term_only[0] or rival_only[0]):
        return
    # P(H > 1) > 1/2 where the median lies above 1, > 0.975 where the interval does; 1e-6 is promised.
    for end, share in (("low", 0.975), ("estimate", 0.5), ("high", 0.025)):
        value = getattr(found.ratio, end)
        if value > 1 + 1e-9:
            assert found.probability_ahead >= share - 1e-6
        elif value < 1 - 1e-9:
            assert found.probability_ahead <= share + 1e-6


@settings(max_examples=60, deadline=None)
@given(hits_of_studies(2000), hits_of_studies(2000))
def test_one_hit_more_puts_the_term_further_ahead(term_only, rival_only):
    fewer = head_to_head((term_only[0], term_only[1] + 1), rival_only)
    more = head_to_head((term_only[0] + 1, term_only[1] + 1), rival_only)
    if term_only[0] or rival_only[0]:
        assert more.probability_ahead >= fewer.probability_ahead - 1e-9


def test_a_plain_lead_and_a_plain_arrear_are_told():
    assert head_to_head((300, 400), (100, 400)).probability_ahead > 0.999999
    assert head_to_head((100, 400), (300, 400)).probability_ahead < 1e-6


@settings(max_examples=30, deadline=None)
@given(st.lists(st.tuples(SIDE, SIDE), min_size=1, max_size=6))
def test_a_pair_has_the_same_digits_alone_and_in_company(pairs):
    assert heads_to_head(pairs + pairs) == [head_to_head(*pair) for pair in pairs] * 2


def test_a_side_without_studies_of_its_own_gives_nothing():
    assert head_to_head((0, 0), (3, 9)) is None
    assert head_to_head((3, 9), (0, 0)) is None
    found = heads_to_head([((3, 9), (0, 0)), ((3, 9), (1, 9))])
    assert [pair is None for pair in found] == [True, False]
    assert heads_to_head([]) == []


@pytest.mark.parametrize(
    ("term_only", "rival_only", "message"),
    [
        (
            (4, 3),
            (1, 2),
            r"^term_only must have active .* but got 4 of 3; check the counts$",
        ),
        ((1, 3), (-1, 2), r"^rival_only must have active .* but got -1 of 2"),
    ],
)
def test_counts_that_do_not_fit_are_refused(term_only, rival_only, message):
    with pytest.raises(InvalidCountError, match=message):
        head_to_head(term_only, rival_only)


def test_a_level_limit_or_prior_outside_is_refused():
    with pytest.raises(InvalidProbabilityError, match=r"^level must .* but got 1\.0; use 0\.95"):
        head_to_head((1, 3), (1, 2), level=1.0)
    with pytest.raises(InvalidCountError, match=r"^the limit of the ratio's prior must be above 1"):
        head_to_head((1, 3), (1, 2), limit=1.0)
    with pytest.raises(InvalidProbabilityError, match=r"^the ratio's prior must be one of .* but got 'flat'"):
        head_to_head((1, 3), (1, 2), prior="flat")


def test_one_pair_takes_a_few_milliseconds():
    spent = []
    for _ in range(10):
        start = time.process_time()
        head_to_head((15, 63), (17, 388))
        spent.append(time.process_time() - start)
    # Promised are 5 ms on a free core; three times that leaves room for a busy or slower machine.
    assert min(spent) < 0.015
