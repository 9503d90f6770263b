"""`revinf terms`: which terms a source has."""

from __future__ import annotations

import os
from typing import Annotated

import typer

from revinf.cli.options import AsJson, KindsFile, LiteratureFolder, TableFile

__all__ = ["terms"]


def terms(
    query: Annotated[
        str,
        typer.Argument(metavar="[QUERY]", help="Part of a term, a synonym, or a domain.", show_default=False),
    ] = "",
    literature: LiteratureFolder = None,
    table: TableFile = None,
    kinds: KindsFile = None,
    as_json: AsJson = False,
) -> None:
    """List the terms with their number of studies, kind and domain.

    Example: revinf terms memory
    """
    from revinf.evidence.source_choice import choose_source
    from revinf.evidence.term_list import list_terms
    from revinf.evidence.vocabulary import chosen_vocabulary

    source = choose_source(literature, table, os.environ)
    found = list_terms(source, query, chosen_vocabulary(kinds))
    if as_json:
        from revinf.reports.machine import print_json

        print_json(found.to_dict())
    else:
        from revinf.reports.literature_screens import terms_screen
        from revinf.reports.terminal import show

        show(*terms_screen(found, source.facts.name))
