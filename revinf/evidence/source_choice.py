"""Which source answers: the one that is named, the environment's, or the shipped open base rates."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from pathlib import Path

from revinf.base_rates.table import BaseRateTable
from revinf.evidence.sources import LiteratureSource, Source, TableSource
from revinf.exceptions import InvalidClaimError
from revinf.knowledge import table_path
from revinf.literature.leaving_out import leave_out
from revinf.literature.literature import Literature

__all__ = ["ENVIRONMENT", "choose_source", "named_or_every", "opened_literature", "source_at"]

ENVIRONMENT = "REVINF_LITERATURE"
"""Environment variable that names the literature to use where none is given."""


def opened_literature(source: Source) -> Literature:
    """Return the literature behind a source.

    Parameters
    ----------
    source : Source
        Of a literature.

    Returns
    -------
    Literature
        Opened.

    Raises
    ------
    InvalidClaimError
        If the source is a table, which does not have the studies.
    """
    if isinstance(source, LiteratureSource):
        return source.literature
    raise InvalidClaimError("this needs the studies themselves; name a literature folder with --literature")


def choose_source(
    literature: str | Path | None,
    table: str | Path | None,
    environment: Mapping[str, str],
    without: Sequence[str] = (),
) -> Source:
    """Return the source that the user named, else the environment's, else the shipped open base rates.

    Parameters
    ----------
    literature, table : path, optional
        At most one of a literature folder and a base-rate table.
    environment : mapping
        Environment variables; REVINF_LITERATURE names a literature folder.
    without : sequence of str
        Studies, groups or DOIs of a literature that are not counted, with all others of their groups.

    Returns
    -------
    Source
        Opened.

    Raises
    ------
    InvalidClaimError
        If both a literature and a table are named, or studies are to be left out of a table.
    LiteratureError, InputFileError
        If it cannot be read.

    Examples
    --------
    >>> choose_source(None, None, {}).facts.name
    'open base rates'
    """
    if literature is not None and table is not None:
        raise InvalidClaimError("counts come from one source; give --literature or --table, not both")
    folder = literature or (environment.get(ENVIRONMENT) if table is None else None)
    if folder:
        return LiteratureSource(leave_out(Literature.open(folder), without))
    if without:
        raise InvalidClaimError("a base-rate table does not know its studies; --without needs a literature")
    if table is not None:
        return TableSource(BaseRateTable.read(table))
    shipped = BaseRateTable.read(table_path("open_base_rates"), name="open base rates")
    return TableSource(shipped, study_is="experiments", shipped=True)


def named_or_every(term: str | None, every: bool, hits_only: bool = False) -> str | None:
    """Return the term that is asked for, or None for all of them.

    Raises
    ------
    InvalidClaimError
        If both or neither are asked for, or only hits of one term.

    Examples
    --------
    >>> named_or_every("fear", False)
    'fear'
    """
    if (term is not None) == every:
        raise InvalidClaimError("name one term with --term, or ask for --all-terms")
    if hits_only and not every:
        raise InvalidClaimError("--hits-only counts every process; ask for it with --all-terms")
    return term


def source_at(path: str | Path) -> Source:
    """Return the source that stands at a path: a literature folder, or a base-rate table.

    Parameters
    ----------
    path : path
        A folder is a literature, a file a table.

    Returns
    -------
    Source
        Opened.

    Raises
    ------
    LiteratureError, InputFileError
        If it cannot be read.
    """
    path = Path(path)
    return TableSource(BaseRateTable.read(path)) if path.is_file() else LiteratureSource(Literature.open(path))
