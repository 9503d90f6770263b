"""How often the same sphere is hit at every grey-matter location: what a region's rate is compared with.

For a radius and a grid of locations: how many studies hit the sphere centred at each location, and how many
locations each study hits. Blocks of peaks keep memory bounded; distances are exact, in whole tenths.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from revinf.spaces.spheres import squared_tenths

__all__ = ["BACKGROUND_RADIUS_MM", "SPACING_TENTHS", "Background", "compute_background", "marked_studies"]

BACKGROUND_RADIUS_MM = 10.0
"""The radius for which `build` stores the background."""

SPACING_TENTHS = 40
"""The grid: coordinates that are multiples of 4 mm."""

_STUDIES, _PEAKS, _RESIDUES = 64, 20_000, 2_000
"""Studies, peaks, and places within a cell that are held at a time: some tens of megabytes."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Background:
    """Hits over the grid for one radius.

    Parameters
    ----------
    location_hits : (G,) int32 array
        Studies that hit the sphere centred at each location.
    study_locations : (S,) int32 array
        Locations whose sphere each study hits.
    """

    location_hits: NDArray[np.int32]
    study_locations: NDArray[np.int32]

    def percentile(self, hits: int) -> float:
        """Return the share of locations, in percent, hit by fewer studies; ties count half.

        Parameters
        ----------
        hits : int
            Studies that hit a region of the same shape.

        Returns
        -------
        float
            0 to 100.
        """
        below = np.count_nonzero(self.location_hits < hits)
        equal = np.count_nonzero(self.location_hits == hits)
        return float(100 * (below + equal / 2) / len(self.location_hits))


def compute_background(
    peak_tenths: NDArray[np.int16],
    peak_study: NDArray[np.int32],
    n_studies: int,
    grid_tenths: NDArray[np.int16],
    radius_mm: float,
    *,
    spacing_tenths: int = SPACING_TENTHS,
) -> Background:
    """Count over a grid of locations.

    Parameters
    ----------
    peak_tenths : (P, 3) int16 array, tenths of a millimetre
        Peaks in any order.
    peak_study : (P,) int32 array
        Index of the study of each peak.
    n_studies : int
        Number of studies.
    grid_tenths : (G, 3) int16 array, tenths of a millimetre
        Locations; their coordinates are multiples of the spacing.
    radius_mm : float, mm
        Radius of the sphere.
    spacing_tenths : int, default 40
        Of the grid.

    Returns
    -------
    Background
        Hits by location and by study.

    Examples
    --------
    >>> peaks = np.array([[0, 0, 0], [0, 0, 10]], dtype=np.int16)
    >>> grid = np.array([[0, 0, 0], [0, 0, 40], [0, 0, 80]], dtype=np.int16)
    >>> background = compute_background(peaks, np.array([0, 0], dtype=np.int32), 2, grid, 3.0)
    >>> background.location_hits.tolist(), background.study_locations.tolist()
    ([1, 1, 0], [2, 0])
    """
    location_hits = np.zeros(len(grid_tenths), dtype=np.int64)
    study_locations = np.zeros(n_studies, dtype=np.int32)
    for first, here in marked_studies(peak_tenths, peak_study, n_studies, grid_tenths, radius_mm, spacing_tenths):
        location_hits += here.sum(axis=0)
        last = min(first + len(here), n_studies)
        study_locations[first:last] = here.sum(axis=1)[: last - first]
    return Background(location_hits=location_hits.astype(np.int32), study_locations=study_locations)


def marked_studies(
    peak_tenths: NDArray[np.int16],
    peak_study: NDArray[np.int32],
    n_studies: int,
    grid_tenths: NDArray[np.int16],
    radius_mm: float,
    spacing_tenths: int,
) -> Iterator[tuple[int, NDArray[np.bool_]]]:
    """Yield blocks of studies with the locations whose sphere each of them hits.

    Parameters
    ----------
    peak_tenths, peak_study, n_studies, grid_tenths, radius_mm, spacing_tenths
        As for `compute_background`.

    Yields
    ------
    int, (64, G) bool array
        The first study of a block, and a row a study; rows beyond the last study, and blocks of studies without
        a peak, hit nothing. Blocks without any peak are left out.
    """
    order = np.argsort(peak_study, kind="stable")
    peaks, studies = np.asarray(peak_tenths)[order].astype(np.int64), np.asarray(peak_study)[order].astype(np.int64)
    stamp = _Stamp.of(np.asarray(grid_tenths, dtype=np.int64), peaks, radius_mm, spacing_tenths)
    # One row a study: a cell that several of its peaks reach is marked once.
    marked = np.zeros((_STUDIES, stamp.size), dtype=bool)
    for first in range(0, n_studies, _STUDIES):
        start, stop = np.searchsorted(studies, [first, first + _STUDIES])
        if start == stop:
            continue
        for low in range(start, stop, _PEAKS):
            part = slice(low, min(low + _PEAKS, stop))
            rows = (studies[part] - first) * stamp.size
            marked.reshape(-1)[(rows + stamp.cell[part])[:, None] + stamp.table[stamp.row[part]]] = True
        yield first, marked[:, stamp.grid]
        marked[:] = False


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Stamp:
    """A sphere stamped on the grid's cells: which cells lie within it depends only on where in its cell a peak is.

    Parameters
    ----------
    grid : (G,) int64 array
        Flat position of each location in a box of cells with a margin around the grid.
    size : int
        Cells of the box.
    cell : (P,) int64 array
        Flat cell of each peak; a peak that reaches nothing of the grid stands in the margin.
    row : (P,) int64 array
        Row of `table` for each peak.
    table : (R, M) int64 array
        Offsets of the cells within reach for each place within a cell, rows filled up with repeats.
    """

    grid: NDArray[np.int64]
    size: int
    cell: NDArray[np.int64]
    row: NDArray[np.int64]
    table: NDArray[np.int64]

    @classmethod
    def of(cls, grid_tenths: NDArray[np.int64], peaks: NDArray[np.int64], radius_mm: float, spacing: int) -> _Stamp:
        """Make the box for a grid, and look up where its peaks reach."""
        limit = squared_tenths(radius_mm)
        place = np.array([spacing**2, spacing, 1], dtype=np.int64)  # makes one number of a place within a cell
        reach = int(np.ceil(np.sqrt(limit))) // spacing + 1
        margin = reach + 1
        cells = grid_tenths // spacing
        corner = cells.min(axis=0) - 2 * margin
        shape = cells.max(axis=0) + 2 * margin + 1 - corner
        strides = np.array([shape[1] * shape[2], shape[2], 1], dtype=np.int64)
        residues, row = np.unique(peaks % spacing @ place, return_inverse=True)
        table, empty = _reached(residues, reach, limit, strides, spacing)
        cell = peaks // spacing - corner
        within = ((cell >= margin) & (cell < shape - margin)).all(axis=1) & ~empty[row.reshape(-1)]
        # From a corner of the margin, no offset reaches the grid.
        nowhere = int(np.full(3, margin, dtype=np.int64) @ strides)
        return cls(
            grid=(cells - corner) @ strides,
            size=int(shape.prod()),
            cell=np.where(within, cell @ strides, nowhere),
            row=row.reshape(-1),
            table=table,
        )


def _reached(
    residues: NDArray[np.int64], reach: int, limit: int, strides: NDArray[np.int64], spacing: int
) -> tuple[NDArray[np.int64], NDArray[np.bool_]]:
    """Return, for each place within a cell, the offsets of the cells in reach, and whether there are none."""
    span = np.arange(-reach, reach + 1)
    steps = np.stack(np.meshgrid(span, span, span, indexing="ij"), axis=-1).reshape(-1, 3)
    near = np.zeros((len(residues), len(steps)), dtype=bool)
    for start in range(0, len(residues), _RESIDUES):
        part = residues[start : start + _RESIDUES]
        within = part[:, None] // np.array([spacing**2, spacing, 1]) % spacing
        away = spacing * steps[None] - within[:, None, :]
        near[start : start + _RESIDUES] = (away**2).sum(axis=2) <= limit
    width = max(1, int(near.sum(axis=1).max())) if len(near) else 1
    order = np.argsort(~near, axis=1, kind="stable")[:, :width]
    offsets = (steps @ strides)[order]
    taken = np.take_along_axis(near, order, axis=1)
    return np.where(taken, offsets, offsets[:, :1]), np.asarray(~near.any(axis=1))
