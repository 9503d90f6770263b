"""`revinf calibrate`: how far a literature can be trusted."""

from __future__ import annotations

import os
import sys
from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import AsJson, KindsFile, LiteratureFolder, Radius, Without, reproducing_command

__all__ = ["calibrate"]


def calibrate(
    literature: LiteratureFolder = None,
    out: Annotated[
        Path | None,
        typer.Option("--out", metavar="FOLDER", help="Write report, JSON and picture here.", show_default=False),
    ] = None,
    folds: Annotated[int, typer.Option("--folds", metavar="N", help="Parts that are held out in turn.")] = 10,
    jobs: Annotated[int, typer.Option("--jobs", metavar="N", help="Folds at a time; -1 takes every core.")] = 1,
    radius: Radius = 10.0,
    without: Without = None,
    kinds: KindsFile = None,
    keep: Annotated[
        bool,
        typer.Option("--keep/--no-keep", help="Keep the result with the literature, for patterns of several peaks."),
    ] = True,
    as_json: AsJson = False,
) -> None:
    """Measure how good this literature's answers are, on studies that were not counted.

    Example: revinf calibrate --literature literature --out calibration
    """
    from revinf.calibration.calibrate import calibrate as measure
    from revinf.evidence.choices import choices_of
    from revinf.evidence.source_choice import choose_source, opened_literature
    from revinf.literature.kept_calibration import keep_calibration
    from revinf.reports.progress import counting

    opened = opened_literature(choose_source(literature, None, os.environ, without or ()))
    words = choices_of(kinds=kinds).vocabulary
    with counting("holding out") as progress:
        found = measure(opened, folds=folds, radius_mm=radius, jobs=jobs, words=words, progress=progress)
    written = []
    if keep and not opened.left_out:
        written.append(str(keep_calibration(opened.folder, found.to_dict())))
    if out is not None:
        from revinf.reports.calibration_folder import write_calibration

        written += write_calibration(found, out, command=reproducing_command(sys.argv[1:]))
    if as_json:
        from revinf.reports.machine import print_json

        print_json(found.to_dict())
    else:
        from revinf.reports.calibration_screen import calibration_screen
        from revinf.reports.terminal import screen_width, show

        show(*calibration_screen(found, written, width=screen_width()))
