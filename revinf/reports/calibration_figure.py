"""The picture of a calibration: what came true by what was forecast, and skill by process."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

from revinf.reports.drawn_text import drawable
from revinf.reports.figures import ACCENT, INK, MUTED, new_figure, write_figure
from revinf.reports.numbers import count

if TYPE_CHECKING:
    from revinf.calibration.summaries import Calibration, Scores

__all__ = ["write_calibration_figure"]

_TERMS = 20


def write_calibration_figure(found: Calibration, path: str | Path) -> Path:
    """Draw reliability curves and skills.

    Parameters
    ----------
    found : Calibration
        From `revinf.calibrate`.
    path : path
        Ends in .png, .svg or .pdf.

    Returns
    -------
    pathlib.Path
        The file.

    Raises
    ------
    InputFileError
        If the file cannot be written.
    """
    terms = found.terms[:_TERMS]
    figure, axes = new_figure(12.0, max(4.2, 1.6 + 0.27 * len(terms)), 1, 3, width_ratios=[1, 1, 1.3])
    for axis, scores, title in (
        (axes[0], found.single, "one peak"),
        (axes[1], found.combined, "all peaks, multiplied"),
    ):
        _reliability(axis, scores, title)
    _reliability(axes[1], found.discounted, None)
    axes[1].legend(loc="upper left", fontsize=8, frameon=False)
    _skills(axes[2], found)
    facts = found.literature
    invented = "   INVENTED DATA" if facts.invented else ""
    figure.suptitle(
        "How far can this literature be trusted?  "
        + drawable(f"{facts.name}: {count(facts.n_studies)} {facts.study_is}{invented}"),
        fontsize=11,
        x=0.01,
        ha="left",
    )
    return write_figure(figure, path, title=f"Calibration of {facts.name}")


def _reliability(axis: Any, scores: Scores, title: str | None) -> None:
    """Draw a reliability curve; the second one of an axis is the discounted one, with hollow squares."""
    first = title is not None
    x = [one.forecast for one in scores.curve]
    y = [one.share.estimate for one in scores.curve]
    below = [one.share.estimate - one.share.low for one in scores.curve]
    above = [one.share.high - one.share.estimate for one in scores.curve]
    axis.errorbar(
        x,
        y,
        yerr=[below, above],
        color=ACCENT if first else INK,
        marker="o" if first else "s",
        mfc=ACCENT if first else "white",
        ms=5,
        lw=1.3,
        ls="-" if first else "--",
        label="multiplied" if first else "discounted",
    )
    if not first:
        return
    axis.plot([0, 1], [0, 1], color=MUTED, lw=1, ls=":")
    axis.set_xlim(0, 1)
    axis.set_ylim(0, 1)
    axis.set_aspect("equal")
    axis.set_xlabel("posterior", fontsize=9)
    axis.set_ylabel("came true", fontsize=9)
    axis.set_title(title, fontsize=10, loc="left")


def _skills(axis: Any, found: Calibration) -> None:
    """Draw the Brier skill of each process: one peak, all peaks, discounted."""
    terms = found.terms[:_TERMS]
    heights = range(len(terms))
    lowest = -1.0
    for name, marker, colour, fill, values in (
        ("one peak", "o", ACCENT, ACCENT, [term.skill_single for term in terms]),
        ("multiplied", "x", MUTED, MUTED, [term.skill_all for term in terms]),
        ("discounted", "s", INK, "white", [term.skill_discounted for term in terms]),
    ):
        shown = [max(lowest, value) if value is not None else float("nan") for value in values]
        axis.plot(shown, heights, marker, color=colour, mfc=fill, ms=5.5, label=name, clip_on=False)
    axis.axvline(0, color=INK, lw=1)
    axis.set_xlim(lowest - 0.05, 0.6)
    axis.set_yticks(list(heights), [f"{drawable(term.term[:36])} ({term.n_studies})" for term in terms], fontsize=8.5)
    axis.set_ylim(len(terms) - 0.4, -0.6)
    axis.set_xlabel("Brier skill over the base rate (below −1 at the edge)", fontsize=9)
    axis.legend(fontsize=8, frameon=False, loc="upper center", bbox_to_anchor=(0.5, 1.1), ncols=3)
