"""Finds places of the brain in a sentence, with the hemisphere that is said."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from functools import cache

from revinf.knowledge import read_table
from revinf.manuscript.phrases import Found, Phrases, Token, tokens

__all__ = ["PlaceMention", "defined_places", "find_places"]

_SIDES = {"left": "left", "right": "right", "bilateral": "bilateral", "bilaterally": "bilateral", "both": "bilateral"}
_SIDES |= {"l": "left", "r": "right", "lh": "left", "rh": "right", "left-sided": "left", "hemispheric": ""}
_DIRECTIONS = frozenset(
    [
        "anterior",
        "posterior",
        "dorsal",
        "ventral",
        "medial",
        "lateral",
        "rostral",
        "caudal",
        "superior",
        "inferior",
        "middle",
        "mid",
        "deep",
        "mesial",
        "hemisphere",
        "hemispheric",
        "sided",
    ]
)
_HEAD = re.compile(r" (?:cortex|gyrus|sulcus|lobule|lobe|junction)$")
_NOT_PLACES = frozenset(
    ["motor", "visual", "auditory", "sensory", "olfactory", "gustatory", "language", "secondary", "primary"]
)
_FOLLOWS = re.compile(
    r"[\s-]+(?:de-?|hyper|hypo)?(?:activ\w+|respon\w+|engage\w*|recruit\w*|signals?|hubs?|clusters?|peaks?|"
    r"regions?|areas?|"
    r"foc(?:us|i)|sites?|involvement|BOLD|increases?|cort(?:ex|ices)|nodes?|sources?|effects?|coupling|"
    r"contribution\w*)\b",
    re.IGNORECASE,
)


@dataclass(frozen=True, slots=True, kw_only=True)
class PlaceMention:
    """A place named in a sentence: canonical name, side ("left", "right", "bilateral" or ""), and offsets."""

    place: str
    side: str
    start: int
    end: int
    abbreviated: bool = field(default=False, compare=False)

    @property
    def label(self) -> str:
        """The place with its side, as a reader says it."""
        return f"{self.side} {self.place}".strip()


@cache
def _names() -> Phrases:
    """Return all full names."""
    rows = read_table("places")
    return Phrases(
        (name, row["place"]) for row in rows for name in (row["place"], *row["names"].split(";")) if name.strip()
    )


@cache
def _adjectives() -> Phrases:
    """Return the names whose head noun may be missing before a word of activity: "dorsolateral prefrontal"."""
    rows = read_table("places")
    names = ((name, row["place"]) for row in rows for name in (row["place"], *row["names"].split(";")))
    return Phrases((name.rsplit(" ", 1)[0], place) for name, place in names if _HEAD.search(name))


@cache
def _places() -> frozenset[str]:
    """Return the canonical names."""
    return frozenset(row["place"] for row in read_table("places"))


@cache
def _abbreviations() -> Phrases:
    """Return all abbreviations, as they are written."""
    rows = read_table("places")
    return Phrases(
        ((short, row["place"]) for row in rows for short in row["abbreviations"].split(";") if short.strip()),
        exact=True,
    )


def find_places(text: str, words: list[Token], defined: Mapping[str, str] | None = None) -> list[PlaceMention]:
    """Return the places that a sentence names.

    Parameters
    ----------
    text : str
        The sentence.
    words : list of Token
        Its words.
    defined : mapping of str to str, optional
        Abbreviations that the document itself explains, and their places.

    Returns
    -------
    list of PlaceMention
        In the order of the sentence. An abbreviation of two letters counts only where the document explains
        it, or a side or a word of activity stands beside it.

    Examples
    --------
    >>> from revinf.manuscript.phrases import tokens
    >>> sentence = "The left and right amygdala and the AI tools."
    >>> [(m.side, m.place) for m in find_places(sentence, tokens(sentence))]
    [('bilateral', 'amygdala')]
    """
    explained = Phrases((defined or {}).items(), exact=True)
    mentions: list[PlaceMention] = []
    position = 0
    while position < len(words):
        hit = _names().at(words, position)
        short = explained.at(words, position) or _trusted(text, words, _abbreviations().at(words, position))
        abbreviated = short is not None and (hit is None or short.last > hit.last)
        hit = short if abbreviated else hit
        if hit is None:
            hit = _before_activity(text, _adjectives().at(words, position))
        if hit is None:
            position += 1
            continue
        side = _side(words, hit) or (_prefixed(words[hit.first].text, hit.key) if abbreviated else "")
        mentions += _shared_head(text, words, hit, side)
        mentions.append(
            PlaceMention(
                place=_narrowed(words, hit) if abbreviated else hit.key,
                side=side,
                start=hit.start,
                end=hit.end,
                abbreviated=abbreviated,
            )
        )
        position = hit.last + 1
    return mentions or _brodmann(text)


_BRODMANN = re.compile(
    r"(?:\b(?P<side>left|right|bilateral|L|R)\s+)?\b(?:Brodmann(?:['’]s|s)?\s+areas?|BAs?)\s?(?P<number>\d{1,2})\b"
)


def _brodmann(text: str) -> list[PlaceMention]:
    """Return Brodmann areas: only where no place has a name, beside which they are but a note."""
    return [
        PlaceMention(
            place=f"brodmann area {found['number']}",
            side=_SIDES.get((found["side"] or "").lower(), ""),
            start=found.start(),
            end=found.end(),
        )
        for found in _BRODMANN.finditer(text)
    ]


_ACTIVE_BESIDE = re.compile(
    r"\s*(?:(?:was|were|is|became|showed|stayed|remained)\s+(?:more\s+|also\s+|strongly\s+)?)?"
    r"(?:activ|respon|signal|recruit|engage|peak|cluster|deactiv|[(\[]\s*[-+\u2212\u2013]?\d)"
)
"""What follows an abbreviation of a place, not a word that happens to look like one."""


def _trusted(text: str, words: list[Token], hit: Found | None) -> Found | None:
    """Return an abbreviation unless it is so short that it may mean anything."""
    if hit is None or hit.end - hit.start > 2 or re.match(r"V\d", text[hit.start : hit.end]):
        return hit
    before = words[hit.first - 1].text.lower() if hit.first else ""
    beside = _ACTIVE_BESIDE.match(text, hit.end)
    return hit if before in _SIDES or beside else None


def _before_activity(text: str, hit: Found | None) -> Found | None:
    """Return a name without its head noun if a word of activity, or of a part, follows."""
    if hit is None or text[hit.start : hit.end].lower() in _NOT_PLACES:
        return None
    return hit if _FOLLOWS.match(text, hit.end) else None


def _narrowed(words: list[Token], hit: Found) -> str:
    """Return the narrower place that a direction before an abbreviation names: "dorsal ACC"."""
    before = words[hit.first - 1].text.lower() if hit.first and words[hit.first].joined else ""
    narrower = f"{before} {hit.key}"
    return narrower if narrower in _places() else hit.key


def _side(words: list[Token], hit: Found) -> str:
    """Return the side that the words before, or right after, a name say."""
    sides = []
    position = hit.first - 1
    while position >= max(0, hit.first - 5):
        word = words[position].text.lower()
        if _SIDES.get(word):
            sides.append(_SIDES[word])
        elif word not in _DIRECTIONS and not (sides and word in ("and", "or")):
            break
        position -= 1
    if not sides and hit.last + 1 < len(words) and words[hit.last + 1].text.lower() in ("bilaterally", "bilateral"):
        return "bilateral"
    if not sides and hit.last + 1 < len(words) and words[hit.last + 1].text in ("left", "right", "L", "R"):
        following = words[hit.last + 1]
        # "insula (left)": the side stands alone in parentheses, not before another name.
        if not following.joined:
            return _SIDES[following.text.lower()]
    if len(set(sides)) > 1:
        return "bilateral"
    return sides[0] if sides else ""


def _prefixed(short: str, place: str) -> str:
    """Return the side that the first letter of an abbreviation says: lIFG, RTPJ; not LPFC, which is lateral."""
    rest = tokens(short[1:])
    known = _abbreviations().at(rest, 0) if rest else None
    if short[0] in "lrLR" and known is not None and known.key == place:
        return "left" if short[0] in "lL" else "right"
    return ""


def _shared_head(text: str, words: list[Token], hit: Found, side: str) -> list[PlaceMention]:
    """Return the first of two places that share a head: the anterior one of "anterior and posterior insula"."""
    if hit.last == hit.first or hit.first < 2:
        return []
    link, first = words[hit.first - 1], words[hit.first - 2]
    slash = text[first.end : words[hit.first].start] == "/" if hit.first else False
    if link.text.lower() not in ("and", "or") and not slash:
        return []
    rest = words[hit.first + 1 : hit.last + 1]
    name = " ".join([first.text.lower(), *(token.text.lower() for token in rest)])
    other = _names().find([Token(word, at, at, True) for at, word in enumerate(name.split())])
    if len(other) != 1 or other[0].first != 0 or other[0].last != len(name.split()) - 1 or other[0].key == hit.key:
        return []
    return [PlaceMention(place=other[0].key, side=side, start=first.start, end=first.end)]


def defined_places(text: str, mentions: list[PlaceMention]) -> dict[str, str]:
    """Return the abbreviations that a sentence explains: "nucleus accumbens (NAc)".

    Parameters
    ----------
    text : str
        The sentence.
    mentions : list of PlaceMention
        Its places.

    Returns
    -------
    dict of str to str
        Abbreviation to place.

    Examples
    --------
    >>> from revinf.manuscript.phrases import tokens
    >>> sentence = "The temporal pole (TPO; 4, 8) was active."
    >>> defined_places(sentence, find_places(sentence, tokens(sentence)))
    {'TPO': 'temporal pole'}
    """
    found = {}
    for mention in mentions:
        short = re.match(r"\s*[(\[]\s*([A-Za-z]?[A-Za-z-]*[A-Z][A-Za-z0-9-]*)\s*[)\],;:]", text[mention.end :])
        if short and 2 <= len(short.group(1)) <= 8 and short.group(1) not in ("MNI", "TAL", "BA", "Left", "Right"):
            found[short.group(1)] = mention.place
    return found
