"""Steps made by a mark alone: "The hypothalamus responded to the menu; the guests were hungry."."""

from __future__ import annotations

import re

from revinf.manuscript.cues import CueMention
from revinf.manuscript.inference import Inference, Reading
from revinf.manuscript.statement_patterns import ACTIVITY, DURING
from revinf.manuscript.unlisted import named_clause, speaks_of_people

__all__ = ["juxtaposed"]

_MARK = re.compile(r"[;:\u2013\u2014](?=\s)")

_DONE_TO_PEOPLE = re.compile(
    r"\b(?:told|asked|instructed|required|shown|paid|scanned|trained|recruited|excluded|screened|informed|given)\b",
    re.IGNORECASE,
)
"""Words of the methods: what participants were told is no sign of what they went through."""


def juxtaposed(sentence: Reading) -> list[Inference]:
    """Return the steps from one half of a sentence, an active place, to the other, what people went through.

    Parameters
    ----------
    sentence : Reading
        Of two halves with a colon, a semicolon or a dash between them.

    Returns
    -------
    list of Inference
        Empty unless one half is about places alone and the other about people alone.
    """
    marks = list(_MARK.finditer(sentence.text))
    if len(marks) != 1:
        return []
    mark = marks[0]
    halves = ((0, mark.start()), (mark.end(), len(sentence.text)))
    for (start, end), (other_start, other_end) in (halves, halves[::-1]):
        places = [place for place in sentence.places if start <= place.start < end]
        if not places or len(places) < len(sentence.places):
            continue
        if _DONE_TO_PEOPLE.search(sentence.text, other_start, other_end):
            continue
        if not ACTIVITY.search(sentence.text[start:end]) or not speaks_of_people(sentence.text, other_start):
            continue
        processes = [
            process
            for process in sentence.processes
            if other_start <= process.start < other_end and not DURING.search(sentence.text[: process.start])
        ]
        if not processes:
            unnamed = named_clause(sentence.text, other_start, other_end)
            processes = [unnamed] if unnamed is not None else []
        cue = CueMention(
            cue=mark.group(),
            words=mark.group(),
            direction="therefore",
            strength="plain",
            start=mark.start(),
            end=mark.end(),
        )
        return [
            Inference(process=process, places=tuple(places), from_before=False, cue=cue, hedged=False)
            for process in processes
        ]
    return []
