"""Counts of one region and every term, whatever they come from."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from revinf.literature.literature import Literature
from revinf.literature.queries import Region
from revinf.stats.estimates import Counts

__all__ = ["TermCounts", "count_hits", "count_terms"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class TermCounts:
    """The counts of one region for every term.

    Parameters
    ----------
    terms : list of str, length T
        Normalised terms.
    term_active, term_total, other_active, other_total : (T,) int64 arrays
        Studies with the term that hit the region, all with it, studies without it that hit, all
        without it.
    """

    terms: list[str]
    term_active: NDArray[np.int64]
    term_total: NDArray[np.int64]
    other_active: NDArray[np.int64]
    other_total: NDArray[np.int64]

    def inverted(self) -> TermCounts:
        """Return the counts with active and inactive exchanged."""
        return TermCounts(
            terms=self.terms,
            term_active=self.term_total - self.term_active,
            term_total=self.term_total,
            other_active=self.other_total - self.other_active,
            other_total=self.other_total,
        )

    def at(self, position: int) -> Counts:
        """Return the four counts of one term."""
        active, total = int(self.term_active[position]), int(self.term_total[position])
        others, other_total = int(self.other_active[position]), int(self.other_total[position])
        return Counts(active, total - active, others, other_total - others)


def count_hits(literature: Literature, hits: NDArray[np.int64]) -> TermCounts:
    """Count for every term, given the studies that are active.

    Parameters
    ----------
    literature : Literature
        Where to count.
    hits : (n,) int64 array
        Indices of the active studies, each once.

    Returns
    -------
    TermCounts
        In the order of `literature.terms`.

    Notes
    -----
    A study that does not carry a term counts as "other" for it: every counted study carries some term.
    """
    term_active = literature.term_hits(hits)
    term_total = literature.term_totals
    return TermCounts(
        terms=literature.terms,
        term_active=term_active,
        term_total=term_total,
        other_active=len(hits) - term_active,
        other_total=literature.n_studies - term_total,
    )


def count_terms(literature: Literature, region: Region) -> TermCounts:
    """Count the studies of a literature for one region and every term.

    Parameters
    ----------
    literature : Literature
        Where to count.
    region : Sphere or Mask
        Where a claim looks.

    Returns
    -------
    TermCounts
        In the order of `literature.terms`.

    """
    return count_hits(literature, literature.studies_hitting(region))
