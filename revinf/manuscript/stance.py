"""How an author stands to a step: with reserve, declining it, telling another's, or stating a premise."""

from __future__ import annotations

import re

from revinf.manuscript.cues import CueMention
from revinf.manuscript.inference import Reading
from revinf.manuscript.statement_patterns import NEGATOR, SELF

__all__ = ["is_declined", "is_hedged", "is_premise", "is_reported", "refused_from"]


_LIKE_OTHERS = re.compile(
    r"\W*(?:in (?:line|agreement|accord|accordance|keeping|contrast)|consistent|contrary|similar|like|unlike|as in|"
    r"much as|compared)\b",
    re.IGNORECASE,
)
"""Opens "In line with earlier reports, the place suggests ...": the step is the author's own."""


_REFUSED = re.compile(r"claim|conclu|infer|argu|proof|prove", re.IGNORECASE)
"""Words of a refusal that holds for the whole clause it opens: "we make no claim that the peak ... indexes fear"."""

_REFRAINED = re.compile(r"refrain|abstain|avoid|declin|hesita|reluctan|caution|claim|conclu|infer", re.IGNORECASE)

_IDIOM = re.compile(r"\b(?:can|could)(?:not|\s+not|n't)\s+(?:help|but)\b|\bno (?:doubt|wonder)\b", re.IGNORECASE)

_AUTHOR = re.compile(r"\W*[A-Z][\w'’-]+(?:\s+(?:and|&)\s+[A-Z][\w'’-]+|\s+et al\.?,?)?\s*[(\[](?:19|20)\d\d[a-z]?[)\]]")
"""An author with a year as the subject of the sentence."""


def is_hedged(sentence: Reading, cue: CueMention) -> bool:
    """Tell whether a step is made with reserve."""
    hedges = [other for other in sentence.cues if other.direction == "hedge"]
    return cue.strength == "hedged" or any(abs(other.start - cue.start) < 60 for other in hedges)


def is_declined(sentence: Reading, cue: CueMention) -> bool:
    """Tell whether a step is denied, doubted or asked."""
    if sentence.text.rstrip().endswith("?"):
        return True
    for other in sentence.cues:
        if other.direction == "open" and other.start <= cue.end:
            return True
        if _IDIOM.search(sentence.text[max(0, other.start - 8) : other.end + 6]):
            continue  # "could not help seeing" is no denial
        if cue.direction == "therefore" and other.direction == "negation" and _REFRAINED.search(other.words):
            return True
        reach = 150 if _REFUSED.search(other.words) else 45
        if other.direction == "negation" and other.start <= cue.end and cue.start - other.end < reach:
            between = sentence.text[other.end : cue.start] if other.end < cue.start else ""
            if not re.search(r"[,;:]\s|\bbut\b", between):
                return True
    lead = sentence.text[max(0, cue.start - 40) : cue.start]
    return bool(NEGATOR.search(lead)) and not re.search(r"[,;:]|\bbut\b|not only", _last_negation(lead))


def _last_negation(lead: str) -> str:
    """Return what follows the last negation of a text, with it."""
    found = list(
        re.finditer(r"\b(?:not|cannot|never|no|nor|neither|hardly|scarcely|without)\b|n't\b", lead, re.IGNORECASE)
    )
    return lead[found[-1].start() :] if found else ""


def refused_from(sentence: Reading) -> float:
    """Return where a refused conclusion begins ("a mistake to conclude that ..."): all it would conclude is refused."""
    concluding = [cue for cue in sentence.cues if cue.direction == "conclude" and is_declined(sentence, cue)]
    return min((cue.start for cue in concluding), default=float("inf"))


def is_reported(sentence: Reading, cue: CueMention) -> bool:
    """Tell whether a step is the step of others."""
    if _AUTHOR.match(sentence.text):
        return True
    for other in sentence.cues:
        if other.direction != "report" or other.start > cue.end or _within(other, cue):
            continue
        if _LIKE_OTHERS.match(sentence.text) and any(
            "," in sentence.text[other.start : place.start] for place in sentence.places if place.start < other.end
        ):
            continue
        if other.end < cue.start and SELF.search(sentence.text[other.end : cue.start]):
            continue
        if not SELF.search(sentence.text[max(0, other.start - 12) : other.end]):
            return True
    return False


def is_premise(sentence: Reading, cue: CueMention) -> bool:
    """Tell whether a cue only stands inside a general statement about the place."""
    for other in sentence.cues:
        if other.direction != "premise" or other.start > cue.start or _within(other, cue):
            continue
        if other.start <= cue.start <= other.end or 0 <= cue.start - other.end <= 12:
            return True
    return False


def _within(other: CueMention, cue: CueMention) -> bool:
    """Tell whether a cue is only a part of the words of another: "supports" of "supports the view that"."""
    return cue.start <= other.start and other.end <= cue.end
