"""Regions a claim can look in: a sphere around a point, or a mask image.

A region answers one question, `contains`, for points in whole tenths of a millimetre (MNI152), and
draws the box around itself. Both kinds are closed sets: a point exactly on the boundary is inside.
Mask images are read here and nowhere else in this part.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from os import PathLike
from pathlib import Path
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import InputFileError, SpaceError
from revinf.spaces.coordinates import FURTHEST_MM
from revinf.spaces.images import image_stem, read_image
from revinf.spaces.spheres import LARGEST_RADIUS_MM, Sphere, sphere
from revinf.spaces.voxels import checked_affine, checked_tenths, touched_voxels

__all__ = ["LARGEST_RADIUS_MM", "Mask", "Region", "Sphere", "load_mask", "sphere"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Mask:
    """The closed boxes of the voxels that an image marks.

    Parameters
    ----------
    ijk_inside : (I, J, K) array of bool
        True for the voxels inside.
    affine : (4, 4) array
        Voxel indices to mm, MNI152.
    name : str
        What the mask is called on a screen.

    Raises
    ------
    SpaceError
        If no voxel is inside, or the arrays are not a grid with an invertible affine.

    See Also
    --------
    load_mask : The same from an image file.

    Examples
    --------
    >>> Mask(ijk_inside=np.ones((3, 1, 1), dtype=bool), affine=np.diag([2, 2, 2, 1]), name="row").centre_mm
    (2.0, 0.0, 0.0)
    """

    ijk_inside: NDArray[np.bool_]
    affine: NDArray[np.float64]
    name: str
    _box: tuple[NDArray[np.int32], NDArray[np.int32]] = field(init=False, repr=False)
    _centre_mm: tuple[float, float, float] = field(init=False, repr=False)

    def __post_init__(self) -> None:
        if self.ijk_inside.ndim != 3 or self.ijk_inside.dtype != np.bool_:
            raise SpaceError(
                f"ijk_inside must be a 3-D array of bool, but got {self.ijk_inside.dtype} of shape "
                f"{self.ijk_inside.shape}; compare the image with 0"
            )
        affine = checked_affine(self.affine)
        ijk = np.argwhere(self.ijk_inside)
        if not len(ijk):
            raise SpaceError("ijk_inside must hold a voxel, but got none; choose another mask")
        low, high = ijk.min(axis=0) - 0.5, ijk.max(axis=0) + 0.5
        corners = np.stack(np.meshgrid(*zip(low, high, strict=True)), axis=-1).reshape(8, 3)
        corners_tenths = 10.0 * (corners @ affine[:3, :3].T + affine[:3, 3])
        if not np.abs(corners_tenths).max() <= 10 * FURTHEST_MM:
            raise SpaceError(
                f"affine must place the mask within {FURTHEST_MM:.0f} mm of the origin, but got "
                f"{np.abs(corners_tenths).max() / 10:.4g} mm; check the units of the image"
            )
        box = (
            # Outwards to whole tenths, except where only the noise of the product asks for it.
            np.floor(corners_tenths.min(axis=0) + 1e-6).astype(np.int32),
            np.ceil(corners_tenths.max(axis=0) - 1e-6).astype(np.int32),
        )
        x, y, z = (affine[:3, :3] @ ijk.mean(axis=0) + affine[:3, 3]).tolist()
        object.__setattr__(self, "affine", affine)
        object.__setattr__(self, "_box", box)
        object.__setattr__(self, "_centre_mm", (x, y, z))

    @property
    def kind(self) -> Literal["mask"]:
        """The word for this kind of region."""
        return "mask"

    @property
    def centre_mm(self) -> tuple[float, float, float]:
        """The centre of gravity in mm; it need not lie inside the mask."""
        return self._centre_mm

    def contains(self, xyz_tenths: NDArray[np.integer]) -> NDArray[np.bool_]:
        """Say of each point whether a nearest voxel of the grid is inside the mask.

        Parameters
        ----------
        xyz_tenths : (N, 3) array of integers, tenths of a millimetre, MNI152

        Returns
        -------
        (N,) array of bool

        Raises
        ------
        SpaceError
            If the points have the wrong shape or type.

        Notes
        -----
        A point on a face between voxels is inside if one of them is: the answer depends neither on
        the side of the brain nor on the order in which the image is stored.

        Examples
        --------
        >>> row = Mask(ijk_inside=np.ones((2, 1, 1), dtype=bool), affine=np.diag([2, 2, 2, 1]), name="row")
        >>> row.contains(np.array([[-10, 0, 0], [-11, 0, 0]]))
        array([ True, False])
        """
        points = checked_tenths(xyz_tenths)
        low, high = self._box
        near = np.flatnonzero(((points >= low) & (points <= high)).all(axis=1))
        touched = touched_voxels(points[near], self.affine, self.ijk_inside.shape)
        inside = self.ijk_inside.reshape(-1)[touched] & (touched >= 0)
        hit = np.zeros(len(points), dtype=np.bool_)
        hit[near] = inside.any(axis=1)
        return hit

    def bounds_tenths(self) -> tuple[NDArray[np.int32], NDArray[np.int32]]:
        """Return the lowest and highest corner of the box around the mask.

        Returns
        -------
        low, high : (3,) arrays of int32, tenths of a millimetre
        """
        low, high = self._box
        return low.copy(), high.copy()


Region = Sphere | Mask


def load_mask(path: str | PathLike[str]) -> Mask:
    """Read a mask image: every voxel that is not zero is inside.

    Parameters
    ----------
    path : str or path-like
        A NIfTI file, .nii or .nii.gz, in MNI152 space: 3-D, or 4-D with one volume; at most 512
        voxels an axis of at most 20 mm.

    Returns
    -------
    Mask
        Named after the file.

    Raises
    ------
    InputFileError
        If the file cannot be read as such an image, has no orientation or a singular one, holds a
        value that is not finite, or marks no voxel or all of them.

    Notes
    -----
    Whether the image is in MNI152 space cannot be seen from the file; that is the caller's word.

    Examples
    --------
    >>> load_mask("absent.nii.gz")
    Traceback (most recent call last):
    revinf.exceptions.InputFileError: absent.nii.gz: there is no such file; give the path of the mask image
    """
    file = Path(path)
    values, affine = read_image(file)
    inside = values != 0
    if not inside.any():
        raise InputFileError("the mask is empty: every voxel is 0; choose another", path=path)
    if inside.all():
        raise InputFileError(
            "every voxel is non-zero, so the image marks no place; set the voxels outside to 0",
            path=path,
        )
    try:
        return Mask(ijk_inside=inside, affine=affine, name=image_stem(file))
    except SpaceError as error:
        raise InputFileError(str(error), path=path) from None
