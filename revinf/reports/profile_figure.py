"""The picture of a place: how often is each process active here, and how much would it tell?"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

from revinf.reports.drawn_text import drawable
from revinf.reports.figures import ACCENT, INK, MUTED, new_figure, ratio_axis, write_figure
from revinf.reports.numbers import coordinates, count, percent

if TYPE_CHECKING:
    from revinf.evidence.profile import ProcessRow, Profile

__all__ = ["write_profile_figure"]

_ROWS = 25


def write_profile_figure(profile: Profile, path: str | Path) -> Path:
    """Draw rate and likelihood ratio of every process, highest shrunk rate first.

    Parameters
    ----------
    profile : Profile
        From `revinf.profile`.
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
    rows = profile.rows[:_ROWS]
    figure, (rates, ratios) = new_figure(9.0, 2.0 + 0.27 * len(rows), 1, 2)
    for height, row in enumerate(rows):
        rates.plot([row.rate.low, row.rate.high], [height, height], color=ACCENT, lw=1.6)
        rates.plot([row.rate.estimate], [height], "o", color=ACCENT, ms=5)
        rates.plot([row.shrunk_rate], [height], "|", color=INK, ms=10, mew=1.6)
        _draw_ratio(ratios, height, row)
    labels = [f"{drawable(row.term)}  {count(row.counts.term_active)}/{count(row.counts.term_total)}" for row in rows]
    rates.set_yticks(range(len(rows)), labels, fontsize=8.5)
    rates.set_xlabel(f"P(active here | process), {percent(profile.level)} interval\n● rate   | shrunk rate", fontsize=9)
    rates.set_xlim(0, max([0.05, *(row.rate.high for row in rows)]) * 1.05)
    ratios.set_yticks(range(len(rows)), [])
    ratio_axis(ratios)
    ratios.set_xlabel("likelihood ratio\n● decided   ○ includes 1", fontsize=9)
    for axis in (rates, ratios):
        axis.set_ylim(len(rows) - 0.4, -0.6)
    facts = profile.literature
    points = " and ".join(coordinates(peak) for peak in profile.peaks)
    where = f"{points} mm MNI152, within {profile.radius_mm:g} mm" if points else drawable(profile.place.words)
    invented = "   INVENTED DATA" if facts.invented else ""
    figure.suptitle(
        f"{where}: {count(profile.hits)} of {count(facts.n_studies)} {drawable(facts.study_is)} active\n"
        f"{drawable(facts.name)}{invented}",
        fontsize=10,
        x=0.01,
        ha="left",
    )
    return write_figure(figure, path, title=f"Profile of {where}")


def _draw_ratio(axis: Any, height: int, row: ProcessRow) -> None:
    """Draw the interval of one ratio; a hollow dot marks one that includes 1."""
    value = row.likelihood_ratio
    if value is None:
        return
    decided = not value.low <= 1 <= value.high
    colour = ACCENT if decided else MUTED
    axis.plot([value.low, value.high], [height, height], color=colour, lw=1.6)
    axis.plot([value.estimate], [height], "o", ms=5, mec=colour, mfc=colour if decided else "white", mew=1.4)
