"""The strongest sentence that direction and headline grade allow; no numbers, so no formats."""

from __future__ import annotations

from collections.abc import Sequence

from revinf.evidence.grading import Direction, grade_words

__all__ = ["verdict"]


def verdict(
    term: str,
    direction: Direction,
    headline_grade: str | None,
    severities: Sequence[str] = (),
    *,
    absent: bool = False,
) -> str:
    """Say in one sentence what the base rates carry.

    Parameters
    ----------
    term : str
        The claimed process.
    direction : {"for", "against", "undecided"}
        Of the likelihood ratio.
    headline_grade : str or None
        Grade of the end of the interval that is nearest 1.
    severities : sequence of str
        Severities of the cautions that hold.
    absent : bool, default False
        The claim rests on no activity.

    Returns
    -------
    str
        One sentence about studies, never about a person.

    Examples
    --------
    >>> verdict("fear", "undecided", None)
    "In this literature, activity here does not tell studies of 'fear' from the others."
    """
    seen = "no reported activity" if absent else "activity"
    if direction == "undecided":
        sentence = f"In this literature, {seen} here does not tell studies of {term!r} from the others"
    else:
        words = grade_words(str(headline_grade))
        how = (
            "commoner in studies of {term} than in the others"
            if direction == "for"
            else "rarer in studies of {term} than in the others, which speaks against the claim"
        )
        sentence = (
            f"In this literature, {seen} here is {how.format(term=repr(term))} "
            f"(at the weaker end of the interval: {words})"
        )
    if "stop" in severities:
        return f"{sentence}; do not rest a conclusion on it before the cautions marked stop are dealt with."
    return f"{sentence}."
