"""Direction and grade of a likelihood ratio (formula 5)."""

from __future__ import annotations

from functools import cache
from typing import Literal

from revinf.knowledge import read_table
from revinf.stats.estimates import Estimate

__all__ = ["Direction", "direction_of", "grade_of", "grade_words", "headline_grade"]

Direction = Literal["for", "against", "undecided"]


def direction_of(ratio: Estimate) -> Direction:
    """Return which way the evidence points: decided only where the interval leaves 1 out.

    Parameters
    ----------
    ratio : Estimate
        Likelihood ratio.

    Returns
    -------
    {"for", "against", "undecided"}
        Direction.

    Examples
    --------
    >>> direction_of(Estimate(4.98, 2.60, 9.37)), direction_of(Estimate(1.2, 0.7, 2.0))
    ('for', 'undecided')
    """
    if ratio.low > 1:
        return "for"
    return "against" if ratio.high < 1 else "undecided"


def grade_of(ratio: float) -> str:
    """Return the grade of a ratio, or of its inverse when it is below 1.

    Parameters
    ----------
    ratio : float, > 0
        Likelihood ratio.

    Returns
    -------
    str
        Name of the grade.

    References
    ----------
    Kass & Raftery 1995, J Am Stat Assoc 90:773-795; the bounds stand in data_tables/evidence_grades.csv.

    Examples
    --------
    >>> grade_of(2.9), grade_of(3), grade_of(1 / 20), grade_of(200)
    ('bare', 'positive', 'strong', 'very strong')
    """
    # 1/(1/20) may fall a rounding error short of 20.
    strength = max(ratio, 1 / ratio) * (1 + 1e-12)
    return [name for name, lower, _ in _grades() if lower <= strength][-1]


def headline_grade(ratio: Estimate) -> str | None:
    """Return the grade of the end of the interval that is nearest 1; None where it includes 1.

    Parameters
    ----------
    ratio : Estimate
        Likelihood ratio.

    Returns
    -------
    str or None
        The weakest grade that the interval allows.

    Examples
    --------
    >>> headline_grade(Estimate(4.98, 2.60, 9.37)), headline_grade(Estimate(1.2, 0.7, 2.0))
    ('bare', None)
    """
    direction = direction_of(ratio)
    if direction == "undecided":
        return None
    return grade_of(ratio.low if direction == "for" else ratio.high)


def grade_words(grade: str) -> str:
    """Return how a sentence says a grade.

    Parameters
    ----------
    grade : str
        Name of the grade.

    Returns
    -------
    str
        Words of the published scale.

    Examples
    --------
    >>> grade_words("bare")
    'not worth more than a bare mention'
    """
    return {name: words for name, _, words in _grades()}[grade]


@cache
def _grades() -> tuple[tuple[str, float, str], ...]:
    """Return name, lower bound and words of each grade, weakest first."""
    return tuple((row["grade"], float(row["lower"]), row["wording"]) for row in read_table("evidence_grades"))
