"""Plain text and Markdown."""

from __future__ import annotations

import re
from pathlib import Path

from revinf.exceptions import InputFileError
from revinf.manuscript.document import Block
from revinf.manuscript.joining import clean, joined
from revinf.manuscript.lines import blocks_of_lines

__all__ = ["decoded", "read_markdown", "read_text"]


def decoded(path: Path) -> str:
    """Return the text of a file: UTF-8 or UTF-16 by its mark, else UTF-8, else Windows Latin-1.

    Parameters
    ----------
    path : pathlib.Path
        The file.

    Returns
    -------
    str
        With plain line ends.

    Raises
    ------
    InputFileError
        If it cannot be read or is not text.
    """
    try:
        raw = path.read_bytes()
    except OSError as error:
        raise InputFileError(f"cannot be read ({error.strerror or error}); check the path", path=path) from None
    if raw.startswith((b"\xff\xfe", b"\xfe\xff")):
        text = raw.decode("utf-16", errors="replace")
    elif b"\0" in raw:
        raise InputFileError("is not text (it holds NUL bytes); give the manuscript itself", path=path)
    else:
        try:
            text = raw.decode("utf-8-sig")
        except UnicodeDecodeError:
            text = raw.decode("cp1252", errors="replace")
    return text.replace("\r\n", "\n").replace("\r", "\n")


def read_text(path: Path) -> list[Block]:
    """Read plain text; a blank line ends a paragraph."""
    return blocks_of_lines(_numbered(decoded(path)))


def _numbered(text: str) -> list[tuple[str, str]]:
    """Return the lines with their numbers."""
    return [(line, f"line {number}") for number, line in enumerate(clean(text).split("\n"), start=1)]


def read_markdown(path: Path) -> list[Block]:
    """Read Markdown: headings, tables with bars, and paragraphs without their marks."""
    blocks: list[Block] = []
    run: list[tuple[str, str]] = []
    header: tuple[str, ...] = ()
    fenced = False

    def close() -> None:
        if run:
            blocks.extend(blocks_of_lines(run))
            run.clear()

    for line, where in _numbered(decoded(path)):
        stripped = line.strip()
        if re.match(r"(?:```|~~~)", stripped):
            fenced = not fenced
            close()
        elif fenced:
            continue
        elif heading := re.match(r"#{1,6}\s+(.*?)\s*#*$", stripped):
            close()
            header = ()
            blocks.append(joined([(_unmarked(heading[1]), where)], kind="heading"))
        elif run and re.fullmatch(r"=+|-{2,}", stripped):  # the line under a heading
            last = run.pop()
            close()
            blocks.append(joined([(_unmarked(last[0]), last[1])], kind="heading"))
        elif stripped.startswith("|") and stripped.count("|") > 2:
            close()
            cells = tuple(_unmarked(cell.strip()) for cell in re.split(r"(?<!\\)\|", stripped.strip("|")))
            if all(re.fullmatch(r":?-*:?", cell) for cell in cells):
                continue
            if not header:
                header = cells
            else:
                blocks.append(Block(kind="row", text=" ".join(cells), marks=((0, where),), cells=cells, header=header))
        else:
            if not stripped:
                header = ()
            run.append((_unmarked(line), where))
    close()
    return blocks


def _unmarked(text: str) -> str:
    """Return Markdown text without its marks."""
    plain = re.sub(r"!?\[([^\]]*)\]\([^)]*\)", r"\1", text)
    plain = re.sub(r"(?<!\w)(\*\*|__|\*|_)(?=\S)(.+?)(?<=\S)\1(?!\w)", r"\2", plain)
    plain = re.sub(r"(?:(?<!\S)\*\*(?=\S))|(?:(?<=\S)\*\*(?!\w))", "", plain)  # bold over several lines
    plain = re.sub(r"`([^`]*)`", r"\1", plain)
    return re.sub(r"\\([\\`*_{}\[\]()#+.!|>~-])", r"\1", re.sub(r"^\s*>\s?", "", plain))
