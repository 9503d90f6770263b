"""What would decide it: where else to look in the same map, to tell the claimed process from its rivals."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from revinf.base_rates.study_level import StudyLevel
from revinf.evidence.choices import Choices
from revinf.evidence.claim import Claim
from revinf.evidence.place import place_of_peak
from revinf.evidence.ratio_settings import RatioSettings
from revinf.evidence.selectivity import RivalRequest, select
from revinf.evidence.settlement import Candidate, Settlement, SettlingPlace
from revinf.evidence.sources import LiteratureSource, Source, as_source
from revinf.evidence.vocabulary import shipped_vocabulary
from revinf.exceptions import InvalidClaimError
from revinf.literature.background import compute_background
from revinf.literature.literature import Literature
from revinf.stats.estimates import Estimate
from revinf.stats.information import entropy_bits, expected_gain, updated

__all__ = ["FEWEST", "RIVALS", "settle"]

FEWEST = 5
"""Studies that can be asked where else they are active; a candidate with fewer is left out."""

RIVALS = 3
"""Leading rivals that are taken where none is named."""

_PLACES, _FINALISTS = 5, 200
_DRAWS, _SEED = 1000, 20132


def settle(
    claim: Claim,
    source: Literature | Source,
    against: Sequence[str] = (),
    choices: Choices | None = None,
    *,
    places: int = _PLACES,
) -> Settlement:
    """Find the places that would best tell a claimed process from its rivals.

    Parameters
    ----------
    claim : Claim
        With one or more peaks.
    source : Literature or LiteratureSource
        The studies; a table does not have them.
    against : sequence of str
        Rivals; left out, the three that lead at the claim's place.
    choices : Choices, optional
        Level of the intervals, vocabulary.
    places : int, default 5
        How many to name.

    Returns
    -------
    Settlement
        Non-overlapping places, by the lower end of their expected gain.

    Raises
    ------
    UnknownTermError
        If a term labels no counted study.
    InvalidClaimError
        If the source is a table, the claim has no peaks or rests on absence, or too few studies are active there.

    Notes
    -----
    The best of thousands of places look better than they are; the lower end of the interval is the safer figure.

    References
    ----------
    Lindley 1956, Ann Math Stat 27:986-1005.
    """
    choices = choices or Choices()
    asked = as_source(source)
    if not isinstance(asked, LiteratureSource):
        raise InvalidClaimError("what would settle a claim needs the studies themselves; use a literature, not a table")
    if not claim.peaks or claim.absent:
        raise InvalidClaimError("what would settle a claim needs the peak that it rests on; give --peak")
    studies = asked.studies(claim)
    literature = asked.literature
    literature.studies_with(claim.term)  # an unknown term is told before its rivals are looked for
    terms = [claim.term, *(against or _leading(claim, asked, studies, choices))]
    terms = list(dict.fromkeys(terms))
    if len(terms) < 2:
        raise InvalidClaimError("there is no rival to tell the claim from; name one with --against")
    carried = np.array([studies.carries(term) for term in terms])
    own = carried & (carried.sum(axis=0) == 1)
    here = own & studies.is_hit
    enough = own.sum(axis=1) >= FEWEST
    if not enough[0] or not enough[1:].any():
        few = terms[0] if not enough[0] else terms[1]
        number = int(own[terms.index(few)].sum())
        raise InvalidClaimError(
            f"only {number} studies carry {few!r} and none of the others, and {FEWEST} are needed to say where else "
            "they are active; use a wider literature or another rival"
        )
    left_out = tuple((term, int(row.sum())) for term, row, fine in zip(terms, own, enough, strict=True) if not fine)
    terms = [term for term, fine in zip(terms, enough, strict=True) if fine]
    own, here = own[enough], here[enough]
    n_active, n_studies = here.sum(axis=1), own.sum(axis=1)
    weights = (n_active + 0.5) / (n_studies + 1)
    weights = weights / weights.sum()
    # Joint counts where enough studies are active at the claim's place, else all studies of the candidate.
    joint = n_active >= FEWEST
    asked_studies = np.where(joint[:, None], here, own)
    numbers = asked_studies.sum(axis=1)
    hits = _hits(literature, asked_studies, claim.radius_mm)
    chosen = _chosen(literature, claim, hits, (weights, numbers), choices.level, places)
    return Settlement(
        term=claim.term,
        peaks=tuple((x, y, z) for x, y, z in claim.mni_peaks()),
        radius_mm=claim.radius_mm,
        literature=asked.facts,
        candidates=tuple(
            Candidate(
                term=term, n_studies=int(total), n_active=int(active), n_asked=int(number), probability=float(weight)
            )
            for term, total, active, number, weight in zip(terms, n_studies, n_active, numbers, weights, strict=True)
        ),
        entropy_bits=float(entropy_bits(weights)),
        places=tuple(chosen),
        left_out=left_out,
        level=choices.level,
    )


def _leading(claim: Claim, source: LiteratureSource, studies: StudyLevel, choices: Choices) -> list[str]:
    """Return the rivals that lead at the claim's place."""
    words = choices.vocabulary or shipped_vocabulary()
    answer = source.answer(claim)
    position = answer.counts.terms.index(claim.term)
    request = RivalRequest(named=(), excluded=tuple(claim.excluded), shown=RIVALS, prior=0.5)
    chosen = select(position, answer.counts, studies, words, request, RatioSettings(level=choices.level))
    return [rival.term for rival in chosen.rivals]


def _hits(literature: Literature, members: NDArray[np.bool_], radius_mm: float) -> NDArray[np.int64]:
    """Return, for every grey-matter location and candidate, how many of its studies are active there, (G, C)."""
    arrays = literature.arrays()
    columns = []
    for row in members:
        mine = row[arrays["peak_study"]]
        _, number = np.unique(arrays["peak_study"][mine], return_inverse=True)
        found = compute_background(
            arrays["peak_tenths"][mine],
            number.reshape(-1).astype(np.int32),
            int(row.sum()),
            arrays["grid_tenths"],
            radius_mm,
        )
        columns.append(found.location_hits.astype(np.int64))
    return np.stack(columns, axis=1)


def _chosen(
    literature: Literature,
    claim: Claim,
    hits: NDArray[np.int64],
    candidates: tuple[NDArray[np.float64], NDArray[np.int64]],
    level: float,
    places: int,
) -> list[SettlingPlace]:
    """Return the best places that overlap neither the claim's nor one another."""
    weights, numbers = candidates
    grid = literature.arrays()["grid_tenths"].astype(np.int64)
    reach = (20 * claim.radius_mm) ** 2  # two radii, in tenths
    free = np.ones(len(grid), dtype=bool)
    for peak in claim.mni_peaks():
        free &= ((grid - np.round(np.array(peak) * 10).astype(np.int64)) ** 2).sum(axis=1) >= reach
    gains = expected_gain(weights, (hits + 0.5) / (numbers + 1))
    order = [int(at) for at in np.argsort(-gains, kind="stable") if free[at]][:_FINALISTS]
    if not order:
        return []
    tail = (1 - level) / 2
    # Equal counts have equal intervals: each starts its own random numbers.
    counted = [tuple(hits[at].tolist()) for at in order]
    distinct = {counts: row for row, counts in enumerate(dict.fromkeys(counted))}
    drawn = np.empty((len(distinct), _DRAWS, len(numbers)))
    for counts, row in distinct.items():
        k = np.array(counts)
        drawn[row] = np.random.default_rng([_SEED, *counts]).beta(k + 0.5, numbers - k + 0.5, size=drawn.shape[1:])
    gained = expected_gain(weights, np.clip(drawn, 1e-12, 1 - 1e-12))
    ends = np.quantile(gained, [tail, 1 - tail], axis=1).T[[distinct[counts] for counts in counted]]
    ranked = sorted(range(len(order)), key=lambda rank: (-ends[rank][0], -gains[order[rank]], rank))
    taken: list[int] = []
    for rank in ranked:
        apart = all(((grid[order[rank]] - grid[order[other]]) ** 2).sum() >= reach for other in taken)
        if apart:
            taken.append(rank)
        if len(taken) == places:
            break
    return [
        _place(literature, grid[order[rank]], hits[order[rank]], candidates, (float(gains[order[rank]]), ends[rank]))
        for rank in taken
    ]


def _place(
    literature: Literature,
    centre: NDArray[np.int64],
    hits: NDArray[np.int64],
    candidates: tuple[NDArray[np.float64], NDArray[np.int64]],
    gain: tuple[float, NDArray[np.float64]],
) -> SettlingPlace:
    """Return one place with what either outcome would do."""
    weights, numbers = candidates
    rates = (hits + 0.5) / (numbers + 1)
    after, without = updated(weights, rates)
    x, y, z = (centre / 10).tolist()
    value, (low, high) = gain
    return SettlingPlace(
        peak=(x, y, z),
        words=place_of_peak(literature.brain, (x, y, z)).words,
        gain=Estimate(value, min(value, float(low)), max(value, float(high))),
        active=tuple(int(k) for k in hits),
        probability_active=float((weights * rates).sum()),
        if_active=tuple(after.tolist()),
        if_silent=tuple(without.tolist()),
    )
