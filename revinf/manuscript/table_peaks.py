"""Coordinates from the rows of tables: by the header's x, y and z, else the first three whole numbers in a row."""

from __future__ import annotations

import re
from dataclasses import dataclass

from revinf.manuscript.document import Block
from revinf.manuscript.triples import space_said

__all__ = ["TablePeak", "table_peak"]

_NUMBER = re.compile(r"[-+\u2212\u2010\u2011\u2012\u2013]?\s?\d{1,3}(?:[.,]\d{1,2})?")
_LIMITS = (100.0, 140.0, 110.0)


@dataclass(frozen=True, slots=True, kw_only=True)
class TablePeak:
    """Coordinates of a row, its label, and the space the row or its header says."""

    xyz: tuple[float, float, float]
    label: str
    space: str


def table_peak(row: Block) -> TablePeak | None:
    """Return the coordinates of a row.

    Parameters
    ----------
    row : Block
        Of kind "row".

    Returns
    -------
    TablePeak or None
        None where the row holds none.

    Examples
    --------
    >>> row = Block(kind="row", text="", cells=("left amygdala", "-22", "-4", "-18"), header=("region", "x", "y", "z"))
    >>> table_peak(row)
    TablePeak(xyz=(-22.0, -4.0, -18.0), label='left amygdala', space='')
    """
    cells = [cell.strip() for cell in row.cells]
    names = [cell.strip().lower() for cell in row.header]
    space = space_said(" ".join(cells)) or space_said(" ".join(names))
    if {"x", "y", "z"} <= {name.split(" ")[0].strip("()") for name in names} and len(cells) == len(names):
        firsts = [name.split(" ")[0].strip("()") for name in names]
        at = [firsts.index(axis) for axis in "xyz"]
        return _peak([cells[position] for position in at], cells, space)
    for start in range(len(cells) - 2):
        triple = cells[start : start + 3]
        if all(_NUMBER.fullmatch(cell) for cell in triple):
            whole = all("." not in cell for cell in triple)
            signed = any(not cell[0].isdigit() for cell in triple)
            if names and not {"x", "y", "z"} & {name.split(" ")[0] for name in names} and not signed:
                return None
            if whole or signed:
                return _peak(triple, cells, space)
    # One cell may hold all three: "-22, -4, -18".
    for cell in cells[1:]:
        parts = re.split(r"\s*[,;/]\s*|\s+", cell.strip("()[] "))
        if len(parts) == 3 and all(_NUMBER.fullmatch(part) for part in parts):
            return _peak(parts, cells, space)
    return None


def _peak(triple: list[str], cells: list[str], space: str) -> TablePeak | None:
    """Return the peak of three cells, or None if they are not numbers within a head."""
    values = []
    for cell, limit in zip(triple, _LIMITS, strict=True):
        if not _NUMBER.fullmatch(cell):
            return None
        sign = -1.0 if re.match(r"[-\u2212\u2010\u2011\u2012\u2013]", cell) else 1.0
        value = sign * float(re.sub(r"[^\d.,]", "", cell).replace(",", ".")) + 0.0
        if abs(value) > limit:
            return None
        values.append(value)
    words = [cell for cell in cells if not _NUMBER.fullmatch(cell) and re.search(r"[A-Za-z]{2}", cell)]
    return TablePeak(xyz=(values[0], values[1], values[2]), label=words[0] if words else "", space=space)
