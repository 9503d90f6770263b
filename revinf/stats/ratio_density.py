"""The posterior density of ln R and its quantiles: the quadrature behind `revinf.stats.ratio`.

Everything is done in theta = ln R and v = logit of the *larger* of the two probabilities. That choice
turns the corner p0 < 1, p1 < 1 into the whole line of v, so that nothing has to be cut off: with
theta > 0, p1 = p and p0 = p e^-theta. Both priors then share one kernel,

    p^A (1-p)^B (1 - p e^-|theta|)^C (1 - p q_max)^D e^(-|theta| E) x a factor in theta alone,

which has one mode in v, known in closed form. The inner integral is a trapezoid sum on a sinh-stretched
axis around that mode; the outer one runs over panels fitted to each table, with a break at theta = 0
where the density has a cusp. No random numbers: the same counts give the same digits.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from revinf.stats.quadrature import panel_nodes, panel_quantiles

__all__ = ["RatioPrior", "log_ratio_posterior"]

RatioPrior = Literal["shared", "independent"]

_NORMAL_975 = 1.959964
"""The value that design and published figures use for the 97.5 % point of the normal law."""

_STEP, _REACH = 0.19, 5.2
_STRETCHED = np.sinh(np.arange(-_REACH, _REACH + _STEP / 2, _STEP))
_STRETCH_SLOPE = np.cosh(np.arange(-_REACH, _REACH + _STEP / 2, _STEP))
"""Trapezoid nodes of the inner integral: exponential tails down to 1e-30, a Gaussian core to 1e-11."""

_PANELS = 16
"""Panels of the outer integral, half of them on each side of the break."""

_POWER = 3
"""theta = t^3 on both sides of the break smooths the cusp at theta = 0."""

_WIDEST = 150.0
"""No theta beyond this has any mass, for counts up to 1e12 and both priors."""

_DROP = 34.0
"""The box ends where the log density has fallen by this much from its top: e^-34 is 2e-15."""


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

    @classmethod
    def of(cls, counts: NDArray[np.float64], prior: RatioPrior, limit: float) -> _Kernel:
        """Make the kernel of (T, 4) counts n11, n10, n01, n00."""
        n11, n10, n01, n00 = counts.T
        weight = (n11 + n10) / counts.sum(axis=1)
        if prior == "shared":
            # dq = q_max p (1-p) dv and q^-1/2 = (p q_max)^-1/2 give A its 1/2 and B its 1.
            return cls(
                power=n11 + n01 + 0.5,
                miss_up=n10 + 1,
                miss_down=n00 + 1,
                small_miss_up=n00,
                small_miss_down=n10,
                fade_up=n01,
                fade_down=n11,
                weight=weight,
                spread=float(np.log(limit)) / _NORMAL_975,
            )
        return cls(
            power=n11 + n01 + 1,
            miss_up=n10 + 0.5,
            miss_down=n00 + 0.5,
            small_miss_up=n00 - 0.5,
            small_miss_down=n10 - 0.5,
            fade_up=n01 + 0.5,
            fade_down=n11 + 0.5,
            weight=weight,
            spread=float("inf"),
        )

    def at(
        self, theta: NDArray[np.float64]
    ) -> tuple[NDArray[np.float64], NDArray[np.float64], NDArray[np.float64], NDArray[np.float64]]:
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


def _solve(kernel: _Kernel, levels: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the quantiles of theta for every table of a kernel."""
    low, high = _box(kernel)
    middle = np.where((low < 0) & (high > 0), 0.0, (low + high) / 2)
    t = panel_nodes(-1.0, 1.0, _PANELS)
    reach_down, reach_up = (middle - low)[:, None], (high - middle)[:, None]

    def unfold(t: NDArray[np.float64]) -> NDArray[np.float64]:
        return middle[:, None] + np.where(t < 0, reach_down, reach_up) * t**_POWER

    flat = np.broadcast_to(t.ravel(), (len(low), t.size))
    log_density = _log_marginal(kernel, unfold(flat))
    log_density -= log_density.max(axis=1, keepdims=True)
    jacobian = np.where(flat < 0, reach_down, reach_up) * flat ** (_POWER - 1)
    density = (np.exp(log_density) * jacobian).reshape(len(low), *t.shape)
    return unfold(panel_quantiles(density, -1.0, 1.0, levels))


def _log_marginal(kernel: _Kernel, theta: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the log density of theta, up to a constant, at (T, n) values: the inner integral."""
    miss, small_miss, outside, gap = kernel.at(theta)
    centre, top, width = _inner_mode(kernel, theta, miss, small_miss, gap)
    v = centre[..., None] + width[..., None] * _STRETCHED
    log_inner = _log_inner(kernel, v, theta, miss, small_miss, gap) - top[..., None]
    inner = (np.exp(log_inner) * _STRETCH_SLOPE).sum(axis=-1)
    return np.asarray(outside + top + np.log(inner * width))


def _log_inner(
    kernel: _Kernel,
    v: NDArray[np.float64],
    theta: NDArray[np.float64],
    miss: NDArray[np.float64],
    small_miss: NDArray[np.float64],
    gap: NDArray[np.float64],
) -> NDArray[np.float64]:
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
    kernel: _Kernel,
    theta: NDArray[np.float64],
    miss: NDArray[np.float64],
    small_miss: NDArray[np.float64],
    gap: NDArray[np.float64],
) -> tuple[NDArray[np.float64], NDArray[np.float64], NDArray[np.float64]]:
    """Return the place, height and width of the inner integrand's top, (T, n) each.

    Without the slowly varying factor in q_max the top solves r(A+B+C) p^2 - (A(1+r)+B+rC) p + A = 0,
    the equation of the likelihood's ridge at a fixed ratio; its smaller root lies in (0, 1).
    """
    a, r = kernel.power[:, None], np.exp(-np.abs(theta))
    linear = a * (1 + r) + miss + r * small_miss
    square = r * (a + miss + small_miss)
    p = 2 * a / (linear + np.sqrt(np.maximum(linear**2 - 4 * square * a, 0)))
    # The root of 1-p directly, since p may round to 1; B >= 1/2 keeps it away from zero.
    q = np.clip(1 - p, 1e-14, 1 - 1e-300)
    p = np.clip(p, 1e-300, 1.0)
    centre = np.log(p) - np.log(q)
    small_q = q - p * np.expm1(-np.abs(theta))  # 1 - p r
    bend = a + miss + small_miss * r * (1 - 2 * p + r * p * p) / small_q**2
    width = 1 / np.sqrt(p * q * np.maximum(bend, 0.5 * np.minimum(a, miss)))
    top = _log_inner(kernel, centre[..., None], theta, miss, small_miss, gap)[..., 0]
    return centre, top, width


def _box(kernel: _Kernel) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return, for each table, the range of theta outside which its density is negligible.

    Found by zooming: at each round the range shrinks to the nodes that are within `_DROP` of the top, so
    that a peak of width 1e-5 (counts of 1e9) is found as surely as one that spans the prior.
    """
    n_tables = len(kernel.weight)
    low, high = np.full(n_tables, -_WIDEST), np.full(n_tables, _WIDEST)
    steps = np.linspace(0.0, 1.0, 49)
    for _ in range(9):
        theta = low[:, None] + (high - low)[:, None] * steps
        miss, small_miss, outside, gap = kernel.at(theta)
        _, top, width = _inner_mode(kernel, theta, miss, small_miss, gap)
        height = outside + top + np.log(width)
        inside = height > height.max(axis=1, keepdims=True) - _DROP
        first = np.maximum(inside.argmax(axis=1) - 1, 0)
        last = np.minimum(len(steps) - inside[:, ::-1].argmax(axis=1), len(steps) - 1)
        rows = np.arange(n_tables)
        low, high = theta[rows, first], theta[rows, last]
        if np.all(last - first >= len(steps) // 2):
            break
    return low, high
