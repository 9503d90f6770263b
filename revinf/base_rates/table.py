"""Base-rate tables: counts and nothing else, so that anybody can type one from a paper.

A source that begins with "invented" marks invented counts.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path

import numpy as np
from numpy.typing import ArrayLike

from revinf.base_rates.counting import TermCounts
from revinf.base_rates.table_checks import region_key
from revinf.base_rates.table_rows import COUNT_COLUMNS, TableRow, read_rows
from revinf.exceptions import SpaceError
from revinf.spaces.coordinates import to_tenths

__all__ = ["BaseRateTable", "TableRegion"]

_DEFAULT_RADIUS_MM = 10.0
_FEWEST_REGIONS = 20


@dataclass(frozen=True, slots=True, kw_only=True)
class TableRegion:
    """A region of a table.

    Parameters
    ----------
    name : str
        As the table writes it.
    centre : tuple of three float, mm, MNI152, or None
        Where it lies, if the table says.
    radius_mm : float or None, mm
        Radius of its sphere, if the table says.
    source : str
        Where its counts come from.
    """

    name: str
    centre: tuple[float, float, float] | None
    radius_mm: float | None
    source: str


class BaseRateTable:
    """A base-rate table in memory.

    Examples
    --------
    >>> table = BaseRateTable([TableRow("here", "pain", 3, 10, 5, 100)], name="typed")
    >>> table.term_counts("here").at(0).as_tuple()
    (3, 7, 5, 95)
    """

    def __init__(self, rows: Iterable[TableRow], *, name: str, fingerprint: str = "") -> None:
        self.name = name
        self.fingerprint = fingerprint
        self._rows: dict[str, list[TableRow]] = {}
        for row in rows:
            self._rows.setdefault(row.region, []).append(row)

    @classmethod
    def read(cls, path: str | Path, *, name: str | None = None) -> BaseRateTable:
        """Read a table, plain or gzipped.

        Parameters
        ----------
        path : path
            The file.
        name : str, optional
            What reports call it; the file's name where left out.

        Returns
        -------
        BaseRateTable
            Checked in every cell.

        Raises
        ------
        InputFileError
            With file, line and column of the first cell that cannot be used.
        """
        path = Path(path)
        rows, digest = read_rows(path)
        stem = path.name.removesuffix(".gz").removesuffix(".csv").removesuffix(".tsv")
        return cls(rows, name=name or stem, fingerprint=digest)

    @property
    def regions(self) -> list[str]:
        """Names of the regions, in order of appearance."""
        return list(self._rows)

    @property
    def terms(self) -> list[str]:
        """The terms of all regions, sorted."""
        return sorted({row.term for rows in self._rows.values() for row in rows})

    def activation_percentile(self, region: str) -> float | None:
        """Return the share of the table's regions, in percent, that fewer studies hit; ties count half.

        Parameters
        ----------
        region : str
            By its name in the table.

        Returns
        -------
        float or None
            0 to 100; None where the table has fewer than 20 regions, too few for a percentile.
        """
        if len(self._rows) < _FEWEST_REGIONS:
            return None
        hits = {name: max(row.term_active + row.other_active for row in rows) for name, rows in self._rows.items()}
        here = hits[region]
        below = sum(other < here for other in hits.values())
        equal = sum(other == here for other in hits.values())
        return 100 * (below + equal / 2) / len(hits)

    def term_totals(self) -> dict[str, int]:
        """Return the largest number of studies behind each term, by term, sorted."""
        totals: dict[str, int] = {}
        for rows in self._rows.values():
            for row in rows:
                totals[row.term] = max(totals.get(row.term, 0), row.term_total)
        return dict(sorted(totals.items()))

    @property
    def n_studies(self) -> int:
        """The largest number of studies behind any row."""
        return max(row.term_total + row.other_total for rows in self._rows.values() for row in rows)

    @property
    def invented(self) -> bool:
        """Whether any source says that the counts are invented."""
        return any(row.source.lower().startswith("invented") for rows in self._rows.values() for row in rows)

    def region(self, name: str) -> TableRegion:
        """Return a region by its name, upper and lower case alike.

        Raises
        ------
        SpaceError
            If there is none; names the ones that look like it.
        """
        key = region_key(name)
        for known in self._rows:
            if region_key(known) == key:
                return self._region(known)
        near = get_close_matches(name, self.regions, n=3, cutoff=0.4) or self.regions[:3]
        raise SpaceError(
            f"the table {self.name!r} has no region {name!r}; it has {len(self.regions)}, such as "
            + ", ".join(repr(item) for item in near)
        )

    def nearest_region(self, xyz_mm: ArrayLike) -> tuple[TableRegion, float]:
        """Return the region whose centre is nearest, if the point lies within its radius.

        Parameters
        ----------
        xyz_mm : (3,) array-like, mm, MNI152
            A peak.

        Returns
        -------
        TableRegion
            The nearest; of equally near ones the first in the table.
        float, mm
            Distance of the peak from its centre.

        Raises
        ------
        SpaceError
            If the table gives no centres, or none is near enough.
        """
        placed = {name: rows[0].centre for name, rows in self._rows.items() if rows[0].centre is not None}
        if not placed:
            raise SpaceError(f"the table {self.name!r} gives no coordinates; name the region with --region")
        centres = to_tenths(list(placed.values())).astype(np.int64)
        peak = to_tenths(xyz_mm).astype(np.int64)
        squared = ((centres - peak) ** 2).sum(axis=1)
        nearest = self._region(list(placed)[int(squared.argmin())])
        distance = float(np.sqrt(squared.min())) / 10
        reach = nearest.radius_mm if nearest.radius_mm is not None else _DEFAULT_RADIUS_MM
        if distance > reach:
            raise SpaceError(
                f"the nearest place of the table {self.name!r} is {distance:.1f} mm away ({nearest.name!r}), "
                f"farther than its radius of {reach:g} mm; check the coordinates, or use a literature"
            )
        return nearest, distance

    def term_counts(self, region: str) -> TermCounts:
        """Return the counts of one region, by its name in the table."""
        rows = sorted(self._rows[region], key=lambda row: row.term)
        columns = np.array([[getattr(row, name) for name in COUNT_COLUMNS] for row in rows], dtype=np.int64)
        return TermCounts(
            terms=[row.term for row in rows],
            term_active=columns[:, 0],
            term_total=columns[:, 1],
            other_active=columns[:, 2],
            other_total=columns[:, 3],
        )

    def _region(self, name: str) -> TableRegion:
        first = self._rows[name][0]
        return TableRegion(name=name, centre=first.centre, radius_mm=first.radius_mm, source=first.source)
