"""`Assessment`: the full answer to one claim, as frozen data and as the JSON of schema revinf/assessment/1.

Parts that a source cannot give are None, and null in the JSON. Nothing in it is formatted for a reader.
"""

from __future__ import annotations

from dataclasses import asdict, dataclass, field
from typing import TYPE_CHECKING, Any

from revinf.evidence.breadth import Breadth
from revinf.evidence.cautions.caution import Caution
from revinf.evidence.contrasts import Context, Mirror, Pattern, ReportingVolume
from revinf.evidence.parts import (
    AssessedClaim,
    Association,
    LikelihoodRatio,
    LiteratureFacts,
    Place,
    Posterior,
    Rates,
    RequiredPrior,
    plain,
)
from revinf.evidence.robustness import Robustness
from revinf.evidence.selectivity import Selectivity
from revinf.evidence.unevenness import Unevenness
from revinf.evidence.verdict import verdict
from revinf.knowledge import VERSION
from revinf.stats.estimates import Counts, Estimate

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["SCHEMA", "Assessment"]

SCHEMA = "revinf/assessment/1"


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
    selectivity: Selectivity
    breadth: Breadth
    unevenness: Unevenness
    robustness: Robustness
    reporting_volume: ReportingVolume | None = None
    context: Context | None = None
    mirror: Mirror | None = None
    pattern: Pattern | None = None
    balanced_ratio: Estimate | None = None
    own_studies: tuple[str, ...] = ()
    level: float = 0.95
    ratio_prior: str = "shared"
    ratio_limit: float = 20.0
    cautions: tuple[Caution, ...] = field(default_factory=tuple)

    @property
    def wording(self) -> str:
        """The strongest sentence that the evidence carries."""
        return verdict(
            self.claim.term,
            self.likelihood_ratio.direction,
            self.likelihood_ratio.headline_grade,
            [caution.severity for caution in self.cautions],
            absent=self.claim.absent,
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
        ratio, chosen = self.likelihood_ratio, self.selectivity
        return {
            "schema": SCHEMA,
            "version": VERSION,
            "claim": plain(asdict(self.claim)),
            "place": self.place.to_dict(),
            "literature": self.literature.to_dict(),
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
                f"{item.target:.2f}": {"estimate": item.estimate, "at_low": item.at_low} for item in self.required_prior
            },
            "association": asdict(self.association),
            "selectivity": chosen.to_dict(),
            "breadth": asdict(self.breadth),
            "reporting_volume": _optional(self.reporting_volume),
            "context": _optional(self.context),
            "mirror": _optional(self.mirror),
            "pattern": _optional(self.pattern),
            "balanced_ratio": _optional(self.balanced_ratio),
            "rivals": [asdict(rival) for rival in chosen.rivals],
            "kin": [asdict(rival) for rival in chosen.kin],
            "robustness": self.robustness.to_dict(),
            "cautions": [caution.to_dict() for caution in self.cautions],
            "wording": self.wording,
        }

    def to_frame(self) -> pd.DataFrame:
        """Return the assessment as one row, nested names joined by a dot.

        Returns
        -------
        pandas.DataFrame
            One row; cautions are their codes and rivals their terms, joined by ``;``. The rows of
            robustness, rivals and kin are in `to_dict`.
        """
        import pandas as pd

        content = self.to_dict()
        content["cautions"] = ";".join(caution.code for caution in self.cautions)
        for name in ("rivals", "kin"):
            content[name] = ";".join(row["term"] for row in content[name])
        content["claim"]["peaks"] = ";".join(" ".join(f"{value:g}" for value in peak) for peak in self.claim.peaks)
        content["claim"]["context"] = ";".join(self.claim.context)
        content["robustness"].pop("rows")
        if content["pattern"] is not None:
            content["pattern"].pop("regions")
        return pd.json_normalize(content)


def _posterior(posterior: Posterior) -> dict[str, float | None]:
    """Return a posterior as plain data."""
    return {**asdict(posterior.value), "observed": posterior.observed, "prior": posterior.prior}


def _optional(part: Any) -> Any:
    """Return a part as plain data, or None."""
    return None if part is None else plain(asdict(part))
