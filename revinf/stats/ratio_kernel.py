"""The kernel behind the posterior of ln R: its exponents for each table, and its part in v with its top.

See `revinf.stats.ratio_density` for the variables.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

__all__ = ["Kernel", "RatioPrior", "inner_mode", "log_inner"]

RatioPrior = Literal["shared", "independent"]

_Array = NDArray[np.float64]

_NORMAL_975 = 1.959964
"""The value that design and published figures use for the 97.5 % point of the normal law."""

_CLIFF = np.array([6.0, 0.0, -6.0, -36.0, -216.0, -1296.0])
"""Edges beside a cliff, in its widths: a normal step, and towards theta = 0 the power law that ends there."""


@dataclass(frozen=True, slots=True)
class Kernel:
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
    def of(cls, counts: NDArray[np.float64], prior: RatioPrior, limit: float) -> Kernel:
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
        """Return B, C, the log factor in theta alone, and 1 - q_max (1: no such factor), at (T, n) values of theta."""
        up = theta > 0
        size = np.abs(theta)
        miss = np.where(up, self.miss_up[:, None], self.miss_down[:, None])
        small_miss = np.where(up, self.small_miss_up[:, None], self.small_miss_down[:, None])
        fade = np.where(up, self.fade_up[:, None], self.fade_down[:, None])
        outside = -fade * size
        if not np.isfinite(self.spread):
            return miss, small_miss, outside, np.ones_like(theta)
        lesser = np.where(up, 1 - self.weight[:, None], self.weight[:, None])
        gap = lesser * -np.expm1(-size)  # 1 - q_max, exact near theta = 0
        outside = outside + 0.5 * np.log1p(-gap) - 0.5 * (theta / self.spread) ** 2
        return miss, small_miss, outside, gap


def log_inner(v: _Array, power: _Array, theta: _Array, miss: _Array, small_miss: _Array, gap: _Array) -> _Array:
    """Return the log of the kernel's part in v; the arrays broadcast."""
    less = np.exp(-np.abs(v))
    log_q = -np.maximum(v, 0.0) - np.log1p(less)  # log(1-p)
    more = 1 / (1 + less)
    less *= more
    up = v > 0
    p, q = np.where(up, more, less), np.where(up, less, more)  # each exact where it is small
    # log p as v + log(1-p): exact for small p too.
    result = power * (v + log_q) + miss * log_q
    fall = -np.expm1(-np.abs(theta))
    result += small_miss * np.log(q + p * fall)  # 1 - p r = (1-p) + p (1-r)
    return np.asarray(result - 0.5 * np.log(q + p * gap))


def inner_mode(
    kernel: Kernel, theta: _Array, miss: _Array, small_miss: _Array, gap: _Array
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
    top = log_inner(centre, a, theta, miss, small_miss, gap)
    return centre, top, width


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
