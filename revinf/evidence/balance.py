"""The claim against a literature in which every other process counts once."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from revinf.base_rates.counting import TermCounts
from revinf.base_rates.study_level import StudyLevel
from revinf.evidence.vocabulary import Vocabulary
from revinf.stats.balanced import balanced_ratio
from revinf.stats.estimates import Estimate

__all__ = ["balanced_against", "counted_once"]


def balanced_against(
    claimed: int,
    counts: TermCounts,
    studies: StudyLevel | None,
    words: Vocabulary,
    kin: NDArray[np.bool_],
    *,
    level: float = 0.95,
) -> Estimate | None:
    """Return the ratio of the claimed process to the mean of its rivals.

    Parameters
    ----------
    claimed : int
        Position of the claimed term.
    counts : TermCounts
        Of every term at the region.
    studies : StudyLevel or None
        The studies themselves; a table cannot tell which processes are largely the same studies.
    words : Vocabulary
        Kinds of terms, and synonyms.
    kin : (T,) bool array
        Kin of the claimed term, which are no rivals.
    level : float, probability
        Of the interval.

    Returns
    -------
    Estimate or None
        None for a table, for a claimed term that is no process, or without rivals that are active.
    """
    if studies is None or not words.counts_as_process(counts.terms[claimed]):
        return None
    rivals = [
        position for position in counted_once(counts, studies, words) if position != claimed and not kin[position]
    ]
    return balanced_ratio(
        (int(counts.term_active[claimed]), int(counts.term_total[claimed])),
        counts.term_active[rivals],
        counts.term_total[rivals],
        level=level,
    )


def counted_once(counts: TermCounts, studies: StudyLevel, words: Vocabulary) -> list[int]:
    """Return the processes of a literature, of kin only the one with most studies.

    Parameters
    ----------
    counts : TermCounts
        Only the totals are used.
    studies : StudyLevel
        Which studies terms share.
    words : Vocabulary
        Kinds of terms, and synonyms.

    Returns
    -------
    list of int
        Positions, most studies first, equal ones by name.
    """
    waiting = [
        position
        for position, term in enumerate(counts.terms)
        if counts.term_total[position] and words.counts_as_process(term)
    ]
    waiting.sort(key=lambda position: (-int(counts.term_total[position]), counts.terms[position]))
    kin: dict[int, list[int]] = {}
    for first, second in studies.literature.kin_pairs().tolist():
        kin.setdefault(first, []).append(second)
        kin.setdefault(second, []).append(first)
    at = {term: position for position, term in enumerate(counts.terms)}
    kept: list[int] = []
    taken: set[int] = set()
    for position in waiting:
        if position in taken:
            continue
        kept.append(position)
        taken.update(kin.get(position, ()))
        taken.update(at[name] for name in words.names_of(counts.terms[position]) if name in at)
    return kept
