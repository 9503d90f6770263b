"""The sentences that every view shares."""

from __future__ import annotations

from collections.abc import Sequence

__all__ = ["LIMITS", "NO_INDIVIDUALS", "active_words", "agreement", "claim_words", "grade_line"]

LIMITS = (
    "Labels may follow the activation: authors can name the process because of the place.",
    "Peaks say nothing about what was not searched or not reported.",
    "The uncertainty of the prior is not in the interval.",
)
"""What no number on the screen takes into account."""

NO_INDIVIDUALS = (
    "These are group-level statements about a literature, never about a person. They must not be used for "
    "clinical, forensic, hiring or lie-detection decisions; those belong to licensed practice and local "
    "rules."
)


def claim_words(term: str, where: str) -> str:
    """Say what is claimed.

    Examples
    --------
    >>> claim_words("fear", "activity at (20, -4, -18)")
    "activity at (20, -4, -18) is taken as a sign of 'fear'"
    """
    return f"{where} is taken as a sign of {term!r}"


def active_words(absent: bool) -> str:
    """Say which studies were counted at the place: those that hit it, or, for an absence, the others.

    Examples
    --------
    >>> active_words(False), active_words(True)
    ('active here', 'not active here')
    """
    return "not active here" if absent else "active here"


def grade_line(direction: str, headline: str | None, estimate: str) -> str:
    """Say direction and grades in one line.

    Examples
    --------
    >>> grade_line("for", "bare", "positive")
    'speaks for the claim; grade at least bare, by the estimate positive'
    >>> grade_line("undecided", None, "bare")
    'undecided: the interval includes 1; by the estimate alone bare'
    """
    if direction == "undecided":
        return f"undecided: the interval includes 1; by the estimate alone {estimate}"
    return f"speaks {direction} the claim; grade at least {headline}, by the estimate {estimate}"


def agreement(number: int, singular: str, plural: str | None = None) -> str:
    """Write a number with its noun.

    Examples
    --------
    >>> agreement(1, "row"), agreement(1200, "row"), agreement(2, "study", "studies")
    ('1 row', '1,200 rows', '2 studies')
    """
    return f"{number:,} {singular if number == 1 else plural or singular + 's'}"


def first_lines(lines: Sequence[int]) -> str:
    """Say where something stands.

    Examples
    --------
    >>> first_lines([7]), first_lines([7, 9]), first_lines([])
    (' (line 7)', ' (first lines 7, 9)', '')
    """
    if not lines:
        return ""
    if len(lines) == 1:
        return f" (line {lines[0]})"
    return f" (first lines {', '.join(str(line) for line in lines)})"
