"""`Assessment`: the full answer to one claim, as frozen data and as the JSON of schema revinf/assessment/1.

Parts that a source cannot give are None, and null in the JSON. Nothing in it is formatted for a reader.
"""

from __future__ import annotations

from dataclasses import asdict, dataclass, field
from typing import TYPE_CHECKING, Any

from revinf.evidence.cautions.caution import Caution
from revinf.evidence.claim import Point
from revinf.evidence.grading import Direction
from revinf.evidence.verdict import verdict
from revinf.knowledge import VERSION
from revinf.stats.estimates import Counts, Estimate

if TYPE_CHECKING:
    import pandas as pd

__all__ = [
    "SCHEMA",
    "AssessedClaim",
    "Assessment",
    "Association",
    "LikelihoodRatio",
    "LiteratureFacts",
    "Nearest",
    "Place",
    "Posterior",
    "Rates",
    "RequiredPrior",
    "TablePlace",
]

SCHEMA = "revinf/assessment/1"


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


@dataclass(frozen=True, slots=True, kw_only=True)
class LiteratureFacts:
    """Where the counts come from; `merged` is None where it is not known."""

    name: str
    n_studies: int
    n_peaks: int | None
    n_terms: int
    study_is: str
    invented: bool
    fingerprint: str
    kind: str = "literature"
    merged: bool | None = None


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


@dataclass(frozen=True, slots=True, kw_only=True)
class Assessment:
    """The full answer to one claim; made by `revinf.assess`."""

    claim: AssessedClaim
    place: Place
    literature: LiteratureFacts
    counts: Counts
    rates: Rates
    likelihood_ratio: LikelihoodRatio
    posterior: Posterior
    posterior_at_prevalence: Posterior
    required_prior: tuple[RequiredPrior, ...]
    association: Association
    level: float = 0.95
    cautions: tuple[Caution, ...] = field(default_factory=tuple)

    @property
    def wording(self) -> str:
        """The strongest sentence that the evidence carries."""
        return verdict(
            self.claim.term,
            self.likelihood_ratio.direction,
            self.likelihood_ratio.headline_grade,
            [caution.severity for caution in self.cautions],
        )

    def __repr__(self) -> str:
        ratio, posterior = self.likelihood_ratio, self.posterior
        return (
            f"<Assessment {self.claim.term!r}: {self.counts.term_active} of {self.counts.term_total} against "
            f"{self.counts.other_active} of {self.counts.other_total} studies, likelihood ratio "
            f"{ratio.value.estimate:.3g} ({ratio.value.low:.3g}-{ratio.value.high:.3g}, {ratio.direction}), "
            f"posterior {posterior.value.estimate:.3f} at prior {posterior.prior:.3g}, "
            f"{len(self.cautions)} cautions>"
        )

    def to_dict(self) -> dict[str, Any]:
        """Return the assessment as plain data of schema revinf/assessment/1.

        Returns
        -------
        dict
            Strict JSON types; what could not be computed is None.
        """
        ratio = self.likelihood_ratio
        nearest, table_region = self.place.nearest, self.place.table_region
        place: dict[str, Any] = {
            "hemisphere": self.place.hemisphere,
            "tissue": self.place.tissue,
            "nearest": asdict(nearest) if nearest else None,
            "words": self.place.words,
        }
        if table_region is not None:
            place["table_region"] = _plain(asdict(table_region))
        facts = self.literature
        return {
            "schema": SCHEMA,
            "version": VERSION,
            "claim": _plain(asdict(self.claim)),
            "place": place,
            "literature": {
                name: getattr(facts, name)
                for name in ("name", "n_studies", "n_peaks", "n_terms", "study_is", "invented", "fingerprint")
            },
            "counts": asdict(self.counts),
            "rates": asdict(self.rates),
            "likelihood_ratio": {
                **asdict(ratio.value),
                "observed": ratio.observed,
                "direction": ratio.direction,
                "headline_grade": ratio.headline_grade,
                "estimate_grade": ratio.estimate_grade,
            },
            "posterior": _posterior(self.posterior),
            "posterior_at_prevalence": _posterior(self.posterior_at_prevalence),
            "required_prior": {
                f"{item.target:.2f}": {"estimate": item.estimate, "at_low": item.at_low}
                for item in self.required_prior
            },
            "association": asdict(self.association),
            # What needs rivals, breadth, contexts and other choices is not computed yet.
            **dict.fromkeys(_NOT_COMPUTED),
            "cautions": [caution.to_dict() for caution in self.cautions],
            "wording": self.wording,
        }

    def to_frame(self) -> pd.DataFrame:
        """Return the assessment as one row, nested names joined by a dot.

        Returns
        -------
        pandas.DataFrame
            One row; cautions are their codes, joined by ``;``.
        """
        import pandas as pd

        content = self.to_dict()
        content["cautions"] = ";".join(caution.code for caution in self.cautions)
        content["claim"]["peaks"] = ";".join(
            " ".join(f"{value:g}" for value in peak) for peak in self.claim.peaks
        )
        content["claim"]["context"] = ";".join(self.claim.context)
        return pd.json_normalize(content)


_NOT_COMPUTED = (
    "selectivity",
    "breadth",
    "reporting_volume",
    "context",
    "mirror",
    "pattern",
    "balanced_ratio",
    "rivals",
    "kin",
    "robustness",
)


def _posterior(posterior: Posterior) -> dict[str, float | None]:
    """Return a posterior as plain data."""
    return {**asdict(posterior.value), "observed": posterior.observed, "prior": posterior.prior}


def _plain(value: Any) -> Any:
    """Return nested tuples as lists, as JSON reads them back."""
    if isinstance(value, dict):
        return {name: _plain(item) for name, item in value.items()}
    if isinstance(value, (list, tuple)):
        return [_plain(item) for item in value]
    return value
