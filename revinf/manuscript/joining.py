"""Joins the lines of a paragraph: wrapped ones by a space, words cut by a hyphen into one."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Sequence

from revinf.manuscript.document import Block, Kind

__all__ = ["clean", "joined"]

_LIGATURES = str.maketrans(
    {
        "ﬀ": "ff",
        "ﬁ": "fi",
        "ﬂ": "fl",
        "ﬃ": "ffi",
        "ﬄ": "ffl",
        "ﬅ": "st",
        "ﬆ": "st",
        "\u00ad": None,
        "\u200b": None,
        "\ufeff": None,
        "\u00a0": " ",
        "\u2009": " ",
        "\u202f": " ",
        "\u2007": " ",
    }
)
_KEPT = frozenset(
    [
        "anti",
        "co",
        "cross",
        "double",
        "event",
        "fronto",
        "goal",
        "high",
        "inter",
        "intra",
        "low",
        "meta",
        "mid",
        "multi",
        "non",
        "occipito",
        "orbito",
        "parieto",
        "post",
        "pre",
        "re",
        "right",
        "left",
        "reward",
        "self",
        "single",
        "sub",
        "super",
        "task",
        "temporo",
        "three",
        "top",
        "bottom",
        "two",
        "value",
        "well",
        "whole",
    ]
)
"""First halves of compounds that are written with a hyphen anyway."""


def clean(text: str) -> str:
    """Return text in NFC, without ligatures, soft hyphens and control characters, odd spaces made plain.

    Parameters
    ----------
    text : str
        As a file holds it.

    Returns
    -------
    str
        Line breaks stay.

    Examples
    --------
    >>> clean("re\u00adward \ufb01ts")
    'reward fits'
    """
    plain = unicodedata.normalize("NFC", text.translate(_LIGATURES))
    return "".join(c for c in plain if c in "\n\t" or unicodedata.category(c) not in ("Cc", "Cf", "Cs", "Co"))


def joined(lines: Sequence[tuple[str, str]], *, kind: Kind = "prose") -> Block:
    """Join lines into one block.

    Parameters
    ----------
    lines : sequence of (str, str)
        Text of each line, and where it stands.
    kind : str, default "prose"
        Of the block.

    Returns
    -------
    Block
        With a mark at the start of each line.

    Examples
    --------
    >>> block = joined([("the para-", "line 1"), ("hippocampal and the temporo-", "line 2"), ("parietal", "line 3")])
    >>> block.text, block.where(20)
    ('the parahippocampal and the temporo-parietal', 'line 2')
    """
    text, marks = "", []
    for raw, where in lines:
        line = " ".join(raw.split())
        if not line:
            continue
        cut = re.search(r"([^\W\d_]+)[-\u2010\u2011]$", text[-60:])
        if cut and re.match(r"[a-zà-ÿ]", line):
            if cut.group(1).lower() not in _KEPT:
                text = text[:-1]
        elif text:
            text += " "
        marks.append((len(text), where))
        text += line
    return Block(kind=kind, text=text, marks=tuple(marks) or ((0, ""),))
