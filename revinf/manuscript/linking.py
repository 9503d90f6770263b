"""Links places to coordinates, says how sure each link is, and leaves a place without any rather than guess."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from revinf.manuscript.places import PlaceMention
from revinf.manuscript.triples import Triple

__all__ = ["Confidence", "FoundTriple", "Link", "link_place", "owners"]

Confidence = Literal["sure", "likely", "unsure", "none"]


@dataclass(frozen=True, slots=True, kw_only=True)
class FoundTriple:
    """Coordinates found in a document.

    Parameters
    ----------
    xyz : (float, float, float), mm
        As the text has them.
    space : str
        "MNI", "Talairach", or "" where the document does not say.
    place, side : str
        The place beside them, and its side; "" where none is named.
    location : str
        Where they stand.
    how : str
        "sentence", "table" or "peaks table".
    sentence : int
        Number of the sentence in the document; -1 for a table.
    """

    xyz: tuple[float, float, float]
    space: str
    place: str
    side: str
    location: str
    how: str
    sentence: int = -1

    @property
    def label(self) -> str:
        """The place with its side."""
        return f"{self.side} {self.place}".strip()


@dataclass(frozen=True, slots=True, kw_only=True)
class Link:
    """Coordinates of a place, or none, with how they were linked and how sure that is."""

    xyz: tuple[float, float, float] | None
    space: str
    how: str
    confidence: Confidence


def owners(text: str, triples: Sequence[Triple], places: Sequence[PlaceMention]) -> list[PlaceMention | None]:
    """Return, for each triple of a sentence, the place that it belongs to.

    Parameters
    ----------
    text : str
        The sentence.
    triples, places : sequence
        What stands in it.

    Returns
    -------
    list of PlaceMention or None
        The nearest place before a triple; where several triples follow as many places, one each in order; the
        only place of a sentence owns what stands before it, too.

    Examples
    --------
    >>> from revinf.manuscript.phrases import tokens
    >>> from revinf.manuscript.places import find_places
    >>> from revinf.manuscript.triples import find_triples
    >>> text = "The amygdala and the hippocampus (-22, -4, -18 and 26, -20, -14, respectively) were active."
    >>> [place.place for place in owners(text, find_triples(text), find_places(text, tokens(text)))]
    ['amygdala', 'hippocampus']
    """
    result: list[PlaceMention | None] = []
    for run in _runs(text, triples, places):
        first = run[0]
        before = [place for place in places if place.end <= first.start]
        earlier = [triple for triple in triples if triple.end <= first.start]
        fresh = [place for place in before if not earlier or place.start >= earlier[-1].end]
        if len(run) > 1 and len(fresh) == len(run):
            result += fresh
        elif fresh:
            result += [_fitting(fresh, triple) for triple in run]
        elif len(places) == 1 or (places and not before):
            after = next((place for place in places if place.start >= run[-1].end), places[0])
            result += [after] * len(run)
        else:
            result += [_fitting(before, triple) if before else None for triple in run]
    return result


def _fitting(places: Sequence[PlaceMention], triple: Triple) -> PlaceMention:
    """Return the nearest place before a triple; of two alike, the one whose side fits."""
    nearest = places[-1]
    side = "left" if triple.xyz[0] < 0 else "right"
    for place in reversed(places):
        if place.place == nearest.place and place.side == side:
            return place
    return nearest


def _runs(text: str, triples: Sequence[Triple], places: Sequence[PlaceMention]) -> list[list[Triple]]:
    """Return the triples in runs between which no place is named."""
    runs: list[list[Triple]] = []
    for triple in triples:
        if runs and not any(runs[-1][-1].end <= place.start < triple.start for place in places):
            runs[-1].append(triple)
        else:
            runs.append([triple])
    return runs


def link_place(
    mention: PlaceMention, sentence: int, own: Sequence[FoundTriple], others: Sequence[FoundTriple]
) -> list[Link]:
    """Return the coordinates of a place that a claim names.

    Parameters
    ----------
    mention : PlaceMention
        The place.
    sentence : int
        Number of the sentence that names it.
    own : sequence of FoundTriple
        Those of the claim's own sentences.
    others : sequence of FoundTriple
        All of the document and of a peaks table.

    Returns
    -------
    list of Link
        One without coordinates where nothing fits or several do.
    """
    both = _on_both_sides(_distinct(own, mention)) if mention.side not in ("left", "right") else []
    if both:
        return [Link(xyz=triple.xyz, space=triple.space, how="in the sentence", confidence="sure") for triple in both]
    return [_one_link(mention, sentence, own, others)]


def _on_both_sides(triples: Sequence[FoundTriple]) -> list[FoundTriple]:
    """Return two triples of which one lies on each side; nothing otherwise."""
    if len(triples) != 2 or triples[0].xyz[0] * triples[1].xyz[0] >= 0:
        return []
    return list(triples)


def _one_link(mention: PlaceMention, sentence: int, own: Sequence[FoundTriple], others: Sequence[FoundTriple]) -> Link:
    """Return the link of a place to one point."""
    nameless = [triple for triple in own if not triple.place]
    if len(nameless) == 1 and not _distinct(own, mention):
        # "Its activation (42, -50, -20) means ...": the place stands in the sentence before.
        return Link(xyz=nameless[0].xyz, space=nameless[0].space, how="beside the claim", confidence="likely")
    here = _distinct(own, mention)
    if len(here) == 1:
        return Link(xyz=here[0].xyz, space=here[0].space, how="in the sentence", confidence="sure")
    if here:
        return Link(xyz=None, space="", how=f"{len(here)} coordinates in the sentence fit", confidence="none")
    near = _distinct(
        [triple for triple in others if triple.sentence >= 0 and abs(triple.sentence - sentence) <= 2], mention
    )
    if len(near) == 1:
        return Link(xyz=near[0].xyz, space=near[0].space, how="in a neighbouring sentence", confidence="likely")
    for source in ("peaks table", "table", "sentence"):
        named = _distinct([triple for triple in others if triple.how == source], mention)
        if len(named) == 1:
            return Link(
                xyz=named[0].xyz, space=named[0].space, how=f"same name in the {_said(source)}", confidence="likely"
            )
        if named:
            return Link(xyz=None, space="", how=f"{len(named)} coordinates have this name", confidence="none")
    wider = [triple for triple in others if _contains(triple.place, mention.place) and _sides_fit(triple, mention)]
    distinct = list({triple.xyz: triple for triple in wider}.values())
    if len(distinct) == 1:
        return Link(
            xyz=distinct[0].xyz, space=distinct[0].space, how=f"called {distinct[0].label} there", confidence="unsure"
        )
    return Link(xyz=None, space="", how="", confidence="none")


def _said(source: str) -> str:
    """Return what a source is called in a sentence."""
    return {"peaks table": "peaks table", "table": "table", "sentence": "text"}[source]


def _distinct(triples: Sequence[FoundTriple], mention: PlaceMention) -> list[FoundTriple]:
    """Return the triples of a place on its side, each point once."""
    fitting = [triple for triple in triples if triple.place == mention.place and _sides_fit(triple, mention)]
    return list({triple.xyz: triple for triple in fitting}.values())


def _sides_fit(triple: FoundTriple, mention: PlaceMention) -> bool:
    """Tell whether a triple lies on the side that is named; a midline point fits either."""
    if mention.side not in ("left", "right") or triple.xyz[0] == 0:
        return True
    actual = "left" if triple.xyz[0] < 0 else "right"
    return actual == mention.side or (triple.side == mention.side and abs(triple.xyz[0]) <= 6)


def _contains(one: str, other: str) -> bool:
    """Tell whether one name holds all words of the other."""
    first, second = set(re.findall(r"\w+", one)), set(re.findall(r"\w+", other))
    return bool(first and second) and (first < second or second < first)
