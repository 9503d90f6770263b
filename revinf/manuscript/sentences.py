"""Splits prose into sentences, and keeps where each begins."""

from __future__ import annotations

import re

__all__ = ["split_sentences"]

_SHORT = frozenset(
    [
        "e.g",
        "i.e",
        "cf",
        "vs",
        "al",
        "fig",
        "figs",
        "eq",
        "eqs",
        "tab",
        "no",
        "nos",
        "ref",
        "refs",
        "approx",
        "ca",
        "resp",
        "exp",
        "dr",
        "prof",
        "st",
        "vol",
        "pp",
        "ed",
        "eds",
        "ch",
        "sect",
        "suppl",
        "viz",
        "etc",
        "incl",
        "max",
        "min",
    ]
)
"""Words that a full stop shortens without ending a sentence; "et al." and "etc." may end one, which loses nothing."""

_END = re.compile(r"[.!?]+[\"'”’)\]]*(?:\[\d[\d,\s–-]*\])?(?=\s+[\"'“‘(\[]*[^\W_])")


_LONGEST = 5_000
"""Letters; no sentence has as many."""


def split_sentences(text: str) -> list[tuple[int, str]]:
    """Return the sentences of a paragraph.

    Parameters
    ----------
    text : str
        With its lines joined.

    Returns
    -------
    list of (int, str)
        Offset of the first character, and the sentence.

    Examples
    --------
    >>> [sentence for _, sentence in split_sentences("The peak (cf. Fig. 2) was at x = -4.5. It fits, e.g. here.")]
    ['The peak (cf. Fig. 2) was at x = -4.5.', 'It fits, e.g. here.']
    """
    sentences = []
    start = 0
    for end in _END.finditer(text):
        if _goes_on(text, start, end):
            continue
        piece = text[start : end.end()]
        sentences.append((start + len(piece) - len(piece.lstrip()), piece.strip()))
        start = end.end()
    rest = text[start:]
    if rest.strip():
        sentences.append((start + len(rest) - len(rest.lstrip()), rest.strip()))
    return [piece for sentence in sentences for piece in _in_pieces(*sentence)]


def _in_pieces(start: int, sentence: str) -> list[tuple[int, str]]:
    """Cut what is far too long for a sentence, since the search for claims takes time with the square of its length."""
    return [
        (start + at, sentence[at : at + _LONGEST].strip() if len(sentence) > _LONGEST else sentence)
        for at in range(0, len(sentence), _LONGEST)
    ]


def _goes_on(text: str, start: int, end: re.Match[str]) -> bool:
    """Tell whether what looks like an end is none."""
    if not end.group().startswith("."):
        # A question in brackets is a part of its sentence: "Fear (how else to explain it?) grew."
        return ")" in end.group() and text.rfind("(", start, end.start()) > start
    following = text[end.end() :].lstrip().lstrip("\"'“‘([")[:1]
    # A few letters suffice: a longer word is no abbreviation, and a search from its every letter would take for ever.
    word = re.search(r"[\w.]*$", text[max(start, end.start() - 20) : end.start()])
    last = word.group().lower() if word else ""
    if re.search(r"\d\s+(?:s|min|h|m|g|ml|mm|cm|ms|Hz|T)$", text[max(start, end.start() - 20) : end.start()]):
        return following.islower()  # a unit behind a number ends its sentence
    if last in _SHORT or (len(last) == 1 and last.isalpha() and last not in "xyz"):
        return True
    return following.islower()
