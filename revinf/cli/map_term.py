"""`revinf map`: a term over the whole brain."""

from __future__ import annotations

import os
from pathlib import Path
from typing import Annotated

import typer

from revinf.cli.options import (
    KindsFile,
    Level,
    LiteratureFolder,
    Radius,
    RatioPriorLimit,
    RatioPriorName,
    Without,
)

__all__ = ["map_term"]


def map_term(
    out: Annotated[Path, typer.Option("--out", metavar="FOLDER", help="The map to make; an older one is replaced.")],
    term: Annotated[
        str | None, typer.Option("--term", metavar="TERM", help="The term to map.", show_default=False)
    ] = None,
    every: Annotated[
        bool, typer.Option("--all-terms", help="Map every process of the literature, a sub-folder each.")
    ] = False,
    hits_only: Annotated[
        bool,
        typer.Option("--hits-only", help="With --all-terms: only the counts, in one volume."),
    ] = False,
    literature: LiteratureFolder = None,
    without: Without = None,
    spacing: Annotated[float, typer.Option("--spacing", metavar="MM", help="Of the points, 2 or 4 mm.")] = 4.0,
    radius: Radius = 10.0,
    prior: Annotated[
        str, typer.Option("--prior", metavar="P", help="Of the posterior: a probability, or the word prevalence.")
    ] = "0.5",
    level: Level = 0.95,
    ratio_prior: RatioPriorName = "shared",
    ratio_prior_limit: RatioPriorLimit = 20.0,
    kinds: KindsFile = None,
) -> None:
    """Write what check would answer at every point of the grey matter, as NIfTI volumes with a picture.

    Example: revinf map --term "theory of mind" --literature literature --out map
    """
    from revinf.evidence.choices import choices_of
    from revinf.evidence.claim import checked_prior
    from revinf.evidence.map_term import map_term as one
    from revinf.evidence.map_terms import hits_of_terms, map_terms
    from revinf.evidence.source_choice import choose_source, named_or_every
    from revinf.reports.brain_map_folder import write_brain_map, write_brain_maps, write_term_hits
    from revinf.reports.brain_map_screen import brain_map_screen, term_hits_screen
    from revinf.reports.progress import counting
    from revinf.reports.terminal import show

    named = named_or_every(term, every, hits_only)
    choices = choices_of(level=level, ratio_prior=ratio_prior, ratio_limit=ratio_prior_limit, kinds=kinds)
    source = choose_source(literature, None, os.environ, without or ())
    asked = checked_prior(prior)
    if hits_only:
        counts = hits_of_terms(source, spacing_mm=spacing, radius_mm=radius, choices=choices)
        show(*term_hits_screen(counts, str(out), write_term_hits(counts, out)))
        return
    if named is None:
        maps = map_terms(source, spacing_mm=spacing, radius_mm=radius, prior=asked, choices=choices)
        with counting("mapping terms") as progress:
            names = write_brain_maps(maps, out, progress=progress)
        show(*brain_map_screen(None, str(out), names))
        return
    found = one(named, source, spacing_mm=spacing, radius_mm=radius, prior=asked, choices=choices)
    show(*brain_map_screen(found, str(out), write_brain_map(found, out)))
