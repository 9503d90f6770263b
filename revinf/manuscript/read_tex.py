"""LaTeX sources: sections, paragraphs and tabular rows; comments, figures and the bibliography are left out."""

from __future__ import annotations

import re
import warnings
from pathlib import Path
from typing import Any

from revinf.manuscript.document import Block
from revinf.manuscript.extras import needed
from revinf.manuscript.joining import clean, joined
from revinf.manuscript.read_text import decoded

__all__ = ["read_tex"]

_HEADING = re.compile(r"\\(?:title|(?:sub)*section|paragraph|chapter)\*?(?:\[[^\]]*\])?\{")
_DROPPED = re.compile(
    r"\\begin\{(?P<name>thebibliography|comment|tikzpicture|verbatim|lstlisting)\}.*?(?:\\end\{(?P=name)\}|\Z)",
    re.DOTALL,
)
_COMMANDS = re.compile(r"\\(?:maketitle|tableofcontents|listof\w+|today|newpage|clearpage|noindent|centering)\b")
_CITED = re.compile(r"~?\\(?:[cC]ite\w*|ref|autoref|[cC]ref|eqref|label|footnotemark)\*?(?:\[[^\]]*\])*\{[^}]*\}")


def read_tex(path: Path) -> list[Block]:
    """Read a .tex file; what it includes is not followed.

    Parameters
    ----------
    path : pathlib.Path
        The file.

    Returns
    -------
    list of Block
        Places are lines of the file.

    Raises
    ------
    InputFileError
        If pylatexenc is not installed.
    """
    latex = needed("pylatexenc.latex2text", "pylatexenc", path)
    converter = latex.LatexNodes2Text(math_mode="text", keep_comments=False, strict_latex_spaces=False)
    source = _COMMANDS.sub("", re.sub(r"(?<!\\)%.*", "", clean(decoded(path))))
    body = re.search(r"\\begin\{document\}", source)
    title = re.search(r"\\title\*?\{(?P<text>[^{}]*)\}", source)
    blocks = []
    if title:
        blocks.append(
            joined([(_plain(converter, title["text"]), f"line {_line(source, title.start())}")], kind="heading")
        )
    start = body.end() if body else 0
    text = source[start:]
    for dropped in reversed(list(_DROPPED.finditer(text))):  # lines stay where they were
        text = text[: dropped.start()] + "\n" * dropped.group().count("\n") + text[dropped.end() :]
    offset = _line(source, start) - 1
    position = 0
    for piece in re.split(
        r"(\n\s*\n|\\begin\{tabular\}.*?\\end\{tabular\}|\\maketitle|\\(?:begin|end)\{abstract\})",
        text,
        flags=re.DOTALL,
    ):
        where = offset + _line(text, position + len(piece) - len(piece.lstrip()))
        position += len(piece)
        if piece.startswith(r"\begin{tabular}"):
            blocks += _rows(converter, piece, where)
        elif piece.startswith(r"\begin{abstract}"):
            blocks.append(joined([("Abstract", f"line {where}")], kind="heading"))
        elif piece.strip():
            blocks += _paragraphs(converter, piece.strip(), where)
    return [block for block in blocks if block.text]


def _line(text: str, offset: int) -> int:
    """Return the line of an offset, from 1."""
    return text.count("\n", 0, offset) + 1


def _paragraphs(converter: Any, piece: str, where: int) -> list[Block]:
    """Return the headings and the prose of a piece without blank lines."""
    blocks, position = [], 0
    for heading in _HEADING.finditer(piece):
        if heading.start() < position:
            continue
        end, depth = heading.end(), 1
        while end < len(piece) and depth:
            depth += {"{": 1, "}": -1}.get(piece[end], 0)
            end += 1
        blocks.append(_prose(converter, piece[position : heading.start()], where + piece.count("\n", 0, position)))
        title = _plain(converter, piece[heading.end() : end - 1])
        blocks.append(joined([(title, f"line {where + piece.count(chr(10), 0, heading.start())}")], kind="heading"))
        position = end
    blocks.append(_prose(converter, piece[position:], where + piece.count("\n", 0, position)))
    return blocks


def _prose(converter: Any, text: str, where: int) -> Block:
    """Return a paragraph whose lines keep their places."""
    lines = text.split("\n")
    plain = [(_plain(converter, line), f"line {where + number}") for number, line in enumerate(lines)]
    if text.count("{") != text.count("}") or any(line.count("{") != line.count("}") for line in lines):
        plain = [(_plain(converter, text), f"line {where}")]  # a command runs over several lines
    return joined([(line, place) for line, place in plain if line])


def _plain(converter: Any, text: str) -> str:
    """Return LaTeX as text; math keeps its signs and numbers."""
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        try:
            return " ".join(str(converter.latex_to_text(_CITED.sub("", text), tolerant_parsing=True)).split())
        except Exception:  # a fragment that the parser cannot take is shown as it is
            return " ".join(re.sub(r"[\\{}$]", " ", text).split())


def _rows(converter: Any, table: str, where: int) -> list[Block]:
    """Return the rows of a tabular below its first one."""
    inner = re.sub(r"^\\begin\{tabular\}(?:\[[^\]]*\])?\{[^}]*\}|\\end\{tabular\}$", "", table)
    inner = re.sub(r"\\(?:hline|toprule|midrule|bottomrule|cline\{[^}]*\}|cmidrule(?:\([^)]*\))?\{[^}]*\})", "", inner)
    rows = []
    for row in re.split(r"\\\\(?:\[[^\]]*\])?", inner):
        cells = tuple(_plain(converter, cell) for cell in re.split(r"(?<!\\)&", row))
        if any(cells):
            rows.append(cells)
    return [
        Block(kind="row", text=" ".join(row), marks=((0, f"line {where}"),), cells=row, header=rows[0])
        for row in rows[1:]
    ]
