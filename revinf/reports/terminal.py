"""What every terminal screen shares: the console, headings, and lines that hang under a label."""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from rich.console import Console
    from rich.table import Table

__all__ = ["fitting", "hanging", "heading", "new_console", "plain_table", "screen_width", "show"]

_WIDEST = 104
"""Columns beyond which a line of prose is hard to read."""

_NAME = 18
"""Columns that a name needs so that it does not fall apart into syllables."""

_GAP = 2


def new_console(width: int | None = None, *, to_stderr: bool = False) -> Console:
    """Return a console on stdout; colours only where a terminal shows them and NO_COLOR is not set."""
    from rich.console import Console

    console = Console(file=sys.stderr if to_stderr else sys.stdout, highlight=False, soft_wrap=False)
    wanted = width or (console.width if console.is_terminal else _WIDEST)
    console.width = max(40, min(wanted, _WIDEST))
    return console


def screen_width() -> int:
    """Return the columns that a screen on stdout has."""
    return new_console().width


def show(*renderables: Any, width: int | None = None) -> None:
    """Print to stdout."""
    console = new_console(width)
    for renderable in renderables:
        console.print(renderable)


def heading(text: str) -> Any:
    """Return a heading with a blank line above it."""
    from rich.text import Text

    return Text.assemble("\n", (text, "bold"))


def hanging(rows: list[tuple[str, str]], *, style: str = "dim", label_width: int = 11) -> Table:
    """Return label and text pairs whose text hangs under itself where it wraps."""
    from rich.table import Table
    from rich.text import Text

    table = Table.grid(padding=(0, 2, 0, 0))
    table.add_column(style=style, min_width=label_width, no_wrap=True)
    table.add_column(overflow="fold")
    for label, text in rows:
        table.add_row(Text(label), Text(text))
    return table


def plain_table(header: list[str], rows: list[list[str]], *, right: tuple[int, ...] = ()) -> Table:
    """Return a table without rules; `right` names the columns that align right."""
    from rich.table import Table
    from rich.text import Text

    table = Table(box=None, padding=(0, 2, 0, 0), header_style="dim")
    for position, name in enumerate(header):
        table.add_column(
            Text(name),
            justify="right" if position in right else "left",
            overflow="fold",
            no_wrap=position > 0,  # numbers and strips stay whole; the first column gives way
        )
    for row in rows:
        table.add_row(*(Text(cell) for cell in row))
    return table


def fitting(
    header: list[str], rows: list[list[str]], width: int, drop: tuple[int, ...]
) -> tuple[list[str], list[list[str]]]:
    """Return a table without the columns that do not fit; what is left out stands in the JSON.

    Parameters
    ----------
    header, rows : list
        Of a plain table whose first column holds names and may wrap.
    width : int, columns
        Of the screen.
    drop : tuple of int
        Columns that may go, the least needed first.

    Returns
    -------
    list, list
        Header and rows.

    Examples
    --------
    >>> fitting(["process", "rate", "q"], [["fear", "0.5", "0.1"]], 12, (2,))
    (['process', 'rate'], [['fear', '0.5']])
    """
    kept = list(range(len(header)))
    widest = [max(len(row[at]) for row in [header, *rows]) for at in kept]
    for column in drop:
        if min(widest[0], _NAME) + sum(widest[at] for at in kept[1:]) + _GAP * len(kept) <= width:
            break
        kept.remove(column)
    return [header[at] for at in kept], [[row[at] for at in kept] for row in rows]
