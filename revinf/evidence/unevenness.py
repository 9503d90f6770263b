"""Do a few processes dominate the literature, and with them every base rate?"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from revinf.base_rates.counting import TermCounts
from revinf.evidence.vocabulary import Vocabulary
from revinf.stats.diversity import effective_number

__all__ = ["DECREASE_WORDS", "Unevenness", "unevenness_of"]

DECREASE_WORDS = ("deactivation", "decrease", "suppression of activity")
"""Terms with one of these words label studies whose peaks are decreases."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Unevenness:
    """How evenly the processes share the studies.

    Parameters
    ----------
    largest_term : str
        The process that labels most studies; empty where there is none.
    largest_share : float
        Its share of the studies.
    effective_processes : float
        Number of equally common processes that would be as mixed (Hill number of order 1).
    n_processes : int
        Their plain number.
    decrease_terms : tuple of str
        Terms whose studies report decreases.
    """

    largest_term: str
    largest_share: float
    effective_processes: float
    n_processes: int
    decrease_terms: tuple[str, ...]


def unevenness_of(counts: TermCounts, words: Vocabulary) -> Unevenness:
    """Measure how evenly the processes share the studies.

    Parameters
    ----------
    counts : TermCounts
        Of every term, at any region: only the totals are used.
    words : Vocabulary
        Kinds of terms.

    Returns
    -------
    Unevenness
        Of the process terms with at least one study.
    """
    positions = [
        position
        for position, term in enumerate(counts.terms)
        if counts.term_total[position] and words.counts_as_process(term)
    ]
    decrease = tuple(
        term
        for position, term in enumerate(counts.terms)
        if counts.term_total[position] and any(word in term for word in DECREASE_WORDS)
    )
    if not positions:
        return Unevenness(
            largest_term="",
            largest_share=0.0,
            effective_processes=0.0,
            n_processes=0,
            decrease_terms=decrease,
        )
    totals = counts.term_total[positions]
    largest = positions[int(np.argmax(totals))]
    n_studies = int(counts.term_total[largest] + counts.other_total[largest])
    return Unevenness(
        largest_term=counts.terms[largest],
        largest_share=float(counts.term_total[largest] / n_studies),
        effective_processes=float(effective_number(totals / totals.sum())),
        n_processes=len(positions),
        decrease_terms=decrease,
    )
