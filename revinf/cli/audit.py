"""`revinf audit`: all claims of a paper, in one report."""

from __future__ import annotations

import os
import sys
from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import (
    KindsFile,
    Level,
    LiteratureFolder,
    NamedColumns,
    RatioPriorLimit,
    RatioPriorName,
    TableFile,
    ThresholdsFile,
    Transform,
    Without,
    parsed_columns,
    reproducing_command,
)

__all__ = ["audit"]


def audit(
    claims: Annotated[
        Path,
        typer.Argument(metavar="CLAIMS", help="Claims table: claim, term, x, y, z; optionally prior, quote, ..."),
    ],
    out: Annotated[
        Path, typer.Option("--out", metavar="FOLDER", help="The report to make; an older one there is replaced.")
    ],
    literature: LiteratureFolder = None,
    table: TableFile = None,
    without: Without = None,
    reader: Annotated[
        list[str] | None,
        typer.Option(
            "--for",
            metavar="READER",
            help="Also write for the author (rewordings), reviewer (comments), presenter (slides). Repeatable.",
            show_default=False,
        ),
    ] = None,
    gate: Annotated[
        str | None,
        typer.Option(
            "--gate",
            metavar="GRADE",
            help="Exit with 3 if a claim does not reach this grade: bare, positive, strong, very-strong.",
            show_default=False,
        ),
    ] = None,
    peaks: Annotated[
        Path | None,
        typer.Option(
            "--peaks",
            metavar="FILE",
            help="Peaks with the names of their places, for claims that name a place and have no coordinates.",
            show_default=False,
        ),
    ] = None,
    column: NamedColumns = None,
    transform: Transform = "pooled",
    level: Level = 0.95,
    ratio_prior: RatioPriorName = "shared",
    ratio_prior_limit: RatioPriorLimit = 20.0,
    kinds: KindsFile = None,
    thresholds: ThresholdsFile = None,
) -> None:
    """Assess every claim of a table and write one report.

    Example: revinf audit claims.csv --literature literature --out report
    """
    from revinf.evidence.audit import audit as assess_all
    from revinf.evidence.audit import checked_readers, fails_gate
    from revinf.evidence.choices import choices_of
    from revinf.evidence.claims_table import read_claims
    from revinf.evidence.source_choice import choose_source
    from revinf.reports.audit_folder import write_audit_folder
    from revinf.reports.audit_screen import audit_screen
    from revinf.reports.progress import counting
    from revinf.reports.terminal import screen_width, show

    readers = checked_readers(reader or (), gate)
    choices = choices_of(
        level=level, ratio_prior=ratio_prior, ratio_limit=ratio_prior_limit, kinds=kinds, thresholds=thresholds
    )
    listed = read_claims(claims, rename=parsed_columns(column), transform=transform, peaks=peaks)
    with counting("assessing claims") as progress:
        result = assess_all(
            listed, choose_source(literature, table, os.environ, without or ()), choices, progress=progress
        )
    command = reproducing_command(sys.argv[1:])
    with counting("drawing slides" if "presenter" in readers else "writing the report") as progress:
        names = write_audit_folder(result, out, readers=readers, command=command, progress=progress)
    show(*audit_screen(result, str(out), names, width=screen_width()))
    failing = fails_gate(result, gate) if gate is not None else []
    if failing:
        verb = "claim does" if len(failing) == 1 else "claims do"
        print(f"revinf: {len(failing)} {verb} not reach {gate}: {', '.join(failing)}", file=sys.stderr)
        raise typer.Exit(3)
