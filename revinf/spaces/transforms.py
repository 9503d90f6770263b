"""Talairach to MNI152 and back, by the published transforms of data_tables/space_transforms.csv.

Each published transform maps MNI152 to Talairach; the way back is its exact inverse. Three are
affine ("pooled", "spm", "fsl": Lancaster et al. 2007), one is piecewise linear ("piecewise": Brett
1999). Holds no numbers of its own, and never guesses the space of a coordinate.
"""

from __future__ import annotations

from functools import cache

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import SpaceError
from revinf.knowledge import read_table
from revinf.spaces.coordinates import finite_xyz

__all__ = ["TRANSFORMS", "mni_to_talairach", "talairach_to_mni"]

TRANSFORMS: tuple[str, ...] = ("pooled", "spm", "fsl", "piecewise")
"""Names of the transforms, the default first."""

_AXES = ("x", "y", "z")


def mni_to_talairach(xyz: ArrayLike, transform: str = "pooled") -> NDArray[np.float64]:
    """Move MNI152 coordinates to Talairach space: xyz' = A xyz + b, by published A and b.

    Parameters
    ----------
    xyz : (3,) or (N, 3) array-like, mm, MNI152
    transform : {"pooled", "spm", "fsl", "piecewise"}
        Which published transform: the one that fits the software that normalised the brains.

    Returns
    -------
    array of float64 of the same shape, mm, Talairach

    Raises
    ------
    SpaceError
        If the transform is not one of the four, or the coordinates are not finite millimetres.

    Notes
    -----
    The piecewise transform has one matrix for MNI z >= 0 and one for z < 0; both give the same at
    z = 0.

    References
    ----------
    Lancaster et al. 2007, Hum Brain Mapp 28:1194-1205, doi:10.1002/hbm.20345.
    Brett 1999, The MNI brain and the Talairach atlas, MRC Cognition and Brain Sciences Unit.

    Examples
    --------
    >>> mni_to_talairach((0, 0, 0))
    array([-1.0423, -1.394 ,  3.6475])
    """
    points = finite_xyz(xyz)
    (upper, upper_offset), (lower, lower_offset) = _branches(transform)
    above = points @ upper.T + upper_offset
    below = points @ lower.T + lower_offset
    moved: NDArray[np.float64] = np.where(points[..., 2:] >= 0.0, above, below)
    return moved


def talairach_to_mni(xyz: ArrayLike, transform: str = "pooled") -> NDArray[np.float64]:
    """Move Talairach coordinates to MNI152: the exact inverse of `mni_to_talairach`.

    Parameters
    ----------
    xyz : (3,) or (N, 3) array-like, mm, Talairach
    transform : {"pooled", "spm", "fsl", "piecewise"}
        Which published transform: the one that brought the paper's coordinates to Talairach space.

    Returns
    -------
    array of float64 of the same shape, mm, MNI152

    Raises
    ------
    SpaceError
        If the transform is not one of the four, or the coordinates are not finite millimetres.

    Notes
    -----
    The inverse of the piecewise transform takes the upper matrix if and only if
    0.0485 y' + 0.9688 z' >= 0: with y' and z' from either matrix that sum is a positive multiple
    of the MNI z that decided the way there.

    References
    ----------
    Lancaster et al. 2007, Hum Brain Mapp 28:1194-1205, doi:10.1002/hbm.20345.
    Brett 1999, The MNI brain and the Talairach atlas, MRC Cognition and Brain Sciences Unit.

    Examples
    --------
    >>> talairach_to_mni((-1.0423, -1.3940, 3.6475)).round(6) + 0.0
    array([0., 0., 0.])
    """
    points = finite_xyz(xyz)
    (upper, upper_offset), (lower, lower_offset) = _branches(transform)
    above = (points - upper_offset) @ np.linalg.inv(upper).T
    below = (points - lower_offset) @ np.linalg.inv(lower).T
    # An affine transform has two equal branches, so the rule below decides nothing for it.
    sign_of_z = -upper[2, 1] * points[..., 1:2] + upper[1, 1] * points[..., 2:]
    moved: NDArray[np.float64] = np.where(sign_of_z >= 0.0, above, below)
    return moved


_Branch = tuple[NDArray[np.float64], NDArray[np.float64]]


@cache
def _branches(transform: str) -> tuple[_Branch, _Branch]:
    """Return matrix and offset for MNI z >= 0 and for z < 0."""
    if transform not in TRANSFORMS:
        raise SpaceError(
            f"transform must be one of {', '.join(TRANSFORMS)}, but got {transform!r}; "
            "use pooled when the paper does not name its software"
        )
    return _branch(transform, "z>=0"), _branch(transform, "z<0")


def _branch(transform: str, half: str) -> _Branch:
    """Read the three rows that hold in one half of the brain."""
    rows = {
        row["axis"]: row
        for row in read_table("space_transforms")
        if row["transform"] == transform and row["applies_to"] in ("all", half)
    }
    matrix = np.array([[float(rows[axis][c]) for c in ("cx", "cy", "cz")] for axis in _AXES])
    offset = np.array([float(rows[axis]["offset"]) for axis in _AXES])
    return matrix, offset
