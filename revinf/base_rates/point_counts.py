"""Counts of every term at every point of a lattice: a sparse product of labels and places, in blocks.

The studies' points are held as bits. For a block of points the bits are unfolded and multiplied by the matrix of terms
and studies, so that memory is the counts themselves, the bits, and one block.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from revinf.literature.active_points import active_points
from revinf.literature.literature import Literature

__all__ = ["PointCounts", "count_points"]

_BLOCK = 256
"""Points at a time: a column of the block fits the processor's cache."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class PointCounts:
    """Studies that are active at every point.

    Parameters
    ----------
    hits : (T, G) int16 or int32 array
        Studies with each term that are active in the sphere at each point, terms in the literature's order.
    active : (G,) int64 array
        All studies that are.
    """

    hits: NDArray[np.int16] | NDArray[np.int32]
    active: NDArray[np.int64]


def count_points(
    literature: Literature, grid_tenths: NDArray[np.int16], radius_mm: float, *, spacing_tenths: int
) -> PointCounts:
    """Count every term at every point.

    Parameters
    ----------
    literature : Literature
        Where to count.
    grid_tenths : (G, 3) int16 array, tenths of a millimetre, MNI152
        Centres of the spheres; their coordinates are multiples of the spacing.
    radius_mm : float, mm
        Radius of the spheres.
    spacing_tenths : int, tenths of a millimetre
        Of the lattice.

    Returns
    -------
    PointCounts
        As `count_terms` counts at each point.
    """
    from scipy.sparse import csr_matrix

    arrays = literature.arrays()
    bits = active_points(
        arrays["peak_tenths"],
        arrays["peak_study"],
        literature.n_studies,
        grid_tenths,
        radius_mm,
        spacing_tenths=spacing_tenths,
    )
    totals = literature.term_totals
    kind = np.int16 if int(totals.max(initial=0)) < np.iinfo(np.int16).max else np.int32
    starts, studies = np.asarray(arrays["term_study_starts"]), np.asarray(arrays["term_studies"])
    carries = csr_matrix(
        (np.ones(len(studies), dtype=kind), studies, starts), shape=(literature.n_terms, literature.n_studies)
    )
    n_points = len(grid_tenths)
    hits = np.empty((literature.n_terms, n_points), dtype=kind)
    active = np.empty(n_points, dtype=np.int64)
    for start in range(0, n_points, _BLOCK):
        stop = min(start + _BLOCK, n_points)
        block = np.unpackbits(bits[:, start // 8 : (stop + 7) // 8], axis=1, count=stop - start)
        active[start:stop] = block.sum(axis=0, dtype=np.int64)
        hits[:, start:stop] = carries @ block.astype(kind)
    return PointCounts(hits=hits, active=active)
