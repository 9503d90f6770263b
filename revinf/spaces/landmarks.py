"""The nearest published point to a place, and what its authors call it.

A labelled point says what its authors called that spot; it is no border, so nothing here may claim that
a place lies *in* a region. Callers import these names from `revinf.spaces.brain`.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.spaces.coordinates import to_tenths
from revinf.spaces.published_points import SEITZMAN
from revinf.spaces.reference import BrainReference
from revinf.spaces.spheres import squared_tenths

__all__ = ["LabelledPoint", "nearest_label", "nearest_network"]


@dataclass(frozen=True, slots=True, kw_only=True)
class LabelledPoint:
    """The nearest published label to a place.

    Parameters
    ----------
    label : str
        As its authors wrote it, without the running number.
    distance_mm : float, mm
    source : str
        The set it comes from.
    network : str
        The network its authors assign it to, or "".
    """

    label: str
    distance_mm: float
    source: str
    network: str


def nearest_label(reference: BrainReference, xyz_mm: ArrayLike, within_mm: float = 6.0) -> LabelledPoint | None:
    """Return the nearest published point that has an anatomical label.

    Parameters
    ----------
    reference : BrainReference
    xyz_mm : (3,) array-like, mm, MNI152
    within_mm : float, mm
        Furthest distance that counts, itself included.

    Returns
    -------
    LabelledPoint or None
        None if no labelled point is that near. Of two equally near points the one of the 160-point
        set is taken.

    Raises
    ------
    SpaceError
        If the coordinates are not three finite millimetres.

    Examples
    --------
    >>> from revinf.spaces.reference import brain_reference
    >>> nearest_label(brain_reference(), (51, -30, 5)).label
    'temporal'
    """
    usable = np.array([label != "" for label in reference.point_labels])
    found = _nearest(reference, xyz_mm, within_mm, usable)
    if found is None:
        return None
    index, distance_mm = found
    return LabelledPoint(
        label=reference.point_labels[index],
        distance_mm=distance_mm,
        source=reference.point_sources[index],
        network=reference.point_networks[index],
    )


def nearest_network(reference: BrainReference, xyz_mm: ArrayLike, within_mm: float = 6.0) -> tuple[str, float] | None:
    """Return the network of the nearest point of the 300-point set, and how far that point is.

    Parameters
    ----------
    reference : BrainReference
    xyz_mm : (3,) array-like, mm, MNI152
    within_mm : float, mm
        Furthest distance that counts, itself included.

    Returns
    -------
    tuple of (str, float in mm) or None
        None if no point of that set is that near, or if the nearest is assigned to no network.

    Raises
    ------
    SpaceError
        If the coordinates are not three finite millimetres.

    Examples
    --------
    >>> from revinf.spaces.reference import brain_reference
    >>> nearest_network(brain_reference(), (0, 0, 150)) is None
    True
    """
    usable = np.array([source == SEITZMAN for source in reference.point_sources])
    found = _nearest(reference, xyz_mm, within_mm, usable)
    if found is None or not reference.point_networks[found[0]]:
        return None
    return reference.point_networks[found[0]], found[1]


def _nearest(
    reference: BrainReference, xyz_mm: ArrayLike, within_mm: float, usable: NDArray[np.bool_]
) -> tuple[int, float] | None:
    """Return the index and distance in mm of the first nearest usable point."""
    if not usable.any():
        return None
    indices = np.flatnonzero(usable)
    away = reference.point_xyz_tenths[indices].astype(np.int64) - to_tenths(xyz_mm)
    squared = (away**2).sum(axis=1)
    nearest = int(squared.argmin())
    if squared[nearest] > squared_tenths(within_mm):
        return None
    return int(indices[nearest]), float(np.sqrt(squared[nearest])) / 10.0
