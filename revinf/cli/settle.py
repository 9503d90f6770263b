"""`revinf settle`: where else to look, to tell a claim from its rivals."""

from __future__ import annotations

import os
from typing import Annotated

import typer

from revinf.cli.options import (
    AsJson,
    Level,
    LiteratureFolder,
    Peaks,
    Radius,
    Space,
    Transform,
    Without,
    parsed_peaks,
)

__all__ = ["settle"]


def settle(
    term: Annotated[
        str, typer.Option("--term", metavar="CLAIMED", help="The process that the activity is taken as a sign of.")
    ],
    peak: Peaks = None,
    against: Annotated[
        list[str] | None,
        typer.Option(
            "--against",
            metavar="RIVAL",
            help="A rival to tell the claim from. Repeatable. [default: the three that lead at the peak]",
            show_default=False,
        ),
    ] = None,
    literature: LiteratureFolder = None,
    without: Without = None,
    radius: Radius = 10.0,
    space: Space = None,
    transform: Transform = "pooled",
    level: Level = 0.95,
    as_json: AsJson = False,
) -> None:
    """Say where else to look in the same map: which places would best tell the claim from its rivals.

    Example: revinf settle --peak -6 -52 28 --term "theory of mind" --against navigation --literature literature
    """
    from revinf.evidence.choices import choices_of
    from revinf.evidence.claim import Claim
    from revinf.evidence.settle import settle as find
    from revinf.evidence.source_choice import choose_source

    claim = Claim(term=term, peaks=parsed_peaks(peak), radius_mm=radius, space=space, transform=transform)
    source = choose_source(literature, None, os.environ, without or ())
    found = find(claim, source, against or (), choices_of(level=level))
    if as_json:
        from revinf.reports.machine import print_json

        print_json(found.to_dict())
    else:
        from revinf.reports.settle_screen import settle_screen
        from revinf.reports.terminal import screen_width, show

        show(*settle_screen(found, width=screen_width()))
