"""The likelihood ratio with every other process counting once, however many studies it has.

P(active | other) as the plain mean over the rivals of their own rates; a literature in which one topic holds
most of the studies cannot bend it. Beside the crude ratio, never mixed with it.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Estimate, check_level
from revinf.stats.rates import count_arrays

__all__ = ["balanced_ratio"]


def balanced_ratio(
    own: tuple[int, int],
    rival_active: ArrayLike,
    rival_total: ArrayLike,
    *,
    level: float = 0.95,
    draws: int = 4000,
    seed: int = 20131,
) -> Estimate | None:
    """Return the claimed process's rate over the mean of its rivals' rates.

    Parameters
    ----------
    own : (int, int)
        Hits and studies of the claimed process.
    rival_active, rival_total : (K,) array-like of int
        Hits and studies of each rival, each with at least one study.
    level : float, probability, default 0.95
        Posterior probability that the interval holds.
    draws, seed : int, default 4000 and fixed
        Number of random sets of rates, and their start: the same counts give the same interval.

    Returns
    -------
    Estimate or None
        A ratio; None without rivals, without a study of the process, or where no rival is ever active.

    Raises
    ------
    InvalidCountError
        If the counts do not fit, or `draws` is below 1.
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1.

    Notes
    -----
    The estimate is that of the plain observed rates. The interval is equal-tailed over independent
    Beta(k + 1/2, n - k + 1/2) rates, the mean of the rivals' by a beta distribution of the same mean and variance, and
    is stretched to hold the estimate where it would not.

    Examples
    --------
    >>> found = balanced_ratio((36, 272), [7, 2, 3, 2, 2], [20, 40, 23, 13, 63])
    >>> round(found.estimate, 2)
    0.92
    """
    tail = (1 - check_level(level)) / 2
    if draws < 1:
        raise InvalidCountError(f"draws must be at least 1, but got {draws!r}; use 4000")
    k, n = count_arrays(rival_active, rival_total)
    own_k, own_n = count_arrays([own[0]], [own[1]])
    if not len(k) or not own_n[0] or not k.sum() or not n.all():
        return None
    estimate = float(own_k[0] / own_n[0] / (k / n).mean())
    generator = np.random.default_rng(seed)
    # The mean of the rivals' rates is drawn from the beta distribution of its own mean and variance: exact for
    # one rival, close for several (tests), and as quick for a thousand.
    mean = float(((k + 0.5) / (n + 1)).mean())
    variance = float(((k + 0.5) * (n - k + 0.5) / ((n + 1.0) ** 2 * (n + 2))).sum()) / len(k) ** 2
    weight = mean * (1 - mean) / variance - 1
    rivals = generator.beta(mean * weight, (1 - mean) * weight, size=draws)
    own_rate = generator.beta(own_k[0] + 0.5, own_n[0] - own_k[0] + 0.5, size=draws)
    low, high = np.quantile(own_rate / rivals, [tail, 1 - tail])
    return Estimate(estimate, min(estimate, float(low)), max(estimate, float(high)))
