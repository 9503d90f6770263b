"""The last resort: an active place and a process in one sentence, and nothing that says why they stand there.

"The right amygdala caught them in the act of being afraid." No table of cues will ever hold all ways to say so. A row
too many is struck out in a second, and one too few is never seen; so a sentence of one's own results that names a place
and a process is shown, marked as such, unless a plain finding, a method, a premise or a denial explains it.
"""

from __future__ import annotations

import re

from revinf.manuscript.cues import CueMention
from revinf.manuscript.inference import Inference, Reading
from revinf.manuscript.places import PlaceMention
from revinf.manuscript.processes import ProcessMention
from revinf.manuscript.statement_patterns import ACTIVITY, ANAPHOR, DURING, TASK_NOUN

__all__ = ["side_by_side"]

_NAME = "side by side"
"""What the table of claims shows in place of a cue's words."""

_EXPLAINED = frozenset(["premise", "report", "open", "negation"])
_METHOD = re.compile(
    r"\b(?:correlat\w+|predict\w*|ratings?|rated|scores?|volumes?|thick\w*|masks?|ROIs?|regions? of interest|seeds?|"
    r"contrast\w*|compar\w+|than|connectivity|coupl\w+|instruct\w*|asked|told|measur\w+|scann\w+|tasks?|paradigms?|"
    r"versus|vs|conditions?|trials?|blocks?|sessions?|stimul\w+|network|questionnaires?|hypothes\w+|interact\w+|"
    r"differ\w*|main effects?|regress\w+|covari\w+|tracts?|lesion\w*|receptors?|genes?|studies|literature|"
    r"patients with|theor\w+|models?|known|often|typically|generally|commonly|classically|always|key structures?|hubs?|"
    r"locali[sz]ed)\b",
    re.IGNORECASE,
)
_OBJECT = re.compile(
    r"\b(?:for|during|in response to|to|by|with|without|while|when|whenever|after|before|in|on|at|between|from|because|"
    r"if|whether|and|or)\s+(?:[\w'’-]+\s+){0,3}$",
    re.IGNORECASE,
)
"""Before a process after a place: what the place was active for, not what its activity means."""


_LED_TO = re.compile(
    r"\b(?:activat|increas|decreas|enhanc|reduc|attenuat|produc|modulat|engag|recruit|elicit|evok|accompan|show|had\b|"
    r"led\b|lead|associat|drove|driv|rais|lower|boost|strengthen|weaken|diminish|abolish|suppress|caus|yield|result|"
    r"gave\b|reveal|spar|heighten|amplif|augment|sharpen|tax|call|depend|rel(?:y|ie))\w*",
    re.IGNORECASE,
)
"""Between a process and a place after it: the task is said to have moved the place."""

_SHORT = re.compile(r"(?:\S+\s+){0,7}\S+$")
"""A sentence of a few words lives on the one before it: "Fear, in other words."."""


def side_by_side(sentence: Reading, before: Reading | None = None) -> list[Inference]:
    """Return a step from each place that nothing explains to the nearest process that nothing explains.

    Parameters
    ----------
    sentence : Reading
        One that has no other step.
    before : Reading, optional
        The sentence before it, whose places it may point at.

    Returns
    -------
    list of Inference
        Hedged or not as the sentence is; the cue is called side by side and spans what lies between the two.

    Examples
    --------
    >>> from revinf.manuscript.cues import find_cues
    >>> from revinf.manuscript.phrases import tokens
    >>> from revinf.manuscript.places import find_places
    >>> from revinf.manuscript.processes import shipped_processes
    >>> def read(text):
    ...     words = tokens(text)
    ...     return Reading(text=text, places=find_places(text, words), processes=shipped_processes().find(words),
    ...                    cues=find_cues(text))
    >>> [step.process.term for step in side_by_side(read("The amygdala lays bare how afraid they were."))]
    ['fear']
    >>> side_by_side(read("The amygdala was active during fear."))
    []
    """
    if any(cue.direction in _EXPLAINED for cue in sentence.cues) or _METHOD.search(sentence.text):
        return []
    from_before = not sentence.places
    places = sentence.places if sentence.places else _pointed_at(sentence, before)
    hedged = any(cue.direction == "hedge" for cue in sentence.cues)
    steps = []
    for process in sentence.processes:
        if not process.listed or not places or _is_explained(sentence, process):
            continue
        if from_before:
            start, end, chosen = 0, process.start, tuple(places)
        else:
            place = min(places, key=lambda one: max(one.start - process.end, process.start - one.end))
            start, end = sorted([process.end, place.end, process.start, place.start])[1:3]
            chosen = (place,)
        start += len(sentence.text[start:end]) - len(sentence.text[start:end].lstrip())
        cue = CueMention(cue=_NAME, words=_NAME, direction="reverse", strength="plain", start=start, end=end)
        steps.append(Inference(process=process, places=chosen, from_before=from_before, cue=cue, hedged=hedged))
    return steps


def _pointed_at(sentence: Reading, before: Reading | None) -> list[PlaceMention]:
    """Return the places of the sentence before, if they were active there and this one points back to them."""
    if before is None or not before.places or not ACTIVITY.search(before.text):
        return []
    return list(before.places) if ANAPHOR.search(sentence.text) or _SHORT.match(sentence.text) else []


def _is_explained(sentence: Reading, process: ProcessMention) -> bool:
    """Tell whether a process is the task, or the condition under which a place was active."""
    text = sentence.text
    if TASK_NOUN.match(text[process.end : process.end + 60]) or DURING.search(text[: process.start]):
        return True
    before = [place for place in sentence.places if place.end <= process.start]
    after = [place for place in sentence.places if place.start >= process.end]
    if after and not before and _LED_TO.search(text[process.end : after[0].start]):
        return True
    return bool(before) and _OBJECT.search(text[before[-1].end : process.start]) is not None
