"""Makes text from strangers safe to stand in a table: in CSV, in Markdown, on one line."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Collection

__all__ = ["csv_cell", "file_name", "markdown_cell", "one_line"]

_FORMULA = ("=", "+", "-", "@", "\t", "\r")


def one_line(text: str) -> str:
    r"""Return text without line breaks and control characters, which could forge rows or reorder words.

    Examples
    --------
    >>> one_line("two\nlines")
    'two lines'
    """
    kept = (
        " " if character in "\r\n\t\v\f\u2028\u2029" else character
        for character in text
        if unicodedata.category(character) not in ("Cc", "Cf") or character in "\r\n\t\v\f\u200d"
    )
    return " ".join("".join(kept).split())


def csv_cell(value: object) -> object:
    """Return a cell that no spreadsheet runs as a formula; what parses as a number stays as it is.

    Examples
    --------
    >>> csv_cell("=1+1"), csv_cell("-24"), csv_cell(-24), csv_cell("fear")
    ("'=1+1", '-24', -24, 'fear')
    """
    if not isinstance(value, str):
        return value
    text = one_line(value)
    if not text.startswith(_FORMULA):
        return text
    try:
        float(text)
    except ValueError:
        return "'" + text
    return text


def markdown_cell(text: str) -> str:
    r"""Return text that shows as itself in Markdown, also inside a table.

    Examples
    --------
    >>> markdown_cell("a|b *c* <i>")
    'a\\|b \\*c\\* &lt;i&gt;'
    """
    escaped = one_line(text).replace("\\", "\\\\")
    for character in "`*_{}[]#|!~$^":
        escaped = escaped.replace(character, "\\" + character)
    escaped = escaped.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")
    # A bare address would become a link.
    return escaped.replace("://", ":&#47;&#47;").replace("www.", "www&#46;").replace("@", "&#64;")


def file_name(text: str, *, taken: Collection[str] = ()) -> str:
    """Return a name for a file or folder: letters and digits, joined by hyphens; numbered where it is taken.

    Examples
    --------
    >>> file_name("Theory of mind"), file_name("../a b", taken=["a-b"]), file_name("...")
    ('theory-of-mind', 'a-b-2', 'term')
    """
    plain = unicodedata.normalize("NFKD", text).encode("ascii", "ignore").decode().lower()
    stem = re.sub(r"[^a-z0-9]+", "-", plain).strip("-")[:60].strip("-") or "term"
    name, number = stem, 1
    while name in taken:
        number += 1
        name = f"{stem}-{number}"
    return name
