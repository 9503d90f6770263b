"""Whose activity a cue starts from: the places before it, or those of the sentence before."""

from __future__ import annotations

import re
from collections.abc import Sequence
from itertools import pairwise

from revinf.manuscript.cues import CueMention
from revinf.manuscript.inference import Reading
from revinf.manuscript.places import PlaceMention
from revinf.manuscript.statement_patterns import ACTIVITY, ANAPHOR, CONTRASTED, JOINT

__all__ = ["antecedent", "place_groups"]


_FOUND = re.compile(r"\b(?:our|these|this|the)\s+(?:\w+\s+)?(?:findings?|results?|observations?|data)\b", re.IGNORECASE)


def antecedent(sentence: Reading, before: Reading | None, cue: CueMention) -> tuple[list[PlaceMention], bool]:
    """Return the places whose activity a cue starts from, and whether they stand in the sentence before."""
    here = [place for place in sentence.places if place.start < cue.end]
    if here:
        return place_groups(sentence.text, here)[-1], False
    if cue.direction == "conclude" and sentence.places and ACTIVITY.search(sentence.text):
        return place_groups(sentence.text, sentence.places)[-1], False
    if (
        before is None
        or not before.places
        or not (
            ACTIVITY.search(before.text + sentence.text) or _FOUND.search(sentence.text) or cue.direction == "conclude"
        )
    ):
        return [], False
    points_back = ANAPHOR.search(sentence.text[: cue.end]) or cue.direction in ("conclude", "therefore")
    return (place_groups(before.text, before.places)[0], True) if points_back else ([], False)


def place_groups(text: str, places: Sequence[PlaceMention]) -> list[list[PlaceMention]]:
    """Return places in groups: those that an "and" or a comma joins belong together; contrasted ones fall away."""
    kept = [place for place in places if not CONTRASTED.search(text[: place.start])] or list(places)
    groups: list[list[PlaceMention]] = [[kept[0]]]
    for earlier, later in pairwise(kept):
        between = re.sub(r"\([^)]*\)|\[[^\]]*\]", " ", text[earlier.end : later.start])
        if later.start < earlier.end or JOINT.fullmatch(between):
            groups[-1].append(later)
        else:
            groups.append([later])
    return groups
