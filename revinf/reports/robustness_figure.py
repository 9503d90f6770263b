"""The picture of a check: over which choices does the grade hold?"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

from revinf.reports.drawn_text import drawable
from revinf.reports.figures import ACCENT, MUTED, new_figure, ratio_axis, write_figure
from revinf.reports.numbers import coordinates, count, interval, percent, ratio

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment

__all__ = ["write_robustness_figure"]

_GROUPS = ("radius", "space", "peak", "prior of the ratio", "kin")


def write_robustness_figure(assessment: Assessment, path: str | Path) -> Path:
    """Draw the likelihood ratio under every other choice, one row each.

    Parameters
    ----------
    assessment : Assessment
        From `revinf.assess`.
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
    rows = _rows(assessment)
    figure, axis = new_figure(8.0, 1.9 + 0.24 * len(rows))
    base = assessment.likelihood_ratio.value
    axis.axvspan(base.low, base.high, color=ACCENT, alpha=0.10, lw=0)
    labels, heights = [], []
    height = 0.0
    group = None
    for name, setting, value, holds in rows:
        if group is not None and name != group:
            height += 0.6
        group = name
        labels.append(drawable(f"{name}: {setting}" if setting else name))
        heights.append(height)
        _draw_row(axis, height, value, holds)
        height += 1
    axis.set_yticks(heights, labels, fontsize=8.5)
    axis.set_ylim(max(heights) + 0.8, -0.8)
    low = min(0.2, *(value.low for _, _, value, _ in rows)) * 0.8
    high = max(5.0, *(value.high for _, _, value, _ in rows)) * 1.25
    axis.set_xlim(max(low, 1e-3), min(high, 1e4))
    ratio_axis(axis)
    axis.set_xlabel(
        f"likelihood ratio ({percent(assessment.level)} interval); left of 1 speaks against, right of 1 for\n"
        "● direction and grade as asked   ○ changed   band: interval as asked",
        fontsize=9,
    )
    claim, facts = assessment.claim, assessment.literature
    where = " and ".join(coordinates(peak) for peak in claim.peaks)
    where = f"{where} mm {claim.space}" if where else drawable(assessment.place.words)
    if claim.absent:
        where = f"no activity at {where}"
    invented = "   INVENTED DATA" if facts.invented else ""
    figure.suptitle(
        f"Does the answer hold?  {drawable(claim.term)}, {where}\n"
        + drawable(
            f"{facts.name}: {count(facts.n_studies)} {facts.study_is}; as asked {interval(base, ratio)}{invented}"
        ),
        fontsize=10,
        x=0.01,
        ha="left",
    )
    return write_figure(figure, path, title=f"Robustness of the answer for {claim.term}")


def _rows(assessment: Assessment) -> list[tuple[str, str, Any, bool]]:
    """Return group, setting, ratio and whether the answer holds; the answer as asked comes first."""
    rows: list[tuple[str, str, Any, bool]] = [("as asked", "", assessment.likelihood_ratio.value, True)]
    for name in _GROUPS:
        rows += [
            (name, row.setting, row.ratio, row.holds) for row in assessment.robustness.of(name) if row.ratio is not None
        ]
    left_out = assessment.robustness.left_out
    if left_out is not None and left_out.ratio is not None:
        same = left_out.direction == assessment.likelihood_ratio.direction
        rows.append(("left out", left_out.name, left_out.ratio, same))
    return rows


def _draw_row(axis: Any, height: float, value: Any, holds: bool) -> None:
    """Draw one interval; a hollow dot marks an answer that changed."""
    colour = ACCENT if holds else MUTED
    axis.plot([value.low, value.high], [height, height], color=colour, lw=1.6, solid_capstyle="butt")
    axis.plot(
        [value.estimate],
        [height],
        marker="o",
        ms=5.5,
        mec=colour,
        mfc=colour if holds else "white",
        mew=1.4,
        ls="none",
    )
