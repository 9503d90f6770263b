"""A rate from a count: the Jeffreys posterior Beta(k + 1/2, n - k + 1/2) (formula 1).

The interval is equal-tailed and does not snap to 0 or 1 at k = 0 or k = n; screens print the count
beside it instead. Quantiles come from quadrature in numpy (scipy would cost more than the whole check)
and are held to scipy and statsmodels in the tests.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Estimate, check_level
from revinf.stats.quadrature import panel_nodes, panel_quantiles

__all__ = ["beta_quantiles", "count_arrays", "jeffreys_rate", "jeffreys_rates"]

_PANEL = 0.65
"""Width of a panel on the stretched axis."""
_SIDE = 8
"""Panels a side: they reach 90 standard deviations, where the tail of a shape of 1/2 is below 1e-30."""
_FADE = 45.0
"""A shape below 1/2 has a longer tail, and gets panels until that is at e^-45 = 3e-20."""
_ROWS = 1024
"""Distributions solved at once: 1.5 MB an array."""


def jeffreys_rate(active: int, total: int, *, level: float = 0.95) -> Estimate | None:
    """Estimate a rate from a count.

    Parameters
    ----------
    active : int
        Successes, 0 <= active <= total.
    total : int
        Trials.
    level : float, probability, default 0.95
        Posterior probability that the interval holds.

    Returns
    -------
    Estimate or None
        Posterior median and equal-tailed interval; None without trials.

    Raises
    ------
    InvalidCountError
        If the counts are negative or `active` exceeds `total`.
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1.

    References
    ----------
    Brown, Cai & DasGupta 2001, Statistical Science 16:101-133, section 3 (the Jeffreys interval).

    Examples
    --------
    >>> rate = jeffreys_rate(15, 63)
    >>> f"{rate.estimate:.3f} ({rate.low:.3f}-{rate.high:.3f})"
    '0.239 (0.146-0.353)'
    >>> jeffreys_rate(0, 0) is None
    True
    """
    return jeffreys_rates([(active, total)], level=level)[0]


def jeffreys_rates(pairs: Sequence[tuple[int, int]], *, level: float = 0.95) -> list[Estimate | None]:
    """Estimate many rates at once.

    Parameters
    ----------
    pairs : sequence of (active, total)
        Counts.
    level : float, probability, default 0.95
        Posterior probability that each interval holds.

    Returns
    -------
    list of Estimate or None
        As `jeffreys_rate`, in the order given.

    Raises
    ------
    InvalidCountError
        If a count is negative or an `active` exceeds its `total`.
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1.

    Examples
    --------
    >>> [rate is None for rate in jeffreys_rates([(1, 2), (0, 0)])]
    [False, True]
    """
    tail = (1 - check_level(level)) / 2
    for active, total in pairs:
        if not 0 <= active <= total:
            raise InvalidCountError(
                f"active must lie between 0 and total, but got {active} of {total}; check the counts"
            )
    known = [i for i, (_, total) in enumerate(pairs) if total > 0]
    result: list[Estimate | None] = [None] * len(pairs)
    if not known:
        return result
    a = np.array([pairs[i][0] + 0.5 for i in known])
    b = np.array([pairs[i][1] - pairs[i][0] + 0.5 for i in known])
    for i, (low, middle, high) in zip(known, beta_quantiles(a, b, np.array([tail, 0.5, 1 - tail])), strict=True):
        result[i] = Estimate(float(middle), float(low), float(high))
    return result


def count_arrays(active: ArrayLike, total: ArrayLike) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
    """Return hits and studies of many terms as arrays, checked.

    Parameters
    ----------
    active : (T,) array-like of int
        Studies of each term that hit the region.
    total : (T,) array-like of int
        All studies of each term.

    Returns
    -------
    active, total : (T,) int64 arrays
        The same counts.

    Raises
    ------
    InvalidCountError
        If the lengths differ, a count is not whole, or `active` is not between 0 and `total`.

    Examples
    --------
    >>> [part.tolist() for part in count_arrays([1, 0], [3, 2])]
    [[1, 0], [3, 2]]
    """
    given = np.asarray(active), np.asarray(total)
    if given[0].ndim != 1 or given[0].shape != given[1].shape:
        raise InvalidCountError(
            f"active and total must be two lists of one length, but got shapes {given[0].shape} and "
            f"{given[1].shape}; give both counts for each term"
        )
    checked = []
    for name, array in zip(("active", "total"), given, strict=True):
        whole = array.astype(np.int64) if array.dtype.kind in "iuf" and np.isfinite(array).all() else None
        if array.size and (whole is None or np.any(whole != array)):
            raise InvalidCountError(
                f"{name} must hold whole numbers, but got {array.tolist()[:3]!r}; give counts of studies"
            )
        checked.append(np.zeros(0, dtype=np.int64) if whole is None else whole)
    k, n = checked
    wrong = (k < 0) | (k > n)
    if wrong.any():
        raise InvalidCountError(
            f"active must lie between 0 and total, but got {k[wrong][0]} of {n[wrong][0]}; check the counts"
        )
    return k, n


def beta_quantiles(a: NDArray[np.float64], b: NDArray[np.float64], levels: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return quantiles of Beta(a, b) distributions.

    Parameters
    ----------
    a, b : (D,) arrays
        Shapes, 1e-6 or more.
    levels : (L,) array, probability
        Where the distribution function is inverted.

    Returns
    -------
    (D, L) array, probability
        Quantiles.

    Notes
    -----
    Integrated over v = logit(p), centred at the mode of the density in v and stretched by sinh, so that
    both a Gaussian core and exponential tails are resolved, whatever the counts. A shape below 1/2 flattens
    the tail on its side and leaves the bend beside it where a shape of 1/2 has it: the centre and the
    stretch are those of 1/2. A quantile below 1e-308 is returned as 0.

    Examples
    --------
    >>> q = beta_quantiles(np.array([0.5]), np.array([0.5]), np.array([0.25]))  # arcsine law
    >>> round(float(q[0, 0]), 6)  # sin(pi/8) squared
    0.146447
    """
    wide_a, wide_b = np.maximum(a, 0.5), np.maximum(b, 0.5)
    mode, spread = np.log(wide_a / wide_b), np.sqrt(1 / wide_a + 1 / wide_b)
    sides = np.stack([_panels(a, spread), _panels(b, spread)])
    result = np.empty((len(a), len(levels)))
    for below, above in np.unique(sides, axis=1).T.tolist():
        start, stop = -below * _PANEL, above * _PANEL
        t = panel_nodes(start, stop, below + above)
        group = np.flatnonzero((sides[0] == below) & (sides[1] == above))
        for rows in np.split(group, range(_ROWS, len(group), _ROWS)):
            middle, scale = mode[rows, None, None], spread[rows, None, None]
            log_p, log_q = _log_sigmoids(middle + scale * np.sinh(t))
            # Each exact in its own tail; differences from the mode keep large counts exact.
            top_p, top_q = _log_sigmoids(middle)
            density = np.exp(a[rows, None, None] * (log_p - top_p) + b[rows, None, None] * (log_q - top_q))
            stretched = panel_quantiles(density * np.cosh(t), start, stop, levels)
            result[rows] = np.exp(_log_sigmoids(middle[..., 0] + scale[..., 0] * np.sinh(stretched))[0])
    return result


def _panels(shape: NDArray[np.float64], spread: NDArray[np.float64]) -> NDArray[np.intp]:
    """Return how many panels the side of a shape needs, in steps of four, so that many share a grid."""
    needed = 4 * np.ceil(np.arcsinh(_FADE / (shape * spread)) / _PANEL / 4)
    return np.where(shape < 0.5, np.maximum(needed, _SIDE), _SIDE).astype(np.intp)


def _log_sigmoids(v: NDArray[np.float64]) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return log p and log (1-p) of the logit v, without overflow."""
    rest = np.log1p(np.exp(-np.abs(v)))
    return np.minimum(v, 0.0) - rest, np.minimum(-v, 0.0) - rest
