"""Reads the templates and points that the nilearn package carries, without importing nilearn.

Importing nilearn and resampling its templates takes seconds; its files are read in a fraction of one. Where
a file is not where this version of nilearn keeps it, every function returns None and the caller asks
nilearn itself. A test holds both ways to the same arrays.
"""

from __future__ import annotations

import csv
from importlib.util import find_spec
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

__all__ = ["PointRow", "Templates", "packaged_points", "packaged_templates"]

Templates = tuple[NDArray[np.bool_], NDArray[np.float32], NDArray[np.float32], NDArray[np.float64]]
"""Brain mask, grey and white matter (0 to 1) at 2 mm, and the affine."""

PointRow = tuple[float, float, float, str, str]
"""x, y, z in mm, label or region, network."""

_BRAIN, _GREY, _WHITE = (f"mni_icbm152_{name}_tal_nlin_sym_09a_converted.nii.gz" for name in ("t1", "gm", "wm"))
_MASK_THRESHOLD = np.float32(0.2)
"""Share of the brightest voxel above which nilearn counts the template as brain."""


def packaged_templates() -> Templates | None:
    """Return the templates at 2 mm, or None where nilearn keeps them elsewhere.

    Returns
    -------
    brain : (99, 117, 95) bool array
    grey, white : (99, 117, 95) float32 arrays, 0 to 1
    affine : (4, 4) array
        Voxel indices to mm, MNI152.

    Notes
    -----
    The files are at 1 mm. Every second voxel has the centre of a voxel at 2 mm, so taking it is what
    linear resampling does.

    Examples
    --------
    >>> packaged_templates()[0].shape
    (99, 117, 95)
    """
    folder = _data_folder()
    if folder is None or not all((folder / name).is_file() for name in (_BRAIN, _GREY, _WHITE)):
        return None
    import nibabel as nib

    every_second, affine = [], np.eye(4)
    for name in (_BRAIN, _GREY, _WHITE):
        image: Any = nib.load(folder / name)
        values = np.asarray(image.dataobj).astype(np.float32)
        affine = np.array(image.affine, dtype=np.float64)
        if not np.array_equal(affine[:3, :3], np.eye(3)):
            return None
        every_second.append((values / values.max())[::2, ::2, ::2])
    affine[:3, :3] *= 2
    brain, grey, white = every_second
    return brain > _MASK_THRESHOLD, grey, white, affine


def packaged_points() -> tuple[list[PointRow], list[PointRow]] | None:
    """Return the 160 and the 300 points, or None where nilearn keeps them elsewhere.

    Returns
    -------
    list of PointRow, list of PointRow
        In nilearn's order: by network, then name, then y; by network, then y.

    Examples
    --------
    >>> [len(rows) for rows in packaged_points()]
    [160, 300]
    """
    folder = _data_folder()
    if folder is None:
        return None
    try:
        first = _named_points(folder / "dosenbach_2010.csv")
        second = _numbered_points(
            folder / "seitzman_2018_ROIs_300inVol_MNI_allInfo.txt",
            folder / "seitzman_2018_ROIs_anatomicalLabels.txt",
        )
    except (OSError, KeyError, ValueError):
        return None
    return first, second


def _named_points(path: Path) -> list[PointRow]:
    """Return the points of a CSV with columns x, y, z, name, network."""
    with path.open(encoding="utf-8", newline="") as stream:
        rows = [
            (float(row["x"]), float(row["y"]), float(row["z"]), row["name"], row["network"])
            for row in csv.DictReader(stream)
        ]
    return sorted(rows, key=lambda row: (row[4], row[3], row[1]))


def _numbered_points(points: Path, regions: Path) -> list[PointRow]:
    """Return the points of a table separated by blanks, with their region from a second file."""
    header, *codes = regions.read_text(encoding="utf-8").split()
    names = dict(part.split("=") for part in header.split(","))
    with points.open(encoding="utf-8", newline="") as stream:
        cells = list(csv.DictReader(stream, delimiter=" "))
    rows = [
        (float(row["x"]), float(row["y"]), float(row["z"]), names[code], row["netName"])
        for row, code in zip(cells, codes, strict=True)
    ]
    return sorted(rows, key=lambda row: (row[4], row[1]))


def _data_folder() -> Path | None:
    """Return the folder in which nilearn keeps its own data, found without importing it."""
    found = find_spec("nilearn")
    if found is None or found.origin is None:
        return None
    folder = Path(found.origin).parent / "datasets" / "data"
    return folder if folder.is_dir() else None
