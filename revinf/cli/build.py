"""`revinf build`: a literature from peaks and annotations."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import AsJson, NamedColumns, Transform, parsed_columns

__all__ = ["build"]


def build(
    peaks: Annotated[
        Path,
        typer.Option("--peaks", metavar="FILE", help="Table of peaks: study, x, y, z; optionally space, stat, group."),
    ],
    annotations: Annotated[
        Path,
        typer.Option(
            "--annotations",
            metavar="FILE",
            help="Which study carries which term: study, term, optionally weight; or one column a term.",
        ),
    ],
    out: Annotated[
        Path,
        typer.Option("--out", metavar="FOLDER", help="The literature to make; an older one there is replaced."),
    ],
    studies: Annotated[
        Path | None,
        typer.Option(
            "--studies",
            metavar="FILE",
            help="One row a study: study, optionally group, doi, ...",
            show_default=False,
        ),
    ] = None,
    column: NamedColumns = None,
    group: Annotated[
        str | None,
        typer.Option(
            "--group",
            metavar="COLUMN",
            help="Count studies that share this column's value as one (several experiments of one paper).",
            show_default=False,
        ),
    ] = None,
    sign: Annotated[
        str,
        typer.Option("--sign", metavar="SIGN", help="Which peaks count by their stat: all, positive, negative."),
    ] = "all",
    min_weight: Annotated[
        float | None,
        typer.Option(
            "--min-weight",
            metavar="W",
            help="Smallest weight of an annotation that counts. [default: above 0]",
            show_default=False,
        ),
    ] = None,
    space: Annotated[
        str | None,
        typer.Option(
            "--space",
            metavar="NAME",
            help="Space of all coordinates, over what the table says: MNI152 or Talairach.",
            show_default=False,
        ),
    ] = None,
    transform: Transform = "pooled",
    keep_empty: Annotated[
        bool, typer.Option("--keep-empty", help="Keep studies without peaks as real null results.")
    ] = False,
    name: Annotated[
        str | None,
        typer.Option(
            "--name",
            metavar="TEXT",
            help="What reports call it. [default: the folder's name]",
            show_default=False,
        ),
    ] = None,
    study_is: Annotated[
        str,
        typer.Option("--study-is", metavar="WORD", help="What one study is, in the plural: experiments, papers."),
    ] = "studies",
    source: Annotated[
        str, typer.Option("--source", metavar="TEXT", help="Where the data come from.", show_default=False)
    ] = "",
    licence: Annotated[
        str,
        typer.Option("--licence", metavar="TEXT", help="On what terms they may be used.", show_default=False),
    ] = "",
    citation: Annotated[
        str, typer.Option("--citation", metavar="TEXT", help="How to cite them.", show_default=False)
    ] = "",
    invented: Annotated[
        bool, typer.Option("--invented", help="The data are made up: every screen will say so.")
    ] = False,
    as_json: AsJson = False,
) -> None:
    """Build a literature from tables of peaks and annotations.

    Example: revinf build --peaks peaks.csv --annotations annotations.csv --out literature
    """
    from revinf.literature.building import build_literature
    from revinf.literature.import_options import import_options
    from revinf.literature.manifest import Description
    from revinf.reports.progress import stages

    options = import_options(
        peaks=peaks,
        annotations=annotations,
        studies=studies,
        rename=parsed_columns(column),
        group=group,
        sign=sign,
        min_weight=min_weight,
        space=space,
        transform=transform,
        keep_empty=keep_empty,
    )
    description = Description(
        name=name or out.name,
        study_is=study_is,
        source=source,
        licence=licence,
        citation=citation,
        invented=invented,
    )
    with stages() as progress:
        literature, _ = build_literature(options, out, description, progress=progress)
    if as_json:
        from revinf.reports.machine import print_json

        print_json(literature.summary())
    else:
        from revinf.reports.literature_screens import inspect_screen
        from revinf.reports.terminal import show

        show(*inspect_screen(literature.summary()))
