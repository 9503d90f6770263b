"""Is the place one where an activation can be, and did the right place answer?"""

from __future__ import annotations

from math import isfinite

from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.thresholds import Thresholds

__all__ = ["far_from_table", "off_brain"]


_WHERE = {
    "outside": "just outside the brain mask",
    "other brain": "between the tissues",
}


def off_brain(
    tissue: str | None, outside_mm: float | None, grey_mm: float | None, limits: Thresholds
) -> Caution | None:
    """Warn where the peak lies outside the brain, or inside it but not in grey matter."""
    if tissue is None or outside_mm is None or grey_mm is None or tissue == "grey matter":
        return None
    evidence = {"tissue": tissue, "outside_mm": _finite(outside_mm), "grey_mm": _finite(grey_mm)}
    if outside_mm > limits.off_brain_mm:
        return Caution(
            code="off-brain",
            severity="stop",
            message=(
                f"The peak lies more than {limits.off_brain_mm:g} mm outside the brain mask; check its "
                "signs, its space and its units."
            ),
            evidence=evidence,
        )
    where = _WHERE.get(tissue, f"in {tissue}")
    return Caution(
        code="off-brain",
        severity="weigh",
        message=(
            f"The peak lies {where} of the standard brain, not in grey matter, which begins {grey_mm:.0f} mm away."
        ),
        evidence=evidence,
    )


def _finite(distance_mm: float) -> float | None:
    """Return a distance, or None where it is beyond what was searched."""
    return distance_mm if isfinite(distance_mm) else None


def far_from_table(distance_mm: float | None, radius_mm: float | None, limits: Thresholds) -> Caution | None:
    """Warn where the table's nearest place is so far off that it shares only part of its sphere."""
    if distance_mm is None or radius_mm is None or distance_mm <= limits.far_share * radius_mm:
        return None
    return Caution(
        code="far-from-table",
        severity="weigh",
        message=(
            f"The nearest place of the table is {distance_mm:.1f} mm from the peak, more than half of its "
            f"radius of {radius_mm:g} mm; a literature would answer for the peak itself."
        ),
        evidence={"distance_mm": distance_mm, "radius_mm": radius_mm},
    )
