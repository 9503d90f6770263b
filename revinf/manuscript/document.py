"""What a document is once it has been read: blocks in order, each with its section and its place in the file."""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass, replace
from typing import Literal

__all__ = ["Block", "Document", "Kind"]

Kind = Literal["heading", "prose", "row"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Block:
    """One heading, one paragraph, or one row of a table.

    Parameters
    ----------
    kind : {"heading", "prose", "row"}
        What it is.
    text : str
        With its lines joined.
    marks : tuple of (int, str)
        Offsets in the text and where they stand in the file: "line 12", "page 3". The first offset is 0.
    section : str
        "title", "abstract", "introduction", "methods", "results", "discussion", "other"; empty while unknown.
    cells, header : tuple of str
        Of a row: its cells, and the cells of the first row of its table.
    number : int
        Of the paragraph within its section, from 1.
    """

    kind: Kind
    text: str
    marks: tuple[tuple[int, str], ...] = ((0, ""),)
    section: str = ""
    cells: tuple[str, ...] = ()
    header: tuple[str, ...] = ()
    number: int = 0

    def where(self, offset: int) -> str:
        """Say where an offset of the text stands in the file."""
        at = bisect_right([start for start, _ in self.marks], offset) - 1
        return self.marks[max(at, 0)][1]

    def moved(self, section: str, number: int) -> Block:
        """Return the block in a section."""
        return replace(self, section=section, number=number)


@dataclass(frozen=True, slots=True, kw_only=True)
class Document:
    """A document as it reads, without its references."""

    name: str
    blocks: tuple[Block, ...]

    def prose(self) -> list[Block]:
        """Return the blocks that hold sentences."""
        return [block for block in self.blocks if block.kind != "row"]
