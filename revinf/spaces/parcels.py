"""The parcels of an atlas image: one mask for every whole number but 0."""

from __future__ import annotations

from collections.abc import Iterator
from os import PathLike
from pathlib import Path

import numpy as np

from revinf.exceptions import InputFileError, SpaceError
from revinf.spaces.images import read_image
from revinf.spaces.regions import Mask

__all__ = ["load_parcels"]

_MOST_PARCELS = 20_000


def load_parcels(path: str | PathLike[str]) -> Iterator[tuple[int, Mask]]:
    """Read an atlas image, parcel by parcel.

    Parameters
    ----------
    path : str or path-like
        A NIfTI file in MNI152 space whose voxels are whole numbers, 0 outside all parcels.

    Yields
    ------
    int
        The parcel's number, increasing.
    Mask
        Its voxels, cropped to its own box, so that a fine atlas needs little memory.

    Raises
    ------
    InputFileError
        If the file cannot be read as such an image, a voxel is not a whole number of at least 0, there
        is no parcel, or one lies far from any head.
    """
    file = Path(path)
    values, affine = read_image(file, "atlas")
    # Small integers would be rounded to half precision, which cannot hold the largest number.
    numbers = np.rint(values) if values.dtype.kind == "f" else values
    if not (numbers == values).all() or int(numbers.min()) < 0 or int(numbers.max()) > 2**31 - 1:
        raise InputFileError(
            "the voxels of an atlas must be whole numbers from 0; this image looks like a map of values",
            path=file,
        )
    flat = numbers.astype(np.int64).reshape(-1)
    marked = np.flatnonzero(flat)
    order = marked[np.argsort(flat[marked], kind="stable")]
    parcels, first = np.unique(flat[order], return_index=True)
    if not 0 < len(parcels) <= _MOST_PARCELS:
        raise InputFileError(f"an atlas has 1 to {_MOST_PARCELS} parcels, but this image has {len(parcels)}", path=file)
    for number, voxels in zip(parcels.tolist(), np.split(order, first[1:]), strict=True):
        ijk = np.column_stack(np.unravel_index(voxels, numbers.shape))
        corner = ijk.min(axis=0)
        inside = np.zeros(ijk.max(axis=0) - corner + 1, dtype=bool)
        inside[tuple((ijk - corner).T)] = True
        shifted = affine.copy()
        shifted[:3, 3] = affine[:3, :3] @ corner + affine[:3, 3]
        try:
            mask = Mask(ijk_inside=inside, affine=shifted, name=f"parcel {number}")
        except SpaceError as error:
            raise InputFileError(str(error), path=file) from None
        yield number, mask
