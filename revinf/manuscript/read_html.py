"""HTML pages: headings, paragraphs, lists and tables; scripts, styles and navigation are left out."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from revinf.exceptions import InputFileError
from revinf.manuscript.document import Block
from revinf.manuscript.extras import needed
from revinf.manuscript.joining import clean, joined
from revinf.manuscript.read_text import decoded

__all__ = ["read_html"]

_HEADINGS = ("h1", "h2", "h3", "h4", "h5", "h6")
_PARAGRAPHS = ("p", "li", "blockquote", "figcaption", "caption", "dd", "dt", "td", "pre")
_SKIPPED = ("script", "style", "nav", "noscript", "template", "svg", "math", "head", "button", "select", "form")


def read_html(path: Path) -> list[Block]:
    """Read an .html file.

    Parameters
    ----------
    path : pathlib.Path
        The file; nothing it points to is fetched.

    Returns
    -------
    list of Block
        Places are lines of the file.

    Raises
    ------
    InputFileError
        If lxml is not installed or the file holds no page.
    """
    parser = needed("lxml.html", "lxml", path)
    etree = needed("lxml.etree", "lxml", path)
    text = clean(decoded(path))
    try:
        root = parser.document_fromstring(
            text.encode("utf-8"), parser=parser.HTMLParser(encoding="utf-8", no_network=True)
        )
    except (etree.LxmlError, ValueError) as error:
        raise InputFileError(f"is not a readable page ({type(error).__name__}); save it as .txt", path=path) from None
    etree.strip_elements(root, *_SKIPPED, with_tail=False)
    etree.strip_tags(root, etree.Comment, etree.ProcessingInstruction)
    blocks: list[Block] = []
    _collect(root, blocks)
    return blocks


def _collect(node: Any, blocks: list[Block]) -> None:
    """Add the blocks of a node, in the order of the page."""
    stack = [node]
    while stack:
        element = stack.pop()
        if not isinstance(element.tag, str):
            continue
        where = f"line {element.sourceline or 0}"
        if element.tag == "table":
            blocks.extend(_rows(element, where))
        elif element.tag in _HEADINGS:
            blocks.append(joined([(_text(element), where)], kind="heading"))
        elif element.tag in _PARAGRAPHS or not len(element):
            if _text(element):
                blocks.append(joined([(_text(element), where)]))
        elif _has_own_text(element):
            blocks.append(joined([(_text(element), where)]))
        else:
            stack.extend(reversed(element))


def _has_own_text(element: Any) -> bool:
    """Tell whether an element holds words beside its children."""
    return bool((element.text or "").strip()) or any((child.tail or "").strip() for child in element)


def _text(element: Any) -> str:
    """Return all words of an element."""
    return " ".join("".join(element.itertext()).split())


def _rows(table: Any, where: str) -> list[Block]:
    """Return the rows of a table below its first one."""
    rows = [tuple(_text(cell) for cell in row.iter("td", "th")) for row in table.iter("tr")]
    rows = [row for row in rows if row]
    return [Block(kind="row", text=" ".join(row), marks=((0, where),), cells=row, header=rows[0]) for row in rows[1:]]
