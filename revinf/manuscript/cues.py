"""Finds cues: the words by which a sentence goes from activity to process, or does something else.

A cue of data_tables/cues.csv is a row of words. ``a|b`` is either, ``stem*`` any ending, ``word?`` may be
missing, and ``~3`` lets up to three words stand between its neighbours.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache
from typing import Literal, cast

from revinf.knowledge import read_table

__all__ = ["CueMention", "Direction", "compiled_cue", "find_cues"]

Direction = Literal[
    "reverse", "backwards", "because", "conclude", "therefore", "negation", "report", "premise", "task", "open", "hedge"
]
"""reverse: activity, cue, process. backwards: process, cue, activity. because: the activity stands in the
reason. conclude: somebody concludes, wherever the place stands. therefore: a connective between the two."""


@dataclass(frozen=True, slots=True, kw_only=True)
class CueMention:
    """A cue in a sentence: its row, its words there, direction, strength and offsets."""

    cue: str
    words: str
    direction: Direction
    strength: str
    start: int
    end: int


def compiled_cue(cue: str) -> re.Pattern[str]:
    """Return a cue as a regular expression.

    Parameters
    ----------
    cue : str
        In the little language of the table.

    Returns
    -------
    re.Pattern
        Case does not matter.

    Examples
    --------
    >>> bool(compiled_cue("interpret* ~3 as").search("We interpreted this response as fear."))
    True
    """
    pattern, gap = r"\b", r"[\s,\-\u2010\u2011]+"
    first = True
    pending = ""
    for word in cue.split():
        if word.startswith("~"):
            pending = rf"(?:[\s,()\-\u2010\u2011\u2212]+[\w'’]+){{0,{int(word[1:])}}}?"
            continue
        optional = word.endswith("?")
        choices = "|".join(re.escape(part).replace(r"\*", r"\w*") for part in word.rstrip("?").split("|"))
        piece = ("" if first else pending + gap) + rf"(?:{choices})\b"
        pattern += f"(?:{piece})?" if optional else piece
        first, pending = False, ""
    return re.compile(pattern, re.IGNORECASE)


@cache
def _rows() -> tuple[tuple[re.Pattern[str], str, Direction, str], ...]:
    """Return all cues, compiled."""
    return tuple(
        (compiled_cue(row["cue"]), row["cue"], cast(Direction, row["direction"]), row["strength"])
        for row in read_table("cues")
    )


def find_cues(sentence: str) -> list[CueMention]:
    """Return the cues of a sentence, in its order; cues of different kinds may overlap.

    Parameters
    ----------
    sentence : str
        One sentence.

    Returns
    -------
    list of CueMention
        All that match.

    Examples
    --------
    >>> [(cue.words, cue.direction) for cue in find_cues("The peak implies fear.")]
    [('implies', 'reverse')]
    """
    plain = sentence.replace("’", "'")
    found = [
        CueMention(
            cue=cue,
            words=match.group(),
            direction=direction,
            strength=strength,
            start=match.start(),
            end=match.end(),
        )
        for pattern, cue, direction, strength in _rows()
        for match in pattern.finditer(plain)
    ]
    return sorted(found, key=lambda mention: (mention.start, -mention.end))
