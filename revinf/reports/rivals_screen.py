"""The second half of the check screen: rivals, breadth, other ways to count, and whether the answer holds."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.numbers import coordinates, count, interval, place_share, probability, ratio
from revinf.reports.terminal import fitting, hanging, heading, plain_table
from revinf.reports.wording import active_words

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.robustness import RobustnessRow
    from revinf.evidence.selectivity import Rival

__all__ = ["rivals_screen"]

_ROWS = 6
"""Rivals on the screen; the rest stand in the JSON."""


def rivals_screen(assessment: Assessment, *, width: int = 104) -> list[Any]:
    """Return what else the activity could mean, and over which choices the answer holds.

    Parameters
    ----------
    assessment : Assessment
        From `revinf.assess`.
    width : int, columns, default 104
        Of the terminal; a narrow one leaves the columns that do not fit to the JSON.

    Returns
    -------
    list
        Renderables.
    """
    return [
        *_rivals(assessment, width),
        *_breadth(assessment),
        *_contrasts(assessment),
        *_robustness(assessment, width),
    ]


def _rivals(assessment: Assessment, width: int) -> list[Any]:
    """Return the processes that lead here, with the claimed one among them."""
    chosen, counts = assessment.selectivity, assessment.counts
    rows = [_rival_row(rival) for rival in chosen.rivals[:_ROWS]]
    shrunk = "" if chosen.shrunk_rate is None else probability(chosen.shrunk_rate)
    own = [
        f"► {assessment.claim.term}",
        f"{count(counts.term_active)} of {count(counts.term_total)}",
        shrunk,
        interval(assessment.likelihood_ratio.value, ratio),
        "",
    ]
    rows.insert(_place_of(assessment), own)
    notes = [("rank", _rank_words(assessment))]
    if len(chosen.rivals) > _ROWS:
        notes.append(("", f"{len(chosen.rivals) - _ROWS} more with --json"))
    if chosen.kin:
        notes.append(("kin", ", ".join(rival.term for rival in chosen.kin) + " (largely the same studies)"))
    header = ["process", active_words(assessment.claim.absent), "shrunk rate", "likelihood ratio", "P(claim leads)"]
    duels = any(rival.probability_ahead is not None for rival in chosen.rivals)
    header, rows = fitting(header, rows, width, (2, 3) if duels else (4, 2))
    return [
        heading("What else could it mean?"),
        plain_table(header, rows, right=tuple(at for at in (1, 2) if header[at:] and "ratio" not in header[at])),
        hanging(notes),
    ]


def _place_of(assessment: Assessment) -> int:
    """Return where the claimed term stands among the rows shown."""
    own, rows = assessment.selectivity.shrunk_rate, assessment.selectivity.rivals[:_ROWS]
    return sum(own is not None and rival.shrunk_rate > own for rival in rows)


def _rival_row(rival: Rival) -> list[str]:
    """Return one row."""
    name = rival.term if rival.kind == "process" else f"{rival.term} (kind unknown)"
    return [
        f"  {name}",
        f"{count(rival.counts.term_active)} of {count(rival.counts.term_total)}",
        probability(rival.shrunk_rate),
        "" if rival.likelihood_ratio is None else interval(rival.likelihood_ratio, ratio),
        "" if rival.probability_ahead is None else probability(rival.probability_ahead),
    ]


def _rank_words(assessment: Assessment) -> str:
    """Say the rank of the claimed term."""
    chosen = assessment.selectivity
    if chosen.rank is None:
        return "the claimed term is no process and is not ranked"
    kin = "kin left out" if assessment.literature.kind == "literature" else "kin cannot be told from a table"
    words = f"{chosen.rank} of {chosen.n_process_terms} processes, {kin}"
    if not chosen.rank_informative:
        words += "; the processes cannot be told apart here, so the rank says nothing"
    return words


def _breadth(assessment: Assessment) -> list[Any]:
    """Return how busy and how many-sided the place is."""
    breadth, total = assessment.breadth, assessment.counts
    absent = assessment.claim.absent
    words = f"{count(total.active_total)} of {count(total.total)} studies are {active_words(absent)}"
    if breadth.activation_percentile is not None:
        words += f", more than at {place_share(breadth.activation_percentile)} of the places compared"
    if absent:  # how many processes share a silence says nothing about the place
        return [hanging([("silent", words)])]
    rows = [("busy", words)]
    mixed = []
    if breadth.effective_processes is not None:
        mixed.append(f"{interval(breadth.effective_processes, ratio)} of {breadth.n_processes} processes")
    if breadth.effective_domains is not None:
        mixed.append(f"{interval(breadth.effective_domains, ratio)} of {breadth.n_domains} domains")
    if mixed:
        rows.append(("mixed", "as if used equally by " + " and by ".join(mixed)))
    elif total.active_total:
        rows.append(("mixed", "too few hits to tell how many processes share the place"))
    if breadth.n_processes_above_own_rate is not None:
        rows.append(
            (
                "above",
                f"{breadth.n_processes_above_own_rate} of {breadth.n_processes} processes are credibly above "
                "their own brain-wide rate",
            )
        )
    return [hanging(rows)]


def _contrasts(assessment: Assessment) -> list[Any]:
    """Return the claim counted in other ways."""
    rows = []
    volume, context = assessment.reporting_volume, assessment.context
    if volume is not None and volume.adjusted_ratio is not None:
        rows.append(
            ("volume", f"{interval(volume.adjusted_ratio, ratio)} among studies alike in their number of peaks")
        )
    if context is not None:
        counts = context.counts
        value = "no ratio" if context.ratio is None else interval(context.ratio, ratio)
        rows.append(
            (
                "context",
                f"{value} within {', '.join(assessment.claim.context)}: {count(counts.term_active)} of "
                f"{count(counts.term_total)} against {count(counts.other_active)} of {count(counts.other_total)}",
            )
        )
    mirror, pattern = assessment.mirror, assessment.pattern
    if mirror is not None and mirror.ratio is not None:
        rows.append(("mirror", f"{interval(mirror.ratio, ratio)} at the same place of the other hemisphere"))
    if pattern is not None:
        rows += [
            (
                "alone",
                f"{'no ratio' if place.ratio is None else interval(place.ratio, ratio)} at {coordinates(place.peak)}",
            )
            for place in pattern.regions
        ]
        overstated = "" if pattern.overstatement is None else f", {pattern.overstatement:.1f} times the joint one"
        rows.append(("multiplied", f"{ratio(pattern.product)} if the places were independent{overstated}"))
    return [heading("Counted otherwise"), hanging(rows)] if rows else []


def _robustness(assessment: Assessment, width: int) -> list[Any]:
    """Return over which choices direction and grade hold."""
    robust = assessment.robustness
    rows = []
    for choice, holds in robust.holds().items():
        members = robust.of(choice)
        kept = sum(row.holds for row in members)
        rows.append([choice, "holds" if holds else f"at {kept} of {len(members)}", _settings(members), _range(members)])
    influence = robust.left_out
    if influence is not None and influence.ratio is not None:
        verdict = "changes" if robust.direction_changes_without_one else "holds"
        rows.append(
            [
                "one left out",
                verdict,
                f"most without {influence.name}",
                interval(influence.ratio, ratio),
            ]
        )
    header, rows = fitting(["choice", "direction and grade", "settings", "likelihood ratio"], rows, width, (2,))
    if len(header) < 4:
        header[1] = "answer"
    return [heading("Does the answer hold?"), plain_table(header, rows)]


def _settings(rows: list[RobustnessRow]) -> str:
    """Say what was tried."""
    if len(rows) == 1:
        return rows[0].setting
    if rows[0].choice == "peak":
        return f"{len(rows)} shifts of 2 and 4 mm"
    if rows[0].choice == "prior of the ratio":
        return f"{len(rows)} priors"
    return f"{rows[0].setting} to {rows[-1].setting}"


def _range(rows: list[RobustnessRow]) -> str:
    """Return the lowest and highest estimate."""
    if rows[0].choice == "prior":
        posteriors = [row.posterior.estimate for row in rows if row.posterior is not None]
        return f"posterior {probability(min(posteriors))} to {probability(max(posteriors))}" if posteriors else ""
    values = [row.ratio.estimate for row in rows if row.ratio is not None]
    if not values:
        return ""
    low, high = ratio(min(values)), ratio(max(values))
    return low if low == high else f"{low} to {high}"
