"""Does the same activation speak as well, or better, for something else?"""

from __future__ import annotations

from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.thresholds import Thresholds

__all__ = ["rival_ahead", "rivals_tied"]


def rival_ahead(
    term: str,
    best_rival: str | None,
    probability: float | None,
    limits: Thresholds,
    *,
    absent: bool = False,
) -> Caution | None:
    """Warn where another process is more often active here than the claimed one, on its own studies."""
    if best_rival is None or probability is None or probability > limits.rival_weigh:
        return None
    return Caution(
        code="rival-ahead",
        severity="stop" if probability <= limits.rival_stop else "weigh",
        message=(
            f"{best_rival!r} is {'silent' if absent else 'active'} here more often than {term!r}: the probability "
            f"that the claimed process leads is {_hundredths(probability)}."
        ),
        evidence={"best_rival": best_rival, "probability_ahead": probability},
    )


def rivals_tied(term: str, best_rival: str | None, probability: float | None, limits: Thresholds) -> Caution | None:
    """Note that the best rival cannot be told from the claimed process at this place."""
    if best_rival is None or probability is None:
        return None
    if not limits.rival_weigh < probability < 1 - limits.rival_weigh:
        return None
    return Caution(
        code="rivals-tied",
        severity="note",
        message=(
            f"{term!r} and {best_rival!r} cannot be told apart here: the probability that the claimed process "
            f"leads is {_hundredths(probability)}."
        ),
        evidence={"best_rival": best_rival, "probability_ahead": probability},
    )


def _hundredths(probability: float) -> str:
    """Write a probability in words that never call it 0 or 1."""
    if probability < 0.01:
        return "under 0.01"
    return "over 0.99" if probability > 0.99 else f"{probability:.2f}"
