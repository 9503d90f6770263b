"""Coordinates as the project compares them: whole tenths of a millimetre, in a named space.

Every distance, fast or slow, is taken between coordinates rounded here, so that no two parts of the
project can disagree about a point that lies exactly on a boundary. Holds no transform and no region.
"""

from __future__ import annotations

from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import SpaceError

__all__ = ["FURTHEST_MM", "Space", "finite_xyz", "normalise_space", "round_mm", "to_tenths"]

Space = Literal["MNI152", "Talairach"]

FURTHEST_MM = 1000.0
"""No head reaches further from its origin; anything beyond is an error of units."""

_SPACES: dict[str, Space] = {
    "mni": "MNI152",
    "mni152": "MNI152",
    "tal": "Talairach",
    "tal88": "Talairach",
    "talairach": "Talairach",
}

# Decimals of a tenth kept before halves are decided: swallows the noise of binary fractions and of
# a matrix product (1e-12), keeps everything a person could have typed.
_NOISE_DECIMALS = 6


def finite_xyz(xyz: ArrayLike) -> NDArray[np.float64]:
    """Return coordinates as floats after checking that they can be places in a head.

    Parameters
    ----------
    xyz : (..., 3) array-like, mm, any space

    Returns
    -------
    (..., 3) array of float64, mm

    Raises
    ------
    SpaceError
        If the last axis is not of length 3, or a value is not a finite number within 1000 mm.

    Examples
    --------
    >>> finite_xyz((54, -54, 24))
    array([ 54., -54.,  24.])
    """
    try:
        values = np.asarray(xyz, dtype=np.float64)
    except (TypeError, ValueError):
        raise SpaceError(
            f"xyz must be numbers in rows of three, but got {_short(xyz)}; give x, y and z in mm"
        ) from None
    if values.ndim == 0 or values.shape[-1] != 3:
        raise SpaceError(
            f"xyz must have three values a point, but got an array of shape {values.shape}; give x, y and z in mm"
        )
    wrong = ~(np.abs(values) <= FURTHEST_MM)
    if wrong.any():
        raise SpaceError(
            f"xyz must be finite and within {FURTHEST_MM:.0f} mm of the origin, "
            f"but got {float(values[wrong][0])!r}; give millimetres"
        )
    return values


def to_tenths(xyz: ArrayLike) -> NDArray[np.int32]:
    """Round coordinates to whole tenths of a millimetre, halves away from zero.

    Halves are those of the decimal number that was typed: 0.35 mm becomes 4 tenths although its
    binary form lies a little below.

    Parameters
    ----------
    xyz : (..., 3) array-like, mm, any space

    Returns
    -------
    (..., 3) array of int32, tenths of a millimetre

    Raises
    ------
    SpaceError
        If the last axis is not of length 3, or a value is not a finite number within 1000 mm.

    Notes
    -----
    The result can exceed int16 arithmetic as soon as it is squared: widen before multiplying.

    Examples
    --------
    >>> to_tenths([[54, -54, 24], [0.35, -0.35, 0.34]])
    array([[ 540, -540,  240],
           [   4,   -4,    3]], dtype=int32)
    """
    scaled = np.round(finite_xyz(xyz) * 10.0, _NOISE_DECIMALS)
    whole = np.trunc(scaled)
    half_or_more = np.abs(scaled - whole) >= 0.5
    rounded: NDArray[np.int32] = (whole + np.sign(scaled) * half_or_more).astype(np.int32)
    return rounded


def round_mm(xyz: ArrayLike) -> NDArray[np.float64]:
    """Round coordinates to 0.1 mm, the precision at which all distances are taken.

    Parameters
    ----------
    xyz : (..., 3) array-like, mm, any space

    Returns
    -------
    (..., 3) array of float64, mm

    Raises
    ------
    SpaceError
        If the last axis is not of length 3, or a value is not a finite number within 1000 mm.

    Examples
    --------
    >>> round_mm((-49.77, -34.36, 25.74))
    array([-49.8, -34.4,  25.7])
    """
    return to_tenths(xyz) / 10.0


def normalise_space(text: str) -> Space:
    """Return the name of the space that a table or a user means.

    Parameters
    ----------
    text : str
        MNI, MNI152, TAL, Tal88 or Talairach, in any case; spaces, hyphens and underscores are
        ignored.

    Returns
    -------
    {"MNI152", "Talairach"}

    Raises
    ------
    SpaceError
        If the text names no space known here.

    Examples
    --------
    >>> normalise_space("mni-152"), normalise_space(" TAL ")
    ('MNI152', 'Talairach')
    """
    key = str(text).casefold().translate({ord(mark): None for mark in " \t-_\u00a0"})
    try:
        return _SPACES[key]
    except KeyError:
        raise SpaceError(
            f"space must be MNI152 or Talairach, but got {_short(text)}; "
            "write MNI or TAL (transform other spaces first)"
        ) from None


def _short(value: object, longest: int = 60) -> str:
    """Return a value as one short line for a message."""
    text = " ".join(repr(value).split())
    return text if len(text) <= longest else text[: longest - 1] + "…"
