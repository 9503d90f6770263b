"""What a scan finds: claims with their linked places, coordinates, and what every sentence does."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass

from revinf.manuscript.inference import Reading, Statement, StatementKind
from revinf.manuscript.linking import FoundTriple, Link

__all__ = ["FoundClaim", "FoundSentence", "LinkedPlace", "Scan"]


@dataclass(frozen=True, slots=True, kw_only=True)
class LinkedPlace:
    """A place that a claim names, with its coordinates as far as they are known."""

    label: str
    link: Link


@dataclass(frozen=True, slots=True, kw_only=True)
class FoundClaim:
    """A claim of a manuscript.

    Parameters
    ----------
    id : str
        "c01", "c02", in the order of the text.
    term : str
        The process, as the literature calls it where one was named.
    places : tuple of LinkedPlace
        Several places are one pattern.
    quote : str
        The sentence; with the one before it where the place stands there.
    location : str
        File, section, and page, line or paragraph.
    cue : str
        The words that make it an inference.
    hedged : bool
        Said with reserve.
    marks : tuple of (int, int, str)
        Spans of the quote and what they are: "place", "cue", "process".
    sentence : int
        Number of the sentence.
    listed : bool
        Whether our table knows the process; otherwise the term is the words of the sentence.
    """

    id: str
    term: str
    places: tuple[LinkedPlace, ...]
    quote: str
    location: str
    cue: str
    hedged: bool
    marks: tuple[tuple[int, int, str], ...]
    sentence: int
    listed: bool = True


@dataclass(frozen=True, slots=True, kw_only=True)
class FoundSentence:
    """A sentence, where it stands, and what it does."""

    text: str
    location: str
    section: str
    reading: Reading
    statement: Statement
    triples: tuple[FoundTriple, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Scan:
    """All that was found in a manuscript, in the order of its text."""

    name: str
    claims: tuple[FoundClaim, ...]
    triples: tuple[FoundTriple, ...]
    sentences: tuple[FoundSentence, ...]

    def kinds(self) -> Counter[StatementKind]:
        """Return how many sentences there are of each kind."""
        return Counter(sentence.statement.kind for sentence in self.sentences)
