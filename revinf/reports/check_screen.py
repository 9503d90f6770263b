"""The terminal screen of one assessment, written for a reviewer who has never seen revinf."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from revinf.evidence.grading import grade_words
from revinf.reports.facts import required_facts
from revinf.reports.numbers import (
    HasInterval,
    coordinates,
    count,
    interval,
    p_value,
    percent,
    probability,
    ratio,
    strip,
)
from revinf.reports.rivals_screen import rivals_screen
from revinf.reports.terminal import hanging, heading, plain_table
from revinf.reports.wording import LIMITS, NO_INDIVIDUALS, active_words, claim_words, grade_line

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.parts import Posterior

__all__ = ["check_screen"]

_STRIP = 25
_NARROW = 90
"""Columns below which a drawn interval would squeeze the words beside it."""

_DECADES = 2.0
"""The ratio's strip runs from 1/100 to 100."""

_MARKS = {"stop": ("■", "bold red"), "weigh": ("▲", "yellow"), "note": ("·", "cyan")}
"""Shape and colour: the shape alone tells the severities apart in greyscale."""


def check_screen(assessment: Assessment, *, width: int = 104) -> list[Any]:
    """Return the screen of an assessment.

    Parameters
    ----------
    assessment : Assessment
        From `revinf.assess`.
    width : int, columns, default 104
        Of the terminal; a narrow one gets no drawn intervals.

    Returns
    -------
    list
        Renderables for `revinf.reports.terminal.show`.
    """
    drawn = width >= _NARROW
    return [
        *_opening(assessment),
        *_counts(assessment, drawn),
        *_ratio(assessment, drawn),
        *_posteriors(assessment, drawn),
        *rivals_screen(assessment, width=width),
        *_cautions(assessment),
        *_closing(),
    ]


def _opening(assessment: Assessment) -> list[Any]:
    """Return claim, place and source."""
    claim, place, facts = assessment.claim, assessment.place, assessment.literature
    rows = [("Claim", claim_words(claim.term, _where(assessment)))]
    if place.hemisphere is not None or len(claim.peaks) > 1:
        rows.append(("Place", place.words))
    if place.table_region is not None:
        table = place.table_region
        rows.append(
            (
                "Answered by",
                f"the table's place {table.region!r} at {coordinates(table.centre)}, "
                f"{table.distance_mm:.1f} mm from the peak, sphere of {claim.radius_mm:g} mm",
            )
        )
    studies = count(facts.n_studies) + " studies"
    if facts.study_is != "studies":
        studies += f" (here: {facts.study_is})"
    peaks = f", {count(facts.n_peaks)} peaks" if facts.n_peaks is not None else ""
    rows.append(("Counted in", f"{facts.name}: {studies}{peaks}, {count(facts.n_terms)} terms"))
    if facts.left_out:
        rows.append(("", f"without {count(facts.left_out)} that were to be left out, with their groups"))
    if facts.invented:
        rows.append(("", "INVENTED DATA: these numbers say nothing about any brain"))
    return [hanging(rows)]


def _where(assessment: Assessment) -> str:
    """Say where the activity was."""
    claim = assessment.claim
    what = _what(assessment)
    if claim.region_kind == "mask":
        return f"{what} in a mask"
    if not claim.peaks:
        return f"{what} in {assessment.place.words}"
    points = " and ".join(coordinates(peak) for peak in claim.peaks)
    where = f"{what} at {points} {claim.space}"
    return where if claim.region_kind == "table" else f"{where}, within {claim.radius_mm:g} mm"


def _what(assessment: Assessment) -> str:
    """Say what the claim rests on."""
    return "no activity" if assessment.claim.absent else "activity"


def _counts(assessment: Assessment, drawn: bool) -> list[Any]:
    """Return the four counts and both rates."""
    counts, rates = assessment.counts, assessment.rates
    rows = [
        _rate_row(
            f"with {assessment.claim.term!r}",
            counts.term_active,
            counts.term_total,
            rates.active_given_term,
        ),
        _rate_row("all others", counts.other_active, counts.other_total, rates.active_given_other),
    ]
    header = [
        "studies",
        active_words(assessment.claim.absent),
        f"rate ({percent(assessment.level)} interval)",
        _axis("0", "1"),
    ]
    return [
        heading(f"How often is this place {active_words(assessment.claim.absent).removesuffix(' here')}?"),
        _table(header, rows, drawn, right=(1,)),
    ]


def _table(header: list[str], rows: list[list[str]], drawn: bool, *, right: tuple[int, ...] = ()) -> Any:
    """Return a table whose last column is a drawn interval, or without it."""
    if not drawn:
        header, rows = header[:-1], [row[:-1] for row in rows]
    return plain_table(header, rows, right=right)


def _rate_row(name: str, active: int, total: int, rate: HasInterval | None) -> list[str]:
    """Return one row of counts and rate."""
    if rate is None:
        return [name, f"{count(active)} of {count(total)}", "", ""]
    return [
        name,
        f"{count(active)} of {count(total)}",
        interval(rate),
        strip(rate.low, rate.estimate, rate.high, _STRIP),
    ]


def _axis(left: str, right: str, middle: str = "") -> str:
    """Return the ends of a strip's scale, spread over its width."""
    gap = _STRIP - len(left) - len(right) - len(middle)
    return left + " " * (gap // 2) + middle + " " * (gap - gap // 2) + right


def _ratio(assessment: Assessment, drawn: bool) -> list[Any]:
    """Return the likelihood ratio with direction and grades."""
    answer = assessment.likelihood_ratio
    value = answer.value
    low, middle, high = (_on_log_axis(x) for x in (value.low, value.estimate, value.high))
    observed = "undefined" if answer.observed is None else ratio(answer.observed)
    rows = [
        [
            "likelihood ratio",
            interval(value, ratio),
            f"observed {observed}",
            strip(low, middle, high, _STRIP, mark=0.5),
        ]
    ]
    header = ["", f"estimate ({percent(assessment.level)} interval)", "", _axis("1/100", "100", "1")]
    line = grade_line(answer.direction, answer.headline_grade, answer.estimate_grade)
    if answer.headline_grade is not None:
        line += f' (the published scale calls that "{grade_words(answer.headline_grade)}")'
    tests = []
    if assessment.association.fisher_p is not None and assessment.association.q is not None:
        tests.append(
            (
                "association",
                f"Fisher's exact p {p_value(assessment.association.fisher_p)}, false-discovery q "
                f"{p_value(assessment.association.q)} over the processes; a small p only says that the ratio "
                "is not 1",
            )
        )
    return [
        heading(f"How much does {_what(assessment)} here tell?"),
        _table(header, rows, drawn),
        hanging([("reading", line), *tests]),
    ]


def _on_log_axis(value: float) -> float:
    """Return the position of a ratio on the strip from 1/100 to 100."""
    return (math.log10(value) + _DECADES) / (2 * _DECADES)


def _posteriors(assessment: Assessment, drawn: bool) -> list[Any]:
    """Return the posteriors and the priors one must have held."""
    counts, given = assessment.counts, "no" if assessment.claim.absent else "the"
    asked, prevalent = assessment.posterior, assessment.posterior_at_prevalence
    rows = []
    if asked.prior != prevalent.prior:
        name = "even odds" if asked.prior == 0.5 else "as asked"
        rows.append(_posterior_row(name, asked))
    rows.append(_posterior_row("share of the studies", prevalent))
    header = ["at a prior of", f"posterior ({percent(assessment.level)} interval)", _axis("0", "1")]
    lines = []
    if prevalent.observed is not None:
        lines.append(
            (
                "observed",
                f"of the studies {active_words(assessment.claim.absent)}, {count(counts.term_active)} of "
                f"{count(counts.active_total)} = {probability(prevalent.observed)} carry the term",
            )
        )
    lines += required_facts(assessment)
    return [
        heading(f"How probable is {assessment.claim.term!r}, given {given} activity?"),
        _table(header, rows, drawn),
        hanging([*lines, ("in words", assessment.wording)]),
    ]


def _posterior_row(name: str, posterior: Posterior) -> list[str]:
    """Return one row of prior and posterior."""
    value = posterior.value
    return [
        f"{probability(posterior.prior)} ({name})",
        interval(value),
        strip(value.low, value.estimate, value.high, _STRIP),
    ]


def _cautions(assessment: Assessment) -> list[Any]:
    """Return the cautions, most severe first."""
    from rich.table import Table
    from rich.text import Text

    if not assessment.cautions:
        return [heading("Cautions"), Text("none of those that can be judged from this source")]
    table = Table.grid(padding=(0, 2, 0, 0))
    table.add_column(no_wrap=True)
    table.add_column(no_wrap=True)
    table.add_column(overflow="fold")
    for caution in assessment.cautions:
        mark, style = _MARKS[caution.severity]
        table.add_row(Text(f"{mark} {caution.severity}", style=style), Text(caution.code), Text(caution.message))
    return [heading("Cautions"), table]


def _closing() -> list[Any]:
    """Return what no number takes into account."""
    from rich.text import Text

    return [Text("\n" + " ".join(LIMITS) + "\n" + NO_INDIVIDUALS, style="dim")]
