"""A term at every grey-matter point: what `check` answers there."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from revinf.evidence.brain_map import BrainMap
from revinf.evidence.choices import Choices
from revinf.evidence.parts import LiteratureFacts
from revinf.evidence.ratio_settings import RatioSettings
from revinf.evidence.sources import LiteratureSource, Source, as_source
from revinf.exceptions import InvalidClaimError, SpaceError
from revinf.literature.background import compute_background
from revinf.literature.literature import Literature
from revinf.spaces.brain import grey_lattice
from revinf.stats.bayes import posterior_probability
from revinf.stats.estimates import Counts

__all__ = ["SPACINGS_MM", "MapQuestion", "map_term", "solved_ratios"]

SPACINGS_MM = (2.0, 4.0)


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
    asked = MapQuestion.of(source, spacing_mm, radius_mm, prior, choices)
    literature = asked.literature
    hits = asked.hits(literature.studies_with(term))
    everyone = asked.hits(None)
    position = literature.term_index(term)
    ends = solved_ratios(asked.settings, literature.n_studies, asked.n_term(position), everyone, hits[None])[0]
    return asked.map(position, hits, everyone, ends)


@dataclass(frozen=True, slots=True, kw_only=True)
class MapQuestion:
    """What all maps of a literature share."""

    literature: Literature
    facts: LiteratureFacts
    grid: NDArray[np.int16]
    spacing_mm: float
    radius_mm: float
    prior: float | Literal["prevalence"]
    choices: Choices

    @classmethod
    def of(
        cls,
        source: Literature | Source,
        spacing_mm: float,
        radius_mm: float,
        prior: float | Literal["prevalence"],
        choices: Choices | None,
    ) -> MapQuestion:
        """Check what is asked and lay the lattice; errors as of `map_term`."""
        known = as_source(source)
        if not isinstance(known, LiteratureSource):
            raise InvalidClaimError("a map needs the studies themselves; name a literature folder with --literature")
        if spacing_mm not in SPACINGS_MM:
            raise SpaceError(f"a map's spacing is 2 or 4 mm, but got {spacing_mm:g}")
        return cls(
            literature=known.literature,
            facts=known.facts,
            grid=grey_lattice(known.literature.brain, spacing_mm),
            spacing_mm=spacing_mm,
            radius_mm=radius_mm,
            prior=prior,
            choices=choices or Choices(),
        )

    @property
    def settings(self) -> RatioSettings:
        """How each ratio is estimated."""
        return RatioSettings(
            level=self.choices.level, ratio_prior=self.choices.ratio_prior, ratio_limit=self.choices.ratio_limit
        )

    def n_term(self, position: int) -> int:
        """Return how many studies carry a term; an error where all do."""
        n_term = int(self.literature.term_totals[position])
        if n_term == self.literature.n_studies:
            term = self.literature.terms[position]
            raise InvalidClaimError(f"every counted study carries {term!r}, so there is nothing to compare with")
        return n_term

    def hits(self, studies: NDArray[np.int64] | None) -> NDArray[np.int64]:
        """Return how many of some studies, or of all, are active at every point."""
        arrays = self.literature.arrays()
        peaks, study, n_studies = arrays["peak_tenths"], arrays["peak_study"], self.literature.n_studies
        if studies is not None:
            number = np.full(n_studies, -1, dtype=np.int32)
            number[studies] = np.arange(len(studies))
            mine = number[study] >= 0
            peaks, study, n_studies = peaks[mine], number[study[mine]], len(studies)
        spacing = round(10 * self.spacing_mm)
        found = compute_background(peaks, study, n_studies, self.grid, self.radius_mm, spacing_tenths=spacing)
        return found.location_hits.astype(np.int64)

    def map(
        self, position: int, hits: NDArray[Any], everyone: NDArray[np.int64], ends: NDArray[np.float64]
    ) -> BrainMap:
        """Return the map of one term, its ratios already solved."""
        n_term = self.n_term(position)
        share = n_term / self.literature.n_studies
        asked = share if self.prior == "prevalence" else float(self.prior)
        distinct, at = np.unique(ends, return_inverse=True)
        posterior = np.array([posterior_probability(asked, ratio) for ratio in distinct.tolist()])[at].reshape(
            ends.shape
        )
        return BrainMap(
            term=self.literature.terms[position],
            grid_tenths=self.grid,
            values={
                "hits": hits.astype(np.int64),
                "active": everyone,
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
            n_other=self.literature.n_studies - n_term,
            literature=self.facts,
        )


def solved_ratios(
    settings: RatioSettings, n_studies: int, n_term: int, everyone: NDArray[np.int64], hits: NDArray[Any]
) -> NDArray[np.float64]:
    """Solve the ratios of terms that equally many studies carry; equal tables are solved once.

    Parameters
    ----------
    settings : RatioSettings
        Level and prior.
    n_studies, n_term : int
        All studies, and those with each of the terms.
    everyone : (G,) int64 array
        Active studies at each point.
    hits : (K, G) array of whole numbers
        Of them, those with each term.

    Returns
    -------
    (K, G, 3) array, ratio
        Estimate and both ends of the interval.
    """
    n_other = n_studies - n_term
    code = hits.astype(np.int64) * (n_studies + 1) + everyone
    distinct, at = np.unique(code, return_inverse=True)
    tables = [
        Counts(k, n_term - k, active - k, n_other - (active - k))
        for k, active in zip((distinct // (n_studies + 1)).tolist(), (distinct % (n_studies + 1)).tolist(), strict=True)
    ]
    ends = np.array([(one.estimate, one.low, one.high) for one in settings.solve_all(tables) if one is not None])
    return np.asarray(ends[at.reshape(hits.shape)])
