"""What `revinf calibrate` says in the terminal."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.calibration_words import group_rows, measured_words, score_rows, term_rows
from revinf.reports.cells import one_line
from revinf.reports.numbers import count
from revinf.reports.terminal import fitting, hanging, heading, plain_table

if TYPE_CHECKING:
    from revinf.calibration.summaries import Calibration

__all__ = ["calibration_screen"]

_TERMS = 20


def calibration_screen(found: Calibration, written: list[str], *, width: int = 104) -> list[Any]:
    """Return the screen of a calibration.

    Parameters
    ----------
    found : Calibration
        From `revinf.calibrate`.
    written : list of str
        Files that were written.
    width : int, columns
        Of the terminal.

    Returns
    -------
    list
        Renderables.
    """
    facts = found.literature
    rows = [
        ("Measured", f"{one_line(facts.name)}: {count(facts.n_studies)} studies (here: {facts.study_is})"),
        ("How", measured_words(found)),
    ]
    if facts.invented:
        rows.append(("", "INVENTED DATA: these numbers say nothing about any brain"))
    if written:
        rows.append(("Written", ", ".join(written)))
    scores = ["answer from", "Brier", "reliability", "resolution", "Brier skill", "log skill", "area"]
    terms = ["process", "studies", "area 1", "area all", "skill 1", "skill all", "discounted", "anywhere"]
    listed = [[one_line(row[0]), *row[1:]] for row in term_rows(found)[:_TERMS]]
    parts: list[Any] = [
        hanging(rows),
        heading("In words"),
        hanging([("", sentence) for sentence in found.verdict], label_width=0),
        heading("How good were the posteriors of studies that were not counted?"),
        plain_table(*fitting(scores, score_rows(found), width, drop=(2, 3, 5)), right=(1, 2, 3, 4, 5, 6)),
        heading("By process (1: one peak; all: all peaks multiplied; anywhere: does any place speak for it?)"),
        plain_table(*fitting(terms, listed, width, drop=(2, 4, 7)), right=(1, 2, 3, 4, 5, 6)),
    ]
    if len(found.terms) > _TERMS:
        parts.append(hanging([("", f"{len(found.terms) - _TERMS} more in the report")]))
    groups = ["one peak, by", "forecasts", "area", "Brier skill"]
    parts += [heading("Where is it better?"), plain_table(groups, group_rows(found), right=(1, 2, 3))]
    reading = (
        "skill is the share of the score saved over the base rate alone: 0 is no better, below 0 worse. area is the "
        "probability that a study with the process gets the higher posterior. Peaks of one study are not independent, "
        "so intervals of the reliability curve are too narrow."
    )
    return [*parts, hanging([("", "")]), hanging([("reading", reading)])]
