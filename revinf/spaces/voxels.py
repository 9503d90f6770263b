"""Which voxels of a grid a point touches, without favouring a side.

A voxel is its closed box. With the usual 2 mm grid every odd coordinate lies on a face between two
voxels, so a rule such as "round up" would treat the left and the right hemisphere, or two storage
orders of one image, differently. Here a point touches each of the nearest voxels (up to eight), and
the caller says what to make of them. `ijk` are voxel indices, `affine` maps them to mm.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import SpaceError

__all__ = ["checked_affine", "checked_tenths", "touched_voxels", "voxel_sizes"]

# Continuous indices are rounded to this many decimals: swallows the noise of the inverse affine.
_NOISE_DECIMALS = 6
# An affine whose volume is this small beside its edges has squashed a dimension.
_LEAST_RELATIVE_VOLUME = 1e-6


def checked_affine(affine: ArrayLike) -> NDArray[np.float64]:
    """Return an affine as floats after checking that it can be inverted.

    Parameters
    ----------
    affine : (4, 4) array-like
        Voxel indices to mm, RAS+.

    Returns
    -------
    (4, 4) array of float64

    Raises
    ------
    SpaceError
        If the shape is wrong, a value is not finite, or the affine is singular.

    Examples
    --------
    >>> checked_affine(np.diag([2, 2, 2, 1]))[0]
    array([2., 0., 0., 0.])
    """
    matrix = np.asarray(affine, dtype=np.float64)
    if matrix.shape != (4, 4) or not np.isfinite(matrix).all():
        raise SpaceError(
            f"affine must be 4 by 4 finite numbers, but got shape {matrix.shape}; take it from the header of the image"
        )
    edges = float(np.prod(voxel_sizes(matrix)))
    volume = abs(float(np.linalg.det(matrix[:3, :3])))
    if not volume > _LEAST_RELATIVE_VOLUME * edges or not np.array_equal(matrix[3], [0, 0, 0, 1]):
        raise SpaceError(
            f"affine must be invertible, but got one with voxel volume {volume:.3g} mm³; "
            "save the image with a valid orientation"
        )
    return matrix


def voxel_sizes(affine: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the edge lengths of a voxel.

    Parameters
    ----------
    affine : (4, 4) array
        Voxel indices to mm.

    Returns
    -------
    (3,) array of float64, mm

    Examples
    --------
    >>> voxel_sizes(np.diag([2.0, 2.0, 3.0, 1.0]))
    array([2., 2., 3.])
    """
    sizes: NDArray[np.float64] = np.sqrt((affine[:3, :3] ** 2).sum(axis=0))
    return sizes


def checked_tenths(xyz_tenths: NDArray[np.integer]) -> NDArray[np.int64]:
    """Return points in tenths as int64, in which squares of any int16 or int32 point fit.

    Parameters
    ----------
    xyz_tenths : (N, 3) array of integers, tenths of a millimetre

    Returns
    -------
    (N, 3) array of int64, tenths of a millimetre

    Raises
    ------
    SpaceError
        If the shape or the type is wrong.

    Examples
    --------
    >>> checked_tenths(np.array([[540, -540, 240]], dtype=np.int16)).dtype
    dtype('int64')
    """
    points = np.asarray(xyz_tenths)
    if points.ndim != 2 or points.shape[1] != 3 or points.dtype.kind not in "iu":
        raise SpaceError(
            f"xyz_tenths must be an (N, 3) array of integers, but got {points.dtype} of shape "
            f"{points.shape}; round coordinates with to_tenths"
        )
    return points.astype(np.int64)


def touched_voxels(
    xyz_tenths: NDArray[np.integer], affine: NDArray[np.float64], shape: tuple[int, ...]
) -> NDArray[np.intp]:
    """Return the flat indices of the up to eight voxels that each point touches.

    Parameters
    ----------
    xyz_tenths : (N, 3) array of integers, tenths of a millimetre
    affine : (4, 4) array
        Voxel indices to mm, invertible.
    shape : tuple of three int
        The grid.

    Returns
    -------
    (N, 8) array of intp
        Indices into the raveled grid (C order); -1 where the voxel lies outside it. A point in the
        inside of a voxel names that voxel eight times.

    Raises
    ------
    SpaceError
        If the points have the wrong shape or type.

    Examples
    --------
    A point in the middle of the first voxel, and one on the face to its neighbour:

    >>> points = np.array([[0, 0, 0], [10, 0, 0]])
    >>> [sorted(set(row)) for row in touched_voxels(points, np.diag([2.0, 2, 2, 1]), (2, 1, 1)).tolist()]
    [[0], [0, 1]]
    """
    points = checked_tenths(xyz_tenths)
    inverse = np.linalg.inv(affine)
    ijk = points / 10.0 @ inverse[:3, :3].T + inverse[:3, 3]
    ijk = np.round(ijk, _NOISE_DECIMALS)
    low, high = np.ceil(ijk - 0.5), np.floor(ijk + 0.5)
    flat = np.zeros((len(points), 8), dtype=np.intp)
    outside = np.zeros((len(points), 8), dtype=np.bool_)
    for axis, length in enumerate(shape):
        # Bit `axis` of the corner number says which of the two candidates it takes on this axis.
        takes_high = (np.arange(8) >> axis) & 1 == 1
        index = np.where(takes_high, high[:, axis, None], low[:, axis, None])
        outside |= (index < 0) | (index >= length)
        flat = flat * length + np.clip(index, 0, length - 1).astype(np.intp)
    flat[outside] = -1
    return flat
