"""Word documents: paragraphs and tables in their order."""

from __future__ import annotations

import zipfile
from pathlib import Path
from typing import Any

from revinf.exceptions import InputFileError
from revinf.manuscript.document import Block, Kind
from revinf.manuscript.extras import needed
from revinf.manuscript.joining import clean, joined

__all__ = ["read_docx"]

_LARGEST = 100_000_000
"""Bytes of text inside; more is a bomb, not a manuscript."""


def read_docx(path: Path) -> list[Block]:
    """Read a .docx file.

    Parameters
    ----------
    path : pathlib.Path
        The file.

    Returns
    -------
    list of Block
        Places are paragraph numbers; tables count as the paragraph before them.

    Raises
    ------
    InputFileError
        If python-docx is not installed, or the file is no Word document.
    """
    docx = needed("docx", "python-docx", path)
    _refuse_bombs(path)
    try:
        document = docx.Document(str(path))
        return _blocks(document)
    except Exception as error:  # the reader raises whatever its parsers raise
        if isinstance(error, (MemoryError, InputFileError)):
            raise
        raise InputFileError(
            f"is not a readable Word document ({type(error).__name__}); open it in a word processor and save it again",
            path=path,
        ) from None


def _refuse_bombs(path: Path) -> None:
    """Refuse what is no zip file, and one that unpacks to far more than a manuscript."""
    try:
        with zipfile.ZipFile(path) as archive:
            entries = archive.infolist()
    except (zipfile.BadZipFile, OSError, ValueError, NotImplementedError):
        raise InputFileError(
            "is not a readable Word document (no zip archive; an encrypted one is none); save it without a password",
            path=path,
        ) from None
    text = sum(entry.file_size for entry in entries if entry.filename.endswith((".xml", ".rels")))
    if text > _LARGEST or len(entries) > 20_000:
        raise InputFileError(
            f"unpacks to {text:,} bytes of text, which no manuscript needs; save it as .txt", path=path
        )


def _blocks(document: Any) -> list[Block]:
    """Return paragraphs and rows in the order of the document."""
    blocks: list[Block] = []
    number = 0
    for item in document.iter_inner_content():
        if hasattr(item, "rows"):
            rows = [tuple(clean(cell.text).strip() for cell in row.cells) for row in item.rows]
            blocks += [
                Block(
                    kind="row",
                    text=" ".join(row),
                    marks=((0, f"table after paragraph {number}"),),
                    cells=row,
                    header=rows[0],
                )
                for row in rows[1:]
            ]
            continue
        text = clean(item.text)
        if not text.strip():
            continue
        number += 1
        style = str(item.style.name or "") if item.style is not None else ""
        kind: Kind = "heading" if style.startswith(("Heading", "Title")) or _looks_like_heading(text) else "prose"
        blocks.append(joined([(line, f"paragraph {number}") for line in text.split("\n")], kind=kind))
    return blocks


def _looks_like_heading(text: str) -> bool:
    """Tell a section's name that was typed without a heading style."""
    from revinf.manuscript.sections import section_of

    return len(text) < 60 and section_of(text) is not None
