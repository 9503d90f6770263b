"""One face for the sources of counts: a literature or a base-rate table, asked for one region."""

from __future__ import annotations

from dataclasses import dataclass
from functools import reduce
from pathlib import Path
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from revinf.base_rates.counting import TermCounts, count_hits
from revinf.base_rates.study_level import StudyLevel
from revinf.base_rates.table import BaseRateTable, TableRegion
from revinf.evidence.asked_region import DEFAULT_RADIUS_MM, AskedRegion
from revinf.evidence.parts import LiteratureFacts, Place, TablePlace
from revinf.evidence.place import place_of_mask, place_of_pattern, place_of_peak
from revinf.exceptions import InvalidClaimError
from revinf.knowledge import describe_table
from revinf.literature.background import Background
from revinf.literature.literature import Literature
from revinf.spaces.reference import brain_reference
from revinf.spaces.regions import Mask, load_mask
from revinf.spaces.spheres import Sphere

__all__ = ["Answer", "LiteratureSource", "Source", "TableSource", "as_source"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Answer:
    """What a source says of a region.

    Parameters
    ----------
    counts : TermCounts
        Of every term.
    place : Place
        Where it is.
    region_kind : str
        "sphere", "mask" or "table".
    radius_mm : float or None, mm
        Radius of the sphere that was counted.
    hits : int
        Studies that count as active.
    studies : StudyLevel or None
        The studies themselves; a table does not have them.
    background : Background or None
        Hits of the same sphere all over the grey matter.
    percentile : float or None
        Activation percentile among the table's other regions.
    """

    counts: TermCounts
    place: Place
    region_kind: str
    radius_mm: float | None
    hits: int
    studies: StudyLevel | None = None
    background: Background | None = None
    percentile: float | None = None


class Source(Protocol):
    """Anything that can be asked for the counts of a region."""

    @property
    def facts(self) -> LiteratureFacts:
        """What the source is."""
        ...

    def answer(self, region: AskedRegion, *, absent: bool = False) -> Answer:
        """Count for a region."""
        ...


class LiteratureSource:
    """A compiled literature."""

    def __init__(self, literature: Literature) -> None:
        self.literature = literature

    @property
    def facts(self) -> LiteratureFacts:
        """What the literature is."""
        description, manifest = self.literature.description, self.literature.manifest
        return LiteratureFacts(
            name=description.name,
            n_studies=self.literature.n_studies,
            n_peaks=self.literature.n_peaks,
            n_terms=self.literature.n_terms,
            study_is=description.study_is,
            invented=description.invented,
            fingerprint=self.literature.fingerprint,
            merged=manifest.merged_by is not None,
            negative_peaks=manifest.counts.get("negative_peaks", 0),
            provenance=description.source,
            licence=description.licence,
            citation=description.citation,
            left_out=len(self.literature.left_out),
        )

    def region_hits(self, region: AskedRegion) -> list[NDArray[np.int64]]:
        """Return, for each place of a region, the indices of the studies that hit it."""
        if region.region is not None:
            raise InvalidClaimError(
                f"region {region.region!r} names a place of a table; a literature needs a peak or a mask"
            )
        places: list[Sphere | Mask] = [region.sphere_at(peak) for peak in region.mni_peaks()]
        if region.mask is not None:
            places = [load_mask(Path(region.mask))]
        return [self.literature.studies_hitting(place) for place in places]

    def studies(self, region: AskedRegion, *, absent: bool = False) -> StudyLevel:
        """Return the studies with those marked that hit every place, or, if `absent`, none of them."""
        hits = self.region_hits(region)
        if absent:
            everyone = np.arange(self.literature.n_studies)
            return StudyLevel(self.literature, np.setdiff1d(everyone, reduce(np.union1d, hits)))
        return StudyLevel(self.literature, reduce(np.intersect1d, hits))

    def answer(self, region: AskedRegion, *, absent: bool = False) -> Answer:
        """Count the studies that hit all spheres of a region, or its mask."""
        studies = self.studies(region, absent=absent)
        hits = np.flatnonzero(studies.is_hit)
        single = len(region.peaks) == 1
        return Answer(
            counts=count_hits(self.literature, hits),
            place=self._place(region),
            region_kind="sphere" if region.mask is None else "mask",
            radius_mm=region.radius_mm if region.mask is None else None,
            hits=len(hits),
            studies=studies,
            background=self.literature.background(region.radius_mm) if single and not absent else None,
        )

    def _place(self, region: AskedRegion) -> Place:
        """Say where a region is."""
        if region.mask is not None:
            return place_of_mask(load_mask(Path(region.mask)))
        places = [place_of_peak(self.literature.brain, peak) for peak in region.mni_peaks()]
        return places[0] if len(places) == 1 else place_of_pattern(places)


class TableSource:
    """A base-rate table; `study_is` says what one study is, in the plural."""

    def __init__(self, table: BaseRateTable, *, study_is: str = "studies", shipped: bool = False) -> None:
        self.table = table
        self.study_is = study_is
        self.shipped = shipped

    @property
    def facts(self) -> LiteratureFacts:
        """What the table is."""
        described = describe_table("open_base_rates") if self.shipped else {}
        return LiteratureFacts(
            name=self.table.name,
            n_studies=self.table.n_studies,
            n_peaks=None,
            n_terms=len(self.table.terms),
            study_is=self.study_is,
            invented=self.table.invented,
            fingerprint=self.table.fingerprint,
            kind="shipped table" if self.shipped else "table",
            merged=False if self.shipped else None,
            provenance="; ".join(source["title"] for source in described.get("sources", ())),
            licence=", ".join(licence["name"] for licence in described.get("licenses", ())),
        )

    def answer(self, region: AskedRegion, *, absent: bool = False) -> Answer:
        """Return the counts of the named region, or of the one nearest to the peak."""
        if region.mask is not None:
            raise InvalidClaimError("a base-rate table has no peaks to put into a mask; use a literature")
        if len(region.peaks) > 1:
            raise InvalidClaimError(
                "a base-rate table cannot tell which studies hit several places; use a literature for a pattern"
            )
        found, nearest = self._found(region)
        if region.radius_mm not in (DEFAULT_RADIUS_MM, found.radius_mm):
            stated = "no radius" if found.radius_mm is None else f"a radius of {found.radius_mm:g} mm"
            raise InvalidClaimError(
                f"the table's region {found.name!r} has {stated}, not {region.radius_mm:g} mm; leave --radius out, "
                "or use a literature"
            )
        if region.region is not None:
            place = Place(hemisphere=None, tissue=None, nearest=None, words=found.name)
        else:
            place = place_of_peak(brain_reference(), region.mni_peaks()[0], nearest)
        counts = self.table.term_counts(found.name)
        if absent:
            counts = counts.inverted()
        return Answer(
            counts=counts,
            place=place,
            region_kind="table",
            radius_mm=found.radius_mm,
            hits=int((counts.term_active + counts.other_active).max()),
            percentile=None if absent else self.table.activation_percentile(found.name),
        )

    def _found(self, region: AskedRegion) -> tuple[TableRegion, TablePlace | None]:
        """Return the region that answers, and how far it is from the peak, if there is one."""
        if region.region is not None:
            return self.table.region(region.region), None
        found, distance = self.table.nearest_region(region.mni_peaks()[0])
        if found.centre is None:  # nearest_region answers only with placed regions
            raise InvalidClaimError("the nearest region has no centre; name it with --region")
        return found, TablePlace(region=found.name, centre=found.centre, distance_mm=distance)


def as_source(source: Literature | BaseRateTable | Source) -> Source:
    """Return the common face of whatever was given.

    Parameters
    ----------
    source : Literature, BaseRateTable or Source
        Where counts come from.

    Returns
    -------
    Source
        To be asked.
    """
    if isinstance(source, Literature):
        return LiteratureSource(source)
    return TableSource(source) if isinstance(source, BaseRateTable) else source
