"""A term over the whole brain: the answer of `check` at every grey-matter point of a lattice."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from revinf.evidence.parts import LiteratureFacts
from revinf.knowledge import VERSION
from revinf.spaces.nifti import lattice_volume, volume_bytes

__all__ = ["FILES", "BrainMap"]

FILES = {
    "hits": "studies with the term that are active in the sphere",
    "active": "all studies that are active in the sphere",
    "ratio": "likelihood ratio, posterior median",
    "ratio-low": "lower end of its interval",
    "ratio-high": "upper end of its interval",
    "posterior": "posterior at the stated prior",
    "posterior-low": "lower end of its interval",
    "posterior-high": "upper end of its interval",
    "mask": "1 where a value stands; 0 in the other volumes means none there",
}
"""Volumes of a map and what each holds."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class BrainMap:
    """The values of one term at every grey-matter point.

    Parameters
    ----------
    term : str
        Which.
    grid_tenths : (G, 3) int16 array, tenths of a millimetre, MNI152
        Centres of the spheres.
    values : dict of str to (G,) array
        As `FILES` names them, without the mask.
    spacing_mm, radius_mm, prior, level : float
        How it was asked.
    ratio_prior, ratio_limit
        How the ratio was estimated.
    n_term, n_other : int
        Studies with the term, and others.
    literature : LiteratureFacts
        Where it was counted.
    """

    term: str
    grid_tenths: NDArray[np.int16]
    values: dict[str, NDArray[Any]]
    spacing_mm: float
    radius_mm: float
    prior: float
    level: float
    ratio_prior: str
    ratio_limit: float
    n_term: int
    n_other: int
    literature: LiteratureFacts

    def strongest(self, number: int) -> list[int]:
        """Return the points with the highest lower ends whose spheres do not overlap."""
        grid = self.grid_tenths.astype(np.int64)
        free = np.ones(len(grid), dtype=bool)
        chosen: list[int] = []
        for at in np.argsort(-self.values["ratio-low"], kind="stable").tolist():
            if not free[at]:
                continue
            chosen.append(at)
            free &= ((grid - grid[at]) ** 2).sum(axis=1) >= (20 * self.radius_mm) ** 2
            if len(chosen) == number:
                break
        return chosen

    def volumes(self) -> Iterator[tuple[str, bytes]]:
        """Yield name and bytes of every volume, as compressed NIfTI."""
        voxels, affine = lattice_volume(self.grid_tenths, round(10 * self.spacing_mm))
        for name in FILES:
            values = np.ones(len(voxels), dtype=np.int32) if name == "mask" else self.values[name]
            yield f"{name}.nii.gz", volume_bytes(values, voxels, affine)

    def to_dict(self) -> dict[str, Any]:
        """Return what the sidecar holds, schema revinf/map/1."""
        return {
            "schema": "revinf/map/1",
            "version": VERSION,
            "term": self.term,
            "space": "MNI152",
            "spacing_mm": self.spacing_mm,
            "radius_mm": self.radius_mm,
            "n_points": len(self.grid_tenths),
            "prior": self.prior,
            "level": self.level,
            "ratio_prior": self.ratio_prior,
            "ratio_prior_limit": self.ratio_limit,
            "n_studies_with_term": self.n_term,
            "n_other_studies": self.n_other,
            "literature": self.literature.to_dict(),
            "volumes": {f"{name}.nii.gz": what for name, what in FILES.items()},
        }
