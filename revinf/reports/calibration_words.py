"""How a calibration reads: the rows that the terminal and the Markdown share."""

from __future__ import annotations

from typing import TYPE_CHECKING

from revinf.reports.numbers import count

if TYPE_CHECKING:
    from revinf.calibration.summaries import Calibration, Scores

__all__ = ["area", "group_rows", "measured_words", "score_rows", "signed", "term_rows"]


def signed(value: float | None) -> str:
    """Write a skill with two decimals and a typographic minus.

    Examples
    --------
    >>> signed(-2.247), signed(0.031), signed(None), signed(-0.001)
    ('−2.25', '0.03', '', '0.00')
    """
    if value is None:
        return ""
    text = f"{value:.2f}"
    return ("0.00" if text == "-0.00" else text).replace("-", "−")


def area(value: float | None) -> str:
    """Write an area under the curve."""
    return "" if value is None else f"{value:.2f}"


def measured_words(found: Calibration) -> str:
    """Say how the figures were measured."""
    grouped = "" if found.n_groups == found.literature.n_studies else f", held out in {count(found.n_groups)} groups"
    solved = "" if found.ratio == "formula 2" else "; ratios of half counts, since there were too many tables"
    return (
        f"{found.n_folds} folds, {count(found.n_held_out)} studies held out in turn{grouped}, "
        f"{count(found.n_peaks)} peaks, spheres of {found.radius_mm:g} mm{solved}"
    )


def score_rows(found: Calibration) -> list[list[str]]:
    """Return one row a kind of answer: Brier score and its parts, skills, area."""
    kinds = (
        ("one peak", found.single),
        ("all peaks, multiplied", found.combined),
        (f"the same to the power {found.discount.exponent:.2f}", found.discounted),
    )
    return [[name, *_cells(scores)] for name, scores in kinds]


def _cells(scores: Scores) -> list[str]:
    """Return the cells of one row."""
    return [
        f"{scores.brier:.3f}",
        f"{scores.parts.reliability:.4f}",
        f"{scores.parts.resolution:.4f}",
        signed(scores.brier_skill),
        signed(scores.log_skill),
        area(scores.area),
    ]


def term_rows(found: Calibration) -> list[list[str]]:
    """Return one row a process."""
    return [
        [
            term.term,
            count(term.n_studies),
            area(term.area_single),
            area(term.area_all),
            signed(term.skill_single),
            signed(term.skill_all),
            signed(term.skill_discounted),
            "yes" if term.supported else "no",
        ]
        for term in found.terms
    ]


def group_rows(found: Calibration) -> list[list[str]]:
    """Return one row a part of the single-peak forecasts."""
    return [
        [group.name, count(group.n), area(group.area), signed(group.brier_skill)]
        for group in (*found.by_studies, *found.by_breadth)
    ]
