"""Can this source of counts be trusted with the question?"""

from __future__ import annotations

from revinf.evidence.cautions.caution import Caution

__all__ = ["invented_data", "small_default", "ungrouped_studies"]


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
