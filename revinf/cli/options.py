"""The options that several commands share, declared once."""

from __future__ import annotations

import shlex
from collections.abc import Sequence
from pathlib import Path
from typing import Annotated

import typer

from revinf.exceptions import InvalidClaimError

__all__ = [
    "AsJson",
    "EveryRival",
    "FigureFile",
    "KindsFile",
    "Level",
    "LiteratureFolder",
    "MaskFile",
    "NamedColumns",
    "Peaks",
    "Radius",
    "RatioPriorLimit",
    "RatioPriorName",
    "RegionName",
    "ReportFile",
    "Space",
    "TableFile",
    "ThresholdsFile",
    "Transform",
    "Without",
    "parsed_columns",
    "parsed_peaks",
    "reproducing_command",
]

LiteratureFolder = Annotated[
    Path | None,
    typer.Option(
        "--literature",
        metavar="FOLDER",
        help="Count in this literature, made by revinf build. [default: $REVINF_LITERATURE, else the open "
        "base rates that ship with revinf]",
        show_default=False,
    ),
]
Without = Annotated[
    list[str] | None,
    typer.Option(
        "--without",
        metavar="STUDY",
        help="Leave this study out of the literature (id, group or DOI), and the others of its group. Repeatable.",
        show_default=False,
    ),
]

TableFile = Annotated[
    Path | None,
    typer.Option(
        "--table",
        metavar="FILE",
        help="Take the counts from this base-rate table (CSV, may be gzipped) instead of a literature.",
        show_default=False,
    ),
]
Peaks = Annotated[
    list[str] | None,
    typer.Option(
        "--peak",
        metavar="X Y Z",
        help="A peak in mm; negative numbers as typed: --peak -24 -4 -18. Repeatable: several form a pattern.",
        show_default=False,
    ),
]
Radius = Annotated[
    float,
    typer.Option("--radius", metavar="MM", help="Radius of the sphere around a peak, 0 to 200 mm."),
]
AsJson = Annotated[bool, typer.Option("--json", help="Print JSON for a machine instead of a screen for a person.")]
MaskFile = Annotated[
    Path | None,
    typer.Option(
        "--mask",
        metavar="FILE",
        help="An image in MNI152 whose non-zero voxels are the region.",
        show_default=False,
    ),
]
RegionName = Annotated[
    str | None,
    typer.Option("--region", metavar="NAME", help="A region of the table, by its name.", show_default=False),
]
Space = Annotated[
    str | None,
    typer.Option(
        "--space",
        metavar="NAME",
        help="Space of the peak: MNI152 or Talairach. [default: MNI152, not stated]",
        show_default=False,
    ),
]
Level = Annotated[float, typer.Option("--level", metavar="P", help="Probability that each interval holds.")]
RatioPriorName = Annotated[
    str,
    typer.Option("--ratio-prior", metavar="NAME", help="Prior of the two rates: shared or independent."),
]
RatioPriorLimit = Annotated[
    float,
    typer.Option(
        "--ratio-prior-limit",
        metavar="R",
        help="The shared prior puts 95 % of the ratio between 1/R and R.",
    ),
]
ThresholdsFile = Annotated[
    Path | None,
    typer.Option(
        "--thresholds",
        metavar="FILE",
        help="Your own beginnings of the cautions, as TOML lines such as thin_weigh = 10.",
        show_default=False,
    ),
]
EveryRival = Annotated[bool, typer.Option("--all", help="List all rivals in the JSON instead of the first 20.")]
ReportFile = Annotated[
    Path | None,
    typer.Option(
        "--report", metavar="FILE", help="Write the answer as one page for a browser, .html.", show_default=False
    ),
]

FigureFile = Annotated[
    Path | None,
    typer.Option(
        "--figure",
        metavar="FILE",
        help="Write the picture to this file: .png, .svg or .pdf.",
        show_default=False,
    ),
]
KindsFile = Annotated[
    Path | None,
    typer.Option(
        "--kinds",
        metavar="FILE",
        help="Your own table of terms (term, kind, domain, synonyms) instead of the shipped one.",
        show_default=False,
    ),
]
NamedColumns = Annotated[
    list[str] | None,
    typer.Option(
        "--column",
        metavar="OURS=YOURS",
        help="What a column is called in your files, such as study=experiment. Repeatable.",
        show_default=False,
    ),
]
Transform = Annotated[
    str,
    typer.Option(
        "--transform",
        metavar="NAME",
        help="Which published transform fits coordinates in Talairach space: pooled, spm, fsl (Lancaster et "
        "al. 2007), or piecewise (Brett 1999).",
    ),
]


def parsed_peaks(texts: list[str] | None) -> list[tuple[float, float, float]]:
    """Return the peaks of the option as numbers."""
    peaks = []
    for text in texts or ():
        try:
            x, y, z = (float(part) for part in text.replace(",", " ").split())
        except ValueError:
            raise InvalidClaimError(
                f"--peak needs three numbers in mm, but got {text!r}; write --peak 54 -54 24"
            ) from None
        peaks.append((x, y, z))
    return peaks


def parsed_columns(texts: list[str] | None) -> dict[str, str]:
    """Return our column names and the files' names of them."""
    columns: dict[str, str] = {}
    for text in texts or ():
        ours, separator, yours = (part.strip() for part in text.partition("="))
        if not (separator and ours and yours):
            raise InvalidClaimError(f"--column needs OURS=YOURS, but got {text!r}; write study=experiment")
        columns[ours] = yours
    return columns


def reproducing_command(arguments: Sequence[str]) -> str:
    """Return a command line without the names of what it writes, so that equal input gives equal reports.

    Examples
    --------
    >>> reproducing_command(["audit", "my claims.csv", "--out", "report", "--level=0.9"])
    "revinf audit 'my claims.csv' --level=0.9"
    """
    written = ("--out", "--report", "--figure", "--coordinates")
    kept: list[str] = []
    skip = False
    for argument in arguments:
        if skip:
            skip = False
        elif argument in written:
            skip = True
        elif not argument.startswith(tuple(f"{name}=" for name in written)):
            kept.append(argument)
    return shlex.join(["revinf", *kept])
