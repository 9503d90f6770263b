"""Where each study is active on a lattice, as bits."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from revinf.literature.background import marked_studies

__all__ = ["active_points"]


def active_points(
    peak_tenths: NDArray[np.int16],
    peak_study: NDArray[np.int32],
    n_studies: int,
    grid_tenths: NDArray[np.int16],
    radius_mm: float,
    *,
    spacing_tenths: int,
) -> NDArray[np.uint8]:
    """Mark the points whose sphere each study hits.

    Parameters
    ----------
    peak_tenths, peak_study, n_studies, grid_tenths, radius_mm, spacing_tenths
        As for `compute_background`.

    Returns
    -------
    (S, ceil(G / 8)) uint8 array
        A row a study, as `numpy.packbits` packs it.

    Examples
    --------
    >>> peaks, grid = np.array([[0, 0, 0]], dtype=np.int16), np.array([[0, 0, 0], [0, 0, 80]], dtype=np.int16)
    >>> bits = active_points(peaks, np.array([1], dtype=np.int32), 2, grid, 3.0, spacing_tenths=40)
    >>> np.unpackbits(bits, axis=1, count=2).tolist()
    [[0, 0], [1, 0]]
    """
    bits = np.zeros((n_studies, (len(grid_tenths) + 7) // 8), dtype=np.uint8)
    for first, here in marked_studies(peak_tenths, peak_study, n_studies, grid_tenths, radius_mm, spacing_tenths):
        last = min(first + len(here), n_studies)
        bits[first:last] = np.packbits(here[: last - first], axis=1)
    return bits
