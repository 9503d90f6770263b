"""Shares, diversities and their intervals; published values are in tests/published."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy import stats

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.diversity import (
    category_diversity,
    category_diversity_minimum,
    diversity_intervals,
    effective_number,
    functional_diversity,
    shares,
)
from tests.strategies import hits_of_studies

SHARES = st.lists(st.floats(0, 1), min_size=2, max_size=20).filter(lambda c: sum(c) > 1e-6)
COUNTS = st.lists(hits_of_studies(500), min_size=2, max_size=12)


class TestShares:
    @given(COUNTS)
    def test_shares_are_proportional_to_the_rates_and_sum_to_1(self, pairs):
        k, n = np.array(pairs).T
        assume(k.sum() > 0)
        c = shares(k, n)
        assert c.sum() == pytest.approx(1, rel=1e-12)
        np.testing.assert_allclose(c * (k / n).sum(), k / n, rtol=1e-12)

    def test_without_hits_there_are_no_shares(self):
        assert shares([0, 0], [5, 7]) is None
        assert shares([], []) is None

    def test_a_category_without_studies_is_refused(self):
        with pytest.raises(
            InvalidCountError, match=r"^every category needs a study, but number 2 has none; leave it out$"
        ):
            shares([1, 0], [3, 0])

    def test_counts_that_do_not_fit_are_refused(self):
        with pytest.raises(InvalidCountError, match=r"^active must lie between 0 and total, but got 4 of 3"):
            shares([1, 4], [3, 3])


class TestSummaries:
    @given(SHARES)
    def test_entropy_summaries_agree_with_scipy(self, c):
        entropy = stats.entropy(c)
        assert functional_diversity(c) == pytest.approx(entropy / np.log(len(c)), abs=1e-12)
        assert effective_number(c) == pytest.approx(np.exp(entropy), rel=1e-12)

    @given(SHARES)
    def test_all_summaries_stay_within_their_limits(self, c):
        assert 0 <= functional_diversity(c) <= 1
        assert 1 - 1e-12 <= effective_number(c) <= len(c)
        assert category_diversity_minimum(len(c)) - 1e-12 <= category_diversity(c) <= 1

    @given(SHARES, st.floats(0.01, 100), st.randoms(use_true_random=False))
    def test_order_and_scale_do_not_matter(self, c, scale, random):
        shuffled = [scale * value for value in c]
        random.shuffle(shuffled)
        for summary in (functional_diversity, category_diversity, effective_number):
            assert summary(shuffled) == pytest.approx(summary(c), abs=1e-9)

    @given(SHARES)
    def test_splitting_every_category_in_two_doubles_the_effective_number(self, c):
        assert effective_number(c + c) == pytest.approx(2 * effective_number(c), rel=1e-12)

    @given(st.lists(st.floats(0.01, 1), min_size=3, max_size=10), st.floats(0.05, 0.95))
    def test_moving_towards_even_raises_all_three(self, c, part):
        c = np.array(c) / sum(c)
        assume(np.ptp(c) > 0.01)
        mixed = (1 - part) * c + part / len(c)
        for summary in (functional_diversity, category_diversity, effective_number):
            assert summary(mixed) > summary(c)

    @pytest.mark.parametrize("k", [2, 3, 7, 100])
    def test_limits_are_reached_by_the_even_and_by_the_single_profile(self, k):
        even, single = np.full(k, 1 / k), np.eye(k)[0]
        assert functional_diversity(even) == pytest.approx(1, rel=1e-12)
        assert effective_number(even) == pytest.approx(k, rel=1e-12)
        assert category_diversity(even) == pytest.approx(1, abs=1e-12)
        assert (functional_diversity(single), effective_number(single)) == (0.0, 1.0)
        assert category_diversity(single) == pytest.approx(category_diversity_minimum(k), rel=1e-12)

    def test_one_category_is_its_own_only_profile(self):
        assert (category_diversity([1]), category_diversity_minimum(1), effective_number([1])) == (1, 1, 1)

    @pytest.mark.parametrize("c", [[-0.1, 1.1], [0, 0], [float("nan"), 1], [float("inf"), 1], []])
    def test_what_is_no_profile_is_refused(self, c):
        for summary in (functional_diversity, category_diversity, effective_number):
            with pytest.raises(InvalidCountError, match=r"^shares must be [12] or more numbers of at least 0"):
                summary(c)

    def test_normalised_entropy_needs_two_categories(self):
        with pytest.raises(InvalidCountError, match=r"^shares must be 2 or more .* but got \[1\.0\]"):
            functional_diversity([1])

    def test_no_category_is_refused(self):
        with pytest.raises(InvalidCountError, match=r"^n_categories must be at least 1, but got 0"):
            category_diversity_minimum(0)


class TestIntervals:
    @settings(max_examples=30, deadline=None)
    @given(COUNTS, st.floats(0.5, 0.99))
    def test_an_interval_holds_the_observed_value_within_the_limits(self, pairs, level):
        k, n = np.array(pairs).T
        assume(k.sum() > 0)
        found = diversity_intervals(k, n, minimum_hits=0, level=level, draws=200)
        c = shares(k, n)
        assert found.functional.estimate == functional_diversity(c)
        assert found.category.estimate == category_diversity(c)
        assert found.effective_number.estimate == effective_number(c)
        for estimate, low, high in (
            (found.functional, 0, 1),
            (found.category, category_diversity_minimum(len(k)), 1),
            (found.effective_number, 1, len(k)),
        ):
            assert low - 1e-12 <= estimate.low <= estimate.estimate <= estimate.high <= high + 1e-12

    def test_ends_are_quantiles_of_renormalised_jeffreys_rates(self):
        k, n = np.array([12, 30, 4, 9]), np.array([60, 100, 50, 44])
        found = diversity_intervals(k, n, minimum_hits=20)
        # Other random numbers, drawn as quotients of gamma variables, and ten times as many.
        rng = np.random.default_rng(99)
        hit, miss = (rng.gamma(shape, size=(40_000, 4)) for shape in (k + 0.5, n - k + 0.5))
        rates = hit / (hit + miss)
        numbers = np.exp(stats.entropy(rates, axis=1))
        low, high = np.quantile(numbers, [0.025, 0.975])
        # Three standard errors of a 2.5 % quantile from 4000 draws.
        slack = 3 * 2.7 / np.sqrt(4000) * numbers.std()
        assert found.effective_number.low == pytest.approx(low, abs=slack)
        assert found.effective_number.high == pytest.approx(high, abs=slack)

    def test_functional_diversity_is_the_log_of_the_effective_number(self):
        found = diversity_intervals([12, 30, 4], [60, 100, 50], minimum_hits=20)
        for end in ("estimate", "low", "high"):
            number = getattr(found.effective_number, end)
            assert getattr(found.functional, end) == pytest.approx(np.log(number) / np.log(3), rel=1e-9)

    def test_the_same_counts_give_the_same_digits(self):
        one, again = (diversity_intervals([12, 30, 4], [60, 100, 50], minimum_hits=20) for _ in range(2))
        other = diversity_intervals([12, 30, 4], [60, 100, 50], minimum_hits=20, seed=1)
        assert one == again
        assert one != other

    def test_more_studies_narrow_the_interval(self):
        few, many = (
            diversity_intervals(np.array([12, 30, 4]) * m, np.array([60, 100, 50]) * m, minimum_hits=1)
            for m in (1, 100)
        )
        for name in ("functional", "category", "effective_number"):
            narrow, wide = getattr(many, name), getattr(few, name)
            assert narrow.high - narrow.low < 0.2 * (wide.high - wide.low)

    def test_the_interval_does_not_depend_on_how_many_draws_are_held_at_once(self, monkeypatch):
        whole = diversity_intervals([12, 30, 4], [60, 100, 50], minimum_hits=20)
        monkeypatch.setattr("revinf.stats.diversity._BLOCK", 100)
        assert diversity_intervals([12, 30, 4], [60, 100, 50], minimum_hits=20) == whole

    def test_a_sparse_profile_has_its_interval_stretched_down_to_the_observed_value(self):
        found = diversity_intervals([20] + [0] * 15, [40] + [2] * 15, minimum_hits=20)
        assert found.effective_number.estimate == found.effective_number.low == 1
        assert found.effective_number.high > 2

    def test_too_few_hits_give_nothing(self):
        assert diversity_intervals([10, 9], [50, 50], minimum_hits=20) is None
        assert diversity_intervals([10, 10], [50, 50], minimum_hits=20) is not None
        assert diversity_intervals([0, 0], [50, 50], minimum_hits=0) is None

    def test_one_category_gives_nothing(self):
        assert diversity_intervals([40], [50], minimum_hits=20) is None

    def test_a_level_or_a_number_of_draws_outside_is_refused(self):
        with pytest.raises(InvalidProbabilityError, match=r"^level must .* but got 1\.0; use 0\.95"):
            diversity_intervals([10, 10], [50, 50], minimum_hits=20, level=1.0)
        with pytest.raises(InvalidCountError, match=r"^draws must be at least 1, but got 0; use 4000$"):
            diversity_intervals([10, 10], [50, 50], minimum_hits=20, draws=0)
