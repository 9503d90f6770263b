"""Peaks of a statistical map, by nilearn."""

from __future__ import annotations

import math
import warnings
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from revinf.exceptions import SpaceError
from revinf.spaces.images import read_image

__all__ = ["MapPeak", "peaks_of_map"]


@dataclass(frozen=True, slots=True, kw_only=True)
class MapPeak:
    """A peak of a map.

    Parameters
    ----------
    xyz : (float, float, float), mm
        In the space of the map.
    statistic : float
        Its value; negative for a decrease.
    cluster : str
        Number of the cluster; further peaks of one have a letter behind it.
    cluster_mm3 : float or None, mm3
        Size of the cluster, at its highest peak.
    """

    xyz: tuple[float, float, float]
    statistic: float
    cluster: str
    cluster_mm3: float | None


def peaks_of_map(
    file: str | Path,
    threshold: float,
    *,
    extent_voxels: int = 0,
    min_distance_mm: float = 8.0,
    two_sided: bool = False,
) -> list[MapPeak]:
    """Return the peaks of a statistical map, cluster by cluster.

    Parameters
    ----------
    file : path
        NIfTI image in which more extreme values mean more; NaN counts as 0.
    threshold : float, > 0
        What a voxel must reach, in the map's own units.
    extent_voxels : int, default 0
        Clusters with fewer voxels are left out.
    min_distance_mm : float, mm, > 0, default 8
        Between the peaks of one cluster.
    two_sided : bool, default False
        Also report decreases, below minus the threshold.

    Returns
    -------
    list of MapPeak
        As nilearn orders them: by the height of the cluster's peak, increases first.

    Raises
    ------
    InputFileError
        If the file cannot be read as an image.
    SpaceError
        If threshold, extent or distance are out of range.

    Notes
    -----
    Not for maps of p-values, where small values mean more.
    """
    for value, name, least in (
        (threshold, "threshold", "above 0"),
        (min_distance_mm, "distance between peaks", "above 0 mm"),
    ):
        if not (math.isfinite(value) and value > 0):
            raise SpaceError(f"the {name} must be {least}, but got {value:g}; for decreases use --two-sided")
    if extent_voxels < 0:
        raise SpaceError(f"the cluster extent must be 0 voxels or more, but got {extent_voxels}; leave it out for all")
    values, affine = read_image(Path(file), "map", nan_is_zero=True)
    import nibabel as nib

    image: Any = nib.Nifti1Image(np.asarray(values, dtype=np.float32), affine)  # type: ignore[no-untyped-call]
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # nilearn warns where nothing survives; an empty list says the same
        from nilearn.reporting import get_clusters_table

        table = get_clusters_table(
            image,
            stat_threshold=threshold,
            cluster_threshold=extent_voxels,
            two_sided=two_sided,
            min_distance=min_distance_mm,
        )
    peaks = []
    for row in table.to_dict("records"):
        size = row["Cluster Size (mm3)"]
        peaks.append(
            MapPeak(
                xyz=(float(row["X"]), float(row["Y"]), float(row["Z"])),
                statistic=float(row["Peak Stat"]),
                cluster=str(row["Cluster ID"]),
                cluster_mm3=float(size) if isinstance(size, (int, float, np.number)) and np.isfinite(size) else None,
            )
        )
    return peaks
