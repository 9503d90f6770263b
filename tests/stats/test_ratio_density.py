"""The quadrature behind the ratio, against other ways to the same integral.

Fixed tables are held to mpmath in tests/published/test_ratio_quantiles.py; here random ones are held to
scipy (independent rates: one integral over an incomplete beta function) and to finer settings.
"""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import example, given, settings
from scipy import special

from revinf.stats import ratio_density
from revinf.stats.estimates import Counts
from revinf.stats.ratio_density import log_ratio_posterior
from tests.strategies import BILLION, full_tables

LEVELS = np.array([0.025, 0.5, 0.975])
# The density breaks off at ln 20 and ln 5, over 0.004 and 0.002 of ln R: coarse panels step over that.
CLIFF, STEEP_CLIFF = Counts(1, 0, 50_000, 950_000), Counts(1, 0, 200_000, 800_000)
CUSP = Counts(2, 0, 1, 0)  # independent rates: the density is infinite at ln R = 0


def as_array(*tables):
    return np.array([table.as_tuple() for table in tables], dtype=np.float64)


def independent_cdf(table, log_ratio):
    """P(ln R <= log_ratio) for two independent Jeffreys rates, from scipy's incomplete beta function."""
    a1, b1, a0, b0 = (n + 0.5 for n in table.as_tuple())
    term_is_wider = b1 / (a1 * (a1 + b1)) > b0 / (a0 * (a0 + b0))
    # Integrate over the rate that is known better, so that the other's distribution function is smooth.
    a, b = (a0, b0) if term_is_wider else (a1, b1)
    mode, spread = np.log(a / b), np.sqrt(1 / a + 1 / b)
    # The other rate reaches 1 at this place on the stretched axis, with a root's cusp: break there.
    kink = -abs(log_ratio) if (log_ratio > 0) == term_is_wider else -np.inf
    broken = np.inf if kink == 0 else -np.inf
    if -np.inf < kink < 0:
        broken = (np.log(np.exp(kink) / -np.expm1(kink)) - mode) / spread
    middle = float(np.clip(np.arcsinh(broken), -5.0, 5.0))
    nodes, weights = np.polynomial.legendre.leggauss(300)
    y = (nodes + 1) / 2
    t = np.concatenate([middle - (middle + 5.2) * y**2, middle + (5.2 - middle) * y**2])
    slope = np.concatenate([(middle + 5.2) * weights * y, (5.2 - middle) * weights * y])
    v = mode + spread * np.sinh(t)
    log_p, log_q = -np.logaddexp(0, -v), -np.logaddexp(0, v)
    weight = slope * np.exp(a * log_p + b * log_q - special.betaln(a, b)) * np.cosh(t)
    other = np.exp(np.minimum(0, log_p + (log_ratio if term_is_wider else -log_ratio)))
    below = special.betainc(a1, b1, other) if term_is_wider else special.betaincc(a0, b0, other)
    return float((weight * below).sum() / weight.sum())


@settings(max_examples=30)
@given(full_tables())
@example(CLIFF)
@example(STEEP_CLIFF)
@example(CUSP)
@example(Counts(10**6, 0, 10**6, 0))
@example(Counts(49_219, 70_799, 13, 0))
def test_independent_quantiles_agree_with_scipy(table):
    found = log_ratio_posterior(as_array(table), LEVELS, "independent", 20.0)[0]
    reached = [independent_cdf(table, value) for value in found]
    np.testing.assert_allclose(reached, LEVELS, rtol=0, atol=1e-6)


def finer(monkeypatch_context, tables, prior):
    u = np.arange(-6.0, 6.0, 0.06)
    monkeypatch_context.setattr(ratio_density, "_STRETCHED", np.sinh(u))
    monkeypatch_context.setattr(ratio_density, "_STRETCH_SLOPE", np.cosh(u))
    monkeypatch_context.setattr(ratio_density, "_PANELS", 70)
    return log_ratio_posterior(as_array(*tables), LEVELS, prior, 20.0)


@pytest.mark.parametrize("prior", ["shared", "independent"])
@settings(max_examples=25)
@given(table=full_tables())
@example(table=CLIFF)
@example(table=STEEP_CLIFF)
@example(table=CUSP)
def test_finer_settings_change_no_posterior_by_a_millionth(prior, table):
    found = log_ratio_posterior(as_array(table), LEVELS, prior, 20.0)
    with pytest.MonkeyPatch.context() as context:
        reference = finer(context, [table], prior)
    np.testing.assert_allclose(special.expit(found), special.expit(reference), rtol=0, atol=1e-6)


@settings(max_examples=25)
@given(full_tables(BILLION))
def test_quantiles_rise_with_the_level(table):
    for prior in ("shared", "independent"):
        found = log_ratio_posterior(as_array(table), np.linspace(0.001, 0.999, 21), prior, 20.0)[0]
        assert np.all(np.isfinite(found))
        assert np.all(np.diff(found) > 0)


def test_swapping_is_a_law_of_the_integral_too():
    # `revinf.stats.ratio` makes it exact; without that it holds to the accuracy of the quadrature.
    tables = [Counts(15, 48, 17, 371), CLIFF, Counts(0, 63, 0, 388), Counts(3, 0, 0, 448)]
    for prior in ("shared", "independent"):
        forward = log_ratio_posterior(as_array(*tables), LEVELS, prior, 20.0)
        backward = log_ratio_posterior(as_array(*(t.swapped() for t in tables)), LEVELS, prior, 20.0)
        np.testing.assert_allclose(special.expit(forward), special.expit(-backward[:, ::-1]), rtol=0, atol=1e-6)


@pytest.mark.parametrize("table", [Counts(0, 63, 0, 388), Counts(1, 999_999, 0, 10**6)])
def test_a_zero_cell_never_collapses_the_interval(table):
    # Fixed nodes in p can miss the mass of such tables and return 1.000 (1.000-1.000) without complaint.
    low, _, high = log_ratio_posterior(as_array(table), LEVELS, "shared", 20.0)[0]
    assert high - low > 4
