"""`revinf profile`: no claim, one place: what is it active for?"""

from __future__ import annotations

import os

from revinf.cli.options import (
    AsJson,
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
    Space,
    TableFile,
    Transform,
    Without,
    parsed_peaks,
)

__all__ = ["profile"]


def profile(
    peak: Peaks = None,
    mask: MaskFile = None,
    region: RegionName = None,
    literature: LiteratureFolder = None,
    table: TableFile = None,
    without: Without = None,
    radius: Radius = 10.0,
    space: Space = None,
    transform: Transform = "pooled",
    level: Level = 0.95,
    ratio_prior: RatioPriorName = "shared",
    ratio_prior_limit: RatioPriorLimit = 20.0,
    kinds: KindsFile = None,
    figure: FigureFile = None,
    as_json: AsJson = False,
) -> None:
    """Show everything a literature says of one place, without a claim.

    Example: revinf profile --peak 54 -54 24
    """
    from revinf.evidence.asked_region import AskedRegion
    from revinf.evidence.choices import choices_of
    from revinf.evidence.profile import profile as describe
    from revinf.evidence.source_choice import choose_source

    place = AskedRegion(
        peaks=parsed_peaks(peak),
        mask=mask,
        region=region,
        radius_mm=radius,
        space=space,
        transform=transform,
    )
    choices = choices_of(level=level, ratio_prior=ratio_prior, ratio_limit=ratio_prior_limit, kinds=kinds)
    found = describe(place, choose_source(literature, table, os.environ, without or ()), choices)
    if figure is not None:
        from revinf.reports.profile_figure import write_profile_figure

        write_profile_figure(found, figure)
    if as_json:
        from revinf.reports.machine import print_json

        print_json(found.to_dict())
    else:
        from revinf.reports.profile_screen import profile_screen
        from revinf.reports.terminal import screen_width, show

        show(*profile_screen(found, width=screen_width()))
