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

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from revinf.stats.quadrature import panel_masses, panel_nodes, panel_quantiles

__all__ = ["RatioPrior", "log_ratio_posterior", "log_ratio_posterior_and_ahead"]

RatioPrior = Literal["shared", "independent"]

_Array = NDArray[np.float64]

_NORMAL_975 = 1.959964
"""The value that design and published figures use for the 97.5 % point of the normal law."""

_STEP, _REACH = 0.19, 5.2
_STRETCHED = np.sinh(np.arange(-_REACH, _REACH + _STEP / 2, _STEP))
_STRETCH_SLOPE = np.cosh(np.arange(-_REACH, _REACH + _STEP / 2, _STEP))
"""Trapezoid nodes of the inner integral: exponential tails down to 1e-30, a Gaussian core to 1e-11."""

_PANELS = 18
"""Panels of the outer integral, before those at the cliffs."""

_CLIFF = np.array([6.0, 0.0, -6.0, -36.0, -216.0, -1296.0])
"""Edges beside a cliff, in its widths: a normal step, and towards theta = 0 the power law that ends there."""

_POWER = 3
"""Beside the break theta runs as the cube of the panel's variable, which smooths the cusp there."""

_WIDEST = 150.0
"""No theta beyond this has any mass, for counts up to 1e12 and both priors."""

_DROP = 34.0
"""The panels end where the log density has fallen by this much from its top: e^-34 is 2e-15."""

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
    return _solve(_Kernel.of(counts, prior, limit), levels)


@dataclass(frozen=True, slots=True)
class _Kernel:
    """The exponents of the kernel, arrays over tables; `*_up` hold for theta > 0, `*_down` below."""

    power: NDArray[np.float64]  # A, of p
    miss_up: NDArray[np.float64]  # B, of 1-p, when the larger probability is the term's
    miss_down: NDArray[np.float64]
    small_miss_up: NDArray[np.float64]  # C, of 1 - p e^-|theta|
    small_miss_down: NDArray[np.float64]
    fade_up: NDArray[np.float64]  # E, of e^-|theta|
    fade_down: NDArray[np.float64]
    weight: NDArray[np.float64]  # w, share of the studies that carry the term
    spread: float  # standard deviation of the prior of ln R; inf for independent rates
    cliffs: NDArray[np.float64]  # panel edges where the larger probability reaches 1

    @classmethod
    def of(cls, counts: NDArray[np.float64], prior: RatioPrior, limit: float) -> _Kernel:
        """Make the kernel of (T, 4) counts n11, n10, n01, n00."""
        n11, n10, n01, n00 = counts.T
        weight = (n11 + n10) / counts.sum(axis=1)
        # Shared: dq = q_max p (1-p) dv and q^-1/2 = (p q_max)^-1/2 give A its 1/2 and B its 1; independent
        # Jeffreys rates move half a count from each exponent of a miss to one of a hit.
        half = 0.0 if prior == "shared" else 0.5
        return cls(
            power=n11 + n01 + 0.5 + half,
            miss_up=n10 + 1 - half,
            miss_down=n00 + 1 - half,
            small_miss_up=n00 - half,
            small_miss_down=n10 - half,
            fade_up=n01 + half,
            fade_down=n11 + half,
            weight=weight,
            spread=float(np.log(limit)) / _NORMAL_975 if prior == "shared" else float("inf"),
            cliffs=_cliffs(counts),
        )

    def at(self, theta: _Array) -> tuple[_Array, _Array, _Array, _Array]:
        """Return B, C, the log factor in theta alone, and 1 - q_max, at (T, n) values of theta."""
        up = theta > 0
        size = np.abs(theta)
        miss = np.where(up, self.miss_up[:, None], self.miss_down[:, None])
        small_miss = np.where(up, self.small_miss_up[:, None], self.small_miss_down[:, None])
        fade = np.where(up, self.fade_up[:, None], self.fade_down[:, None])
        outside = -fade * size
        if not np.isfinite(self.spread):
            return miss, small_miss, outside, np.zeros_like(theta)
        lesser = np.where(up, 1 - self.weight[:, None], self.weight[:, None])
        gap = lesser * -np.expm1(-size)  # 1 - q_max, exact near theta = 0
        outside = outside + 0.5 * np.log1p(-gap) - 0.5 * (theta / self.spread) ** 2
        return miss, small_miss, outside, gap


def _solve(kernel: _Kernel, levels: _Array) -> tuple[_Array, _Array]:
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
    log_density = _log_marginal(kernel, theta)
    log_density -= log_density.max(axis=1, keepdims=True)
    density = (np.exp(log_density) * slope).reshape(n_tables, *t.shape)
    place = panel_quantiles(density, 0.0, float(n_panels), levels)
    panel = np.minimum(place.astype(np.intp), n_panels - 1)
    # 0 is an edge of the panels wherever it lies within them.
    mass = panel_masses(density)
    return unfold(panel, place - panel)[0], (mass * (left >= 0)).sum(axis=1) / mass.sum(axis=1)


def _log_marginal(kernel: _Kernel, theta: _Array) -> _Array:
    """Return the log density of theta, up to a constant, at (T, n) values: the inner integral."""
    miss, small_miss, outside, gap = kernel.at(theta)
    centre, top, width = _inner_mode(kernel, theta, miss, small_miss, gap)
    v = centre[..., None] + width[..., None] * _STRETCHED
    log_inner = _log_inner(kernel, v, theta, miss, small_miss, gap) - top[..., None]
    inner = (np.exp(log_inner) * _STRETCH_SLOPE).sum(axis=-1)
    return np.asarray(outside + top + np.log(inner * width))


def _log_inner(kernel: _Kernel, v: _Array, theta: _Array, miss: _Array, small_miss: _Array, gap: _Array) -> _Array:
    """Return the log of the kernel's part in v, at (T, n, m) values of v."""
    log_q = -np.logaddexp(0.0, v)  # log(1-p)
    q = np.exp(log_q)
    p = -np.expm1(log_q)
    # log p as v + log(1-p): exact for small p too.
    result = kernel.power[:, None, None] * (v + log_q) + miss[..., None] * log_q
    fall = -np.expm1(-np.abs(theta))[..., None]
    result += small_miss[..., None] * np.log(q + p * fall)  # 1 - p r = (1-p) + p (1-r)
    if np.isfinite(kernel.spread):
        result -= 0.5 * np.log(q + p * gap[..., None])
    return np.asarray(result)


def _inner_mode(
    kernel: _Kernel, theta: _Array, miss: _Array, small_miss: _Array, gap: _Array
) -> tuple[_Array, _Array, _Array]:
    """Return the place, height and width of the inner integrand's top, (T, n) each.

    Without the slowly varying factor in q_max the top solves r(A+B+C) p^2 - (A(1+r)+B+rC) p + A = 0,
    the equation of the likelihood's ridge at a fixed ratio; its smaller root lies in (0, 1). Where C is
    -1/2 (independent rates, no misses) that factor varies slowly too and is left out: it only flattens
    the side towards p = 1.
    """
    a, fall = kernel.power[:, None], -np.expm1(-np.abs(theta))
    r, c = np.exp(-np.abs(theta)), np.maximum(small_miss, 0)
    square = r * (a + miss + c)
    # The same equation in 1-p has the coefficients square, slope, -miss (1-r): nothing cancels in its
    # discriminant, whereas linear^2 - 4 square A loses every digit for counts of 1e9 without a miss.
    linear, slope = a * (1 + r) + miss + r * c, (a + miss) * fall - r * (miss + c)
    root = np.hypot(slope, 2 * np.sqrt(square * miss * fall))
    p = 2 * a / (linear + root)
    q = np.where(slope > 0, 2 * miss * fall / (np.abs(slope) + root), (np.abs(slope) + root) / (2 * square))
    centre = np.log(p) - np.log(q)
    small_q = q + p * fall  # 1 - p r
    bend = a + miss + c * r * (1 - 2 * p + r * p * p) / small_q**2
    width = 1 / np.sqrt(p * q * np.maximum(bend, 0.5 * np.minimum(a, miss)))
    top = _log_inner(kernel, centre[..., None], theta, miss, small_miss, gap)[..., 0]
    return centre, top, width


def _panel_edges(kernel: _Kernel) -> _Array:
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


def _cliffs(counts: _Array) -> _Array:
    """Return panel edges around the two values of theta at which the larger probability reaches 1.

    With few studies on a side, none or few of them misses, the density of theta does not fade there but
    breaks off, over the width of ln p of the *other* side: 1/1 v 500/10000 ends at ln 20 within 0.04.
    """
    edges = []
    for sign, hits, misses in ((-1.0, counts[:, 2:3], counts[:, 3:]), (1.0, counts[:, :1], counts[:, 1:2])):
        share = (hits + 0.5) / (hits + misses + 1)
        width = np.sqrt((misses + 0.5) / ((hits + 0.5) * (hits + misses + 1)))
        edges.append(sign * (np.log(share) - width * _CLIFF))
    return np.concatenate(edges, axis=1)


def _outer_mode(kernel: _Kernel) -> _Array:
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


def _height(kernel: _Kernel, theta: _Array) -> _Array:
    """Return the log density of theta by Laplace's method: cheap, and near enough to place panels."""
    miss, small_miss, outside, gap = kernel.at(theta)
    _, top, width = _inner_mode(kernel, theta, miss, small_miss, gap)
    return np.asarray(outside + top + np.log(width))
