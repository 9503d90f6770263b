"""Can this source of counts be trusted with the question?"""

from __future__ import annotations

from collections.abc import Sequence

from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.evidence.unevenness import Unevenness
from revinf.stats.estimates import Estimate

__all__ = [
    "invented_data",
    "mixed_direction",
    "own_study_counted",
    "small_default",
    "uneven_literature",
    "ungrouped_studies",
]


def invented_data(invented: bool) -> Caution | None:
    """Stop where the literature is made up for demonstration."""
    if not invented:
        return None
    return Caution(
        code="invented-data",
        severity="stop",
        message="This literature is INVENTED for demonstration; the numbers say nothing about any brain.",
        evidence={"invented": True},
    )


def ungrouped_studies(merged: bool | None, study_is: str) -> Caution | None:
    """Note that several experiments of one paper count as independent, so that intervals are too narrow."""
    if merged is not False:
        return None
    return Caution(
        code="ungrouped-studies",
        severity="note",
        message=(
            f"The {study_is} are counted as independent; several may come from one paper, which makes the "
            "intervals too narrow. Build with --group where the grouping is known."
        ),
        evidence={"study_is": study_is},
    )


def small_default(shipped: bool, n_studies: int, largest_share: float) -> Caution | None:
    """Warn where the shipped open base rates answered: few topics, one of them most of the studies."""
    if not shipped:
        return None
    return Caution(
        code="small-default",
        severity="weigh",
        message=(
            f"The base rates that ship with revinf come from {n_studies} experiments of a few social, memory "
            f"and language topics, one of them {largest_share:.0%} of all. Bring a literature of your own "
            "with revinf build."
        ),
        evidence={"n_studies": n_studies, "largest_share": largest_share},
    )


def uneven_literature(
    uneven: Unevenness,
    limits: Thresholds,
    *,
    observed: float | None = None,
    balanced: Estimate | None = None,
) -> Caution | None:
    """Warn where a few processes dominate the literature, and with them every base rate.

    Where the ratio lies on the other side of 1 once every other process counts once, it says so.
    """
    largest_term, largest_share = uneven.largest_term, uneven.largest_share
    effective, n_processes = uneven.effective_processes, uneven.n_processes
    dominated = largest_share > limits.uneven_share
    if n_processes < 2 or not (dominated or effective < limits.uneven_effective * n_processes):
        return None
    reversal = ""
    if observed is not None and balanced is not None and (observed - 1) * (balanced.estimate - 1) < 0:
        reversal = (
            f" Here it matters: the observed ratio is {observed:.2f}, but {balanced.estimate:.2f} where every other "
            "process counts once."
        )
    return Caution(
        code="uneven-literature",
        severity="weigh",
        message=(
            f"This literature is uneven: {largest_term!r} labels {largest_share:.0%} of the studies, and its "
            f"{n_processes} processes count as {effective:.1f}; base rates and 'the others' inherit that."
            f"{reversal}"
        ),
        evidence={
            "largest_term": largest_term,
            "largest_share": largest_share,
            "effective_processes": effective,
            "n_processes": n_processes,
            "observed_ratio": observed,
            "balanced_ratio": None if balanced is None else balanced.estimate,
        },
    )


def mixed_direction(negative_peaks: int, decrease_terms: Sequence[str]) -> Caution | None:
    """Note that decreases are counted as activation."""
    if not negative_peaks and not decrease_terms:
        return None
    parts = []
    if negative_peaks:
        parts.append(f"{negative_peaks} peaks with a negative statistic")
    if decrease_terms:
        parts.append("the studies of " + ", ".join(repr(term) for term in decrease_terms))
    return Caution(
        code="mixed-direction",
        severity="note",
        message=f"Decreases are counted as activation: {' and '.join(parts)}.",
        evidence={"negative_peaks": negative_peaks, "decrease_terms": list(decrease_terms)},
    )


def own_study_counted(studies: Sequence[str]) -> Caution | None:
    """Warn where the claim's peaks are a counted study's own, which then speaks for itself."""
    if not studies:
        return None
    return Caution(
        code="own-study-counted",
        severity="weigh",
        message=(
            f"The claim's coordinates are those of the counted study {studies[0]!r}; a study must not be evidence "
            "for its own claim."
        ),
        evidence={"studies": list(studies)},
    )
