"""What a sentence does: infers a process from activity, or something else that merely looks like it.

kinds: "claim" (activity there is taken as a sign of the process), "negated" (that step is declined or left
open), "reported" (the step of others), "background" (a premise), "forward" (the task activated the place),
"none".
"""

from __future__ import annotations

import re
from collections.abc import Sequence

from revinf.manuscript.antecedents import antecedent, place_groups
from revinf.manuscript.cues import CueMention
from revinf.manuscript.inference import Inference, Reading, Statement, StatementKind
from revinf.manuscript.juxtaposition import juxtaposed
from revinf.manuscript.places import PlaceMention
from revinf.manuscript.process_side import processes_after, task_free
from revinf.manuscript.processes import ProcessMention
from revinf.manuscript.stance import is_declined, is_hedged, is_premise, is_reported, refused_from
from revinf.manuscript.statement_patterns import (
    ACTIVITY,
    ANAPHOR,
)
from revinf.manuscript.unlisted import named_after, named_clause

__all__ = ["read_statement"]


_IT = re.compile(r"(?:\s+(?:it|this|so|that))?\s*(?:[.,;]|$)")
"""The object of "Fear was not rated, but the response implies it", or none: "and the response is the proof"."""

_VERB_BEFORE = re.compile(
    r"\b(?:may|might|could|can|would|to|should|must|and|will|they|both|\w+s)\s+(?:\w+ly\s+)?$", re.IGNORECASE
)

_LEAD = 12  # letters before a cue that opens its sentence: "Highly", "Also,"


def read_statement(sentence: Reading, before: Reading | None = None) -> Statement:
    """Say what a sentence does.

    Parameters
    ----------
    sentence : Reading
        The sentence.
    before : Reading, optional
        The one before it, for "This response suggests ...".

    Returns
    -------
    Statement
        A claim with its inferences, or another kind without.

    Notes
    -----
    Where in doubt it says claim: a false row is struck out in a second, a missed one is never seen.
    """
    found: list[Inference] = []
    declined = reported = False
    refused = refused_from(sentence)
    for cue in sentence.cues:
        steps = _steps(sentence, before, cue)
        if not steps:
            continue
        if is_premise(sentence, cue):
            continue
        if is_reported(sentence, cue):
            reported = True
        elif cue.start > refused or is_declined(sentence, cue):
            # A negation inside a reason ("because nobody moved, ...") declines nothing else.
            declined |= cue.direction != "because"
        else:
            found += steps
    if declined and not any(_is_stronger(sentence, item) for item in found):
        return Statement(kind="negated")
    if found and not reported:
        return Statement(kind="claim", inferences=_once(found))
    if reported:
        return Statement(kind="reported")
    kind = _other_kind(sentence)
    beside = juxtaposed(sentence) if kind in ("none", "forward") else []
    return Statement(kind="claim", inferences=_once(beside)) if beside else Statement(kind=kind)


def _is_stronger(sentence: Reading, item: Inference) -> bool:
    """Tell whether a step stands clear of the negation that another cue of the sentence has."""
    negations = [cue for cue in sentence.cues if cue.direction == "negation"]
    return all(cue.start > item.process.end or cue.end + 60 < item.cue.start for cue in negations)


def _other_kind(sentence: Reading) -> StatementKind:
    """Return the kind of a sentence that infers nothing."""
    directions = {cue.direction for cue in sentence.cues}
    if not sentence.places:
        return "none"
    if sentence.processes and "premise" in directions:
        return "background"
    if sentence.processes and "report" in directions:
        return "reported"
    return "forward" if "task" in directions and ACTIVITY.search(sentence.text) else "none"


def _steps(sentence: Reading, before: Reading | None, cue: CueMention) -> list[Inference]:
    """Return the steps that a cue makes, whatever else the sentence says of them."""
    if cue.words.lower() == "signal" and not _VERB_BEFORE.search(sentence.text[: cue.start]):
        return []  # "the FFA signal rose": the noun
    if cue.direction in ("reverse", "therefore", "conclude"):
        fronted = _fronted(sentence, cue)
        if fronted:
            return fronted
        places, from_before = antecedent(sentence, before, cue)
        processes = processes_after(sentence, cue.end)
        if cue.direction == "therefore" and processes and not _is_assertion(sentence, cue):
            return []
    elif cue.direction == "backwards":
        places, from_before, processes = _backwards(sentence, before, cue)
    elif cue.direction == "because":
        return _because(sentence, cue)
    else:
        return []
    if not places:
        return []
    processes = [process for process in processes if process.listed] or processes
    if not processes and cue.direction == "reverse" and _IT.match(sentence.text, cue.end):
        end = cue.start if from_before else places[0].start
        processes = [process for process in sentence.processes if process.end <= end]
    linked = _linked_to(sentence, places, cue)
    if not processes and linked is not None:
        processes = processes_after(sentence, linked)
    if not processes:
        unnamed = _unnamed(sentence, cue, linked)
        processes = [unnamed] if unnamed is not None and not _names_place(sentence, unnamed) else []
    hedged = is_hedged(sentence, cue)
    return [
        Inference(process=process, places=tuple(places), from_before=from_before, cue=cue, hedged=hedged)
        for process in processes
    ]


def _backwards(
    sentence: Reading, before: Reading | None, cue: CueMention
) -> tuple[list[PlaceMention], bool, list[ProcessMention]]:
    """Return the places after a cue and the processes before it; those after the comma where the cue stands first."""
    comma = _comma_of_fronted(sentence, cue)
    end = len(sentence.text) if comma is None else comma
    places = [place for place in sentence.places if cue.end <= place.start < end]
    places, from_before = (place_groups(sentence.text, places)[0] if places else []), False
    if not places and before is not None and ANAPHOR.search(sentence.text[cue.end : end]):
        places, from_before = list(before.places), True
    processes = [
        process
        for process in sentence.processes
        if (process.end <= cue.start if comma is None else process.start >= comma)
    ]
    return places, from_before, task_free(sentence, processes)


def _masked(text: str) -> str:
    """Return a text of the same length in which brackets hold no commas."""
    return re.sub(r"\([^)]*\)|\[[^\]]*\]", lambda found: "_" * len(found.group()), text)


def _comma_of_fronted(sentence: Reading, cue: CueMention) -> int | None:
    """Return where the main clause begins after a cue that opens its sentence: "As shown by the place, ..."."""
    comma = re.search(r",\s", _masked(sentence.text)[cue.end :])
    return cue.end + comma.end() if cue.start < _LEAD and comma is not None else None


def _linked_to(sentence: Reading, places: Sequence[PlaceMention], cue: CueMention) -> int | None:
    """Return where the process of "we relate the activity of the place to the process" begins."""
    if cue.direction != "conclude" or not places or places[-1].start < cue.end:
        return None
    found = re.compile(r"[^,;:]{0,80}?\b(?:to|with|as)\b").match(_masked(sentence.text), places[-1].end)
    return found.end() if found else None


def _unnamed(sentence: Reading, cue: CueMention, linked: int | None) -> ProcessMention | None:
    """Return the words that stand where a cue wants a process, if none has a name there."""
    if cue.direction in ("reverse", "conclude"):
        return named_after(sentence.text, cue.end if linked is None else linked)
    if cue.direction == "backwards":
        comma = _comma_of_fronted(sentence, cue)
        start, end = (0, cue.start) if comma is None else (comma, len(sentence.text))
        return named_clause(sentence.text, start, end)
    return named_clause(sentence.text, 0 if cue.start < _LEAD else cue.end, len(sentence.text))


def _fronted(sentence: Reading, cue: CueMention) -> list[Inference]:
    """Return the steps of "Consistent with fear, the amygdala responded": cue and process stand before the place."""
    comma = re.search(r",\s", sentence.text[cue.end :])
    if cue.start > _LEAD or cue.direction != "reverse" or comma is None:
        return []
    end = cue.end + comma.start()
    processes = [process for process in sentence.processes if cue.end <= process.start < end]
    processes = [process for process in processes if process.listed] or processes
    places = [place for place in sentence.places if place.start >= end]
    if not processes or not places or any(place.start < end for place in sentence.places):
        return []
    if not ACTIVITY.search(sentence.text[end:]):
        return []
    chosen, hedged = tuple(place_groups(sentence.text, places)[0]), is_hedged(sentence, cue)
    return [
        Inference(process=process, places=chosen, from_before=False, cue=cue, hedged=hedged)
        for process in task_free(sentence, processes)
    ]


def _names_place(sentence: Reading, words: ProcessMention) -> bool:
    """Tell whether words hold the name of a place: then the sentence speaks of it, not of a process."""
    return any(place.start < words.end and words.start < place.end for place in sentence.places)


def _is_assertion(sentence: Reading, cue: CueMention) -> bool:
    """Tell whether what follows a connective says that a process went on, not that a place was active."""
    processes = [process for process in sentence.processes if process.start >= cue.end]
    if not processes:
        return False
    between = sentence.text[cue.end : processes[0].start]
    return not any(place.start >= cue.end for place in sentence.places) and len(between) < 120


def _because(sentence: Reading, cue: CueMention) -> list[Inference]:
    """Return the steps from a reason in which a place is active to what stands outside the reason."""
    comma = re.search(r",\s", _masked(sentence.text)[cue.end :])
    at_start = cue.start < 15
    if at_start and not comma:
        return []
    end = cue.end + comma.start() if at_start and comma else len(sentence.text)
    reason = sentence.text[cue.end : end]
    places = [place for place in sentence.places if cue.start <= place.start < end]
    if not places or not ACTIVITY.search(reason):
        return []
    outside = [
        process for process in sentence.processes if (process.start >= end if at_start else process.end <= cue.start)
    ]
    if at_start and any(place.start >= end for place in sentence.places):
        return []
    if not at_start and any(place.end <= cue.start for place in sentence.places):
        return []
    if not outside:
        unnamed = named_clause(sentence.text, *((end + 1, len(sentence.text)) if at_start else (0, cue.start)))
        outside = [unnamed] if unnamed is not None else []
    hedged = is_hedged(sentence, cue)
    return [
        Inference(process=process, places=tuple(places), from_before=False, cue=cue, hedged=hedged)
        for process in task_free(sentence, [process for process in outside if process.listed] or outside)
    ]


def _once(found: list[Inference]) -> tuple[Inference, ...]:
    """Keep one step a process, the one with the nearest cue; of wordings within each other, the shortest."""
    best: dict[str, Inference] = {}
    spans = [(item.process.start, item.process.end) for item in found]
    for item in found:
        own = (item.process.start, item.process.end)
        if any(own != span and own[0] <= span[0] and span[1] <= own[1] for span in spans):
            continue
        known = best.get(item.process.term)
        if known is None or abs(item.process.start - item.cue.end) < abs(known.process.start - known.cue.end):
            best[item.process.term] = item
    return tuple(sorted(best.values(), key=lambda item: item.process.start))
