"""What the figures of a calibration say in words, and no more than that."""

from __future__ import annotations

from collections.abc import Sequence

from revinf.calibration.summaries import Discount, Scores, TermScore

__all__ = ["verdict"]

_HARDLY, _LITTLE = 0.02, 0.10
_RANKS_WELL = 0.70
_STEEP, _FAIR = 0.75, 0.95


def verdict(
    single: Scores, combined: Scores, repaired: Scores, discount: Discount, terms: Sequence[TermScore]
) -> tuple[str, ...]:
    """Say what single peaks, all peaks and the discount are worth, and which processes this literature cannot support.

    Parameters
    ----------
    single, combined, repaired : Scores
        A peak alone; all peaks multiplied; the same with the discount.
    discount : Discount
        The exponent.
    terms : sequence of TermScore
        By process.

    Returns
    -------
    tuple of str
        One sentence each.
    """
    said = [_single(single), _combined(combined), _discount(repaired, discount)]
    worse = [term.term for term in terms if term.skill_all is not None and term.skill_all < 0]
    if worse:
        said.append("Multiplied, the peaks do worse than the base rate alone for " + _named(worse) + ".")
    bare = [term.term for term in terms if not term.supported]
    if bare:
        said.append(
            "No place in the grey matter speaks credibly for "
            + _named(bare)
            + ": this literature cannot support a claim about "
            + ("it." if len(bare) == 1 else "them.")
        )
    return tuple(said)


def _single(single: Scores) -> str:
    """Say what one peak is worth."""
    gain = single.brier_skill or 0.0
    if gain < -_HARDLY / 4:
        how = "does worse than the base rate alone"
    elif gain < _HARDLY:
        how = "hardly improves on the base rate"
    elif gain < _LITTLE:
        how = "improves a little on the base rate"
    else:
        how = "clearly improves on the base rate"
    return f"A single peak {how} (Brier skill {_figure(gain)}{_area(single)}): do not rest a conclusion on one."


def _combined(combined: Scores) -> str:
    """Say what all peaks are worth when they are multiplied."""
    gain, area = combined.brier_skill or 0.0, combined.area or 0.5
    ranks = "rank the processes of a study well" if area >= _RANKS_WELL else "rank the processes of a study poorly"
    if gain < 0:
        sure = "but are far too sure of themselves" if area >= _RANKS_WELL else "and are far too sure of themselves"
    elif gain < _HARDLY:
        sure = "and gain hardly anything over the base rate"
    else:
        sure = "and improve on the base rate"
    return f"All peaks of a study, multiplied, {ranks} {sure} (Brier skill {_figure(gain)}{_area(combined)})."


def _discount(repaired: Scores, discount: Discount) -> str:
    """Say how over-confident independence is, and what the discount repairs."""
    b = discount.exponent
    span = f"{b:.2f} ({discount.low:.2f} to {discount.high:.2f})"
    gain = repaired.brier_skill or 0.0
    if b >= _FAIR:
        return f"Peaks count as nearly independent: the exponent that fits best is {span}, Brier skill {_figure(gain)}."
    how = "strongly overstates" if b < _STEEP else "overstates"
    return (
        f"Multiplying peaks as if they were independent {how}: the exponent that fits best is {span}; with it the "
        f"Brier skill is {_figure(gain)}."
    )


def _figure(value: float) -> str:
    """Write a skill; one that rounds to nothing has no sign."""
    return f"{value:.2f}".replace("-0.00", "0.00")


def _area(scores: Scores) -> str:
    """Write the area under the curve, if there is one."""
    return "" if scores.area is None else f", area under the curve {scores.area:.2f}"


def _named(terms: list[str]) -> str:
    """Name the first few."""
    shown = ", ".join(terms[:6])
    return shown if len(terms) <= 6 else f"{shown} and {len(terms) - 6} more"
