"""How many processes keep a place busy: its rate among all places, and the spread of what it serves (9)."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from revinf.base_rates.counting import TermCounts
from revinf.base_rates.study_level import StudyLevel
from revinf.evidence.sources import Answer
from revinf.evidence.vocabulary import Vocabulary
from revinf.literature.background import Background
from revinf.stats.diversity import category_diversity_minimum, diversity_intervals
from revinf.stats.estimates import Estimate
from revinf.stats.rates import jeffreys_rates

__all__ = ["LEAST_DOMAIN_STUDIES", "LEAST_HITS", "Breadth", "breadth_of"]

LEAST_HITS = 20
"""Below this many hits diversity is not computed: few hits look falsely selective."""

LEAST_DOMAIN_STUDIES = 5
"""Domains with fewer studies are left out of the shares."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Breadth:
    """How busy and how many-sided a place is; parts that a source cannot give are None."""

    activation_percentile: float | None
    functional_diversity: Estimate | None
    category_diversity: Estimate | None
    category_diversity_minimum: float | None
    effective_domains: Estimate | None
    n_domains: int | None
    effective_processes: Estimate | None
    n_processes: int
    n_processes_above_own_rate: int | None


def breadth_of(answer: Answer, words: Vocabulary, *, level: float = 0.95) -> Breadth:
    """Describe how broadly a region is active.

    Parameters
    ----------
    answer : Answer
        What the source says of the region; without studies, domains are not known, and without a
        background there is no brain-wide rate.
    words : Vocabulary
        Kinds and domains.
    level : float, probability, default 0.95
        Of the intervals.

    Returns
    -------
    Breadth
        What can be computed.
    """
    counts, studies, background = answer.counts, answer.studies, answer.background
    is_process = np.array([words.counts_as_process(term) for term in counts.terms], dtype=bool) & (
        counts.term_total > 0
    )
    process_active, process_total = counts.term_active[is_process], counts.term_total[is_process]
    processes = diversity_intervals(process_active, process_total, minimum_hits=LEAST_HITS, level=level)
    if answer.hits < LEAST_HITS:  # a study with several processes is one hit
        processes = None
    domains, n_domains = None, None
    if studies is not None:
        found = studies.domains(words.domain)
        enough = found.total >= LEAST_DOMAIN_STUDIES
        n_domains = int(enough.sum())
        if answer.hits >= LEAST_HITS and n_domains > 1:
            domains = diversity_intervals(
                found.active[enough], found.total[enough], minimum_hits=LEAST_HITS, level=level
            )
    above = None
    if studies is not None and background is not None:
        above = _above_own_rate(counts, is_process, studies, background, level)
    percentile = answer.percentile if background is None else background.percentile(answer.hits)
    return Breadth(
        activation_percentile=percentile,
        functional_diversity=domains.functional if domains else None,
        category_diversity=domains.category if domains else None,
        category_diversity_minimum=category_diversity_minimum(n_domains) if domains and n_domains else None,
        effective_domains=domains.effective_number if domains else None,
        n_domains=n_domains,
        effective_processes=processes.effective_number if processes else None,
        n_processes=int(is_process.sum()),
        n_processes_above_own_rate=above,
    )


def _above_own_rate(
    counts: TermCounts,
    is_process: NDArray[np.bool_],
    studies: StudyLevel,
    background: Background,
    level: float,
) -> int:
    """Count the processes whose rate here is credibly above their own mean rate over the grey matter."""
    share = background.study_locations / len(background.location_hits)
    own_rate = studies.literature.term_means(share)
    positions = np.flatnonzero(is_process)
    if level >= 0.5:  # then the lower end lies below the mean of the rate's Beta law, so few need to be solved
        mean = (counts.term_active + 0.5) / (counts.term_total + 1)
        positions = positions[mean[positions] > own_rate[positions]]
    rates = jeffreys_rates([(int(counts.term_active[i]), int(counts.term_total[i])) for i in positions], level=level)
    return sum(
        rate is not None and bool(rate.low > own_rate[position])
        for position, rate in zip(positions.tolist(), rates, strict=True)
    )
