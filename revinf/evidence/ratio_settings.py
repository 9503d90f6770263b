"""How every likelihood ratio of an assessment is estimated."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from revinf.stats.estimates import Counts, Estimate
from revinf.stats.ratio import DEFAULT_LIMIT, RatioPrior, likelihood_ratios

__all__ = ["RatioSettings"]


@dataclass(frozen=True, slots=True, kw_only=True)
class RatioSettings:
    """Level of the interval and prior of the two rates.

    Examples
    --------
    >>> round(RatioSettings().solve(Counts(15, 48, 17, 371)).estimate, 2)
    4.98
    """

    level: float = 0.95
    ratio_prior: RatioPrior = "shared"
    ratio_limit: float = DEFAULT_LIMIT

    def solve(self, counts: Counts) -> Estimate | None:
        """Return the likelihood ratio of one table; None where a side has no study."""
        return self.solve_all([counts])[0]

    def solve_all(self, tables: Sequence[Counts]) -> list[Estimate | None]:
        """Return the likelihood ratios of many tables; equal ones are solved once."""
        return likelihood_ratios(tables, level=self.level, prior=self.ratio_prior, limit=self.ratio_limit)
