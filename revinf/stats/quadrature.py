"""Quantiles of a density known only up to a factor, by Gauss-Legendre panels; deterministic, numpy only.

The density is given at the nodes of equal panels in a variable t. In each panel it is replaced by the
polynomial through its nodes, whose antiderivative is exact; a quantile is the root of that antiderivative.
Many densities are solved at once: arrays are (densities, panels, nodes).
"""

from __future__ import annotations

from functools import cache

import numpy as np
from numpy.polynomial import legendre
from numpy.typing import NDArray

__all__ = ["panel_masses", "panel_nodes", "panel_quantiles"]

_SMALL_STEP = 1e-9

NODES = 12
"""Nodes a panel: a polynomial of degree 11 resolves a Gaussian over two standard deviations to 1e-10."""


@cache
def _rule() -> tuple[NDArray[np.float64], NDArray[np.float64], NDArray[np.float64]]:
    """Return nodes, weights, and the matrix from node values to Legendre coefficients."""
    nodes, weights = legendre.leggauss(NODES)
    # Discrete orthogonality: c_k = (2k+1)/2 sum_i w_i P_k(x_i) f(x_i), exact up to the node count.
    to_coefficients = ((2 * np.arange(NODES) + 1) / 2)[:, None] * (legendre.legvander(nodes, NODES - 1).T * weights)
    return nodes, weights, to_coefficients


def panel_nodes(start: float, stop: float, n_panels: int) -> NDArray[np.float64]:
    """Return the places at which a density is wanted.

    Parameters
    ----------
    start, stop : float
        Ends of the range of t.
    n_panels : int
        Number of equal panels.

    Returns
    -------
    (n_panels, nodes) array
        Values of t, increasing.

    Examples
    --------
    >>> panel_nodes(0.0, 1.0, 2).shape
    (2, 12)
    """
    edges = np.linspace(start, stop, n_panels + 1)
    middle, half = (edges[1:] + edges[:-1]) / 2, (edges[1:] - edges[:-1]) / 2
    return np.asarray(middle[:, None] + half[:, None] * _rule()[0])


def panel_masses(density: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the integral over each panel, in half panels.

    Parameters
    ----------
    density : (D, n_panels, nodes) array
        Densities at the nodes of `panel_nodes`.

    Returns
    -------
    (D, n_panels) array
        Integrals, to be multiplied by half a panel's width.

    Examples
    --------
    >>> t = panel_nodes(0.0, 2.0, 1)
    >>> round(float(panel_masses(t[None])[0, 0]), 12)  # half of 2 squared
    2.0
    """
    # Sums row by row, not a matrix product: its rounding may depend on how many densities there are.
    return np.asarray((density * _rule()[1]).sum(axis=-1))


def panel_quantiles(
    density: NDArray[np.float64], start: float, stop: float, levels: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Return the quantiles of densities given at panel nodes.

    Parameters
    ----------
    density : (D, n_panels, nodes) array
        Non-negative, finite, up to a factor for each of the D densities.
    start, stop : float
        Ends of the range of t, as for `panel_nodes`.
    levels : (L,) array, probability
        Where the distribution function is to be inverted.

    Returns
    -------
    (D, L) array
        Values of t.

    Examples
    --------
    >>> t = panel_nodes(-8.0, 8.0, 16)
    >>> q = panel_quantiles(np.exp(-t**2 / 2)[None], -8.0, 8.0, np.array([0.5, 0.975]))
    >>> [round(abs(float(v)), 6) for v in q[0]]
    [0.0, 1.959964]
    """
    _, _, to_coefficients = _rule()
    n_densities, n_panels, _ = density.shape
    half = (stop - start) / n_panels / 2
    mass = half * panel_masses(density)
    edges = np.concatenate([np.zeros((n_densities, 1)), np.cumsum(mass, axis=1)], axis=1)
    edges /= edges[:, -1:]
    total = mass.sum(axis=1)
    # Panel of each quantile: the last edge at or below the level.
    panel = (edges[:, None, 1:-1] <= levels[None, :, None]).sum(axis=2)
    rows = np.arange(n_densities)[:, None]
    coefficients = (density[rows, panel][..., None, :] * to_coefficients).sum(axis=-1)
    wanted = (levels[None, :] - edges[rows, panel]) * total[:, None] / half
    position = _invert(coefficients, wanted)
    return np.asarray(start + half * (2 * panel + 1 + position))


def _invert(coefficients: NDArray[np.float64], wanted: NDArray[np.float64]) -> NDArray[np.float64]:
    """Find x in [-1, 1] at which the antiderivative from -1 of a Legendre series reaches `wanted`."""
    series = np.moveaxis(coefficients, -1, 0).reshape(NODES, -1)
    integral = legendre.legint(series, lbnd=-1, axis=0)
    goal = wanted.reshape(-1)
    low, high = np.full(goal.shape, -1.0), np.full(goal.shape, 1.0)
    # From where the root would be if the density were even over the panel.
    whole = legendre.legval(1.0, integral)
    with np.errstate(divide="ignore", invalid="ignore"):
        x = np.nan_to_num(np.clip(2 * goal / whole - 1, -1, 1))
    going = np.arange(len(goal))
    # Newton, kept inside a shrinking bracket: the antiderivative grows, the density may be near zero. What has
    # settled is left alone, so that no density's digits depend on its company.
    for _ in range(60):
        now = x[going]
        excess = legendre.legval(now, integral[:, going], tensor=False) - goal[going]
        low[going] = np.where(excess < 0, now, low[going])
        high[going] = np.where(excess < 0, high[going], now)
        slope = legendre.legval(now, series[:, going], tensor=False)
        with np.errstate(divide="ignore", invalid="ignore"):
            step = now - excess / slope
        inside = (step >= low[going]) & (step <= high[going])
        x[going] = np.where(inside, step, (low[going] + high[going]) / 2)
        # Newton doubles the right digits: after a step this small the next would be lost in rounding.
        going = going[np.abs(x[going] - now) > np.where(inside, _SMALL_STEP, 1e-15)]
        if not len(going):
            break
    return np.asarray(x.reshape(wanted.shape))
