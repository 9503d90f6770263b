"""Reads a table of labelled peaks, for linking places to coordinates."""

from __future__ import annotations

import csv
import io
from pathlib import Path

from revinf.exceptions import InputFileError
from revinf.manuscript.linking import FoundTriple
from revinf.manuscript.phrases import tokens
from revinf.manuscript.places import find_places
from revinf.manuscript.read_text import decoded

__all__ = ["LABELS", "labelled_place", "read_labelled_peaks"]

LABELS = ("place", "region", "label", "name", "area", "structure")
"""Columns that may hold the name of a peak's place, in this order."""


def read_labelled_peaks(path: str | Path) -> list[FoundTriple]:
    """Read a table with columns x, y, z, a name of the place, and optionally space.

    Parameters
    ----------
    path : path
        CSV or TSV, UTF-8.

    Returns
    -------
    list of FoundTriple
        In the order of the file.

    Raises
    ------
    InputFileError
        If a column is missing, or a coordinate is not a number.
    """
    path = Path(path)
    text = decoded(path)
    first = text.split("\n", 1)[0]
    delimiter = max("\t;,", key=first.count)
    rows = csv.DictReader(io.StringIO(text), delimiter=delimiter)
    columns = {str(name).strip().lower(): str(name) for name in rows.fieldnames or ()}
    missing = [axis for axis in "xyz" if axis not in columns]
    label = next((columns[name] for name in LABELS if name in columns), None)
    if missing or label is None:
        lacking = ", ".join([*missing, *([] if label else ["place"])])
        raise InputFileError(
            f"the peaks table lacks the columns {lacking}; name them x, y, z and place", path=path, row=1
        )
    found = []
    try:
        for number, row in enumerate(rows, start=2):
            xyz = [_number(row[columns[axis]], axis, path, number) for axis in "xyz"]
            place, side = labelled_place(str(row[label] or ""), xyz[0])
            found.append(
                FoundTriple(
                    xyz=(xyz[0], xyz[1], xyz[2]),
                    space=str(row.get(columns.get("space", ""), "") or "").strip(),
                    place=place,
                    side=side,
                    location=f"{path.name}, line {number}",
                    how="peaks table",
                )
            )
    except csv.Error as error:
        raise InputFileError(f"is not a table ({error}); save it as CSV", path=path) from None
    return found


def labelled_place(label: str, x: float) -> tuple[str, str]:
    """Return the place and the side that a label names; the side from x where it names none.

    Examples
    --------
    >>> labelled_place("L. amygdala", -22.0), labelled_place("thing", 3.0)
    (('amygdala', 'left'), ('thing', ''))
    """
    mentions = find_places(label, tokens(label))
    if not mentions:
        return label.strip().lower(), ""
    side = mentions[0].side or ("left" if x < 0 else "right" if x > 0 else "")
    return mentions[0].place, side


def _number(cell: str | None, axis: str, path: Path, row: int) -> float:
    """Return a coordinate."""
    try:
        return float(str(cell or "").strip().replace("\u2212", "-"))
    except ValueError:
        raise InputFileError(
            f"{axis} is {str(cell)[:40]!r}, not a number; write millimetres with a decimal point",
            path=path,
            row=row,
            column=axis,
        ) from None
