"""`revinf check`: one claim against base rates."""

from __future__ import annotations

import os
import sys
from typing import Annotated

import typer

from revinf.cli.options import (
    AsJson,
    EveryRival,
    FigureFile,
    KindsFile,
    Level,
    LiteratureFolder,
    MaskFile,
    Peaks,
    Radius,
    RatioPriorLimit,
    RatioPriorName,
    RegionName,
    ReportFile,
    Space,
    TableFile,
    ThresholdsFile,
    Transform,
    Without,
    parsed_peaks,
    reproducing_command,
)

__all__ = ["check"]


def check(
    term: Annotated[
        str,
        typer.Option("--term", metavar="TERM", help="The process that the activity is taken as a sign of."),
    ],
    peak: Peaks = None,
    mask: MaskFile = None,
    region: RegionName = None,
    literature: LiteratureFolder = None,
    table: TableFile = None,
    without: Without = None,
    prior: Annotated[
        str,
        typer.Option(
            "--prior",
            metavar="P",
            help="Probability of the process before the activity was seen, or the word prevalence.",
        ),
    ] = "0.5",
    radius: Radius = 10.0,
    space: Space = None,
    transform: Transform = "pooled",
    absent: Annotated[
        bool, typer.Option("--absent", help="The claim rests on NO activity there: count the studies without.")
    ] = False,
    context: Annotated[
        list[str] | None,
        typer.Option(
            "--context",
            metavar="TERM",
            help="Count again within the studies that carry this term. Repeatable: any of them.",
            show_default=False,
        ),
    ] = None,
    rival: Annotated[
        list[str] | None,
        typer.Option("--rival", metavar="TERM", help="Show this rival in any case. Repeatable.", show_default=False),
    ] = None,
    exclude: Annotated[
        list[str] | None,
        typer.Option(
            "--exclude", metavar="TERM", help="Never count this term as a rival. Repeatable.", show_default=False
        ),
    ] = None,
    level: Level = 0.95,
    ratio_prior: RatioPriorName = "shared",
    ratio_prior_limit: RatioPriorLimit = 20.0,
    kinds: KindsFile = None,
    thresholds: ThresholdsFile = None,
    every_rival: EveryRival = False,
    figure: FigureFile = None,
    report: ReportFile = None,
    as_json: AsJson = False,
) -> None:
    """Check one claim: how much does activity in a place say about a process?

    Several peaks form a pattern: the studies that hit all of them are counted.

    Example: revinf check --peak 54 -54 24 --term "theory of mind"
    """
    from revinf.evidence.assess import assess
    from revinf.evidence.choices import choices_of
    from revinf.evidence.claim import Claim, parsed_prior
    from revinf.evidence.source_choice import choose_source

    claim = Claim(
        term=term,
        peaks=parsed_peaks(peak),
        mask=mask,
        region=region,
        radius_mm=radius,
        space=space,
        transform=transform,
        absent=absent,
        prior=parsed_prior(prior),
        context=context or (),
        rivals=rival or (),
        excluded=exclude or (),
    )
    choices = choices_of(
        level=level,
        ratio_prior=ratio_prior,
        ratio_limit=ratio_prior_limit,
        kinds=kinds,
        thresholds=thresholds,
        every_rival=every_rival,
    )
    assessment = assess(claim, choose_source(literature, table, os.environ, without or ()), choices)
    if figure is not None:
        from revinf.reports.robustness_figure import write_robustness_figure

        write_robustness_figure(assessment, figure)
    if report is not None:
        from revinf.evidence.audit import audit_of
        from revinf.reports.html_report import write_html

        write_html(audit_of(claim, assessment), report, command=reproducing_command(sys.argv[1:]))
    if as_json:
        from revinf.reports.machine import print_json

        print_json(assessment.to_dict())
    else:
        from revinf.reports.check_screen import check_screen
        from revinf.reports.terminal import screen_width, show

        show(*check_screen(assessment, width=screen_width()))
