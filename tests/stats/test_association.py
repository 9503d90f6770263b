"""Fisher's exact test and Benjamini-Hochberg, against scipy and statsmodels."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.stats import false_discovery_control, fisher_exact, norm
from statsmodels.stats.multitest import multipletests

from revinf.exceptions import InvalidProbabilityError
from revinf.stats.association import benjamini_hochberg, fisher_p
from revinf.stats.estimates import Counts
from tests.strategies import full_tables

P_VALUES = st.lists(st.floats(0, 1), min_size=1, max_size=40)


def scipy_p(table):
    n11, n10, n01, n00 = table.as_tuple()
    return fisher_exact([[n11, n10], [n01, n00]])[1]


@given(full_tables(300))
def test_fisher_agrees_with_scipy(table):
    assert fisher_p(table) == pytest.approx(scipy_p(table), rel=1e-9, abs=1e-300)


@settings(max_examples=20)
@given(full_tables(20_000))
def test_fisher_agrees_with_scipy_on_large_tables(table):
    assert fisher_p(table) == pytest.approx(scipy_p(table), rel=1e-8, abs=1e-300)


@pytest.mark.parametrize(
    "table",
    [
        Counts(166, 703, 199, 2154),
        Counts(500_600, 499_400, 500_000, 500_000),
        Counts(500_000, 500_000, 500_000, 500_000),
        Counts(1, 999_999, 5, 999_995),
        Counts(10, 999_990, 40, 999_960),
    ],
)
def test_fisher_agrees_with_scipy_up_to_a_million(table):
    assert fisher_p(table) == pytest.approx(scipy_p(table), rel=1e-8)


def test_fisher_of_certainty_at_a_million_is_zero():
    assert fisher_p(Counts(10**6, 0, 0, 10**6)) == 0.0


@given(full_tables(300))
def test_fisher_does_not_care_which_side_is_which(table):
    flipped = Counts(*(table.as_tuple()[i] for i in (1, 0, 3, 2)))
    turned = Counts(*(table.as_tuple()[i] for i in (0, 2, 1, 3)))
    p = fisher_p(table)
    assert 0 <= p <= 1
    assert fisher_p(table.swapped()) == pytest.approx(p, rel=1e-9)
    assert fisher_p(flipped) == pytest.approx(p, rel=1e-9)
    if turned.term_total and turned.other_total:
        assert fisher_p(turned) == pytest.approx(p, rel=1e-9)


@given(full_tables(300))
def test_without_active_studies_no_table_is_less_probable(table):
    assert fisher_p(Counts(0, table.term_total, 0, table.other_total)) == 1.0


@pytest.mark.parametrize("table", [Counts(0, 0, 3, 4), Counts(3, 4, 0, 0), Counts(0, 0, 0, 0)])
def test_without_a_side_there_is_no_test(table):
    assert fisher_p(table) is None


@given(P_VALUES)
def test_benjamini_hochberg_agrees_with_scipy_and_statsmodels(p_values):
    q = benjamini_hochberg(p_values)
    np.testing.assert_allclose(q, false_discovery_control(p_values), rtol=1e-12, atol=1e-300)
    np.testing.assert_allclose(q, multipletests(p_values, method="fdr_bh")[1], rtol=1e-12, atol=1e-300)


@given(P_VALUES, st.randoms(use_true_random=False))
def test_q_values_follow_their_p_values_through_any_order(p_values, random):
    order = list(range(len(p_values)))
    random.shuffle(order)
    shuffled = benjamini_hochberg([p_values[i] for i in order])
    assert np.array_equal(shuffled, benjamini_hochberg(p_values)[order])


@given(P_VALUES)
def test_a_q_value_is_a_probability_no_smaller_than_its_p(p_values):
    q = benjamini_hochberg(p_values)
    assert np.all((q >= np.array(p_values) * (1 - 1e-12)) & (q <= 1))
    by_p = q[np.argsort(p_values, kind="stable")]
    assert np.all(np.diff(by_p) >= 0)


def test_one_test_keeps_its_p_and_none_gives_none():
    assert benjamini_hochberg([0.03]).tolist() == [0.03]
    assert benjamini_hochberg([]).shape == (0,)


def test_equal_p_values_have_equal_q_values():
    assert len(set(benjamini_hochberg([0.02, 0.3, 0.02, 0.02, 0.9])[[0, 2, 3]])) == 1


@pytest.mark.parametrize("value", [-0.1, 1.5, float("nan")])
def test_a_p_value_outside_is_refused(value):
    with pytest.raises(
        InvalidProbabilityError,
        match=f"^p-values must lie between 0 and 1, but got {value}; check the tests they come from$",
    ):
        benjamini_hochberg([0.5, value, 0.1])


def test_fisher_p_at_a_billion_is_quick_finite_and_right() -> None:
    assert fisher_p(Counts(10**9, 0, 0, 10**9)) == 0.0
    assert fisher_p(Counts(1, 10**9, 0, 10**9)) == pytest.approx(1.0)
    # Far from the bounds the law is normal (the central limit theorem): two-sided tail of z.
    k, half = 500_050_000, 10**9
    z = (k - half / 2) / np.sqrt(half / 8)
    assert fisher_p(Counts(k, half - k, half - k, k)) == pytest.approx(2 * norm.sf(z), rel=2e-3)
