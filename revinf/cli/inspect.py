"""`revinf inspect`: what a literature holds and how it was built."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import AsJson

__all__ = ["inspect"]


def inspect(
    folder: Annotated[Path, typer.Argument(metavar="FOLDER", help="A literature made by revinf build.")],
    verify: Annotated[
        bool, typer.Option("--verify", help="Recompute the hash of every array and refuse a damaged one.")
    ] = False,
    as_json: AsJson = False,
) -> None:
    """Show what a literature holds and how it was built.

    Example: revinf inspect literature --verify
    """
    from revinf.literature.literature import Literature

    summary = Literature.open(folder, verify=verify).summary()
    if as_json:
        from revinf.reports.machine import print_json

        print_json(summary)
    else:
        from revinf.reports.literature_screens import inspect_screen
        from revinf.reports.terminal import show

        show(*inspect_screen(summary, verified=verify))
