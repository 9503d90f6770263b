"""Do two likelihood ratios differ? Their quotient, from the posteriors of both.

Each ln R stands as 801 equally probable quantiles; all pairs of differences give the quotient's quantiles and
the probability that the first is larger. Deterministic; the error of a probability is below 1/801.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from revinf.stats.estimates import Counts, Estimate, check_level
from revinf.stats.ratio import DEFAULT_LIMIT, RatioPrior, log_ratio_quantiles

__all__ = ["Quotient", "ratio_of_ratios"]

_POINTS = 801


@dataclass(frozen=True, slots=True, kw_only=True)
class Quotient:
    """R of the first over R of the second, and the probability that the first is larger."""

    ratio: Estimate
    probability_larger: float


def ratio_of_ratios(
    first: Counts,
    second: Counts,
    *,
    level: float = 0.95,
    prior: RatioPrior = "shared",
    limit: float = DEFAULT_LIMIT,
) -> Quotient | None:
    """Compare two likelihood ratios whose studies are not the same.

    Parameters
    ----------
    first, second : Counts
        The four counts of each.
    level : float, probability, default 0.95
        Of the interval.
    prior, limit
        As in `likelihood_ratio`.

    Returns
    -------
    Quotient or None
        None where a side of either has no study.

    Raises
    ------
    InvalidCountError, InvalidProbabilityError
        As `likelihood_ratio`.

    Examples
    --------
    >>> found = ratio_of_ratios(Counts(15, 48, 17, 371), Counts(15, 48, 17, 371))
    >>> round(found.ratio.estimate, 6), found.probability_larger
    (1.0, 0.5)
    """
    tail = (1 - check_level(level)) / 2
    if not all((first.term_total, first.other_total, second.term_total, second.other_total)):
        return None
    at = (np.arange(_POINTS) + 0.5) / _POINTS
    one, two = log_ratio_quantiles([first, second], at, prior=prior, limit=limit)
    gaps = one[:, None] - two[None, :]
    larger = (np.count_nonzero(gaps > 0) + np.count_nonzero(gaps == 0) / 2) / gaps.size
    low, middle, high = np.exp(np.quantile(gaps, [tail, 0.5, 1 - tail]))
    return Quotient(ratio=Estimate(float(middle), float(low), float(high)), probability_larger=float(larger))
