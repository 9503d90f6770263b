"""Quantiles of densities by Gauss-Legendre panels, against laws whose quantiles scipy knows."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from revinf.stats.quadrature import NODES, panel_nodes, panel_quantiles

LEVELS = np.array([0.001, 0.025, 0.25, 0.5, 0.75, 0.975, 0.999])


def quantiles(law, start, stop, n_panels=16, levels=LEVELS):
    nodes = panel_nodes(start, stop, n_panels)
    return panel_quantiles(law.pdf(nodes)[None], start, stop, levels)[0]


@pytest.mark.parametrize(
    ("law", "start", "stop"),
    [
        (stats.norm(), -9, 9),
        (stats.logistic(), -40, 40),
        (stats.gumbel_r(), -5, 40),
        (stats.expon(), 0, 40),
        (stats.uniform(-1, 2), -1, 1),
        (stats.beta(3, 7), 0, 1),
    ],
)
def test_quantiles_agree_with_scipy(law, start, stop):
    np.testing.assert_allclose(law.cdf(quantiles(law, start, stop, 48)), LEVELS, rtol=0, atol=1e-8)


def test_nodes_increase_and_stay_inside_their_panels():
    nodes = panel_nodes(-2.0, 6.0, 4)
    assert nodes.shape == (4, NODES)
    assert np.all(np.diff(nodes.ravel()) > 0)
    edges = np.linspace(-2, 6, 5)
    assert np.all((nodes > edges[:-1, None]) & (nodes < edges[1:, None]))


@settings(max_examples=40)
@given(st.lists(st.floats(1e-6, 1 - 1e-6), min_size=2, max_size=8, unique=True))
def test_quantiles_rise_with_the_level(levels):
    found = quantiles(stats.norm(), -9, 9, levels=np.sort(levels))
    assert np.all(np.diff(found) >= 0)


@settings(max_examples=40)
@given(st.floats(-200, 200))
def test_a_factor_in_the_density_does_not_matter(log_factor):
    density = stats.norm.pdf(panel_nodes(-9, 9, 16))[None]
    once = panel_quantiles(density, -9, 9, LEVELS)
    again = panel_quantiles(density * np.exp(log_factor), -9, 9, LEVELS)
    np.testing.assert_allclose(again, once, rtol=0, atol=1e-12)


@settings(max_examples=25)
@given(st.lists(st.floats(0.3, 3), min_size=1, max_size=20))
def test_a_density_has_the_same_digits_alone_and_in_company(spreads):
    densities = stats.norm.pdf(panel_nodes(-30, 30, 16), scale=np.array(spreads)[:, None, None])
    together = panel_quantiles(densities, -30, 30, LEVELS)
    alone = [panel_quantiles(density[None], -30, 30, LEVELS)[0] for density in densities]
    assert np.array_equal(together, np.array(alone))


def test_a_quantile_behind_a_gap_without_mass_is_found():
    nodes = panel_nodes(0.0, 4.0, 4)
    density = np.where((nodes < 1) | (nodes > 3), 1.0, 0.0)[None]
    found = panel_quantiles(density, 0.0, 4.0, np.array([0.25, 0.75]))[0]
    np.testing.assert_allclose(found, [0.5, 3.5], rtol=0, atol=1e-12)
