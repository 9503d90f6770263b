"""Plain lines to blocks: for text files, and for the pages of a PDF."""

from __future__ import annotations

import re
from collections.abc import Sequence

from revinf.manuscript.document import Block
from revinf.manuscript.joining import joined
from revinf.manuscript.sections import section_of

__all__ = ["blocks_of_lines", "table_cells"]

_LISTED = re.compile(r"^\s*(?:[-*+•]|\d+[.)])\s+\S")


def blocks_of_lines(lines: Sequence[tuple[str, str]]) -> list[Block]:
    """Return the blocks of plain lines: a blank line or a known heading ends a paragraph.

    Parameters
    ----------
    lines : sequence of (str, str)
        Text of each line, and where it stands.

    Returns
    -------
    list of Block
        Rows of numbers are rows of a table.

    Examples
    --------
    >>> blocks = blocks_of_lines([("Discussion", "line 1"), ("It was", "line 2"), ("active.", "line 3")])
    >>> [(block.kind, block.text) for block in blocks]
    [('heading', 'Discussion'), ('prose', 'It was active.')]
    """
    blocks: list[Block] = []
    run: list[tuple[str, str]] = []
    header: tuple[str, ...] = ()

    def close() -> None:
        if run:
            blocks.append(joined(run))
            run.clear()

    for text, where in lines:
        stripped = text.strip()
        cells = table_cells(stripped)
        if not stripped:
            close()
        elif section_of(stripped) and len(stripped) < 60:
            close()
            blocks.append(joined([(stripped, where)], kind="heading"))
        elif (
            re.search(r"\bx\W+y\W+z\b", stripped, re.IGNORECASE)
            and len(stripped) < 120
            and not re.search(r"\d{2}", stripped)
        ):
            close()
            header = tuple(re.split(r"\t+|\s{2,}|\s+(?=[xyz]\b)|(?<=\b[xyz])\s+", stripped))
        elif cells:
            close()
            blocks.append(Block(kind="row", text=stripped, marks=((0, where),), cells=cells, header=header))
        else:
            if _LISTED.match(text):
                close()
            run.append((text, where))
    close()
    return blocks


_NUMBER = r"[-+\u2212\u2010\u2011\u2013]?\d{1,5}(?:\.\d+)?"
_ROW = re.compile(rf"^(?P<label>\D[^\d]*?(?:\(?BA\s?[\d/, ]+\)?)?)\s+(?P<numbers>{_NUMBER}(?:\s+\S+)*)$")


def table_cells(line: str) -> tuple[str, ...]:
    """Return the cells of a line that is a row of a table of coordinates; empty for any other line.

    Examples
    --------
    >>> table_cells("left amygdala  -22 -4 -18  MNI")
    ('left amygdala', '-22', '-4', '-18', 'MNI')
    >>> table_cells("The sample had 20 volunteers.")
    ()
    """
    if len(line) > 160 or line.endswith((".", ",", ";", ":")):
        return ()
    found = _ROW.match(line)
    if found is None:
        return ()
    rest = found["numbers"].split()
    numeric = [bool(re.fullmatch(_NUMBER, word)) for word in rest]
    if sum(numeric) < 3 or len(rest) > 14 or numeric.count(False) > numeric.count(True):
        return ()
    return (found["label"].strip(), *rest)
