"""What only the studies themselves can tell: which terms share them, which domains they belong to.

A base-rate table has counts of regions and terms; these questions need to know *which* studies they are.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from revinf.literature.literature import Literature
from revinf.stats.estimates import Counts

__all__ = ["DomainCounts", "SharedCounts", "StudyLevel"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SharedCounts:
    """Studies that a term shares with every other.

    Parameters
    ----------
    total, active : (T,) int64 arrays
        Studies that carry both, and those of them that hit the region.
    """

    total: NDArray[np.int64]
    active: NDArray[np.int64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class DomainCounts:
    """Studies of every domain; a study in two domains counts in both.

    Parameters
    ----------
    names : list of str, length D
        Domains, sorted.
    active, total : (D,) int64 arrays
        Those that hit the region, and all.
    """

    names: list[str]
    active: NDArray[np.int64]
    total: NDArray[np.int64]


class StudyLevel:
    """The studies of a literature, and which of them hit a region.

    Parameters
    ----------
    literature : Literature
        The studies.
    hits : (n,) int64 array
        Indices of the studies that hit the region, increasing.
    among : (n,) int64 array, optional
        Restrict everything to these studies (a context); all where left out.
    """

    def __init__(
        self,
        literature: Literature,
        hits: NDArray[np.int64],
        among: NDArray[np.int64] | None = None,
    ) -> None:
        self.literature = literature
        self.is_hit: NDArray[np.bool_] = np.zeros(literature.n_studies, dtype=bool)
        self.is_hit[hits] = True
        self.counted: NDArray[np.bool_] = np.ones(literature.n_studies, dtype=bool)
        if among is not None:
            self.counted[:] = False
            self.counted[among] = True
            self.is_hit &= self.counted

    def restricted_to(self, terms: Sequence[str]) -> StudyLevel:
        """Return the same region within the studies that carry any of the terms.

        Raises
        ------
        UnknownTermError
            If a term labels no counted study.
        """
        among = np.unique(np.concatenate([self.literature.studies_with(term) for term in terms]))
        return StudyLevel(self.literature, np.flatnonzero(self.is_hit), among[self.counted[among]])

    @property
    def n_studies(self) -> int:
        """Number of counted studies."""
        return int(self.counted.sum())

    def carries(self, term: str) -> NDArray[np.bool_]:
        """Return which studies carry a term, (S,)."""
        flags = np.zeros(self.literature.n_studies, dtype=bool)
        flags[self.literature.studies_with(term)] = True
        return flags & self.counted

    def counts(self, term: str) -> Counts:
        """Return the four counts of a term."""
        return self.table(self.carries(term), self.is_hit)

    def table(
        self,
        has_term: NDArray[np.bool_],
        is_hit: NDArray[np.bool_],
        *,
        within: NDArray[np.bool_] | None = None,
    ) -> Counts:
        """Return the four counts of two sets of studies, within the counted ones and a further set."""
        counted = self.counted if within is None else self.counted & within
        n11 = int(np.count_nonzero(has_term & is_hit & counted))
        n1 = int(np.count_nonzero(has_term & counted))
        active = int(np.count_nonzero(is_hit & counted))
        return Counts(n11, n1 - n11, active - n11, int(counted.sum()) - n1 - (active - n11))

    def without_kin(self, term: str, kin: NDArray[np.bool_]) -> Counts:
        """Return the four counts with the studies of some terms left out of the others."""
        has_term = self.carries(term)
        kept = has_term | ~self.literature.studies_carrying_any(kin)
        return self.table(has_term, self.is_hit, within=kept)

    def groups(self) -> tuple[list[str], NDArray[np.int64]]:
        """Return names, and for each study the number of its own: the group's, where it has one."""
        numbers: dict[str, int] = {}
        known = zip(self.literature.study_ids, self.literature.study_groups, strict=True)
        index = [numbers.setdefault(group or study, len(numbers)) for study, group in known]
        return list(numbers), np.array(index, dtype=np.int64)

    def shared_with(self, term: str) -> SharedCounts:
        """Return, for every term, the studies it shares with the given one."""
        has_term = self.carries(term)
        return SharedCounts(
            total=self.literature.term_hits(np.flatnonzero(has_term)),
            active=self.literature.term_hits(np.flatnonzero(has_term & self.is_hit)),
        )

    def domains(self, domain_of: Callable[[str], str]) -> DomainCounts:
        """Return the counts of every domain.

        Parameters
        ----------
        domain_of : callable
            Domain of a term; empty for terms that belong to none.

        Returns
        -------
        DomainCounts
            Of the domains that any counted study belongs to.
        """
        flags = np.array([domain_of(term) for term in self.literature.terms], dtype=object)
        names = sorted({name for name in flags.tolist() if name})
        active, total = [], []
        for name in names:
            member = self.literature.studies_carrying_any(flags == name) & self.counted
            active.append(int(np.count_nonzero(member & self.is_hit)))
            total.append(int(np.count_nonzero(member)))
        return DomainCounts(
            names=names,
            active=np.array(active, dtype=np.int64),
            total=np.array(total, dtype=np.int64),
        )
