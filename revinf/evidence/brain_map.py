"""A term over the whole brain: the answer of `check` at every grey-matter point of a lattice."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from revinf.evidence.choices import Choices
from revinf.evidence.parts import LiteratureFacts
from revinf.evidence.ratio_settings import RatioSettings
from revinf.evidence.sources import LiteratureSource, Source, as_source
from revinf.evidence.vocabulary import shipped_vocabulary
from revinf.exceptions import InvalidClaimError, SpaceError
from revinf.knowledge import VERSION
from revinf.literature.background import compute_background
from revinf.literature.literature import Literature
from revinf.spaces.brain import grey_lattice
from revinf.spaces.nifti import lattice_volume, volume_bytes
from revinf.stats.bayes import posterior_probability
from revinf.stats.estimates import Counts

__all__ = ["FILES", "SPACINGS_MM", "BrainMap", "map_term", "map_terms"]

SPACINGS_MM = (2.0, 4.0)

FILES = {
    "hits": "studies with the term that are active in the sphere",
    "active": "all studies that are active in the sphere",
    "ratio": "likelihood ratio, posterior median",
    "ratio-low": "lower end of its interval",
    "ratio-high": "upper end of its interval",
    "posterior": "posterior at the stated prior",
    "posterior-low": "lower end of its interval",
    "posterior-high": "upper end of its interval",
    "mask": "1 where a value stands; 0 in the other volumes means none there",
}
"""Volumes of a map and what each holds."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class BrainMap:
    """The values of one term at every grey-matter point.

    Parameters
    ----------
    term : str
        Which.
    grid_tenths : (G, 3) int16 array, tenths of a millimetre, MNI152
        Centres of the spheres.
    values : dict of str to (G,) array
        As `FILES` names them, without the mask.
    spacing_mm, radius_mm, prior, level : float
        How it was asked.
    ratio_prior, ratio_limit
        How the ratio was estimated.
    n_term, n_other : int
        Studies with the term, and others.
    literature : LiteratureFacts
        Where it was counted.
    """

    term: str
    grid_tenths: NDArray[np.int16]
    values: dict[str, NDArray[Any]]
    spacing_mm: float
    radius_mm: float
    prior: float
    level: float
    ratio_prior: str
    ratio_limit: float
    n_term: int
    n_other: int
    literature: LiteratureFacts

    def strongest(self, number: int) -> list[int]:
        """Return the points with the highest lower ends whose spheres do not overlap."""
        grid = self.grid_tenths.astype(np.int64)
        free = np.ones(len(grid), dtype=bool)
        chosen: list[int] = []
        for at in np.argsort(-self.values["ratio-low"], kind="stable").tolist():
            if not free[at]:
                continue
            chosen.append(at)
            free &= ((grid - grid[at]) ** 2).sum(axis=1) >= (20 * self.radius_mm) ** 2
            if len(chosen) == number:
                break
        return chosen

    def volumes(self) -> Iterator[tuple[str, bytes]]:
        """Yield name and bytes of every volume, as compressed NIfTI."""
        voxels, affine = lattice_volume(self.grid_tenths, round(10 * self.spacing_mm))
        for name in FILES:
            values = np.ones(len(voxels), dtype=np.int32) if name == "mask" else self.values[name]
            yield f"{name}.nii.gz", volume_bytes(values, voxels, affine)

    def to_dict(self) -> dict[str, Any]:
        """Return what the sidecar holds, schema revinf/map/1."""
        return {
            "schema": "revinf/map/1",
            "version": VERSION,
            "term": self.term,
            "space": "MNI152",
            "spacing_mm": self.spacing_mm,
            "radius_mm": self.radius_mm,
            "n_points": len(self.grid_tenths),
            "prior": self.prior,
            "level": self.level,
            "ratio_prior": self.ratio_prior,
            "ratio_prior_limit": self.ratio_limit,
            "n_studies_with_term": self.n_term,
            "n_other_studies": self.n_other,
            "literature": self.literature.to_dict(),
            "volumes": {f"{name}.nii.gz": what for name, what in FILES.items()},
        }


def map_term(
    term: str,
    source: Literature | Source,
    *,
    spacing_mm: float = 4.0,
    radius_mm: float = 10.0,
    prior: float | Literal["prevalence"] = 0.5,
    choices: Choices | None = None,
) -> BrainMap:
    """Ask about a term at every grey-matter point of a lattice.

    Parameters
    ----------
    term : str
        A term of the literature.
    source : Literature or LiteratureSource
        A table has too few places.
    spacing_mm : {2, 4}, mm
        Of the lattice.
    radius_mm : float, mm, default 10
        Of the sphere around each point.
    prior : float or "prevalence", probability
        Of the posterior.
    choices : Choices, optional
        Level and prior of the ratio.

    Returns
    -------
    BrainMap
        Each value is what `revinf.assess` says at that point.

    Raises
    ------
    UnknownTermError
        If no counted study carries the term.
    InvalidClaimError
        If the source is a table, or every study carries the term.
    SpaceError
        If the spacing is not 2 or 4 mm, or the radius is out of range.
    """
    literature, facts = _opened(source)
    grid = _lattice(literature, spacing_mm)
    everyone = _hits(literature, None, grid, spacing_mm, radius_mm)
    return _Asked(literature, facts, grid, everyone, spacing_mm, radius_mm, prior, choices or Choices()).map(term)


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
        How many are done, of how many, and the map.
    """
    literature, facts = _opened(source)
    chosen = choices or Choices()
    words = chosen.vocabulary or shipped_vocabulary()
    grid = _lattice(literature, spacing_mm)
    everyone = _hits(literature, None, grid, spacing_mm, radius_mm)
    totals = literature.term_totals
    terms = [
        term
        for at, term in enumerate(literature.terms)
        if 0 < totals[at] < literature.n_studies and words.counts_as_process(term)
    ]
    asked = _Asked(literature, facts, grid, everyone, spacing_mm, radius_mm, prior, chosen)
    for number, term in enumerate(terms, start=1):
        yield number, len(terms), asked.map(term)


def _opened(source: Literature | Source) -> tuple[Literature, LiteratureFacts]:
    """Return the literature behind a source."""
    asked = as_source(source)
    if not isinstance(asked, LiteratureSource):
        raise InvalidClaimError("a map needs the studies themselves; name a literature folder with --literature")
    return asked.literature, asked.facts


def _lattice(literature: Literature, spacing_mm: float) -> NDArray[np.int16]:
    """Return the grey-matter points."""
    if spacing_mm not in SPACINGS_MM:
        raise SpaceError(f"a map's spacing is 2 or 4 mm, but got {spacing_mm:g}")
    return grey_lattice(literature.brain, spacing_mm)


def _hits(
    literature: Literature,
    studies: NDArray[np.int64] | None,
    grid: NDArray[np.int16],
    spacing_mm: float,
    radius_mm: float,
) -> NDArray[np.int64]:
    """Return how many of some studies, or of all, are active at every point."""
    arrays = literature.arrays()
    peaks, study = arrays["peak_tenths"], arrays["peak_study"]
    n_studies = literature.n_studies
    if studies is not None:
        number = np.full(n_studies, -1, dtype=np.int32)
        number[studies] = np.arange(len(studies))
        mine = number[study] >= 0
        peaks, study, n_studies = peaks[mine], number[study[mine]], len(studies)
    found = compute_background(peaks, study, n_studies, grid, radius_mm, spacing_tenths=round(10 * spacing_mm))
    return found.location_hits.astype(np.int64)


@dataclass(frozen=True, slots=True)
class _Asked:
    """What all maps of a literature share."""

    literature: Literature
    facts: LiteratureFacts
    grid: NDArray[np.int16]
    everyone: NDArray[np.int64]
    spacing_mm: float
    radius_mm: float
    prior: float | Literal["prevalence"]
    choices: Choices

    def map(self, term: str) -> BrainMap:
        """Return the map of one term."""
        mine = self.literature.studies_with(term)
        n_term, n_other = len(mine), self.literature.n_studies - len(mine)
        if not n_other:
            raise InvalidClaimError(f"every counted study carries {term!r}, so there is nothing to compare with")
        hits = _hits(self.literature, mine, self.grid, self.spacing_mm, self.radius_mm)
        share = n_term / self.literature.n_studies
        asked = share if self.prior == "prevalence" else float(self.prior)
        settings = RatioSettings(
            level=self.choices.level, ratio_prior=self.choices.ratio_prior, ratio_limit=self.choices.ratio_limit
        )
        # Few distinct tables arise, and each is solved once.
        pairs, at = np.unique(np.stack([hits, self.everyone], axis=1), axis=0, return_inverse=True)
        tables = [Counts(k, n_term - k, active - k, n_other - (active - k)) for k, active in pairs.tolist()]
        ends = np.array([(one.estimate, one.low, one.high) for one in settings.solve_all(tables) if one is not None])[
            at.reshape(-1)
        ]
        posterior = np.array([[posterior_probability(asked, ratio) for ratio in row] for row in ends.tolist()])
        return BrainMap(
            term=self.literature.terms[self.literature.term_index(term)],
            grid_tenths=self.grid,
            values={
                "hits": hits,
                "active": self.everyone,
                "ratio": ends[:, 0],
                "ratio-low": ends[:, 1],
                "ratio-high": ends[:, 2],
                "posterior": posterior[:, 0],
                "posterior-low": posterior[:, 1],
                "posterior-high": posterior[:, 2],
            },
            spacing_mm=self.spacing_mm,
            radius_mm=self.radius_mm,
            prior=asked,
            level=self.choices.level,
            ratio_prior=self.choices.ratio_prior,
            ratio_limit=self.choices.ratio_limit,
            n_term=n_term,
            n_other=n_other,
            literature=self.facts,
        )
