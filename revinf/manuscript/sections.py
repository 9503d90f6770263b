"""Gives every block its section, and drops the references."""

from __future__ import annotations

import re
from collections.abc import Sequence

from revinf.manuscript.document import Block

__all__ = ["in_sections", "section_of"]

_SECTIONS = (
    ("abstract", r"abstract|summary|synopsis"),
    ("introduction", r"(?:general )?introduction|background"),
    ("methods", r"(?:materials? and )?methods?(?: and materials?)?|methodology|experimental procedures?|procedures?"),
    ("results", r"results?|findings"),
    (
        "discussion",
        r"results? and discussion|(?:general )?discussion|conclusions?|concluding remarks|"
        r"discussion and conclusions?|interpretation|limitations",
    ),
    ("references", r"references?|bibliography|literature cited|works cited|reference list"),
    (
        "other",
        r"acknowledge?ments?|funding|author contributions?|(?:conflicts?|declarations?) of interests?|"
        r"competing interests?|data availability(?: statement)?|ethics(?: statement)?|supplement\w*(?: \w+)?|"
        r"appendix(?: \w+)?|figure (?:captions?|legends?)|tables?|notes?|keywords?|highlights|significance statement",
    ),
)
_NUMBERED = re.compile(r"^(?:\d+(?:\.\d+)*|[IVX]+)[.)]?\s*\|?\s*")


def section_of(heading: str) -> str | None:
    """Return the section that a heading opens; None for a heading within one.

    Examples
    --------
    >>> section_of("4. General Discussion"), section_of("Amygdala and fear"), section_of("REFERENCES")
    ('discussion', None, 'references')
    """
    plain = _NUMBERED.sub("", " ".join(heading.split())).strip(" .:*#").lower()
    for name, pattern in _SECTIONS:
        if re.fullmatch(pattern, plain):
            return name
    return None


def in_sections(blocks: Sequence[Block]) -> list[Block]:
    """Return the blocks with their sections, numbered within them, without the references.

    Parameters
    ----------
    blocks : sequence of Block
        As read.

    Returns
    -------
    list of Block
        What stands before the first known heading is the title and, after it, "other".

    Examples
    --------
    >>> blocks = [Block(kind="heading", text=text) for text in ("On fear", "Discussion", "References")]
    >>> [(block.text, block.section) for block in in_sections(blocks)]
    [('On fear', 'title'), ('Discussion', 'discussion')]
    """
    section, number = "title", 0
    placed: list[Block] = []
    for block in blocks:
        if block.kind == "heading":
            opened = section_of(block.text)
            if opened is not None:
                section, number = opened, 0
            elif section == "references" and len(block.text) < 80:
                section, number = "other", 0  # an appendix, a table, a figure after the references
        elif section == "title" and placed:
            section, number = "other", 0
        if section == "references":
            continue
        number += block.kind == "prose"
        placed.append(block.moved(section, number))
    return placed
