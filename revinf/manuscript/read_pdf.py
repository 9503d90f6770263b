"""PDF files: the text of each page, without running heads, page numbers and numbers in the margin."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Callable
from itertools import pairwise
from pathlib import Path
from typing import Any

from revinf.exceptions import InputFileError
from revinf.manuscript.document import Block
from revinf.manuscript.extras import needed
from revinf.manuscript.joining import clean
from revinf.manuscript.lines import blocks_of_lines

__all__ = ["read_pdf", "without_running_heads"]

_MOST_PAGES = 5_000
_DEPTH = 2
"""Lines at the head and at the foot of a page that may run through the document."""


def read_pdf(path: Path, progress: Callable[[int, int], None] | None = None) -> list[Block]:
    """Read a .pdf file.

    Parameters
    ----------
    path : pathlib.Path
        The file.
    progress : callable, optional
        Told how many pages are read, of how many.

    Returns
    -------
    list of Block
        Places are pages; a paragraph may run over two.

    Raises
    ------
    InputFileError
        If pypdfium2 is not installed, or the file is broken or needs a password.
    """
    pdfium = needed("pypdfium2", "pypdfium2", path)
    try:
        document = pdfium.PdfDocument(str(path))
    except pdfium.PdfiumError as error:
        if "password" in str(error).lower():
            raise InputFileError("needs a password; save it without one", path=path) from None
        raise InputFileError("is not a readable PDF; export it again", path=path) from None
    try:
        pages = _pages(document, pdfium, path, progress)
    finally:
        document.close()
    lines = [
        (line, f"page {number}") for number, page in enumerate(without_running_heads(pages), start=1) for line in page
    ]
    return blocks_of_lines(lines)


def _pages(document: Any, pdfium: Any, path: Path, progress: Callable[[int, int], None] | None) -> list[list[str]]:
    """Return the lines of every page."""
    total = len(document)
    if total > _MOST_PAGES:
        raise InputFileError(f"has {total:,} pages, which no manuscript needs; give the pages that matter", path=path)
    pages = []
    for number in range(total):
        try:
            page = document[number]
            text = page.get_textpage()
            # A word cut at the end of a line is marked by the reader; a plain hyphen is put back.
            raw = text.get_text_bounded().replace("\ufffe", "-").replace("\x02", "-")
            text.close()
            page.close()
        except pdfium.PdfiumError:
            raise InputFileError(f"page {number + 1} cannot be read; export the PDF again", path=path) from None
        pages.append(clean(raw.replace("\r\n", "\n").replace("\r", "\n")).split("\n"))
        if progress is not None:
            progress(number + 1, total)
    return pages


def without_running_heads(pages: list[list[str]]) -> list[list[str]]:
    """Return the pages without lines that stand on most of them, page numbers, and numbers in the margin.

    Parameters
    ----------
    pages : list of list of str
        Lines of each page.

    Returns
    -------
    list of list of str
        As many pages.

    Examples
    --------
    >>> without_running_heads([["A head", "One.", "1"], ["A head", "Two.", "2"], ["A head", "Three.", "3"]])
    [['One.'], ['Two.'], ['Three.']]
    """
    edges = Counter(
        re.sub(r"\d+", "#", line.strip())
        for page in pages
        for line in {line for line in (*_edge(page, _DEPTH),) if line.strip()}
    )
    often = {line for line, times in edges.items() if times >= max(3, 0.5 * len(pages))}
    kept = []
    for page in pages:
        ends = set(map(id, _edge(page, _DEPTH)))
        body = [
            line
            for line in page
            if not (id(line) in ends and (re.sub(r"\d+", "#", line.strip()) in often or _is_page_number(line)))
        ]
        kept.append(_without_margin(body))
    return kept


def _edge(page: list[str], depth: int) -> list[str]:
    """Return the first and last lines of a page that hold something."""
    filled = [line for line in page if line.strip()]
    return filled if len(filled) <= 2 * depth else [*filled[:depth], *filled[-depth:]]


def _is_page_number(line: str) -> bool:
    """Tell a line that is only a page number."""
    return re.fullmatch(r"\W*(?:page\s+)?\d{1,4}(?:\s*(?:/|of)\s*\d{1,4})?\W*", line.strip(), re.IGNORECASE) is not None


def _without_margin(page: list[str]) -> list[str]:
    """Return the lines without the running numbers that review copies have in the margin."""
    numbered = [re.match(r"\s*(\d{1,4})(?:\s+(?=\S)|\s*$)", line) for line in page]
    values = [int(found[1]) for found in numbered if found]
    rising = sum(later - earlier == 1 for earlier, later in pairwise(values))
    if (
        len(values) < 10
        or rising < 0.8 * (len(values) - 1)
        or len(values) < 0.6 * sum(bool(line.strip()) for line in page)
    ):
        return page
    return [line[found.end() :] if found else line for line, found in zip(page, numbered, strict=True)]
