"""What a calibration reports: plain frozen data."""

from __future__ import annotations

from dataclasses import asdict, dataclass
from typing import Any

from revinf.evidence.parts import LiteratureFacts
from revinf.stats.scores import BrierParts, ReliabilityBin

__all__ = ["SCHEMA", "Calibration", "Discount", "GroupScore", "Scores", "TermScore"]

SCHEMA = "revinf/calibration/1"


@dataclass(frozen=True, slots=True, kw_only=True)
class Scores:
    """How good one kind of answer was.

    Parameters
    ----------
    n : int
        Forecasts: one a peak (or a study) and process.
    brier, log : float
        Scores; 0 is best.
    brier_skill, log_skill : float or None
        Share saved over the base rate alone; negative is worse than it.
    area : float or None
        Mean over the processes of the area under the curve.
    parts : BrierParts
        Of the Brier score.
    curve : tuple of ReliabilityBin
        What came true by what was forecast.
    """

    n: int
    brier: float
    log: float
    brier_skill: float | None
    log_skill: float | None
    area: float | None
    parts: BrierParts
    curve: tuple[ReliabilityBin, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class TermScore:
    """How one process fared; `supported` tells whether any grey-matter place speaks credibly for it."""

    term: str
    n_studies: int
    area_single: float | None
    area_all: float | None
    skill_single: float | None
    skill_all: float | None
    skill_discounted: float | None
    supported: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class GroupScore:
    """Scores of a part of the forecasts: processes by number of studies, or peaks by how busy the place is."""

    name: str
    n: int
    area: float | None
    brier_skill: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Discount:
    """The exponent of a product of ratios, and its interval by leaving out each fold."""

    exponent: float
    low: float
    high: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Calibration:
    """How far a literature can be trusted.

    Parameters
    ----------
    literature : LiteratureFacts
        Which one.
    radius_mm : float
        Of the spheres.
    n_folds, n_held_out, n_peaks, n_groups : int
        How it was measured.
    ratio : str
        "formula 2", or "half counts" where there were too many tables for it.
    single, combined, discounted : Scores
        A peak alone; all peaks of a study multiplied; the same raised to the discount.
    discount : Discount
        What repairs the product.
    terms : tuple of TermScore
        Most studies first.
    by_studies, by_breadth : tuple of GroupScore
        Of single peaks.
    verdict : tuple of str
        In words.
    """

    literature: LiteratureFacts
    radius_mm: float
    n_folds: int
    n_held_out: int
    n_peaks: int
    n_groups: int
    ratio: str
    single: Scores
    combined: Scores
    discounted: Scores
    discount: Discount
    terms: tuple[TermScore, ...]
    by_studies: tuple[GroupScore, ...]
    by_breadth: tuple[GroupScore, ...]
    verdict: tuple[str, ...]

    def to_dict(self) -> dict[str, Any]:
        """Return it as plain data of schema revinf/calibration/1."""
        content = asdict(self)
        content["literature"] = self.literature.to_dict()
        return {"schema": SCHEMA, **content}
