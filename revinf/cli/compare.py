"""`revinf compare`: do two literatures agree on the same claims?"""

from __future__ import annotations

import sys
from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import AsJson, Level, NamedColumns, Transform, parsed_columns, reproducing_command

__all__ = ["compare"]


def compare(
    first: Annotated[Path, typer.Argument(metavar="LITERATURE_A", help="A literature folder, or a base-rate table.")],
    second: Annotated[Path, typer.Argument(metavar="LITERATURE_B", help="The other one.")],
    claims: Annotated[Path, typer.Option("--claims", metavar="FILE", help="Claims table, as for audit.")],
    out: Annotated[
        Path | None, typer.Option("--out", metavar="FILE", help="Also write the comparison, .md.", show_default=False)
    ] = None,
    column: NamedColumns = None,
    transform: Transform = "pooled",
    level: Level = 0.95,
    as_json: AsJson = False,
) -> None:
    """Ask two literatures about the same claims and say how far they agree.

    Example: revinf compare literature-a literature-b --claims claims.csv
    """
    from revinf.evidence.choices import choices_of
    from revinf.evidence.claims_table import read_claims
    from revinf.evidence.comparison import compare as hold
    from revinf.evidence.source_choice import source_at
    from revinf.reports.comparison_views import comparison_markdown, comparison_screen
    from revinf.reports.progress import counting
    from revinf.reports.scan_tables import write_table
    from revinf.reports.terminal import screen_width, show

    listed = read_claims(claims, rename=parsed_columns(column), transform=transform)
    sources = source_at(first), source_at(second)
    with counting("comparing claims") as progress:
        found = hold(listed, *sources, choices_of(level=level), progress=progress)
    written = ""
    if out is not None:
        written = str(write_table(comparison_markdown(found, command=reproducing_command(sys.argv[1:])), out))
    if as_json:
        from revinf.reports.machine import print_json

        print_json(found.to_dict())
    else:
        show(*comparison_screen(found, written, width=screen_width()))
