"""The second half of the check screen: rivals, breadth, other ways to count, and whether the answer holds."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.facts import breadth_facts, contrast_facts, range_words, rank_words, settings_words, shown_rivals
from revinf.reports.numbers import count, interval, probability, ratio
from revinf.reports.terminal import fitting, hanging, heading, plain_table
from revinf.reports.wording import active_words

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.selectivity import Rival

__all__ = ["rivals_screen"]


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
        hanging(breadth_facts(assessment)),
        *_contrasts(assessment),
        *_robustness(assessment, width),
    ]


def _rivals(assessment: Assessment, width: int) -> list[Any]:
    """Return the processes that lead here, with the claimed one among them."""
    chosen, counts = assessment.selectivity, assessment.counts
    shown = shown_rivals(assessment)
    rows = [_rival_row(rival) for rival in shown]
    shrunk = "" if chosen.shrunk_rate is None else probability(chosen.shrunk_rate)
    own = [
        f"► {assessment.claim.term}",
        f"{count(counts.term_active)} of {count(counts.term_total)}",
        shrunk,
        interval(assessment.likelihood_ratio.value, ratio),
        "",
    ]
    rows.insert(_place_of(assessment), own)
    notes = [("rank", rank_words(assessment))]
    if len(chosen.rivals) > len(shown):
        notes.append(("", f"{len(chosen.rivals) - len(shown)} more with --json"))
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
    own, rows = assessment.selectivity.shrunk_rate, shown_rivals(assessment)
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


def _contrasts(assessment: Assessment) -> list[Any]:
    """Return the claim counted in other ways."""
    rows = contrast_facts(assessment)
    return [heading("Counted otherwise"), hanging(rows)] if rows else []


def _robustness(assessment: Assessment, width: int) -> list[Any]:
    """Return over which choices direction and grade hold."""
    robust = assessment.robustness
    rows = []
    for choice, holds in robust.holds().items():
        members = robust.of(choice)
        kept = sum(row.holds for row in members)
        rows.append(
            [
                choice,
                "holds" if holds else f"at {kept} of {len(members)}",
                settings_words(members),
                range_words(members),
            ]
        )
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
