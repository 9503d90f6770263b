"""What several regions would say together if they were independent within each process (formula 12).

A foil, never the answer: peaks of one study come together, so the product of single-region ratios
overstates. It stands beside the ratio of the joint counts to show by how much.
"""

from __future__ import annotations

from collections.abc import Sequence
from math import exp, log

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Counts, check_probability

__all__ = ["naive_bayes_posterior", "product_of_ratios"]


def product_of_ratios(tables: Sequence[Counts]) -> float:
    """Return the product of the single-region ratios of (k + 1/2) / (n + 1) rates.

    Parameters
    ----------
    tables : sequence of Counts
        The four counts at each region, at least one.

    Returns
    -------
    float
        Ratio P(all regions active | term) / P(all regions active | other) under independence.

    Raises
    ------
    InvalidCountError
        If there is no region.

    Examples
    --------
    >>> product_of_ratios([Counts(4, 4, 1, 7), Counts(2, 6, 1, 7)])  # 3 times 5/3
    5.0
    """
    above, below = _fraction(tables)
    return above / below


def naive_bayes_posterior(tables: Sequence[Counts], prior: float, hit: Sequence[bool] | None = None) -> float:
    """Return P(term | which regions are active) under independence within each group.

    Parameters
    ----------
    tables : sequence of Counts
        The four counts at each region, at least one.
    prior : float, probability, 0 < prior < 1
        P(term) before the regions were seen.
    hit : sequence of bool, optional
        Which regions are active; left out, all of them.

    Returns
    -------
    float, probability
        The posterior of a Bernoulli naive-Bayes classifier that adds 1/2 to each count.

    Raises
    ------
    InvalidCountError
        If there is no region, or `hit` is not as long as `tables`.
    InvalidProbabilityError
        If the prior is not strictly between 0 and 1.

    Examples
    --------
    >>> round(naive_bayes_posterior([Counts(4, 4, 1, 7), Counts(2, 6, 1, 7)], 0.5), 4)  # odds 5
    0.8333
    >>> round(naive_bayes_posterior([Counts(4, 4, 1, 7)], 0.5, [False]), 4)  # odds 4.5 / 7.5
    0.375
    """
    check_probability(prior, "prior", "use 0.5 for even odds")
    seen = [True] * len(tables) if hit is None else list(hit)
    if len(seen) != len(tables):
        raise InvalidCountError(
            f"hit must be as many as the tables, but got {len(seen)} for {len(tables)}; say of each region "
            "whether it is active"
        )
    turned = [
        table if active else Counts(table.term_inactive, table.term_active, table.other_inactive, table.other_active)
        for table, active in zip(tables, seen, strict=True)
    ]
    above, below = _fraction(turned)
    against = log(1 - prior) - log(prior) + log(below) - log(above)
    return 1 / (1 + exp(against)) if against < 0 else exp(-against) / (1 + exp(-against))


def _fraction(tables: Sequence[Counts]) -> tuple[int, int]:
    """Return the product of the ratios as a fraction of whole numbers."""
    if not tables:
        raise InvalidCountError("tables must hold at least one region, but got none; give one table a region")
    above = below = 1
    for table in tables:
        above *= (2 * table.term_active + 1) * (table.other_total + 1)
        below *= (2 * table.other_active + 1) * (table.term_total + 1)
    return above, below
