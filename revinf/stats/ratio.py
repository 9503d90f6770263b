"""The likelihood ratio R = P(active | term) / P(active | other) with its posterior quantiles (formula 2).

Two priors. "shared": the pooled rate q = w p1 + (1-w) p0 is Beta(1/2, 1/2) and, independently, ln R is
normal with 95 % between 1/limit and limit (Greenland 2006); no evidence then returns the prior.
"independent": p1 and p0 each have a Jeffreys prior.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import get_args

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.estimates import Counts, Estimate, check_level
from revinf.stats.ratio_density import RatioPrior, log_ratio_posterior_and_ahead

__all__ = [
    "DEFAULT_LIMIT",
    "RatioPrior",
    "likelihood_ratio",
    "likelihood_ratios",
    "log_ratio_quantiles",
    "log_ratio_summary",
    "observed_ratio",
]

DEFAULT_LIMIT = 20.0
"""95 % of the prior of R lies between 1/20 and 20."""

_LARGEST_LIMIT = 1e9
"""A wider prior would reach beyond the range of ln R in which the posterior is looked for."""


def likelihood_ratio(
    counts: Counts,
    *,
    level: float = 0.95,
    prior: RatioPrior = "shared",
    limit: float = DEFAULT_LIMIT,
) -> Estimate | None:
    """Estimate the likelihood ratio P(active | term) / P(active | other).

    Parameters
    ----------
    counts : Counts
        The four counts.
    level : float, probability, default 0.95
        Posterior probability that the interval holds.
    prior : {"shared", "independent"}, default "shared"
        Prior of the two rates.
    limit : float, ratio, 1 < limit <= 1e9, default 20
        With the shared prior: 95 % of the prior of the ratio lies between 1/limit and limit.

    Returns
    -------
    Estimate or None
        Posterior median and equal-tailed interval (a ratio, no unit); None where a side has no study.

    Raises
    ------
    InvalidCountError
        If `limit` is not a number above 1 and at most 1e9.
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1, or `prior` is unknown.

    Notes
    -----
    The ratio is the Bayes factor of Poldrack 2006. It says nothing of how the labels came about.

    References
    ----------
    Poldrack 2006, Trends Cogn Sci 10:59-63. Greenland 2006, Int J Epidemiol 35:765-775.

    Examples
    --------
    Broca's area and language (Poldrack 2006, table 1; published as 2.3):

    >>> ratio = likelihood_ratio(Counts(166, 703, 199, 2154))
    >>> f"{ratio.estimate:.3f} ({ratio.low:.3f}-{ratio.high:.3f})"
    '2.249 (1.857-2.720)'
    """
    return likelihood_ratios([counts], level=level, prior=prior, limit=limit)[0]


def likelihood_ratios(
    tables: Sequence[Counts],
    *,
    level: float = 0.95,
    prior: RatioPrior = "shared",
    limit: float = DEFAULT_LIMIT,
) -> list[Estimate | None]:
    """Estimate many likelihood ratios; equal tables are solved once.

    Parameters
    ----------
    tables : sequence of Counts
        The four counts of each.
    level, prior, limit
        As in `likelihood_ratio`.

    Returns
    -------
    list of Estimate or None
        As `likelihood_ratio`, in the order given.

    Raises
    ------
    InvalidCountError
        If `limit` is not a number above 1 and at most 1e9.
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1, or `prior` is unknown.

    Examples
    --------
    >>> both = likelihood_ratios([Counts(0, 63, 0, 388), Counts(0, 0, 3, 5)])
    >>> round(both[0].estimate, 2), both[1]
    (1.0, None)
    """
    tail = (1 - check_level(level)) / 2
    solvable = [table for table in dict.fromkeys(tables) if table.term_total and table.other_total]
    logs = log_ratio_quantiles(solvable, np.array([tail, 0.5, 1 - tail]), prior=prior, limit=limit)
    solved = {
        table: Estimate(*(float(value) for value in np.exp(row[[1, 0, 2]])))
        for table, row in zip(solvable, logs, strict=True)
    }
    return [solved.get(table) for table in tables]


def observed_ratio(counts: Counts) -> float | None:
    """Return the plain ratio of the two observed rates.

    Parameters
    ----------
    counts : Counts
        The four counts.

    Returns
    -------
    float or None
        (n11/n1) / (n01/n0); None where it is undefined (no study on a side, or no other study active).

    Examples
    --------
    >>> round(observed_ratio(Counts(166, 703, 199, 2154)), 2)
    2.26
    >>> observed_ratio(Counts(3, 0, 0, 448)) is None
    True
    """
    if not (counts.term_total and counts.other_total and counts.other_active):
        return None
    return (counts.term_active * counts.other_total) / (counts.term_total * counts.other_active)


def log_ratio_quantiles(
    tables: Sequence[Counts],
    levels: NDArray[np.float64],
    *,
    prior: RatioPrior = "shared",
    limit: float = DEFAULT_LIMIT,
) -> NDArray[np.float64]:
    """Return posterior quantiles of ln R.

    Parameters
    ----------
    tables : sequence of Counts
        Each with at least one study on either side.
    levels : (L,) array, probability
        Symmetric about 1/2 (for example 0.025, 0.5, 0.975), increasing.
    prior, limit
        As in `likelihood_ratio`.

    Returns
    -------
    (T, L) array
        Quantiles of the natural logarithm of the ratio.

    Raises
    ------
    InvalidCountError
        If `limit` is not a number above 1 and at most 1e9.
    InvalidProbabilityError
        If the levels are not symmetric about 1/2, or `prior` is unknown.

    Notes
    -----
    A table and its swapped twin are solved as one, and the answer is negated and reversed: swapping term
    and other inverts every quantile exactly.

    Examples
    --------
    >>> q = log_ratio_quantiles([Counts(5, 5, 5, 5)], np.array([0.025, 0.5, 0.975]))
    >>> bool(q[0, 1] == 0), bool(q[0, 0] == -q[0, 2])
    (True, True)
    """
    return log_ratio_summary(tables, levels, prior=prior, limit=limit)[0]


def log_ratio_summary(
    tables: Sequence[Counts],
    levels: NDArray[np.float64],
    *,
    prior: RatioPrior = "shared",
    limit: float = DEFAULT_LIMIT,
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return posterior quantiles of ln R and P(R > 1).

    Parameters
    ----------
    tables, levels, prior, limit
        As in `log_ratio_quantiles`.

    Returns
    -------
    (T, L) array, (T,) array
        Quantiles of ln R; probabilities that the ratio is above 1, exactly 1 minus that of the swapped
        table, exactly 1/2 for a table that is its own.

    Raises
    ------
    InvalidCountError, InvalidProbabilityError
        As in `log_ratio_quantiles`.

    Examples
    --------
    >>> _, ahead = log_ratio_summary([Counts(5, 3, 2, 7), Counts(2, 7, 5, 3)], np.array([0.5]))
    >>> bool(ahead[0] == 1 - ahead[1])
    True
    """
    if not 1 < limit <= _LARGEST_LIMIT:
        raise InvalidCountError(
            f"the limit of the ratio's prior must be above 1 and at most 1e9, but got {limit!r}; use 20"
        )
    if prior not in get_args(RatioPrior):
        raise InvalidProbabilityError(
            f"the ratio's prior must be one of {', '.join(get_args(RatioPrior))}, but got {prior!r}; use shared"
        )
    if not np.allclose(levels + levels[::-1], 1, rtol=0, atol=1e-12):
        raise InvalidProbabilityError(
            f"levels must be symmetric about 1/2, but got {levels.tolist()}; use 0.025, 0.5 and 0.975"
        )
    if not tables:
        return np.empty((0, len(levels))), np.empty(0)
    oriented = [min(table.as_tuple(), table.swapped().as_tuple()) for table in tables]
    distinct = sorted(set(oriented))
    solved: dict[tuple[int, ...], tuple[NDArray[np.float64], float]] = {}
    for block in range(0, len(distinct), 64):  # bounds memory: about 12 MB a block
        part = distinct[block : block + 64]
        rows, ahead = log_ratio_posterior_and_ahead(np.array(part, dtype=np.float64), levels, prior, limit)
        # 1 - p is exact for p >= 1/2 only: from there its twin is taken, so that 1 - (1 - p) is p.
        likelier = np.maximum(ahead, 1 - ahead)
        ahead = np.where(ahead >= 0.5, likelier, 1 - likelier)
        solved.update(zip(part, zip(rows, ahead.tolist(), strict=True), strict=True))
    quantiles, above = np.empty((len(tables), len(levels))), np.empty(len(tables))
    for i, (table, key) in enumerate(zip(tables, oriented, strict=True)):
        row, share = solved[key]
        if table.as_tuple() == table.swapped().as_tuple():
            row, share = (row - row[::-1]) / 2, 0.5
        turned = table.as_tuple() != key
        quantiles[i], above[i] = (-row[::-1], 1 - share) if turned else (row, share)
    return quantiles, above
