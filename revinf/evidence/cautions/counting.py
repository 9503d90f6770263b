"""Is the ratio an effect of how studies report, or of what was counted together?"""

from __future__ import annotations

from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.stats.estimates import Counts, Estimate

__all__ = [
    "absence_unsearched",
    "busy_reporters",
    "context_small",
    "overlapping_regions",
    "pattern_overstated",
]


def busy_reporters(
    ratio: Estimate, crude: float | None, adjusted: Estimate | None, limits: Thresholds
) -> Caution | None:
    """Warn where the ratio changes once studies with few and with many peaks are compared apart."""
    if crude is None or adjusted is None or crude <= 0:
        return None
    change = adjusted.estimate / crude
    moved = not 1 / limits.volume_change <= change <= limits.volume_change
    lost = adjusted.covers(1.0) and not ratio.covers(1.0)
    if not moved and not lost:
        return None
    return Caution(
        code="busy-reporters",
        severity="weigh",
        message=(
            f"Studies that report many peaks hit everything: among studies alike in their number of peaks the "
            f"ratio is {adjusted.estimate:.2f} ({adjusted.low:.2f} to {adjusted.high:.2f}) instead of {crude:.2f}."
        ),
        evidence={"crude_ratio": crude, "adjusted_ratio": adjusted.estimate, "change": change},
    )


def context_small(n_studies: int | None, counts: Counts | None, limits: Thresholds) -> Caution | None:
    """Warn where the context leaves too few studies to say anything."""
    if n_studies is None or counts is None:
        return None
    least = min(counts.term_total, counts.other_total)
    if n_studies >= limits.context_studies and least >= limits.context_side:
        return None
    return Caution(
        code="context-small",
        severity="weigh",
        message=(
            f"Within the context only {n_studies} studies are left, {counts.term_total} with the term and "
            f"{counts.other_total} without."
        ),
        evidence={"n_studies": n_studies, "term": counts.term_total, "other": counts.other_total},
    )


def pattern_overstated(
    joint: Estimate | None, product: float | None, joint_hits: int | None, limits: Thresholds
) -> Caution | None:
    """Warn where multiplying the places as if independent claims more than the studies that hit them all."""
    if joint is None or product is None or product <= joint.high:
        return None
    few = f"; only {joint_hits} studies hit all places" if (joint_hits or 0) < limits.joint_hits else ""
    return Caution(
        code="pattern-overstated",
        severity="weigh",
        message=(
            f"Taken one by one and multiplied, the places would claim a ratio of {product:.3g}; the studies that "
            f"hit all of them carry at most {joint.high:.3g}{few}."
        ),
        evidence={"product": product, "joint_high": joint.high, "joint_hits": joint_hits},
    )


def overlapping_regions(pairs: int) -> Caution | None:
    """Note that places of the pattern share ground, so that one activation counts as several."""
    if not pairs:
        return None
    return Caution(
        code="overlapping-regions",
        severity="note",
        message="Places of this pattern share ground: one peak can hit several of them.",
        evidence={"overlapping_pairs": pairs},
    )


def absence_unsearched(absent: bool) -> Caution | None:
    """Warn that a peaks table is silent about what was not searched, so absence is not observed."""
    if not absent:
        return None
    return Caution(
        code="absence-unsearched",
        severity="weigh",
        message=(
            "A study without a peak here may not have searched here, or not have reported it: tables of peaks "
            "cannot tell absence from silence."
        ),
        evidence={"absent": True},
    )
