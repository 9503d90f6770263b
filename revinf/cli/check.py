"""`revinf check`: one claim against base rates."""

from __future__ import annotations

import os
from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import (
    AsJson,
    KindsFile,
    LiteratureFolder,
    Peaks,
    Radius,
    TableFile,
    Transform,
    parsed_peaks,
)

__all__ = ["check"]


def check(
    term: Annotated[
        str,
        typer.Option("--term", metavar="TERM", help="The process that the activity is taken as a sign of."),
    ],
    peak: Peaks = None,
    mask: Annotated[
        Path | None,
        typer.Option(
            "--mask",
            metavar="FILE",
            help="An image in MNI152 whose non-zero voxels are the region.",
            show_default=False,
        ),
    ] = None,
    region: Annotated[
        str | None,
        typer.Option(
            "--region", metavar="NAME", help="A region of the table, by its name.", show_default=False
        ),
    ] = None,
    literature: LiteratureFolder = None,
    table: TableFile = None,
    prior: Annotated[
        str,
        typer.Option(
            "--prior",
            metavar="P",
            help="Probability of the process before the activity was seen, or the word prevalence.",
        ),
    ] = "0.5",
    radius: Radius = 10.0,
    space: Annotated[
        str, typer.Option("--space", metavar="NAME", help="Space of the peak: MNI152 or Talairach.")
    ] = "MNI152",
    transform: Transform = "pooled",
    level: Annotated[
        float, typer.Option("--level", metavar="P", help="Probability that each interval holds.")
    ] = 0.95,
    ratio_prior: Annotated[
        str,
        typer.Option("--ratio-prior", metavar="NAME", help="Prior of the two rates: shared or independent."),
    ] = "shared",
    ratio_prior_limit: Annotated[
        float,
        typer.Option(
            "--ratio-prior-limit",
            metavar="R",
            help="The shared prior puts 95 % of the ratio between 1/R and R.",
        ),
    ] = 20.0,
    kinds: KindsFile = None,
    as_json: AsJson = False,
) -> None:
    """Check one claim: how much does activity in a place say about a process?

    Example: revinf check --peak 54 -54 24 --term "theory of mind"
    """
    from revinf.evidence.assess import assess, choices_of
    from revinf.evidence.claim import Claim, parsed_prior
    from revinf.evidence.sources import choose_source

    claim = Claim(
        term=term,
        peaks=parsed_peaks(peak),
        mask=mask,
        region=region,
        radius_mm=radius,
        space=space,
        transform=transform,
        prior=parsed_prior(prior),
    )
    choices = choices_of(level=level, ratio_prior=ratio_prior, ratio_limit=ratio_prior_limit, kinds=kinds)
    assessment = assess(claim, choose_source(literature, table, os.environ), choices)
    if as_json:
        from revinf.reports.machine import print_json

        print_json(assessment.to_dict())
    else:
        from revinf.reports.check_screen import check_screen
        from revinf.reports.terminal import screen_width, show

        show(*check_screen(assessment, width=screen_width()))
