"""How often the same sphere is hit at every grey-matter location: what a region's rate is compared with.

For a radius and a grid of locations: how many studies hit the sphere centred at each location, and how many
locations each study hits. Blocks of peaks keep memory bounded; distances are exact, in whole tenths.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from revinf.spaces.spheres import squared_tenths

__all__ = ["BACKGROUND_RADIUS_MM", "SPACING_TENTHS", "Background", "compute_background"]

BACKGROUND_RADIUS_MM = 10.0
"""The radius for which `build` stores the background."""

SPACING_TENTHS = 40
"""The grid: coordinates that are multiples of 4 mm."""

_PAIRS = 3_000_000
"""Peak and location pairs held at a time: about 100 MB."""


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
        Locations; their coordinates are multiples of `SPACING_TENTHS`.
    radius_mm : float, mm
        Radius of the sphere.

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
    order = np.argsort(peak_study, kind="stable")
    peaks, studies = np.asarray(peak_tenths)[order].astype(np.int32), np.asarray(peak_study)[order]
    lookup, corner = _lookup(grid_tenths)
    limit = squared_tenths(radius_mm)
    reach = int(np.ceil(np.sqrt(limit)))
    width = 2 * reach // SPACING_TENTHS + 2
    steps = np.stack(np.meshgrid(*[np.arange(width)] * 3, indexing="ij"), axis=-1).reshape(-1, 3)
    location_hits = np.zeros(len(grid_tenths), dtype=np.int32)
    study_locations = np.zeros(n_studies, dtype=np.int32)
    for start, stop in _blocks(studies, max(1, _PAIRS // len(steps))):
        block = peaks[start:stop]
        first = -((reach - block) // SPACING_TENTHS)  # the lowest multiple that is not below block - reach
        cells = first[:, None, :] + steps[None]
        away = cells * SPACING_TENTHS - block[:, None, :]
        near = np.einsum("psi,psi->ps", away, away, dtype=np.int64) <= limit
        shifted = cells[near] - corner
        inside = ((shifted >= 0) & (shifted < lookup.shape)).all(axis=1)
        location = lookup[tuple(shifted[inside].T)]
        study = np.broadcast_to(studies[start:stop, None], near.shape)[near][inside]
        grey = location >= 0
        pair = np.unique(study[grey].astype(np.int64) * len(grid_tenths) + location[grey])
        location_hits += np.bincount(pair % len(grid_tenths), minlength=len(grid_tenths)).astype(np.int32)
        study_locations += np.bincount(pair // len(grid_tenths), minlength=n_studies).astype(np.int32)
    return Background(location_hits=location_hits, study_locations=study_locations)


def _lookup(grid_tenths: NDArray[np.int16]) -> tuple[NDArray[np.int32], NDArray[np.int32]]:
    """Return a volume with the number of each location, -1 elsewhere, and its lowest corner in cells."""
    cells = np.asarray(grid_tenths, dtype=np.int32) // SPACING_TENTHS
    corner = cells.min(axis=0)
    lookup = np.full(cells.max(axis=0) - corner + 1, -1, dtype=np.int32)
    lookup[tuple((cells - corner).T)] = np.arange(len(cells))
    return lookup, corner


def _blocks(studies: NDArray[np.int32], size: int) -> list[tuple[int, int]]:
    """Return stretches of whole studies with about `size` peaks; one study may be longer."""
    ends = np.flatnonzero(np.diff(studies, append=-1)) + 1
    blocks, start = [], 0
    while start < len(studies):
        reachable = ends[(ends > start) & (ends <= start + size)]
        stop = int(reachable[-1]) if len(reachable) else int(ends[ends > start][0])
        blocks.append((start, stop))
        start = stop
    return blocks
