"""The terminal screen of `revinf profile`."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.numbers import coordinates, count, interval, p_value, percent, place_share, probability, ratio
from revinf.reports.terminal import fitting, hanging, heading, plain_table
from revinf.reports.wording import LIMITS, NO_INDIVIDUALS

if TYPE_CHECKING:
    from revinf.evidence.profile import Profile

__all__ = ["profile_screen"]

_ROWS = 20
_NARROW = 90


def profile_screen(profile: Profile, *, width: int = 104) -> list[Any]:
    """Return the screen of a profile.

    Parameters
    ----------
    profile : Profile
        From `revinf.profile`.
    width : int, columns, default 104
        Of the terminal; a narrow one leaves the intervals of the rates to the JSON.

    Returns
    -------
    list
        Renderables.
    """
    from rich.text import Text

    facts, breadth = profile.literature, profile.breadth
    studies = count(facts.n_studies) + " studies"
    if facts.study_is != "studies":
        studies += f" (here: {facts.study_is})"
    opening = [
        ("Place", _where(profile)),
        ("Counted in", f"{facts.name}: {studies}, {count(facts.n_terms)} terms"),
        ("Active", f"{count(profile.hits)} studies are active here"),
    ]
    if facts.invented:
        opening.append(("", "INVENTED DATA: these numbers say nothing about any brain"))
    if breadth.activation_percentile is not None:
        opening.append(("Busy", f"more than {place_share(breadth.activation_percentile)} of the places compared"))
    if breadth.effective_processes is not None:
        opening.append(
            (
                "Mixed",
                f"as if used equally by {interval(breadth.effective_processes, ratio)} of {breadth.n_processes} "
                "processes",
            )
        )
    if not profile.rank_informative:
        opening.append(("Order", "the processes cannot be told apart here; the order says nothing"))
    parts: list[Any] = [hanging(opening), heading("Processes"), _processes(profile, width)]
    if len(profile.rows) > _ROWS:
        parts.append(hanging([("", f"{len(profile.rows) - _ROWS} more with --json")]))
    if profile.domains:
        rows = [
            [row.domain, f"{count(row.active)} of {count(row.total)}", interval(row.rate)] for row in profile.domains
        ]
        parts += [
            heading("Domains"),
            plain_table(["domain", "active here", f"rate ({percent(profile.level)} interval)"], rows, right=(1,)),
        ]
    return [*parts, Text("\n" + " ".join(LIMITS[:2]) + "\n" + NO_INDIVIDUALS, style="dim")]


def _where(profile: Profile) -> str:
    """Say where the place is."""
    points = " and ".join(coordinates(peak) for peak in profile.peaks)
    if not points:
        return profile.place.words
    table = profile.place.table_region
    answered = ""
    if table is not None:
        answered = f"; answered by the table's {table.region!r}, {table.distance_mm:.1f} mm away"
    return f"{points}, within {profile.radius_mm:g} mm: {profile.place.words}{answered}"


def _processes(profile: Profile, width: int) -> Any:
    """Return the processes, highest shrunk rate first."""
    wide = width >= _NARROW
    rows = []
    for row in profile.rows[:_ROWS]:
        rows.append(
            [
                row.term if row.kind == "process" else f"{row.term} (kind unknown)",
                f"{count(row.counts.term_active)} of {count(row.counts.term_total)}",
                interval(row.rate) if wide else probability(row.rate.estimate),
                probability(row.shrunk_rate),
                "" if row.likelihood_ratio is None else interval(row.likelihood_ratio, ratio),
                "" if row.q is None else p_value(row.q),
            ]
        )
    header = ["process", "active here", "rate (interval)" if wide else "rate", "shrunk", "likelihood ratio", "q"]
    header, rows = fitting(header, rows, width, (5, 3, 2))
    right = tuple(at for at, name in enumerate(header) if name in ("active here", "shrunk", "q"))
    return plain_table(header, rows, right=right)
