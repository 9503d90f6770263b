"""The posterior density of ln R and its quantiles: the quadrature behind `revinf.stats.ratio`.

Everything is done in theta = ln R and v = logit of the *larger* of the two probabilities. That choice
turns the corner p0 < 1, p1 < 1 into the whole line of v, so that nothing has to be cut off: with
theta > 0, p1 = p and p0 = p e^-theta. Both priors then share one kernel,

    p^A (1-p)^B (1 - p e^-|theta|)^C (1 - p q_max)^D e^(-|theta| E) x a factor in theta alone,

which has one mode in v, known in closed form. The inner integral is a trapezoid sum on a sinh-stretched
axis around that mode. The outer one runs over panels that are equal on a sinh-stretched axis around the
mode of theta, so that a spike of width 1e-9 with a tail of length 100 is resolved as well as a Gaussian,
and is broken at theta = 0, where the density has a cusp. No random numbers, and no table's search waits
for another's: the same counts give the same digits, alone or in company.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from revinf.stats.quadrature import panel_masses, panel_nodes, panel_quantiles
from revinf.stats.ratio_kernel import Kernel, RatioPrior, inner_mode, log_inner

__all__ = ["RatioPrior", "log_ratio_posterior", "log_ratio_posterior_and_ahead"]

_Array = NDArray[np.float64]

_STEP, _REACH = 0.19, 5.2
_STRETCHED = np.sinh(np.arange(-_REACH, _REACH + _STEP / 2, _STEP))
_STRETCH_SLOPE = np.cosh(np.arange(-_REACH, _REACH + _STEP / 2, _STEP))
"""Trapezoid nodes of the inner integral: exponential tails down to 1e-30, a Gaussian core to 1e-11."""

_MANY = 50.0
_CORE = slice(12, -12)
"""Nodes within 9.3 widths of the top: beyond, an integrand whose exponents are above 50 has fallen to 3e-13 of it."""

_PANELS = 18
"""Panels of the outer integral, before those at the cliffs."""

_POWER = 3
"""Beside the break theta runs as the cube of the panel's variable, which smooths the cusp there."""

_WIDEST = 150.0
"""No theta beyond this has any mass, for counts up to 1e12 and both priors."""

_DROP = 34.0
"""The panels end where the log density has fallen by this much from its top: e^-34 is 2e-15."""

_NEGLIGIBLE = 40.0
"""Within the panels, no density below e^-40 of the top is worked out; Laplace's method may be off by a few."""

_DISTANCES = np.geomspace(1e-13, 2 * _WIDEST, 72)
"""Where the fall from the top is looked at, on either side; neighbours differ by a factor of 1.65."""


def log_ratio_posterior(
    counts: NDArray[np.float64], levels: NDArray[np.float64], prior: RatioPrior, limit: float
) -> NDArray[np.float64]:
    """Return posterior quantiles of ln R for an array of tables.

    Parameters
    ----------
    counts : (T, 4) array
        n11, n10, n01, n00 of each table, with at least one study on either side.
    levels : (L,) array, probability
        Where the distribution function is inverted.
    prior : {"shared", "independent"}
        Prior of the two rates.
    limit : float, ratio > 1
        With the shared prior: 95 % of the prior of R lies between 1/limit and limit.

    Returns
    -------
    (T, L) array
        Quantiles of the natural logarithm of the ratio.

    Examples
    --------
    >>> q = log_ratio_posterior(np.array([[15.0, 48, 17, 371]]), np.array([0.5]), "shared", 20.0)
    >>> round(float(np.exp(q[0, 0])), 3)
    4.977
    """
    return log_ratio_posterior_and_ahead(counts, levels, prior, limit)[0]


def log_ratio_posterior_and_ahead(
    counts: NDArray[np.float64], levels: NDArray[np.float64], prior: RatioPrior, limit: float
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return posterior quantiles of ln R and P(ln R > 0); parameters as in `log_ratio_posterior`.

    Returns
    -------
    (T, L) array, (T,) array
        Quantiles of ln R, and probabilities that R is above 1.

    Examples
    --------
    >>> _, ahead = log_ratio_posterior_and_ahead(np.array([[5.0, 5, 5, 5]]), np.array([0.5]), "shared", 20.0)
    >>> round(float(ahead[0]), 9)
    0.5
    """
    return _solve(Kernel.of(counts, prior, limit), levels)


def _solve(kernel: Kernel, levels: _Array) -> tuple[_Array, _Array]:
    """Return the quantiles of theta, and its mass above 0, for every table of a kernel."""
    edges = _panel_edges(kernel)
    left, width = edges[:, :-1], np.diff(edges, axis=1)
    n_tables, n_panels = width.shape
    from_break, to_break = left == 0, edges[:, 1:] == 0

    def unfold(panel: NDArray[np.intp], x: _Array) -> tuple[_Array, _Array]:
        """Return theta, and its slope, at the place x in [0, 1] of a panel."""
        start, end = np.take_along_axis(from_break, panel, 1), np.take_along_axis(to_break, panel, 1)
        share = np.where(start, x**_POWER, np.where(end, 1 - (1 - x) ** _POWER, x))
        near = np.where(start, x, 1 - x) ** (_POWER - 1)
        slope = np.where(start | end, _POWER * near, 1.0)
        size = np.take_along_axis(width, panel, 1)
        return np.take_along_axis(left, panel, 1) + size * share, size * slope

    t = panel_nodes(0.0, float(n_panels), n_panels)
    shape = n_tables, t.size
    panel, x = np.broadcast_to(t.astype(np.intp).ravel(), shape), np.broadcast_to(t.ravel() % 1, shape)
    theta, slope = unfold(panel, x)
    log_density = _log_marginal(kernel, theta, np.take_along_axis(width, panel, 1))
    log_density -= log_density.max(axis=1, keepdims=True)
    density = (np.exp(log_density) * slope).reshape(n_tables, *t.shape)
    place = panel_quantiles(density, 0.0, float(n_panels), levels)
    panel = np.minimum(place.astype(np.intp), n_panels - 1)
    # 0 is an edge of the panels wherever it lies within them.
    mass = panel_masses(density)
    return unfold(panel, place - panel)[0], (mass * (left >= 0)).sum(axis=1) / mass.sum(axis=1)


def _log_marginal(kernel: Kernel, theta: _Array, width: _Array) -> _Array:
    """Return the log density of theta, up to a constant, at (T, n) values: the inner integral.

    It is taken only where the density may matter: in a panel of some width, and where Laplace's method does
    not put it below e^-40 of the top. Elsewhere it is 0.
    """
    miss, small_miss, outside, gap = kernel.at(theta)
    centre, top, spread = inner_mode(kernel, theta, miss, small_miss, gap)
    height = outside + top + np.log(spread)
    chosen = (width > 0) & (height > height.max(axis=1, keepdims=True) - _NEGLIGIBLE)
    power = np.broadcast_to(kernel.power[:, None], theta.shape)
    result = np.full(theta.shape, -np.inf)
    # With many hits and misses the integrand is near a Gaussian, and the far nodes hold nothing.
    many = np.minimum(power, miss) > _MANY
    for here, nodes in ((chosen & many, _CORE), (chosen & ~many, slice(None))):
        parts = [values[here][:, None] for values in (power, theta, miss, small_miss, gap)]
        v = centre[here][:, None] + spread[here][:, None] * _STRETCHED[nodes]
        logs = log_inner(v, *parts) - top[here][:, None]
        inner = (np.exp(logs) * _STRETCH_SLOPE[nodes]).sum(axis=-1)
        result[here] = height[here] + np.log(inner)
    return result


def _panel_edges(kernel: Kernel) -> _Array:
    """Return the edges of the outer panels, (T, n); those of no width have no mass."""
    mode = _outer_mode(kernel)
    top = _height(kernel, mode)
    ends, scales = [], []
    for side in (-1, 1):
        fall = top - _height(kernel, mode + side * _DISTANCES)
        ends.append(_DISTANCES[np.argmax(fall > _DROP, axis=1)])
        scales.append(_DISTANCES[np.argmax(fall > 0.5, axis=1)])
    # One scale for both sides, the finer: beside a cliff the gentle side has the cliff's detail too.
    scale = np.minimum(*scales)[:, None]
    low, high = -np.arcsinh(ends[0][:, None] / scale), np.arcsinh(ends[1][:, None] / scale)
    stretched = low + (high - low) * np.linspace(0.0, 1.0, _PANELS + 1)
    edges = mode + scale * np.sinh(stretched)
    # The break: the inner edge nearest theta = 0 moves there if 0 is within, and has a short panel on
    # either side, so that the cube in `_solve` costs the bulk of the density nothing.
    nearest = 1 + np.argmin(np.abs(edges[:, 1:-1]), axis=1)[:, None]
    within = (edges[:, :1] < 0) & (edges[:, -1:] > 0)
    np.put_along_axis(edges, nearest, np.where(within, 0.0, np.take_along_axis(edges, nearest, 1)), 1)
    beside = np.take_along_axis(edges, nearest + np.array([-1, 1]), 1) / 6
    beside = np.where(within, beside, edges[:, -1:])
    cliffs = np.clip(kernel.cliffs, edges[:, :1], edges[:, -1:])
    return np.sort(np.concatenate([edges, beside, cliffs], axis=1), axis=1)


def _outer_mode(kernel: Kernel) -> _Array:
    """Return, as (T, 1), where the density of theta is highest, by zooming in a fixed number of times."""
    n_tables = len(kernel.weight)
    low, high = np.full((n_tables, 1), -_WIDEST), np.full((n_tables, 1), _WIDEST)
    steps = np.linspace(0.0, 1.0, 17)
    for _ in range(14):
        theta = low + (high - low) * steps
        best = np.argmax(_height(kernel, theta), axis=1)[:, None]
        low = np.take_along_axis(theta, np.maximum(best - 1, 0), 1)
        high = np.take_along_axis(theta, np.minimum(best + 1, len(steps) - 1), 1)
    return np.asarray((low + high) / 2)


def _height(kernel: Kernel, theta: _Array) -> _Array:
    """Return the log density of theta by Laplace's method: cheap, and near enough to place panels."""
    miss, small_miss, outside, gap = kernel.at(theta)
    _, top, width = inner_mode(kernel, theta, miss, small_miss, gap)
    return np.asarray(outside + top + np.log(width))
