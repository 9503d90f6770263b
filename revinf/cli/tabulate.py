"""`revinf tabulate`: a base-rate table of many places from a literature."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import NamedColumns, Radius, Transform, parsed_columns

__all__ = ["tabulate"]


def tabulate(
    literature: Annotated[Path, typer.Option("--literature", metavar="FOLDER", help="The literature to count in.")],
    out: Annotated[
        Path,
        typer.Option("--out", metavar="FILE", help="The table to write: .csv, or .csv.gz for a gzipped one."),
    ],
    lattice: Annotated[
        float | None,
        typer.Option(
            "--lattice",
            metavar="MM",
            help="Count at every point of grey matter on a lattice of this spacing.",
            show_default=False,
        ),
    ] = None,
    regions: Annotated[
        Path | None,
        typer.Option(
            "--regions",
            metavar="FILE",
            help="Count at the places of this table: region, x, y, z; optionally radius_mm, space.",
            show_default=False,
        ),
    ] = None,
    atlas: Annotated[
        Path | None,
        typer.Option(
            "--atlas",
            metavar="FILE",
            help="Count in every parcel of this atlas image in MNI152 (whole numbers, 0 outside).",
            show_default=False,
        ),
    ] = None,
    labels: Annotated[
        Path | None,
        typer.Option(
            "--labels",
            metavar="FILE",
            help="The names of the atlas's parcels: columns value, region.",
            show_default=False,
        ),
    ] = None,
    radius: Radius = 10.0,
    term: Annotated[
        list[str] | None,
        typer.Option("--term", metavar="TERM", help="Only this term. Repeatable. [default: all]", show_default=False),
    ] = None,
    column: NamedColumns = None,
    transform: Transform = "pooled",
) -> None:
    """Count every region and term of a literature into a base-rate table.

    Example: revinf tabulate --literature literature --lattice 6 --out table.csv.gz
    """
    from revinf.base_rates.places import PlaceRequest, chosen_places
    from revinf.base_rates.table_rows import write_table
    from revinf.base_rates.tabulate import tabulate as count_all
    from revinf.literature.literature import Literature
    from revinf.reports.literature_screens import tabulate_line
    from revinf.reports.progress import counting
    from revinf.reports.terminal import show

    opened = Literature.open(literature)
    request = PlaceRequest(
        radius_mm=radius,
        spacing_mm=lattice,
        listed=regions,
        atlas=atlas,
        labels=labels,
        rename=parsed_columns(column),
        transform=transform,
    )
    places = chosen_places(opened, request)
    with counting("counting places") as progress:
        n_rows = write_table(count_all(opened, places, terms=term or (), progress=progress), out)
    show(tabulate_line(n_rows, len(places), str(out)))
