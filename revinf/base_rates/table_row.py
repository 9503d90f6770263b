"""One row of a base-rate table."""

from __future__ import annotations

from typing import NamedTuple

__all__ = ["TableRow"]


class TableRow(NamedTuple):
    """One region and term; a light tuple, since a table has tens of thousands of rows."""

    region: str
    term: str
    term_active: int
    term_total: int
    other_active: int
    other_total: int
    centre: tuple[float, float, float] | None = None
    radius_mm: float | None = None
    source: str = ""
