"""One face for the sources of counts: a literature or a base-rate table, asked for one claim."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Protocol

from revinf.base_rates.counting import TermCounts, count_terms
from revinf.base_rates.table import BaseRateTable
from revinf.evidence.assessment import LiteratureFacts, Place, TablePlace
from revinf.evidence.claim import Claim
from revinf.evidence.place import place_of_mask, place_of_peak
from revinf.exceptions import InvalidClaimError
from revinf.knowledge import table_path
from revinf.literature.literature import Literature
from revinf.spaces.reference import brain_reference
from revinf.spaces.regions import load_mask

__all__ = ["ENVIRONMENT", "Answer", "LiteratureSource", "Source", "TableSource", "choose_source"]

ENVIRONMENT = "REVINF_LITERATURE"
"""Environment variable that names the literature to use where none is given."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Answer:
    """What a source says of a claim's region.

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
    """

    counts: TermCounts
    place: Place
    region_kind: str
    radius_mm: float | None


class Source(Protocol):
    """Anything that can be asked for the counts of a claim's region."""

    @property
    def facts(self) -> LiteratureFacts:
        """What the source is."""
        ...

    def answer(self, claim: Claim) -> Answer:
        """Count for a claim."""
        ...


class LiteratureSource:
    """A compiled literature."""

    def __init__(self, literature: Literature) -> None:
        self.literature = literature

    @property
    def facts(self) -> LiteratureFacts:
        """What the literature is."""
        description = self.literature.description
        return LiteratureFacts(
            name=description.name,
            n_studies=self.literature.n_studies,
            n_peaks=self.literature.n_peaks,
            n_terms=self.literature.n_terms,
            study_is=description.study_is,
            invented=description.invented,
            fingerprint=self.literature.fingerprint,
            merged=self.literature.manifest.merged_by is not None,
        )

    def answer(self, claim: Claim) -> Answer:
        """Count the studies that hit the claim's sphere or mask."""
        if claim.region is not None:
            raise InvalidClaimError(
                f"region {claim.region!r} names a place of a table; a literature needs a peak or a mask"
            )
        if claim.mask is not None:
            mask = load_mask(Path(claim.mask))
            return Answer(
                counts=count_terms(self.literature, mask),
                place=place_of_mask(mask),
                region_kind="mask",
                radius_mm=None,
            )
        peak = claim.mni_peaks()[0]
        return Answer(
            counts=count_terms(self.literature, claim.sphere_at(peak)),
            place=place_of_peak(self.literature.brain, peak),
            region_kind="sphere",
            radius_mm=claim.radius_mm,
        )


class TableSource:
    """A base-rate table; `study_is` says what one study is, in the plural."""

    def __init__(self, table: BaseRateTable, *, study_is: str = "studies", shipped: bool = False) -> None:
        self.table = table
        self.study_is = study_is
        self.shipped = shipped

    @property
    def facts(self) -> LiteratureFacts:
        """What the table is."""
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
        )

    def answer(self, claim: Claim) -> Answer:
        """Return the counts of the claim's named region, or of the one nearest to its peak."""
        if claim.mask is not None:
            raise InvalidClaimError("a base-rate table has no peaks to put into a mask; use a literature")
        if claim.region is not None:
            region = self.table.region(claim.region)
            return Answer(
                counts=self.table.term_counts(region.name),
                place=Place(hemisphere=None, tissue=None, nearest=None, words=region.name),
                region_kind="table",
                radius_mm=region.radius_mm,
            )
        peak = claim.mni_peaks()[0]
        region, distance = self.table.nearest_region(peak)
        if region.centre is None:  # nearest_region answers only with placed regions
            raise InvalidClaimError("the nearest region has no centre; name it with --region")
        return Answer(
            counts=self.table.term_counts(region.name),
            place=place_of_peak(
                brain_reference(),
                peak,
                TablePlace(region=region.name, centre=region.centre, distance_mm=distance),
            ),
            region_kind="table",
            radius_mm=region.radius_mm,
        )


def choose_source(
    literature: str | Path | None,
    table: str | Path | None,
    environment: Mapping[str, str],
) -> Source:
    """Return the source that the user named, else the environment's, else the shipped open base rates.

    Parameters
    ----------
    literature, table : path, optional
        At most one of a literature folder and a base-rate table.
    environment : mapping
        Environment variables; REVINF_LITERATURE names a literature folder.

    Returns
    -------
    Source
        Opened.

    Raises
    ------
    InvalidClaimError
        If both a literature and a table are named.
    LiteratureError, InputFileError
        If it cannot be read.

    Examples
    --------
    >>> choose_source(None, None, {}).facts.name
    'open base rates'
    """
    if literature is not None and table is not None:
        raise InvalidClaimError("counts come from one source; give --literature or --table, not both")
    if table is not None:
        return TableSource(BaseRateTable.read(table))
    folder = literature or environment.get(ENVIRONMENT)
    if folder:
        return LiteratureSource(Literature.open(folder))
    shipped = BaseRateTable.read(table_path("open_base_rates"), name="open base rates")
    return TableSource(shipped, study_is="experiments", shipped=True)
