"""Reads a manuscript, whatever its kind of file."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

from revinf.exceptions import InputFileError
from revinf.manuscript.document import Block, Document
from revinf.manuscript.read_docx import read_docx
from revinf.manuscript.read_html import read_html
from revinf.manuscript.read_pdf import read_pdf
from revinf.manuscript.read_tex import read_tex
from revinf.manuscript.read_text import read_markdown, read_text
from revinf.manuscript.sections import in_sections

__all__ = ["FORMATS", "read_document"]

FORMATS: dict[str, str] = {
    ".txt": "plain text",
    ".md": "Markdown",
    ".markdown": "Markdown",
    ".tex": "LaTeX",
    ".html": "HTML",
    ".htm": "HTML",
    ".docx": "Word",
    ".pdf": "PDF",
}
"""Endings that can be read."""

_LARGEST = 200_000_000
"""Bytes; a manuscript with all its pictures is smaller."""

_MOST_TEXT = 5_000_000
"""Letters: some 1,500 pages, which take a minute."""


def read_document(path: str | Path, *, progress: Callable[[int, int], None] | None = None) -> Document:
    """Read a manuscript in the order of its text, with sections and without references.

    Parameters
    ----------
    path : path
        Ends in .txt, .md, .tex, .html, .docx or .pdf.
    progress : callable, optional
        Told how many pages are read, of how many; only a PDF has pages.

    Returns
    -------
    Document
        Its blocks.

    Raises
    ------
    InputFileError
        If the file cannot be read, holds no text, or its reader is not installed.

    Examples
    --------
    >>> from revinf.knowledge import demo_folder
    >>> read_document(demo_folder() / "manuscript.md").blocks[0].text
    'What goes on in viewers of a film that does not exist'
    """
    path = Path(path)
    kind = path.suffix.lower()
    if kind not in FORMATS:
        raise InputFileError(
            f"a manuscript ends in {', '.join(sorted(FORMATS))}, but got {kind or 'none'!r}; save it as one of these",
            path=path,
        )
    try:
        size = path.stat().st_size
    except OSError as error:
        raise InputFileError(f"cannot be read ({error.strerror or error}); check the path", path=path) from None
    if not path.is_file():
        raise InputFileError("is not a file; name the manuscript itself", path=path)
    if size > _LARGEST:
        raise InputFileError(f"has {size:,} bytes, which no manuscript needs; save its text alone", path=path)
    blocks = _read(path, kind, progress)
    if not any(character.isalpha() for block in blocks for character in block.text):
        remedy = "a scan needs text recognition first" if kind == ".pdf" else "is it the right file?"
        raise InputFileError(f"holds no text; {remedy}", path=path)
    letters = sum(len(block.text) for block in blocks)
    if letters > _MOST_TEXT:
        raise InputFileError(
            f"holds {letters:,} letters of text, which no manuscript has; is it the right file?", path=path
        )
    return Document(name=path.name, blocks=tuple(in_sections(blocks)))


def _read(path: Path, kind: str, progress: Callable[[int, int], None] | None) -> list[Block]:
    """Return the blocks of a file."""
    if kind == ".pdf":
        return read_pdf(path, progress)
    if kind == ".docx":
        return read_docx(path)
    readers = {".tex": read_tex, ".html": read_html, ".htm": read_html, ".txt": read_text}
    return readers.get(kind, read_markdown)(path)
