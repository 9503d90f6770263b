"""Where a claim's region is, as an assessment says it."""

from __future__ import annotations

from collections.abc import Sequence

from revinf.evidence.asked_region import Point
from revinf.evidence.parts import Nearest, Place, TablePlace
from revinf.spaces.brain import (
    BrainReference,
    distance_outside_mm,
    distance_to_grey_mm,
    hemisphere,
    nearest_label,
    place_in_words,
    tissue_at,
)
from revinf.spaces.regions import Mask

__all__ = ["place_of_mask", "place_of_pattern", "place_of_peak"]

_WORST_FIRST = ("outside", "other brain", "white matter", "grey matter")


def place_of_peak(brain: BrainReference, peak: Point, table_region: TablePlace | None = None) -> Place:
    """Return side, tissue and nearest published label of a peak.

    Parameters
    ----------
    brain : BrainReference
        Tissue image and labelled points.
    peak : (x, y, z), mm, MNI152
        The peak.
    table_region : TablePlace, optional
        The region of a table that answers for it.

    Returns
    -------
    Place
        In words and parts.
    """
    label = nearest_label(brain, peak)
    return Place(
        hemisphere=hemisphere(peak),
        tissue=tissue_at(brain, peak),
        nearest=None
        if label is None
        else Nearest(label=label.label, distance_mm=label.distance_mm, source=label.source),
        words=place_in_words(brain, peak),
        outside_mm=distance_outside_mm(brain, peak),
        grey_mm=distance_to_grey_mm(brain, peak),
        table_region=table_region,
    )


def place_of_mask(mask: Mask) -> Place:
    """Return what can be said of a mask: its name and its centre of gravity, which may lie outside it.

    Parameters
    ----------
    mask : Mask
        The region.

    Returns
    -------
    Place
        In words; tissue and nearest label are left out, since a mask is no point.
    """
    x, y, z = mask.centre_mm
    return Place(
        hemisphere=hemisphere(mask.centre_mm),
        tissue=None,
        nearest=None,
        words=(f"mask {mask.name}, {int(mask.ijk_inside.sum())} voxels, centre of gravity ({x:.0f}, {y:.0f}, {z:.0f})"),
    )


def place_of_pattern(places: Sequence[Place]) -> Place:
    """Return what can be said of several places together.

    Parameters
    ----------
    places : sequence of Place
        One a peak.

    Returns
    -------
    Place
        The side where all share it, the words of all; tissue and distances of the worst.
    """
    sides = {place.hemisphere for place in places}
    return Place(
        hemisphere=sides.pop() if len(sides) == 1 else None,
        tissue=next((name for name in _WORST_FIRST if any(place.tissue == name for place in places)), None),
        nearest=None,
        words=" | ".join(place.words for place in places),
        outside_mm=max(place.outside_mm or 0.0 for place in places),
        grey_mm=max(place.grey_mm or 0.0 for place in places),
    )
