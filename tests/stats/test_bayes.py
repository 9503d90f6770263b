"""Bayes' rule in odds form: posterior, prevalence, and the prior one must have held."""

from __future__ import annotations

import math

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.bayes import (
    observed_posterior,
    posterior_estimate,
    posterior_probability,
    prevalence,
    required_prior,
)
from revinf.stats.estimates import Counts, Estimate
from revinf.stats.ratio import observed_ratio
from tests.strategies import active_tables, priors, ratios

OUTSIDE = [0, 1, -0.5, 2, float("nan"), None]


@given(priors(), st.floats(0, allow_nan=False))
def test_a_posterior_is_a_probability(prior, ratio):
    assert 0 <= posterior_probability(prior, ratio) <= 1


@given(priors(), ratios(), ratios())
def test_the_posterior_rises_with_the_ratio(prior, one, other):
    low, high = sorted((one, other))
    assert posterior_probability(prior, low) <= posterior_probability(prior, high)
    if high > low * 1.001 and posterior_probability(prior, high) < 0.999:
        assert posterior_probability(prior, low) < posterior_probability(prior, high)


@given(priors(), priors(), ratios())
def test_the_posterior_rises_with_the_prior(one, other, ratio):
    low, high = sorted((one, other))
    assert posterior_probability(low, ratio) <= posterior_probability(high, ratio)


@given(priors())
def test_a_ratio_of_one_returns_the_prior(prior):
    assert posterior_probability(prior, 1.0) == pytest.approx(prior, rel=1e-12)


@given(st.floats(0.001, 0.999), ratios())
def test_the_other_hypothesis_has_the_rest(prior, ratio):
    rest = posterior_probability(1 - prior, 1 / ratio)
    assert posterior_probability(prior, ratio) + rest == pytest.approx(1, abs=1e-9)


@given(st.floats(0.001, 0.999), st.floats(0.01, 100), st.floats(0.01, 100))
def test_updating_twice_is_updating_by_the_product(prior, first, second):
    in_turn = posterior_probability(posterior_probability(prior, first), second)
    assert in_turn == pytest.approx(posterior_probability(prior, first * second), rel=1e-9)


@given(priors(), ratios())
def test_posterior_odds_are_prior_odds_times_the_ratio(prior, ratio):
    posterior = posterior_probability(prior, ratio)
    assume(1e-9 < posterior < 1 - 1e-9)
    odds = math.log(prior / (1 - prior)) + math.log(ratio)
    assert math.log(posterior / (1 - posterior)) == pytest.approx(odds, abs=1e-6)


@given(priors())
def test_limits_are_certainty_against_and_for(prior):
    assert posterior_probability(prior, 0) == 0
    assert posterior_probability(prior, math.inf) == 1


@given(priors(), st.tuples(ratios(), ratios(), ratios()))
def test_the_posterior_interval_is_the_image_of_the_ratio_s(prior, values):
    low, estimate, high = sorted(values)
    posterior = posterior_estimate(prior, Estimate(estimate, low, high))
    assert posterior == Estimate(
        posterior_probability(prior, estimate),
        posterior_probability(prior, low),
        posterior_probability(prior, high),
    )
    assert posterior.low <= posterior.estimate <= posterior.high


def test_without_a_ratio_there_is_no_posterior_but_the_prior_is_still_checked():
    assert posterior_estimate(0.5, None) is None
    with pytest.raises(InvalidProbabilityError, match=r"^prior must lie strictly between 0 and 1, but got 1;"):
        posterior_estimate(1, None)


@given(active_tables())
def test_the_observed_posterior_at_the_prevalence_is_the_share_of_active_studies(table):
    assert observed_posterior(table) == table.term_active / table.active_total
    share = prevalence(table)
    assert share == table.term_total / table.total
    assert observed_posterior(table, share) == pytest.approx(observed_posterior(table), rel=1e-9)


@given(active_tables(), priors())
def test_the_observed_posterior_is_bayes_rule_on_the_observed_ratio(table, prior):
    ratio = observed_ratio(table)
    expected = 1.0 if ratio is None else posterior_probability(prior, ratio)
    assert observed_posterior(table, prior) == pytest.approx(expected, rel=1e-9)


@pytest.mark.parametrize("table", [Counts(0, 5, 0, 5), Counts(0, 0, 3, 5), Counts(3, 5, 0, 0), Counts(0, 0, 0, 0)])
def test_without_active_studies_or_a_side_nothing_was_observed(table):
    assert observed_posterior(table) is None
    assert observed_posterior(table, 0.5) is None


def test_prevalence_is_the_share_of_studies_and_null_without_any():
    assert prevalence(Counts(1, 0, 1, 2)) == 0.25
    assert prevalence(Counts(0, 0, 0, 0)) is None


@given(st.floats(0.001, 0.999), st.floats(1e-4, 1e4))
def test_the_required_prior_reaches_its_target(target, ratio):
    prior = required_prior(target, ratio)
    assert posterior_probability(prior, ratio) == pytest.approx(target, rel=1e-9)


@given(st.floats(0.001, 0.999), ratios(), ratios())
def test_stronger_evidence_requires_less_of_the_prior(target, one, other):
    low, high = sorted((one, other))
    assert required_prior(target, high) <= required_prior(target, low)


@given(st.floats(0.001, 0.999))
def test_without_evidence_the_required_prior_is_the_target(target):
    assert required_prior(target, 1.0) == pytest.approx(target, rel=1e-12)


@pytest.mark.parametrize("prior", OUTSIDE)
def test_a_prior_outside_is_refused(prior):
    message = r"^prior must lie strictly between 0 and 1, but got .*; use 0\.5 for even odds$"
    with pytest.raises(InvalidProbabilityError, match=message):
        posterior_probability(prior, 2.0)
    with pytest.raises(InvalidProbabilityError, match=message):
        posterior_estimate(prior, Estimate(2, 1, 3))
    if prior is not None:
        with pytest.raises(InvalidProbabilityError, match=message):
            observed_posterior(Counts(1, 1, 1, 1), prior)


@pytest.mark.parametrize("target", OUTSIDE)
def test_a_target_outside_is_refused(target):
    with pytest.raises(InvalidProbabilityError, match=r"^target must .* but got .*; use 0\.8 or 0\.95$"):
        required_prior(target, 2.0)


@pytest.mark.parametrize("ratio", [-1.0, float("nan")])
def test_a_ratio_that_is_none_is_refused(ratio):
    with pytest.raises(InvalidCountError, match=f"ratio must not be negative, but got {ratio}; check the rates"):
        posterior_probability(0.5, ratio)
    with pytest.raises(InvalidCountError, match=f"ratio must be above 0, but got {ratio}; check the rates"):
        required_prior(0.5, ratio)


def test_a_prior_required_by_a_ratio_of_zero_is_refused():
    with pytest.raises(InvalidCountError, match="ratio must be above 0, but got 0; check the rates"):
        required_prior(0.5, 0)
