"""`revinf demo`: writes the invented scenario to a folder and says what to run on it."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

__all__ = ["demo"]


def demo(
    out: Annotated[Path, typer.Option("--out", metavar="FOLDER", help="Where to write; must be new or empty.")] = Path(
        "revinf-demo"
    ),
) -> None:
    """Write an invented literature, manuscript and claims to try things on.

    Example: revinf demo --out revinf-demo
    """
    from revinf.evidence.demonstration import write_demonstration
    from revinf.reports.demo_screen import demo_screen
    from revinf.reports.terminal import show

    show(*demo_screen(write_demonstration(out)))
