"""The parts that every assessment has: claim, place, source, rates, ratio, posteriors, association."""

from __future__ import annotations

from dataclasses import asdict, dataclass
from typing import Any

from revinf.evidence.asked_region import Point
from revinf.evidence.grading import Direction
from revinf.stats.estimates import Estimate

__all__ = [
    "AssessedClaim",
    "Association",
    "LikelihoodRatio",
    "LiteratureFacts",
    "Nearest",
    "Place",
    "Posterior",
    "Rates",
    "RequiredPrior",
    "TablePlace",
    "plain",
]


@dataclass(frozen=True, slots=True, kw_only=True)
class AssessedClaim:
    """The claim as it was assessed: peaks in mm as given, prior as a probability."""

    id: str
    term: str
    region_kind: str
    peaks: tuple[Point, ...]
    space: str
    radius_mm: float | None
    prior: float
    absent: bool = False
    context: tuple[str, ...] = ()
    quote: str = ""
    location: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Nearest:
    """The nearest labelled point of a published set, within 6 mm."""

    label: str
    distance_mm: float
    source: str


@dataclass(frozen=True, slots=True, kw_only=True)
class TablePlace:
    """The region of a base-rate table that answered for a peak."""

    region: str
    centre: Point
    distance_mm: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Place:
    """Where the region is, in words; `outside_mm` and `grey_mm` are distances to brain and grey matter."""

    hemisphere: str | None
    tissue: str | None
    nearest: Nearest | None
    words: str
    outside_mm: float | None = None
    grey_mm: float | None = None
    table_region: TablePlace | None = None

    def to_dict(self) -> dict[str, Any]:
        """Return the place as plain data; `table_region` only where a table answered for a peak."""
        content: dict[str, Any] = {
            "hemisphere": self.hemisphere,
            "tissue": self.tissue,
            "nearest": asdict(self.nearest) if self.nearest else None,
            "words": self.words,
        }
        if self.table_region is not None:
            content["table_region"] = plain(asdict(self.table_region))
        return content


@dataclass(frozen=True, slots=True, kw_only=True)
class LiteratureFacts:
    """Where the counts come from; `merged` is None where it is not known, and a text is empty."""

    name: str
    n_studies: int
    n_peaks: int | None
    n_terms: int
    study_is: str
    invented: bool
    fingerprint: str
    kind: str = "literature"
    merged: bool | None = None
    negative_peaks: int = 0
    provenance: str = ""
    licence: str = ""
    citation: str = ""
    left_out: int = 0

    def to_dict(self) -> dict[str, Any]:
        """Return the source as plain data."""
        names = ("name", "n_studies", "n_peaks", "n_terms", "study_is", "invented", "fingerprint")
        return {name: getattr(self, name) for name in names}


@dataclass(frozen=True, slots=True, kw_only=True)
class Rates:
    """The four rates of formula 1."""

    active_given_term: Estimate | None
    active_given_other: Estimate | None
    activation: Estimate | None
    prevalence: Estimate | None


@dataclass(frozen=True, slots=True, kw_only=True)
class LikelihoodRatio:
    """The ratio with its direction and grades."""

    value: Estimate
    observed: float | None
    direction: Direction
    headline_grade: str | None
    estimate_grade: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Posterior:
    """A posterior at a stated prior."""

    value: Estimate
    observed: float | None
    prior: float


@dataclass(frozen=True, slots=True, kw_only=True)
class RequiredPrior:
    """The prior one must have held for a target posterior."""

    target: float
    estimate: float
    at_low: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Association:
    """Fisher's exact p and its false-discovery q over the process terms."""

    fisher_p: float | None
    q: float | None


def plain(value: Any) -> Any:
    """Return nested tuples as lists, as JSON reads them back."""
    if isinstance(value, dict):
        return {name: plain(item) for name, item in value.items()}
    if isinstance(value, (list, tuple)):
        return [plain(item) for item in value]
    return value
