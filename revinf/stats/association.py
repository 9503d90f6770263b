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
    Time and memory grow with the smallest margin: 0.2 s and 60 MB at a million.

    Examples
    --------
    >>> round(fisher_p(Counts(3, 1, 1, 3)), 4)  # the lady tasting tea
    0.4857
    """
    if not counts.term_total or not counts.other_total:
        return None
    active, total, drawn = counts.active_total, counts.total, counts.term_total
    k = np.arange(max(0, drawn + active - total), min(drawn, active) + 1)
    # ln P(k+1)/P(k) of the hypergeometric law, summed from the observed table outwards: no factorials,
    # hence no loss of digits at counts of a million.
    with np.errstate(divide="ignore"):
        steps = (
            np.log(active - k[:-1])
            + np.log(drawn - k[:-1])
            - np.log(k[:-1] + 1)
            - np.log(total - active - drawn + k[:-1] + 1)
        )
    log_p = np.concatenate([[0.0], np.cumsum(steps)])
    log_p -= log_p[counts.term_active - k[0]]
    scale = log_p.max()
    weight = np.exp(log_p - scale)
    return float(min(1.0, weight[log_p <= _TIE].sum() / weight.sum()))


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
