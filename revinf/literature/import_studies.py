"""Reads the optional table of studies: group and DOI; its other columns are not needed for counting."""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

from revinf.literature.refusals import ImportReport
from revinf.literature.row_checks import RowChecks, record_groups
from revinf.literature.rows import LINE, open_delimited

__all__ = ["StudyRows", "read_studies"]


@dataclass(slots=True, kw_only=True)
class StudyRows:
    """Group and DOIs by study id, where they are given."""

    group: dict[str, str] = field(default_factory=dict)
    doi: dict[str, set[str]] = field(default_factory=dict)


def read_studies(path: Path | None, rename: dict[str, str], group_column: str, report: ImportReport) -> StudyRows:
    """Read the table of studies.

    Parameters
    ----------
    path : pathlib.Path or None
        The table; None gives an empty answer.
    rename : dict
        Our name of a column to the file's name of it.
    group_column : str
        Column that holds the group, if the table has it.
    report : ImportReport
        Takes what is refused and noticed.

    Returns
    -------
    StudyRows
        What the table says.

    Raises
    ------
    InputFileError
        If the table has no study column.
    """
    result = StudyRows()
    if path is None:
        return result
    table = open_delimited(path, rename)
    table.require("study")
    seen: set[str] = set()
    repeated: list[int] = []
    for block in table.blocks():
        report.read[table.path.name] += len(block)
        study = block["study"].str.strip()
        checks = RowChecks(block)
        checks.refuse(study == "", "empty study id")
        report.refuse(table.path.name, checks.refused_rows(table.delimiter))
        report.kept[table.path.name] += int(checks.fine.sum())
        record_groups(result.group, block[checks.fine], group_column, table.path)
        rows = block[checks.fine]
        dois = rows["doi"].str.strip() if "doi" in rows.columns else [""] * len(rows)
        for name, doi, line in zip(study[checks.fine], dois, rows[LINE], strict=True):
            if name in seen:
                repeated.append(int(line))
            seen.add(name)
            if doi:
                result.doi.setdefault(name, set()).add(doi)
    if table.has_bom:
        report.notice("byte-order-mark", f"{table.path.name} starts with a byte-order mark; it was skipped")
    if repeated:
        report.notice(
            "duplicate-rows",
            f"{table.path.name}: {len(repeated)} rows name a study again; all its DOIs are kept",
            repeated,
        )
    return result
