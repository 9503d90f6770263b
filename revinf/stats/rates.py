"""A rate from a count: the Jeffreys posterior Beta(k + 1/2, n - k + 1/2) (formula 1).

The interval is equal-tailed and does not snap to 0 or 1 at k = 0 or k = n; screens print the count
beside it instead. Quantiles come from quadrature in numpy (scipy would cost more than the whole check)
and are held to scipy and statsmodels in the tests.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Estimate, check_level
from revinf.stats.quadrature import panel_nodes, panel_quantiles

__all__ = ["beta_quantiles", "jeffreys_rate", "jeffreys_rates"]

_REACH = 5.2
"""On the stretched axis: 90 standard deviations, where the slowest tail, e^(v/2), is below 1e-30."""
_PANELS = 16


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
    for i, (low, middle, high) in zip(
        known, beta_quantiles(a, b, np.array([tail, 0.5, 1 - tail])), strict=True
    ):
        result[i] = Estimate(float(middle), float(low), float(high))
    return result


def beta_quantiles(
    a: NDArray[np.float64], b: NDArray[np.float64], levels: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Return quantiles of Beta(a, b) distributions.

    Parameters
    ----------
    a, b : (D,) arrays
        Shapes, 1/2 or more.
    levels : (L,) array, probability
        Where the distribution function is inverted.

    Returns
    -------
    (D, L) array, probability
        Quantiles.

    Notes
    -----
    Integrated over v = logit(p), centred at the mode of the density in v and stretched by sinh, so that
    both a Gaussian core and exponential tails are resolved, whatever the counts.

    Examples
    --------
    >>> q = beta_quantiles(np.array([0.5]), np.array([0.5]), np.array([0.25]))  # arcsine law
    >>> round(float(q[0, 0]), 6)  # sin(pi/8) squared
    0.146447
    """
    t = panel_nodes(-_REACH, _REACH, _PANELS)
    a, b = a[:, None, None], b[:, None, None]
    mode, spread = np.log(a / b), np.sqrt(1 / a + 1 / b)
    v = mode + spread * np.sinh(t)
    # log p and log (1-p), both exact in their own tail; differences from the mode keep large counts exact.
    log_p = _log_sigmoid(v) - _log_sigmoid(mode)
    log_q = _log_sigmoid(-v) - _log_sigmoid(-mode)
    density = np.exp(a * log_p + b * log_q) * np.cosh(t)
    stretched = panel_quantiles(density, -_REACH, _REACH, levels)
    quantile = mode[..., 0] + spread[..., 0] * np.sinh(stretched)
    return np.asarray(np.exp(_log_sigmoid(quantile)))


def _log_sigmoid(v: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return log(1 / (1 + exp(-v))) without overflow."""
    return np.asarray(-np.logaddexp(0.0, -v))
