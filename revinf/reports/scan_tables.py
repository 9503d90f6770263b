"""The tables of a scan: claims that `audit` takes as they are, and all coordinates in the order of the text."""

from __future__ import annotations

import csv
import io
import os
from collections.abc import Iterable
from pathlib import Path
from typing import TYPE_CHECKING, Any

from revinf.reports.cells import csv_cell, one_line
from revinf.whole_file import replacing_file

if TYPE_CHECKING:
    from revinf.manuscript.found import Scan
    from revinf.manuscript.linking import FoundTriple

__all__ = ["CLAIM_COLUMNS", "COORDINATE_COLUMNS", "coordinate_rows", "scan_rows", "table_text", "write_table"]

CLAIM_COLUMNS = (
    "claim",
    "term",
    "x",
    "y",
    "z",
    "space",
    "place",
    "quote",
    "location",
    "cue",
    "strength",
    "link",
    "confidence",
)
COORDINATE_COLUMNS = ("x", "y", "z", "space", "place", "location", "how")


def scan_rows(found: Scan) -> list[dict[str, Any]]:
    """Return one row a claim and place; the places of a pattern share the claim's id.

    Parameters
    ----------
    found : Scan
        From `revinf.scan`.

    Returns
    -------
    list of dict
        Keys as in `CLAIM_COLUMNS`; x, y and z are None where no coordinates could be linked.
    """
    rows = []
    for claim in found.claims:
        for place in claim.places:
            xyz = place.link.xyz or (None, None, None)
            rows.append(
                {
                    "claim": claim.id,
                    "term": claim.term,
                    **dict(zip("xyz", xyz, strict=True)),
                    "space": place.link.space,
                    "place": place.label,
                    "quote": one_line(claim.quote),
                    "location": claim.location,
                    "cue": claim.cue,
                    "strength": "hedged" if claim.hedged else "plain",
                    "link": place.link.how,
                    "confidence": place.link.confidence,
                }
            )
    return rows


def coordinate_rows(triples: Iterable[FoundTriple]) -> list[dict[str, Any]]:
    """Return one row a triple.

    Parameters
    ----------
    triples : iterable of FoundTriple
        Of a scan.

    Returns
    -------
    list of dict
        Keys as in `COORDINATE_COLUMNS`.
    """
    return [
        {
            **dict(zip("xyz", triple.xyz, strict=True)),
            "space": triple.space,
            "place": triple.label,
            "location": triple.location,
            "how": triple.how,
        }
        for triple in triples
    ]


def table_text(columns: Iterable[str], rows: Iterable[dict[str, Any]]) -> str:
    r"""Return rows as CSV in which no cell runs as a formula; whole numbers without a point.

    Examples
    --------
    >>> table_text(("x", "place"), [{"x": -22.0, "place": "=left"}])
    "x,place\n-22,'=left\n"
    """
    columns = tuple(columns)
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(columns)
    for row in rows:
        writer.writerow([_cell(row[name]) for name in columns])
    return text.getvalue()


def _cell(value: Any) -> Any:
    """Return one cell."""
    if value is None:
        return ""
    return f"{value:g}" if isinstance(value, float) else csv_cell(value)


def write_table(text: str, path: str | Path) -> Path:
    """Write a table as a whole or not at all.

    Parameters
    ----------
    text : str
        From `table_text`.
    path : path
        An older file there is replaced.

    Returns
    -------
    pathlib.Path
        The file.

    Raises
    ------
    InputFileError
        If it cannot be written.
    """
    path = Path(path)
    beside = path.with_name(f".{path.name}.part-{os.getpid()}")
    with replacing_file(path, beside, "choose another place"):
        path.parent.mkdir(parents=True, exist_ok=True)
        beside.write_text(text, encoding="utf-8", newline="\n")
    return path
