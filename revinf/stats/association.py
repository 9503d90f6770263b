"""Is there any association at all? Fisher's exact test and false-discovery control (formula 6).

Never the headline: a tiny p-value only says that the ratio is not 1. The hypergeometric probabilities
are summed in numpy, since the test runs on every plain check; scipy is the reference in the tests.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import InvalidProbabilityError
from revinf.stats.estimates import Counts

__all__ = ["benjamini_hochberg", "fisher_p"]

_TIE = 1e-7
"""Relative slack within which two tables count as equally probable, as reference software has it."""


def fisher_p(counts: Counts) -> float | None:
    """Return the two-sided p of Fisher's exact test.

    Parameters
    ----------
    counts : Counts
        The four counts.

    Returns
    -------
    float or None
        Probability of all tables with these margins that are no more probable than the observed one;
        None where a side has no study.

    Notes
    -----
    Time and memory grow with the spread of the table's law, at most the root of the number of studies: 0.1 s and
    30 MB for counts of a billion.

    Examples
    --------
    >>> round(fisher_p(Counts(3, 1, 1, 3)), 4)  # the lady tasting tea
    0.4857
    """
    if not counts.term_total or not counts.other_total:
        return None
    # Outwards from the most probable table, as ln P(k+1)/P(k) of the hypergeometric law: no factorials, hence no
    # loss of digits, and only as far as a probability can be told from 0.
    active, total, drawn = counts.active_total, counts.total, counts.term_total
    mode = (drawn + 1) * (active + 1) // (total + 2)
    lowest, highest = max(0, drawn + active - total), min(drawn, active)
    mode = min(max(mode, lowest), highest)
    up = _falls(mode, highest, (active, drawn, 1, total - active - drawn + 1))
    # Downwards is upwards for the misses: k' = active - k, drawn from the other side.
    down = _falls(active - mode, active - lowest, (active, total - drawn, 1, drawn - active + 1))
    away = counts.term_active - mode
    side = up if away > 0 else down
    if abs(away) > len(side):
        return 0.0
    observed = side[abs(away) - 1] if away else 0.0
    log_p = np.concatenate([down[::-1], [0.0], up])
    return float(min(1.0, np.exp(log_p[log_p <= observed + _TIE]).sum() / np.exp(log_p).sum()))


_FAR = -760.0
"""No probability is this far below another and still a number above 0."""


def _falls(start: int, stop: int, law: tuple[int, int, int, int]) -> NDArray[np.float64]:
    """Return ln P(k)/P(start) of the hypergeometric law for k = start + 1, ..., until it is as good as 0.

    The law's numbers a, b, c, d give P(k+1)/P(k) = (a - k)(b - k) / ((k + c)(k + d)).
    """
    a, b, c, d = (float(number) for number in law)
    found: list[NDArray[np.float64]] = []
    reached, at, length = 0.0, start, 256
    while at < stop and reached > _FAR:
        k = np.arange(at, min(at + length, stop), dtype=np.float64)
        falls = reached + np.cumsum(np.log(a - k) + np.log(b - k) - np.log(k + c) - np.log(k + d))
        found.append(falls)
        reached, at, length = float(falls[-1]), at + len(k), 2 * length
    return np.concatenate(found) if found else np.empty(0)


def benjamini_hochberg(p_values: ArrayLike) -> NDArray[np.float64]:
    """Return the q-values of Benjamini and Hochberg's step-up procedure.

    Parameters
    ----------
    p_values : (N,) array-like, probability
        P-values of a family of tests, in any order.

    Returns
    -------
    (N,) array, probability
        Smallest false-discovery rate at which each test is rejected, in the order given.

    Raises
    ------
    InvalidProbabilityError
        If a p-value lies outside 0 to 1.

    References
    ----------
    Benjamini & Hochberg 1995, J R Stat Soc B 57:289-300.

    Examples
    --------
    >>> [round(float(q), 3) for q in benjamini_hochberg([0.04, 0.01, 0.5])]
    [0.06, 0.03, 0.5]
    """
    p = np.asarray(p_values, dtype=np.float64).reshape(-1)
    outside = p[~((p >= 0) & (p <= 1))]
    if outside.size:
        raise InvalidProbabilityError(
            f"p-values must lie between 0 and 1, but got {outside[0]:g}; check the tests they come from"
        )
    if not p.size:
        return p
    order = np.argsort(-p, kind="stable")
    rank = np.arange(p.size, 0, -1)
    q = np.empty_like(p)
    q[order] = np.minimum.accumulate(np.minimum(1.0, p[order] * p.size / rank))
    return q
