"""`revinf scan`: the claims and the coordinates of a manuscript."""

from __future__ import annotations

import os
from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import AsJson, LiteratureFolder

__all__ = ["scan"]


def scan(
    manuscript: Annotated[
        Path, typer.Argument(metavar="MANUSCRIPT", help="A .txt, .md, .tex, .html, .docx or .pdf file.")
    ],
    out: Annotated[Path, typer.Option("--out", metavar="FILE", help="The claims table to write, .csv.")],
    peaks: Annotated[
        Path | None,
        typer.Option(
            "--peaks",
            metavar="FILE",
            help="Peaks with the names of their places: x, y, z, place, optionally space.",
            show_default=False,
        ),
    ] = None,
    coordinates: Annotated[
        Path | None,
        typer.Option(
            "--coordinates",
            metavar="FILE",
            help="Also write every coordinate triple that was found, .csv.",
            show_default=False,
        ),
    ] = None,
    literature: LiteratureFolder = None,
    as_json: AsJson = False,
) -> None:
    """Find the claims of a manuscript, and the coordinates they rest on.

    Nothing leaves this machine. Confirm the rows before you audit them: a row too many is struck out in a
    second. With a literature, processes are called as it calls them.

    Example: revinf scan manuscript.docx --out claims.csv
    """
    from revinf.evidence.source_choice import choose_source
    from revinf.evidence.term_list import list_terms
    from revinf.manuscript.peaks_labels import read_labelled_peaks
    from revinf.manuscript.reading import read_document
    from revinf.manuscript.scanning import scan as find
    from revinf.reports.progress import counting
    from revinf.reports.scan_tables import (
        CLAIM_COLUMNS,
        COORDINATE_COLUMNS,
        coordinate_rows,
        scan_rows,
        table_text,
        write_table,
    )

    labelled = read_labelled_peaks(peaks) if peaks is not None else []
    terms = [row.term for row in list_terms(choose_source(literature, None, os.environ)).rows]
    with counting("reading pages") as progress:
        document = read_document(manuscript, progress=progress)
    found = find(document, peaks=labelled, terms=terms)
    written = [str(write_table(table_text(CLAIM_COLUMNS, scan_rows(found)), out))]
    if coordinates is not None:
        written.append(str(write_table(table_text(COORDINATE_COLUMNS, coordinate_rows(found.triples)), coordinates)))
    if as_json:
        from revinf.reports.machine import print_json

        print_json({"claims": scan_rows(found), "coordinates": coordinate_rows(found.triples)})
    else:
        from revinf.reports.scan_screen import scan_screen
        from revinf.reports.terminal import show

        show(*scan_screen(found, written))
