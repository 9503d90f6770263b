"""Every process of a literature over the brain: the counts of all at once, then map after map."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from revinf.base_rates.point_counts import count_points
from revinf.evidence.brain_map import BrainMap
from revinf.evidence.choices import Choices
from revinf.evidence.map_term import MapQuestion, solved_ratios
from revinf.evidence.parts import LiteratureFacts
from revinf.evidence.sources import Source
from revinf.evidence.vocabulary import shipped_vocabulary
from revinf.in_processes import each
from revinf.knowledge import VERSION
from revinf.literature.literature import Literature
from revinf.spaces.nifti import lattice_volume, series_chunks, volume_bytes

__all__ = ["TermHits", "hits_of_terms", "map_terms"]

_MANY_TABLES = 2_000_000
"""From so many points times terms on, other processes help to solve."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class TermHits:
    """How many studies of every process are active at every point.

    Parameters
    ----------
    terms : tuple of str, length K
        The processes.
    n_term : (K,) int64 array
        Studies with each.
    hits : (K, G) int16 or int32 array
        Of them, those active in the sphere at each point.
    active : (G,) int64 array
        All active studies.
    grid_tenths : (G, 3) int16 array, tenths of a millimetre, MNI152
        Centres of the spheres.
    spacing_mm, radius_mm : float, mm
        Of the lattice, of the spheres.
    literature : LiteratureFacts
        Where it was counted.
    """

    terms: tuple[str, ...]
    n_term: NDArray[np.int64]
    hits: NDArray[Any]
    active: NDArray[np.int64]
    grid_tenths: NDArray[np.int16]
    spacing_mm: float
    radius_mm: float
    literature: LiteratureFacts

    def to_dict(self) -> dict[str, Any]:
        """Return what the sidecar holds, schema revinf/hits/1."""
        return {
            "schema": "revinf/hits/1",
            "version": VERSION,
            "space": "MNI152",
            "spacing_mm": self.spacing_mm,
            "radius_mm": self.radius_mm,
            "n_points": len(self.grid_tenths),
            "n_terms": len(self.terms),
            "literature": self.literature.to_dict(),
            "volumes": {
                "hits.nii.gz": "studies with the term that are active in the sphere, a volume a row of terms.csv",
                "active.nii.gz": "all studies that are active in the sphere",
                "mask.nii.gz": "1 where a value stands; 0 in the other volumes means none there",
            },
        }

    def volumes(self) -> Iterator[tuple[str, Iterator[bytes]]]:
        """Yield name and bytes, piece by piece, of every volume, as compressed NIfTI."""
        voxels, affine = lattice_volume(self.grid_tenths, round(10 * self.spacing_mm))
        yield "hits.nii.gz", series_chunks(self.hits, len(self.terms), voxels, affine)
        yield "active.nii.gz", iter([volume_bytes(self.active, voxels, affine)])
        yield "mask.nii.gz", iter([volume_bytes(np.ones(len(voxels), dtype=np.int32), voxels, affine)])


def hits_of_terms(
    source: Literature | Source,
    *,
    spacing_mm: float = 4.0,
    radius_mm: float = 10.0,
    choices: Choices | None = None,
) -> TermHits:
    """Count every process of a literature at every grey-matter point of a lattice.

    Parameters
    ----------
    source, spacing_mm, radius_mm, choices
        As for `map_term`.

    Returns
    -------
    TermHits
        Terms that every study carries, and terms that are no processes, are left out.
    """
    return _counted(MapQuestion.of(source, spacing_mm, radius_mm, 0.5, choices))[0]


def map_terms(
    source: Literature | Source,
    *,
    spacing_mm: float = 4.0,
    radius_mm: float = 10.0,
    prior: float | Literal["prevalence"] = 0.5,
    choices: Choices | None = None,
) -> Iterator[tuple[int, int, BrainMap]]:
    """Map every process of a literature, one after another, so that memory stays bounded.

    Parameters
    ----------
    source, spacing_mm, radius_mm, prior, choices
        As for `map_term`.

    Yields
    ------
    int, int, BrainMap
        How many are done, of how many, and the map; terms of fewest studies first.
    """
    asked = MapQuestion.of(source, spacing_mm, radius_mm, prior, choices)
    found, positions = _counted(asked)
    # Terms that equally many studies carry share their tables, so they are solved together.
    groups = [np.flatnonzero(found.n_term == total) for total in np.unique(found.n_term)]
    number = 0
    for group, ends in zip(groups, _solved(asked, found, groups), strict=True):
        for at, own in zip(group.tolist(), ends, strict=True):
            number += 1
            yield number, len(found.terms), asked.map(int(positions[at]), found.hits[at], found.active, own)


def _counted(asked: MapQuestion) -> tuple[TermHits, NDArray[np.intp]]:
    """Return the counts of every process, and their positions among the literature's terms."""
    literature = asked.literature
    words = asked.choices.vocabulary or shipped_vocabulary()
    totals = literature.term_totals
    positions = np.array(
        [
            at
            for at, term in enumerate(literature.terms)
            if 0 < totals[at] < literature.n_studies and words.counts_as_process(term)
        ],
        dtype=np.intp,
    )
    counts = count_points(literature, asked.grid, asked.radius_mm, spacing_tenths=round(10 * asked.spacing_mm))
    hits = counts.hits if len(positions) == len(counts.hits) else counts.hits[positions]
    found = TermHits(
        terms=tuple(literature.terms[at] for at in positions.tolist()),
        n_term=totals[positions],
        hits=hits,
        active=counts.active,
        grid_tenths=asked.grid,
        spacing_mm=asked.spacing_mm,
        radius_mm=asked.radius_mm,
        literature=asked.facts,
    )
    return found, positions


def _solved(asked: MapQuestion, found: TermHits, groups: list[NDArray[np.intp]]) -> Iterator[NDArray[np.float64]]:
    """Yield the ratios of group after group."""
    n_studies, settings = asked.literature.n_studies, asked.settings
    work = ((settings, n_studies, int(found.n_term[group[0]]), found.active, found.hits[group]) for group in groups)
    if found.hits.size < _MANY_TABLES:
        yield from (solved_ratios(*arguments) for arguments in work)
    else:
        yield from each(solved_ratios, work, pre_dispatch="n_jobs")
