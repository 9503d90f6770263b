"""P(H > 1) against mpmath's quadrature of the density as it is defined (formula 2).

Shared prior: q = w p1 + (1-w) p0 ~ Beta(1/2, 1/2), ln H normal with 95 % between 1/20 and 20 (Greenland
2006, Int J Epidemiol 35:765-775). Independent rates: P(p1 > p0) of two Jeffreys posteriors, one integral
over an incomplete beta function.

The reference itself: with 20 panels instead of 8 it changes by less than 1e-8.
"""

from __future__ import annotations

import mpmath
import pytest
from mpmath import mp, mpf

from revinf.stats.head_to_head import head_to_head

CASES = [
    ((2, 3), (1, 2)),
    ((0, 3), (17, 388)),
    ((3, 3), (5, 40)),
    ((9, 50), (30, 140)),
]


def shared(term_only, rival_only, panels=8):
    """P(ln H > 0), with q = q_max sin^2 of an angle: the two square roots of Beta(1/2, 1/2) vanish."""
    (k1, n1), (k0, n0) = term_only, rival_only
    w, sd = mpf(n1) / (n1 + n0), mp.log(20) / mpf("1.959964")
    shape = mp.log((k1 + 0.5) / (n1 + 1)) * k1 + mp.log((k0 + 0.5) / (n0 + 1)) * k0
    shape += mp.log(1 - (k1 + 0.5) / (n1 + 1)) * (n1 - k1) + mp.log(1 - (k0 + 0.5) / (n0 + 1)) * (n0 - k0)

    def inner(log_ratio):
        ratio = mp.exp(log_ratio)
        pooled = w * ratio + 1 - w
        largest = pooled * min(1, 1 / ratio)

        def kernel(angle):
            q = largest * mp.sin(angle) ** 2
            p0 = q / pooled
            p1 = ratio * p0
            # With Gaussian nodes no rate reaches 0 or 1; a rate of 0 misses has the power 0 anyway.
            log = k1 * mp.log(p1) + k0 * mp.log(p0) - shape
            log += (n1 - k1) * mp.log1p(-p1) if n1 > k1 else 0
            log += (n0 - k0) * mp.log1p(-p0) if n0 > k0 else 0
            return mp.exp(log) * mp.cos(angle) / mp.sqrt(1 - q)

        # 2 dq / (2 sqrt(q) sqrt(1-q)) = 2 sqrt(q_max) cos / sqrt(1-q) d angle
        area = mp.quad(kernel, mp.linspace(0, mp.pi / 2, panels + 1), method="gauss-legendre", maxdegree=3)
        return mp.sqrt(largest) * area * mp.exp(-((log_ratio / sd) ** 2) / 2)

    ends = [mpf(e) for e in ("0", "0.1", "0.3", "0.6", "1", "1.5", "2.2", "3", "4.5", "6", "9", "12")]
    above = mp.quad(inner, ends, method="gauss-legendre", maxdegree=2)
    below = mp.quad(inner, [-e for e in reversed(ends)], method="gauss-legendre", maxdegree=2)
    return float(above / (above + below))


def independent(term_only, rival_only):
    """P(p1 > p0): mean over p1 of the distribution function of p0."""
    (a1, b1), (a0, b0) = ((k + 0.5, n - k + 0.5) for k, n in (term_only, rival_only))

    def kernel(p):
        density = mp.exp((a1 - 1) * mp.log(p) + (b1 - 1) * mp.log1p(-p)) / mp.beta(a1, b1)
        return density * mpmath.betainc(a0, b0, 0, p, regularized=True)

    middle = mpf(a1) / (a1 + b1)
    return float(mp.quad(kernel, [0, middle / 2, middle, (1 + middle) / 2, 1]))


@pytest.mark.parametrize(("term_only", "rival_only"), CASES)
def test_the_probability_ahead_with_the_shared_prior_is_that_of_mpmath(term_only, rival_only):
    with mpmath.workdps(15):
        expected = shared(term_only, rival_only)
    assert head_to_head(term_only, rival_only).probability_ahead == pytest.approx(expected, abs=1e-7)


@pytest.mark.parametrize(("term_only", "rival_only"), CASES)
def test_the_probability_ahead_with_independent_rates_is_that_of_mpmath(term_only, rival_only):
    with mpmath.workdps(20):
        expected = independent(term_only, rival_only)
    found = head_to_head(term_only, rival_only, prior="independent").probability_ahead
    assert found == pytest.approx(expected, abs=1e-7)
