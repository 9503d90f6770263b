"""Finds processes in a sentence: terms, synonyms, and the words by which authors say that one went on."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from functools import cache

from revinf.knowledge import normalise_term, read_table
from revinf.manuscript.phrases import Phrases, Token

__all__ = ["ProcessMention", "ProcessNames", "defined_processes", "shipped_processes"]


@dataclass(frozen=True, slots=True, kw_only=True)
class ProcessMention:
    """A process named in a sentence, by its term, with offsets; `listed` where our table knows it."""

    term: str
    start: int
    end: int
    listed: bool = True


@dataclass(frozen=True, slots=True)
class ProcessNames:
    """All names of processes, and how a literature calls them.

    Parameters
    ----------
    phrases : Phrases
        Names to terms.
    spoken : mapping of str to str
        Our term to the literature's, where it differs.
    """

    phrases: Phrases
    spoken: Mapping[str, str] = field(default_factory=dict)

    def find(self, words: list[Token], defined: Mapping[str, str] | None = None) -> list[ProcessMention]:
        """Return the processes that a sentence names, in its order."""
        explained = Phrases((defined or {}).items(), exact=True)
        found, position = [], 0
        while position < len(words):
            hit = self.phrases.at(words, position) or explained.at(words, position)
            if hit is None:
                position += 1
                continue
            term = self.spoken.get(hit.key, hit.key)
            found.append(ProcessMention(term=term, start=hit.start, end=hit.end))
            position = hit.last + 1
        return found

    def speaking(self, terms: Iterable[str]) -> ProcessNames:
        """Return the same names, saying the terms of a literature.

        Parameters
        ----------
        terms : iterable of str
            As the literature has them; those that we do not know are looked for as they are.

        Returns
        -------
        ProcessNames
            A process whose own term the literature lacks is called by the first synonym that it has.
        """
        theirs = {normalise_term(term) for term in terms}
        rows = read_table("processes")
        spoken, known = {}, set()
        for row in rows:
            names = [row["term"], *(name for name in row["synonyms"].split(";") if name)]
            known |= set(names)
            same = [name for name in names if name in theirs]
            if same and row["term"] not in theirs:
                spoken[row["term"]] = same[0]
        kinds = {row["term"] for row in read_table("term_kinds")}
        extra = [(term, term) for term in sorted(theirs - known - kinds)]
        return ProcessNames(Phrases([*_all_names(), *extra]), spoken)


_ALIKE = (
    ("perception", "processing", "recognition", "identification", "analysis", "detection"),
    ("detection", "processing", "monitoring"),
    ("memory", "retrieval", "recollection", "remembering"),
    ("imagery", "imagination", "imagining"),
    ("anticipation", "expectation"),
    ("learning", "acquisition"),
    ("control", "regulation"),
    ("inhibition", "suppression"),
    ("processing", "perception", "analysis"),
    ("comprehension", "understanding"),
    ("production", "generation"),
)
"""Head nouns that stand for one another once their complement is the same; the term's own comes first."""


def _all_names() -> list[tuple[str, str]]:
    """Return every name with its term: those of the table, and "processing of faces" for "face processing"."""
    stated = [
        (name, row["term"])
        for row in read_table("processes")
        for name in (row["term"], *row["synonyms"].split(";"), *row["wordings"].split(";"))
        if name.strip()
    ]
    known = {name for name, _ in stated}
    turned = [pair for name, term in stated for pair in _turned(name, term)]
    return stated + [(name, term) for name, term in dict(reversed(turned)).items() if name not in known]


def _turned(name: str, term: str) -> list[tuple[str, str]]:
    """Return a name with its head noun first, or another head noun that means the same."""
    what, _, head = name.rpartition(" ")
    if not what or what.count(" ") > 1:
        return []
    heads = [head, *(other for group in _ALIKE if group[0] == head for other in group[1:])]
    if len(heads) == 1 and not head.endswith(("tion", "sion", "ment", "ing", "ory", "ence")):
        return []
    plural = what if what.endswith("s") else what + "s"
    found = [
        (f"{other} of {article}{form}", term)
        for other in heads
        for form in (what, plural)
        for article in ("", "the ", "a ", "an ")
    ]
    return found + [(f"{what} {other}", term) for other in heads[1:]]


@cache
def shipped_processes() -> ProcessNames:
    """Return the names of data_tables/processes.csv.

    Examples
    --------
    >>> from revinf.manuscript.phrases import tokens
    >>> [mention.term for mention in shipped_processes().find(tokens("They engaged working memory."))]
    ['working memory']
    """
    return ProcessNames(Phrases(_all_names()))


def defined_processes(text: str, mentions: list[ProcessMention]) -> dict[str, str]:
    """Return the abbreviations that a sentence explains: "theory of mind (ToM)".

    Examples
    --------
    >>> mention = ProcessMention(term="theory of mind", start=3, end=17)
    >>> defined_processes("On theory of mind (ToM).", [mention])
    {'ToM': 'theory of mind'}
    """
    found = {}
    for mention in mentions:
        short = re.match(r"\s*[(\[]\s*([A-Z][A-Za-z-]*[A-Z])\s*[)\],;]", text[mention.end :])
        if short and len(short.group(1)) <= 6:
            found[short.group(1)] = mention.term
    return found
