"""The sphere around a point: the region that most claims look in.

Distances are compared as whole squared tenths of a millimetre, so that a peak exactly on the surface
is inside on every machine. Callers import these names from `revinf.spaces.regions`.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import SpaceError
from revinf.spaces.coordinates import FURTHEST_MM, to_tenths
from revinf.spaces.voxels import checked_tenths

__all__ = ["LARGEST_RADIUS_MM", "Sphere", "sphere", "squared_tenths"]

LARGEST_RADIUS_MM = 200.0
"""A sphere of this radius around any point of a head contains the head."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Sphere:
    """All points no further from a centre than a radius.

    Parameters
    ----------
    centre_tenths : tuple of three int, tenths of a millimetre, MNI152
    radius_mm : float, mm, 0 to 200
        0 means the very point.

    Raises
    ------
    SpaceError
        If the radius or the centre lies outside its range.

    See Also
    --------
    sphere : The same from millimetres.

    Examples
    --------
    >>> Sphere(centre_tenths=(540, -540, 240), radius_mm=10.0).centre_mm
    (54.0, -54.0, 24.0)
    """

    centre_tenths: tuple[int, int, int]
    radius_mm: float

    def __post_init__(self) -> None:
        if not 0.0 <= self.radius_mm <= LARGEST_RADIUS_MM:
            raise SpaceError(
                f"radius_mm must lie between 0 and {LARGEST_RADIUS_MM:.0f} mm, "
                f"but got {self.radius_mm!r}; 10 mm is usual"
            )
        if len(self.centre_tenths) != 3 or not all(abs(value) <= 10 * FURTHEST_MM for value in self.centre_tenths):
            raise SpaceError(
                f"centre_tenths must be three whole tenths of a millimetre within "
                f"{FURTHEST_MM:.0f} mm of the origin, but got {self.centre_tenths!r}; use sphere()"
            )

    @property
    def kind(self) -> Literal["sphere"]:
        """The word for this kind of region."""
        return "sphere"

    @property
    def centre_mm(self) -> tuple[float, float, float]:
        """The centre in mm."""
        x, y, z = self.centre_tenths
        return x / 10.0, y / 10.0, z / 10.0

    def contains(self, xyz_tenths: NDArray[np.integer]) -> NDArray[np.bool_]:
        """Say of each point whether its distance from the centre is at most the radius.

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
        Exact: whole squared tenths are compared with the whole part of the squared radius.

        Examples
        --------
        >>> points = np.array([[640, -540, 240], [641, -540, 240]], dtype=np.int16)
        >>> sphere((54, -54, 24), 10).contains(points)
        array([ True, False])
        """
        away = checked_tenths(xyz_tenths) - np.array(self.centre_tenths, dtype=np.int64)
        hit: NDArray[np.bool_] = np.einsum("ij,ij->i", away, away) <= squared_tenths(self.radius_mm)
        return hit

    def bounds_tenths(self) -> tuple[NDArray[np.int32], NDArray[np.int32]]:
        """Return the lowest and highest corner of the box around the sphere.

        Returns
        -------
        low, high : (3,) arrays of int32, tenths of a millimetre

        Examples
        --------
        >>> low, high = sphere((0, 0, 0), 10.25).bounds_tenths()
        >>> low.tolist(), high.tolist()
        ([-103, -103, -103], [103, 103, 103])
        """
        centre = np.array(self.centre_tenths, dtype=np.int32)
        reach = np.int32(math.ceil(_radius_tenths(self.radius_mm)))
        return centre - reach, centre + reach


def sphere(xyz_mm: ArrayLike, radius_mm: float) -> Sphere:
    """Return the sphere around a point given in millimetres.

    Parameters
    ----------
    xyz_mm : (3,) array-like, mm, MNI152
        The centre; rounded to 0.1 mm like every coordinate.
    radius_mm : float, mm, 0 to 200

    Returns
    -------
    Sphere

    Raises
    ------
    SpaceError
        If the centre or the radius lies outside its range.

    Examples
    --------
    >>> sphere((54, -54, 24), 10)
    Sphere(centre_tenths=(540, -540, 240), radius_mm=10.0)
    """
    x, y, z = (int(value) for value in to_tenths(np.reshape(np.asarray(xyz_mm), -1)))
    return Sphere(centre_tenths=(x, y, z), radius_mm=float(radius_mm))


def _radius_tenths(radius_mm: float) -> Fraction:
    """Return the radius in tenths as the decimal that was typed, to 1e-9 of a tenth."""
    return Fraction(round(Fraction(repr(float(radius_mm))) * 10**10), 10**9)


def squared_tenths(radius_mm: float) -> int:
    """Return the largest whole squared distance that a radius admits.

    Parameters
    ----------
    radius_mm : float, mm

    Returns
    -------
    int, squared tenths of a millimetre
        A point of whole tenths is within the radius if and only if its squared distance is at most
        this.

    Examples
    --------
    >>> squared_tenths(10.25), squared_tenths(0.7)
    (10506, 49)
    """
    return math.floor(_radius_tenths(radius_mm) ** 2)
