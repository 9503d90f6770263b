"""A calibration as Markdown."""

from __future__ import annotations

from typing import TYPE_CHECKING

from revinf.knowledge import VERSION
from revinf.reports.calibration_words import group_rows, measured_words, score_rows, term_rows
from revinf.reports.cells import markdown_cell
from revinf.reports.numbers import count, interval, probability
from revinf.reports.wording import NO_INDIVIDUALS

if TYPE_CHECKING:
    from revinf.calibration.summaries import Calibration, Scores

__all__ = ["calibration_markdown"]


def calibration_markdown(found: Calibration, *, command: str = "") -> str:
    """Return a calibration as Markdown; the same one gives the same text.

    Parameters
    ----------
    found : Calibration
        From `revinf.calibrate`.
    command : str, optional
        What reproduces it.

    Returns
    -------
    str
        Verdict first, then the tables.
    """
    facts = found.literature
    lines = [
        "# How far can this literature be trusted?",
        "",
        f"{markdown_cell(facts.name)}: {count(facts.n_studies)} studies (here: {markdown_cell(facts.study_is)}), "
        f"fingerprint `{facts.fingerprint}`. {measured_words(found)}.",
    ]
    if facts.invented:
        lines += ["", "**INVENTED DATA: these numbers say nothing about any brain.**"]
    lines += ["", "## In words", "", *(f"- {markdown_cell(sentence)}" for sentence in found.verdict), ""]
    lines += _table(
        "Posteriors of studies that were not counted, at the base rate",
        ["answer from", "Brier", "reliability", "resolution", "Brier skill", "log skill", "area"],
        score_rows(found),
    )
    d = found.discount
    lines += [
        "",
        f"Discount: (product of ratios) to the power {d.exponent:.3f} ({d.low:.3f} to {d.high:.3f}, leaving out each "
        "fold); each study is scored with the exponent of the other folds.",
        "",
    ]
    lines += _table(
        "By process",
        [
            "process",
            "studies",
            "area, one peak",
            "area, all",
            "skill, one peak",
            "skill, all",
            "discounted",
            "anywhere",
        ],
        term_rows(found),
    )
    lines += ["", *_table("One peak", ["by", "forecasts", "area", "Brier skill"], group_rows(found)), ""]
    for name, scores in (
        ("one peak", found.single),
        ("all peaks, multiplied", found.combined),
        ("discounted", found.discounted),
    ):
        lines += [*_curve(name, scores), ""]
    lines += [
        "Brier 1950, Mon Weather Rev 78:1-3; Murphy 1973, J Appl Meteorol 12:595-600. Skill: share of the score saved "
        "over the base rate alone. Peaks of one study are not independent, so the curves' intervals are too narrow.",
        "",
        NO_INDIVIDUALS,
    ]
    if command:
        lines += ["", f"Made by revinf {VERSION} with `{command.replace('`', '')}`."]
    return "\n".join(lines) + "\n"


def _table(title: str, header: list[str], rows: list[list[str]]) -> list[str]:
    """Return a table with its title."""
    body = [f"| {' | '.join([markdown_cell(row[0]), *row[1:]])} |" for row in rows]
    return [f"## {title}", "", f"| {' | '.join(header)} |", "|" + "---|" * len(header), *body]


def _curve(name: str, scores: Scores) -> list[str]:
    """Return a reliability curve."""
    rows = [
        [probability(one.forecast), interval(one.share), f"{one.observed:.3f}", count(one.n)] for one in scores.curve
    ]
    return _table(f"Reliability: {name}", ["forecast", "came true", "observed", "forecasts"], rows)
