"""Does the activation speak more for the term or for its rival? (formula 8)

Compared are the studies that carry the term but not the rival with those that carry the rival but not the
term: studies that carry both cannot tell the two apart. The ratio is formula 2 on these counts.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Counts, Estimate, check_level
from revinf.stats.ratio import DEFAULT_LIMIT, RatioPrior, log_ratio_summary

__all__ = ["HeadToHead", "head_to_head", "heads_to_head"]


@dataclass(frozen=True, slots=True)
class HeadToHead:
    """How a term stands against a rival.

    Parameters
    ----------
    ratio : Estimate
        H = P(active | term only) / P(active | rival only), no unit.
    probability_ahead : float, probability
        P(H > 1).
    """

    ratio: Estimate
    probability_ahead: float


def head_to_head(
    term_only: tuple[int, int],
    rival_only: tuple[int, int],
    *,
    level: float = 0.95,
    prior: RatioPrior = "shared",
    limit: float = DEFAULT_LIMIT,
) -> HeadToHead | None:
    """Compare a term with one rival.

    Parameters
    ----------
    term_only, rival_only : (active, total) tuple of int
        Studies that carry only the one of the two: those that hit the region, and all of them.
    level : float, probability, default 0.95
        Posterior probability that the interval holds.
    prior : {"shared", "independent"}, default "shared"
        Prior of the two rates.
    limit : float, ratio > 1, default 20
        With the shared prior: 95 % of the prior of the ratio lies between 1/limit and limit.

    Returns
    -------
    HeadToHead or None
        None where a side has no study of its own.

    Raises
    ------
    InvalidCountError
        If an active count is not between 0 and its total, or the limit is not above 1.
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1, or the prior is unknown.

    Notes
    -----
    `probability_ahead` is exactly 1 minus that of the exchanged pair, and exactly 1/2 when neither side
    has a hit.

    Examples
    --------
    >>> found = head_to_head((15, 63), (17, 388))
    >>> f"{found.ratio.estimate:.3f} {found.probability_ahead:.4f}"
    '4.977 1.0000'
    >>> head_to_head((0, 3), (0, 900)).probability_ahead
    0.5
    """
    return heads_to_head([(term_only, rival_only)], level=level, prior=prior, limit=limit)[0]


def heads_to_head(
    pairs: Sequence[tuple[tuple[int, int], tuple[int, int]]],
    *,
    level: float = 0.95,
    prior: RatioPrior = "shared",
    limit: float = DEFAULT_LIMIT,
) -> list[HeadToHead | None]:
    """Compare many pairs; equal tables are solved once.

    Parameters
    ----------
    pairs : sequence of (term_only, rival_only)
        As in `head_to_head`.
    level, prior, limit
        As in `head_to_head`.

    Returns
    -------
    list of HeadToHead or None
        As `head_to_head`, in the order given.

    Raises
    ------
    InvalidCountError
        If an active count is not between 0 and its total, or the limit is not above 1.
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1, or the prior is unknown.

    Examples
    --------
    >>> one, other = heads_to_head([((5, 9), (2, 8)), ((2, 8), (5, 9))])
    >>> one.probability_ahead == 1 - other.probability_ahead
    True
    """
    tail = (1 - check_level(level)) / 2
    tables = [_table(*pair) for pair in pairs]
    solvable = [table for table in dict.fromkeys(tables) if table.term_total and table.other_total]
    logs, ahead = log_ratio_summary(solvable, np.array([tail, 0.5, 1 - tail]), prior=prior, limit=limit)
    solved = {
        table: HeadToHead(
            Estimate(*np.exp(row[[1, 0, 2]]).tolist()),
            # No hit anywhere is no evidence, whatever the numbers of studies.
            probability if table.active_total else 0.5,
        )
        for table, row, probability in zip(solvable, logs, ahead.tolist(), strict=True)
    }
    return [solved.get(table) for table in tables]


def _table(term_only: tuple[int, int], rival_only: tuple[int, int]) -> Counts:
    """Return the four counts as formula 2 takes them, checked."""
    for name, (active, total) in (("term_only", term_only), ("rival_only", rival_only)):
        if not 0 <= active <= total:
            raise InvalidCountError(
                f"{name} must have active between 0 and total, but got {active} of {total}; check the counts"
            )
    return Counts(term_only[0], term_only[1] - term_only[0], rival_only[0], rival_only[1] - rival_only[0])
