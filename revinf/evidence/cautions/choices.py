"""Would another reasonable choice have given another answer?"""

from __future__ import annotations

from collections.abc import Mapping

from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.stats.estimates import Estimate
from revinf.stats.sides import probability_above_half

__all__ = ["mirror_equal", "radius_sensitive", "single_study", "space_doubt"]


def radius_sensitive(ratio: Estimate, by_radius: Mapping[float, Estimate | None], limits: Thresholds) -> Caution | None:
    """Warn where a decided answer depends on the radius of the sphere."""
    if ratio.covers(1.0):
        return None
    strayed, lost = [], []
    for radius, other in by_radius.items():
        if other is None:
            continue
        if radius in limits.radii_estimate and (
            (other.estimate > 1) != (ratio.estimate > 1) or not ratio.covers(other.estimate)
        ):
            strayed.append(radius)
        if radius in limits.radii_interval and other.covers(1.0):
            lost.append(radius)
    if not strayed and not lost:
        return None
    names = ", ".join(f"{radius:g}" for radius in sorted({*strayed, *lost}))
    return Caution(
        code="radius-sensitive",
        severity="weigh" if strayed else "note",
        message=(
            f"The answer depends on the radius: at {names} mm the estimate leaves this interval, or the "
            "interval includes 1."
        ),
        evidence={"estimate_strays_at_mm": strayed, "undecided_at_mm": lost},
    )


def single_study(ratio: Estimate, changes: bool, name: str | None, study_is: str) -> Caution | None:
    """Warn where a decided answer hangs on one study: without it the direction changes."""
    if ratio.covers(1.0) or not changes:
        return None
    return Caution(
        code="single-study",
        severity="weigh",
        message=(
            f"The direction hangs on a single one of the {study_is}: without it the interval includes 1. The "
            f"largest influence is that of {name!r}."
        ),
        evidence={"largest_influence": name},
    )


def space_doubt(direction: str, other_direction: str | None, stated: bool, other: str) -> Caution | None:
    """Warn where reading the coordinates in the other standard space changes the direction."""
    if other_direction is None or other_direction == direction:
        return None
    return Caution(
        code="space-doubt",
        severity="note" if stated else "weigh",
        message=(
            f"Read as {other} coordinates the answer would be {other_direction!r} instead of {direction!r}; make "
            "sure of the space" + ("." if stated else ", which was not stated.")
        ),
        evidence={"direction": direction, "other_direction": other_direction, "space_stated": stated},
    )


def mirror_equal(
    direction: str,
    x_mm: float,
    radius_mm: float,
    sides: tuple[int, int],
    limits: Thresholds,
) -> Caution | None:
    """Note that the mirrored place answers alike, so that the claim is not about this side."""
    if direction != "for" or abs(x_mm) <= radius_mm:
        return None
    probability = probability_above_half(*sides)
    if not limits.mirror_low < probability < 1 - limits.mirror_low:
        return None
    return Caution(
        code="mirror-equal",
        severity="note",
        message=(
            f"The other hemisphere cannot be told from this one: of the term's studies {sides[0]} hit only this "
            f"side and {sides[1]} only the other."
        ),
        evidence={"this_side_only": sides[0], "other_side_only": sides[1], "probability": probability},
    )
