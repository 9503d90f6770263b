"""The beta-binomial fit against scipy: scipy.stats.betabinom's likelihood, maximised by scipy.optimize.

All counts are simulated, from fixed seeds.
"""

from __future__ import annotations

import numpy as np
import pytest
from scipy import optimize, stats

from revinf.stats.shrinkage import STRENGTH_LIMITS, fit_beta_binomial, shrunk_rates

CASES = [  # terms, mean, strength, most studies a term
    (6, 0.30, 5.0, 60),
    (30, 0.10, 20.0, 300),
    (200, 0.05, 50.0, 300),
    (50, 0.02, 1.5, 300),
    (50, 0.50, 0.2, 300),  # below the lower limit of the strength
    (20, 0.30, 1e5, 2000),
    (500, 0.08, 8.0, 3000),
]


def simulated(n_terms, mean, strength, most):
    rng = np.random.default_rng(n_terms)
    n = rng.integers(1, most, n_terms)
    return rng.binomial(n, rng.beta(mean * strength, (1 - mean) * strength, n_terms)), n


def reference(k, n):
    """Maximise scipy's likelihood from several starts; tolerances as tight as L-BFGS-B takes them."""

    def loss(v):
        mean, strength = 1 / (1 + np.exp(-v[0])), np.exp(v[1])
        return -stats.betabinom.logpmf(k, n, mean * strength, (1 - mean) * strength).sum()

    bounds = [(-12, 12), tuple(np.log(STRENGTH_LIMITS))]
    fits = [
        optimize.minimize(loss, [-2, y], bounds=bounds, method="L-BFGS-B", options={"ftol": 1e-15}) for y in (0.5, 3, 6)
    ]
    best = min(fits, key=lambda fit: fit.fun)
    return 1 / (1 + np.exp(-best.x[0])), np.exp(best.x[1]), -best.fun


@pytest.mark.parametrize("case", CASES, ids=lambda case: f"{case[0]} terms, mean {case[1]}, strength {case[2]}")
def test_the_fit_is_the_maximum_that_scipy_finds(case):
    k, n = simulated(*case)
    fit = fit_beta_binomial(k, n)
    mean, strength, value = reference(k, n)
    assert fit.log_likelihood == pytest.approx(value, rel=1e-9)
    # The reference stops where the likelihood no longer changes: its place is good to half the digits.
    assert fit.mean == pytest.approx(mean, rel=1e-4)
    assert fit.strength == pytest.approx(strength, rel=1e-3)


@pytest.mark.parametrize("case", CASES[:4], ids=lambda case: f"{case[0]} terms")
def test_shrunk_rates_are_the_medians_of_scipy(case):
    k, n = simulated(*case)
    fit = fit_beta_binomial(k, n)
    expected = stats.beta.median(fit.mean * fit.strength + k, (1 - fit.mean) * fit.strength + n - k)
    np.testing.assert_allclose(shrunk_rates(k, n, fit), expected, rtol=1e-6, atol=1e-12)
