"""Coordinates by the name of their place, for claims that name a place and no coordinates."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path

from revinf.knowledge import normalise_term
from revinf.literature.rows import LINE, open_delimited

__all__ = ["filled", "read_named_peaks"]

_NAMES = ("place", "region", "label", "name")
"""Columns that may hold the name of a place, in this order."""


def read_named_peaks(path: str | Path) -> dict[str, dict[str, str]]:
    """Read a table of peaks with the names of their places.

    Parameters
    ----------
    path : path
        CSV or TSV with columns x, y, z, a name (place, region, label or name), and optionally space.

    Returns
    -------
    dict of str to dict
        Name to its cells x, y, z and space; a name that several points have is left out.

    Raises
    ------
    InputFileError
        If the file cannot be read, or lacks a column.
    """
    table = open_delimited(Path(path), None)
    table.require("x", "y", "z")
    points: dict[str, set[tuple[str, str, str, str]]] = {}
    for block in table.blocks():
        for cells in block.to_dict("records"):
            row = {str(name): str(cell).strip() for name, cell in cells.items() if name != LINE}
            name = normalise_term(next((row[column] for column in _NAMES if row.get(column)), ""))
            if name:
                points.setdefault(name, set()).add((row["x"], row["y"], row["z"], row.get("space", "")))
    return {
        name: dict(zip(("x", "y", "z", "space"), next(iter(found)), strict=True))
        for name, found in points.items()
        if len(found) == 1
    }


def filled(row: Mapping[str, str], places: Mapping[str, Mapping[str, str]]) -> dict[str, str]:
    """Return a row of a claims table with the coordinates of the place it names, if it has none.

    Parameters
    ----------
    row : mapping
        Column to cell.
    places : mapping
        From `read_named_peaks`.

    Returns
    -------
    dict
        The same row where it has coordinates, or names no known place.

    Examples
    --------
    >>> filled({"x": "", "place": "Left amygdala"}, {"left amygdala": {"x": "-22", "y": "-4", "z": "-18"}})
    {'x': '-22', 'place': 'Left amygdala', 'y': '-4', 'z': '-18'}
    """
    name = normalise_term(row.get("place") or row.get("region") or "")
    if any(row.get(axis) for axis in "xyz") or name not in places:
        return dict(row)
    return {**row, **{column: cell for column, cell in places[name].items() if cell or column != "space"}}
