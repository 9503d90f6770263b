"""Sorts peaks into 8 mm cells, so that a small region looks at a few hundred peaks instead of all.

The cells cover the head (`import_peaks.HEAD_MM`); a cell's peaks lie together in the peaks array, and
`starts` says where each cell begins. Exactness is not this module's business: it only proposes
candidates, the region itself decides.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

__all__ = ["CELL_SHAPE", "candidate_slices", "cell_numbers", "cell_starts"]

CELL_TENTHS = 80
_ORIGIN = np.array([-1040, -1440, -1120])
CELL_SHAPE = (26, 32, 28)
"""Covers x -104..104, y -144..112, z -112..112 mm, wider than any accepted peak."""


def cell_numbers(peak_tenths: NDArray[np.int16]) -> NDArray[np.int32]:
    """Return the number of the cell of each peak; cells that differ in z only are neighbours.

    Parameters
    ----------
    peak_tenths : (P, 3) int16 array, tenths of a millimetre
        Peaks inside the head.

    Returns
    -------
    (P,) int32 array
        Cell numbers.

    Examples
    --------
    >>> cell_numbers(np.array([[-1040, -1440, -1120], [-1040, -1440, -1040]], dtype=np.int16)).tolist()
    [0, 1]
    """
    cell = (peak_tenths.astype(np.int32) - _ORIGIN) // CELL_TENTHS
    return np.asarray(np.ravel_multi_index(cell.T, CELL_SHAPE), dtype=np.int32)


def cell_starts(sorted_numbers: NDArray[np.int32]) -> NDArray[np.int64]:
    """Return where each cell begins in peaks sorted by cell, and at the end their number.

    Parameters
    ----------
    sorted_numbers : (P,) int32 array
        Cell numbers in increasing order.

    Returns
    -------
    (n_cells + 1,) int64 array
        Starts.

    Examples
    --------
    >>> cell_starts(np.array([0, 0, 2], dtype=np.int32))[:4].tolist()
    [0, 2, 2, 3]
    """
    n_cells = int(np.prod(CELL_SHAPE))
    return np.searchsorted(sorted_numbers, np.arange(n_cells + 1)).astype(np.int64)


def candidate_slices(
    starts: NDArray[np.int64], low: NDArray[np.int32], high: NDArray[np.int32]
) -> list[tuple[int, int]]:
    """Return the stretches of the peaks array whose cells touch a box.

    Parameters
    ----------
    starts : (n_cells + 1,) int64 array
        As from `cell_starts`.
    low, high : (3,) int32 arrays, tenths of a millimetre
        Corners of the box, both included.

    Returns
    -------
    list of (start, stop)
        Non-empty, disjoint, increasing; empty where the box misses the head.

    Examples
    --------
    >>> starts = cell_starts(np.array([0, 0, 2], dtype=np.int32))
    >>> candidate_slices(starts, np.array([-1040, -1440, -1120]), np.array([-1040, -1440, -1000]))
    [(0, 2)]
    """
    first = np.clip((np.asarray(low) - _ORIGIN) // CELL_TENTHS, 0, None)
    last = np.minimum((np.asarray(high) - _ORIGIN) // CELL_TENTHS, np.array(CELL_SHAPE) - 1)
    if (first > last).any():
        return []
    columns = np.ravel_multi_index(
        np.ix_(range(first[0], last[0] + 1), range(first[1], last[1] + 1), [0]), CELL_SHAPE
    ).ravel()
    begins, ends = starts[columns + first[2]], starts[columns + last[2] + 1]
    filled = begins < ends
    return list(zip(begins[filled].tolist(), ends[filled].tolist(), strict=True))
