"""Finds names of several words in running text: the longest wins, hyphens and spaces are the same."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass

__all__ = ["Found", "Phrases", "Token", "tokens"]

_TOKEN = re.compile(r"[^\W_]+(?:['’][^\W\d_]+)*")
_BETWEEN = re.compile(r"[\s\-\u2010\u2011\u2013/'’]{1,3}")


@dataclass(frozen=True, slots=True)
class Token:
    """A word, where it begins and ends, and whether only a space or hyphen stands before it."""

    text: str
    start: int
    end: int
    joined: bool


@dataclass(frozen=True, slots=True)
class Found:
    """A name that was found: whose it is, where, and the tokens it takes."""

    key: str
    start: int
    end: int
    first: int
    last: int


def tokens(text: str) -> list[Token]:
    """Return the words of a text.

    Parameters
    ----------
    text : str
        Any.

    Returns
    -------
    list of Token
        Apostrophes are made plain.

    Examples
    --------
    >>> [(token.text, token.joined) for token in tokens("Broca’s area, pre-SMA")]
    [("Broca's", False), ('area', True), ('pre', False), ('SMA', True)]
    """
    found: list[Token] = []
    end = 0
    for match in _TOKEN.finditer(text):
        joined = bool(found) and _BETWEEN.fullmatch(text, end, match.start()) is not None
        found.append(Token(match.group().replace("’", "'"), match.start(), match.end(), joined))
        end = match.end()
    return found


class Phrases:
    """Names to look for, in lower case or, for abbreviations, as they are written.

    Examples
    --------
    >>> names = Phrases([("anterior insula", "a"), ("insula", "b")])
    >>> [found.key for found in names.find(tokens("The anterior-insula and the insula."))]
    ['a', 'b']
    """

    def __init__(self, names: Iterable[tuple[str, str]], *, exact: bool = False) -> None:
        self.exact = exact
        self._by_first: dict[str, list[tuple[tuple[str, ...], str]]] = {}
        for name, key in names:
            words = tuple(token.text for token in tokens(name if exact else name.lower()))
            if words:
                self._by_first.setdefault(words[0], []).append((words, key))
        for entries in self._by_first.values():
            entries.sort(key=lambda entry: -len(entry[0]))

    def at(self, words: list[Token], position: int) -> Found | None:
        """Return the longest name that begins at a token."""
        first = words[position].text if self.exact else words[position].text.lower()
        for name, key in self._by_first.get(first, ()):
            last = position + len(name) - 1
            if last >= len(words):
                continue
            run = words[position : last + 1]
            spelled = [token.text if self.exact else token.text.lower() for token in run]
            if all(token.joined for token in run[1:]) and tuple(spelled) == name:
                return Found(key, run[0].start, run[-1].end, position, last)
        return None

    def find(self, words: list[Token]) -> list[Found]:
        """Return the names in their order; none overlaps another."""
        found, position = [], 0
        while position < len(words):
            hit = self.at(words, position)
            if hit is None:
                position += 1
                continue
            found.append(hit)
            position = hit.last + 1
        return found
