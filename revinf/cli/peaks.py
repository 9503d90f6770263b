"""`revinf peaks`: from a statistical map to a peaks table."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import AsJson

__all__ = ["peaks"]


def peaks(
    stat_map: Annotated[
        Path, typer.Argument(metavar="STAT_MAP", help="A statistical map in MNI152 space, .nii or .nii.gz.")
    ],
    threshold: Annotated[
        float, typer.Option("--threshold", metavar="VALUE", help="What a voxel must reach, in the map's units.")
    ],
    out: Annotated[Path, typer.Option("--out", metavar="FILE", help="The peaks table to write, .csv.")],
    extent: Annotated[
        int, typer.Option("--extent", metavar="VOXELS", help="Leave out clusters with fewer voxels.")
    ] = 0,
    min_distance: Annotated[
        float, typer.Option("--min-distance", metavar="MM", help="Between the peaks of one cluster, in mm.")
    ] = 8.0,
    two_sided: Annotated[
        bool, typer.Option("--two-sided", help="Also report decreases, below minus the threshold.")
    ] = False,
    as_json: AsJson = False,
) -> None:
    """Find the peaks of a statistical map and name their places.

    Not for maps of p-values, where small values mean more.

    Example: revinf peaks zmap.nii.gz --threshold 3.1 --extent 10 --out peaks.csv
    """
    from revinf.evidence.map_peaks import PEAK_COLUMNS, map_peaks, peak_rows
    from revinf.reports.scan_tables import table_text, write_table

    found = map_peaks(stat_map, threshold, extent_voxels=extent, min_distance_mm=min_distance, two_sided=two_sided)
    rows = peak_rows(found, stat_map.name.removesuffix(".gz").removesuffix(".nii"))
    written = write_table(table_text(PEAK_COLUMNS, rows), out)
    if as_json:
        from revinf.reports.machine import print_json

        print_json(rows)
    else:
        from revinf.reports.peaks_screen import peaks_screen
        from revinf.reports.terminal import screen_width, show

        show(*peaks_screen(found, str(written), width=screen_width()))
