"""The gamma function's logarithm and derivatives, against scipy and, beside the zeros, mpmath."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import special

from revinf.exceptions import InvalidCountError
from revinf.stats.special import digamma, log_gamma, trigamma

POSITIVE = st.floats(1e-9, 1e9)
GRID = np.concatenate([np.geomspace(1e-10, 1e9, 20_001), np.linspace(0.4, 12, 20_001)])
DIGAMMA_ZERO = 1.4616321449683622


def test_log_gamma_agrees_with_scipy():
    np.testing.assert_allclose(log_gamma(GRID), special.gammaln(GRID), rtol=1e-13, atol=1e-14)


def test_log_gamma_keeps_its_digits_beside_its_zeros():
    # scipy 1.17.1 loses digits just below 2, hence mpmath.
    near = np.concatenate([z + s * np.geomspace(1e-15, 0.5, 60) for z in (1.0, 2.0) for s in (1, -1)])
    with mpmath.workdps(40):
        exact = [float(mpmath.loggamma(mpmath.mpf(float(x)))) for x in near]
    np.testing.assert_allclose(log_gamma(near), exact, rtol=1e-13, atol=0)


def test_digamma_agrees_with_scipy():
    away = GRID[np.abs(GRID - DIGAMMA_ZERO) > 0.05]
    np.testing.assert_allclose(digamma(away), special.digamma(away), rtol=1e-13, atol=0)
    np.testing.assert_allclose(digamma(GRID), special.digamma(GRID), rtol=1e-13, atol=1e-14)


def test_trigamma_agrees_with_scipy():
    np.testing.assert_allclose(trigamma(GRID), special.polygamma(1, GRID), rtol=1e-13, atol=0)


def test_log_gamma_is_zero_at_1_and_2():
    assert log_gamma([1.0, 2.0]).tolist() == [0.0, 0.0]


@given(POSITIVE)
def test_recurrences_hold(x):
    scale = abs(float(log_gamma(x + 1))) + abs(np.log(x)) + 1
    assert float(log_gamma(x + 1) - log_gamma(x)) == pytest.approx(np.log(x), abs=1e-14 * scale)
    assert float(digamma(x + 1)) == pytest.approx(float(digamma(x)) + 1 / x, rel=1e-12, abs=1e-13 / x)
    assert float(trigamma(x)) == pytest.approx(float(trigamma(x + 1)) + 1 / x**2, rel=1e-12)


@given(st.integers(1, 170))
def test_log_gamma_of_a_whole_number_is_the_log_of_a_factorial(n):
    assert float(log_gamma(n + 1)) == pytest.approx(sum(np.log(i) for i in range(1, n + 1)), rel=1e-13)


@given(st.lists(POSITIVE, min_size=1, max_size=20))
def test_a_value_has_the_same_digits_alone_and_in_company(values):
    for function in (log_gamma, digamma, trigamma):
        assert function(values).tolist() == [float(function(value)) for value in values]


def test_shapes_are_kept():
    for function in (log_gamma, digamma, trigamma):
        assert function(np.ones((2, 3))).shape == (2, 3)
        assert function([]).shape == (0,)
        assert function(3).shape == ()


@pytest.mark.parametrize("function", [log_gamma, digamma, trigamma])
@pytest.mark.parametrize("value", [0.0, -1.5, float("inf"), float("nan")])
def test_arguments_that_are_not_above_0_are_refused(function, value):
    with pytest.raises(InvalidCountError, match=rf"^x must be a finite number above 0, but got {value}; check"):
        function([1.0, value])
