"""What `revinf demo` says after it has written the invented scenario."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from revinf.reports.terminal import hanging

__all__ = ["demo_screen"]


def demo_screen(folder: Path) -> list[Any]:
    """Return the screen that says what to try.

    Parameters
    ----------
    folder : pathlib.Path
        Where the scenario was written.

    Returns
    -------
    list
        Renderables.
    """
    from rich.text import Text

    return [
        Text(f"Wrote an INVENTED literature, manuscript and claims to {folder}. Nothing in them is real."),
        Text("\nTry, in that folder:\n"),
        hanging(
            [
                (
                    "build it",
                    "revinf build --peaks peaks.csv --annotations annotations.csv --studies studies.csv "
                    "--group group --study-is papers --invented --name 'Invented demonstration literature' "
                    "--out literature",
                ),
                (
                    "a selective place",
                    "revinf check --literature literature --peak -22 -4 -18 --term fear",
                ),
                ("a busy place", "revinf check --literature literature --peak 36 22 -2 --term disgust"),
                ("a lucky rare term", "revinf check --literature literature --peak -44 -56 -14 --term humour"),
                (
                    "a manuscript",
                    "revinf scan manuscript.docx --literature literature --out found.csv",
                ),
                ("all its claims", "revinf audit found.csv --literature literature --out report"),
                (
                    "outside the head",
                    "revinf check --literature literature --peak 60 -60 62 --term 'spatial attention'",
                ),
            ]
        ),
        Text("\nREADME.md there tells the story and lists the rest."),
    ]
