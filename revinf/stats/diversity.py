"""How evenly a region's hits spread over categories of processes (formula 9).

Shares are rates made to sum to 1, so that a category does not count for more by having more studies:
c_i = (hits_i / n_i) / sum_j (hits_j / n_j).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Estimate, check_level
from revinf.stats.rates import count_arrays

__all__ = [
    "Diversity",
    "category_diversity",
    "category_diversity_minimum",
    "diversity_intervals",
    "effective_number",
    "functional_diversity",
    "shares",
]

_BLOCK = 1 << 18


@dataclass(frozen=True, slots=True)
class Diversity:
    """The three summaries with their intervals.

    Parameters
    ----------
    functional : Estimate
        Normalised entropy, 0 to 1.
    category : Estimate
        1 minus the distance from the even profile.
    effective_number : Estimate
        exp(H), from 1 to the number of categories.
    """

    functional: Estimate
    category: Estimate
    effective_number: Estimate


def shares(active: ArrayLike, total: ArrayLike) -> NDArray[np.float64] | None:
    """Return each category's share of the summed activation rates.

    Parameters
    ----------
    active, total : (K,) array-like of int
        Hits and studies, at least one, of each category; a study in two counts in both.

    Returns
    -------
    (K,) array, probability, or None
        Shares that sum to 1; None where no category has a hit.

    Raises
    ------
    InvalidCountError
        If the lengths differ, a count is not whole, `active` is not between 0 and `total`, or a category
        has no study.

    Examples
    --------
    >>> shares([1, 50], [4, 200]).tolist()  # the same rate, whatever the sizes
    [0.5, 0.5]
    """
    k, n = count_arrays(active, total)
    if not n.all():
        raise InvalidCountError(
            f"every category needs a study, but number {int(np.argmin(n)) + 1} has none; leave it out"
        )
    if not k.sum():
        return None
    rates = k / n
    return np.asarray(rates / rates.sum())


def functional_diversity(shares: ArrayLike) -> float:
    """Return the entropy of the shares over its largest possible value, H / ln K.

    Parameters
    ----------
    shares : (K,) array-like, K >= 2
        Shares; made to sum to 1, so that printed, rounded ones may be given.

    Returns
    -------
    float
        0 (one category has everything) to 1 (even).

    Raises
    ------
    InvalidCountError
        If a share is negative or not finite, all are 0, or there are fewer than two.

    References
    ----------
    Anderson, Kinnison & Pessoa 2013, NeuroImage 73:50-58 (the entropy; the division by ln K is ours).

    Examples
    --------
    >>> functional_diversity([0.25, 0.25, 0.25, 0.25]), functional_diversity([0, 1, 0])
    (1.0, 0.0)
    """
    c = _checked(shares, 2)
    return min(float(_entropy(c) / np.log(c.size)), 1.0)


def category_diversity(shares: ArrayLike) -> float:
    """Return 1 minus the distance of the shares from the even profile.

    Parameters
    ----------
    shares : (K,) array-like, K >= 1
        Shares, made to sum to 1 as above.

    Returns
    -------
    float
        1 - sqrt(sum (c_i - 1/K)^2 / K): `category_diversity_minimum(K)` to 1 (even).

    Raises
    ------
    InvalidCountError
        If a share is negative or not finite, or all are 0.

    References
    ----------
    Anderson 2007, The Neuroscientist 13:13-21, table 1.

    Examples
    --------
    >>> round(category_diversity([0.55, 0.24, 0, 0.21]), 2)  # published: 0.80
    0.8
    """
    return float(_category(_checked(shares, 1)))


def category_diversity_minimum(n_categories: int) -> float:
    """Return the category diversity of a region that serves one category only.

    Parameters
    ----------
    n_categories : int, K >= 1
        Number of categories.

    Returns
    -------
    float
        1 - sqrt(K - 1) / K: it rises with K, hence a value means nothing without it.

    Raises
    ------
    InvalidCountError
        If there is no category.

    Examples
    --------
    >>> round(category_diversity_minimum(4), 2)
    0.57
    """
    if n_categories < 1:
        raise InvalidCountError(
            f"n_categories must be at least 1, but got {n_categories!r}; give a number of categories"
        )
    return float(1 - np.sqrt(n_categories - 1) / n_categories)


def effective_number(shares: ArrayLike) -> float:
    """Return the number of equally common categories that would have the same entropy, exp(H).

    Parameters
    ----------
    shares : (K,) array-like, K >= 1
        Shares, made to sum to 1 as above.

    Returns
    -------
    float
        Hill number of order 1, from 1 to K.

    Raises
    ------
    InvalidCountError
        If a share is negative or not finite, or all are 0.

    References
    ----------
    Jost 2006, Oikos 113:363-375.

    Examples
    --------
    >>> round(effective_number([0.5, 0.5, 0, 0]), 12)
    2.0
    """
    c = _checked(shares, 1)
    return min(float(np.exp(_entropy(c))), float(c.size))


def diversity_intervals(
    active: ArrayLike,
    total: ArrayLike,
    *,
    minimum_hits: int,
    level: float = 0.95,
    draws: int | None = None,
    seed: int = 20130,
) -> Diversity | None:
    """Return the three summaries with intervals.

    Parameters
    ----------
    active, total : (K,) array-like of int
        Hits and studies of each category, each with at least one study.
    minimum_hits : int
        Fewer hits than this, summed over the categories, give None: few hits look falsely selective.
    level : float, probability, default 0.95
        Posterior probability that each interval holds.
    draws, seed : int, fixed
        Number of random sets of rates, and their start: equal counts give equal intervals. Left out, 4000, or down to
        500 for more than 250 categories, whose summaries vary less.

    Returns
    -------
    Diversity or None
        None below `minimum_hits`, without any hit, and with fewer than two categories.

    Raises
    ------
    InvalidCountError
        If the counts do not fit, as in `shares`, or `draws` is below 1.
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1.

    Notes
    -----
    The estimate is that of the plain observed shares. The interval is equal-tailed over independent
    Beta(k + 1/2, n - k + 1/2) rates, made to sum to 1, and is stretched to hold the estimate where it
    would not: the half hit that each rate's prior adds makes sparse profiles look more even than observed.

    Examples
    --------
    >>> found = diversity_intervals([12, 30, 4], [60, 100, 50], minimum_hits=20).effective_number
    >>> f"{found.estimate:.2f} ({found.low:.1f}-{found.high:.1f})"
    '2.67 (2.3-2.9)'
    """
    tail = (1 - check_level(level)) / 2
    observed = shares(active, total)
    k, n = count_arrays(active, total)
    draws = max(500, min(4000, 1_000_000 // max(len(k), 1))) if draws is None else draws
    if draws < 1:
        raise InvalidCountError(f"draws must be at least 1, but got {draws!r}; use 4000")
    if observed is None or len(k) < 2 or k.sum() < minimum_hits:
        return None
    generator = np.random.default_rng(seed)
    rows = max(1, _BLOCK // len(k))
    found: list[NDArray[np.float64]] = []
    for start in range(0, draws, rows):
        drawn = generator.beta(k + 0.5, n - k + 0.5, size=(min(rows, draws - start), len(k)))
        drawn /= drawn.sum(axis=1, keepdims=True)
        found.append(np.stack([_entropy(drawn), _category(drawn)]))
    entropy, category = np.quantile(np.concatenate(found, axis=1), [tail, 1 - tail], axis=1).T
    return Diversity(
        functional=_stretched(functional_diversity(observed), entropy / np.log(len(k))),
        category=_stretched(category_diversity(observed), category),
        effective_number=_stretched(effective_number(observed), np.exp(entropy)),
    )


def _stretched(estimate: float, ends: NDArray[np.float64]) -> Estimate:
    """Return an estimate whose interval holds it."""
    return Estimate(estimate, min(estimate, float(ends[0])), max(estimate, float(ends[1])))


def _checked(shares: ArrayLike, fewest: int) -> NDArray[np.float64]:
    """Return the shares, made to sum to 1."""
    c = np.asarray(shares, dtype=np.float64).reshape(-1)
    if not (c.size >= fewest and np.isfinite(c).all() and (c >= 0).all() and c.any()):
        raise InvalidCountError(
            f"shares must be {fewest} or more numbers of at least 0, not all 0, but got {c.tolist()[:4]}; "
            "give the rates of all categories"
        )
    return np.asarray(c / c.sum())


def _entropy(c: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the entropy of (..., K) shares in nats; 0 ln 0 is 0, and -0 is plain 0."""
    return np.asarray(-(c * np.log(np.maximum(c, np.finfo(np.float64).tiny))).sum(axis=-1) + 0.0)


def _category(c: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return 1 minus the root mean square distance of (..., K) shares from 1/K."""
    return np.asarray(1 - np.sqrt(((c - 1 / c.shape[-1]) ** 2).mean(axis=-1)))
