"""What is known of a place in the standard brain: tissue, side, distance to the brain, landmarks.

Everything here works on one `BrainReference` with numpy alone. All places are mm in MNI152. *Grey
matter* is a template above 0.5, a statement about an average brain.
"""

from __future__ import annotations

from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import SpaceError
from revinf.spaces.coordinates import to_tenths
from revinf.spaces.landmarks import LabelledPoint, nearest_label, nearest_network
from revinf.spaces.reference import (
    GREY,
    OTHER,
    OUTSIDE,
    WHITE,
    BrainReference,
    brain_reference,
)
from revinf.spaces.voxels import touched_voxels, voxel_sizes

__all__ = [
    "BrainReference",
    "LabelledPoint",
    "brain_reference",
    "distance_outside_mm",
    "distance_to_grey_mm",
    "grey_lattice",
    "hemisphere",
    "nearest_label",
    "nearest_network",
    "place_in_words",
    "tissue_at",
]

Tissue = Literal["grey matter", "white matter", "other brain", "outside"]
Side = Literal["left", "right", "midline"]

_WORDS: dict[int, Tissue] = {
    GREY: "grey matter",
    WHITE: "white matter",
    OTHER: "other brain",
    OUTSIDE: "outside",
}
_MIDLINE_MM = 4.0
_FURTHEST_SEARCH_MM = 60.0


def tissue_at(reference: BrainReference, xyz_mm: ArrayLike) -> Tissue:
    """Name the tissue of the template at a place.

    Parameters
    ----------
    reference : BrainReference
    xyz_mm : (3,) array-like, mm, MNI152

    Returns
    -------
    {"grey matter", "white matter", "other brain", "outside"}
        On a face between voxels the first of these that one of them is: every odd coordinate lies
        on such a face, and the benefit of the doubt is the only rule that treats both sides alike.

    Raises
    ------
    SpaceError
        If the coordinates are not three finite millimetres.

    Examples
    --------
    >>> tissue_at(brain_reference(), (-42, -22, 52)), tissue_at(brain_reference(), (0, 0, 110))
    ('grey matter', 'outside')
    """
    codes = set(_touched_codes(reference, to_tenths(xyz_mm).reshape(-1, 3)).ravel().tolist())
    return next(word for code, word in _WORDS.items() if code in codes)


def distance_outside_mm(reference: BrainReference, xyz_mm: ArrayLike) -> float:
    """Return how far a place lies outside the brain.

    Parameters
    ----------
    reference : BrainReference
    xyz_mm : (3,) array-like, mm, MNI152

    Returns
    -------
    float, mm
        0 in a voxel of the brain or on its face, else the distance to the nearest centre of a brain
        voxel; infinity beyond 60 mm.

    Raises
    ------
    SpaceError
        If the coordinates are not three finite millimetres.

    Examples
    --------
    >>> distance_outside_mm(brain_reference(), (-42, -22, 52))
    0.0
    >>> distance_outside_mm(brain_reference(), (0, 0, 900))
    inf
    """
    return _distance_to(reference, xyz_mm, (OTHER, GREY, WHITE))


def distance_to_grey_mm(reference: BrainReference, xyz_mm: ArrayLike) -> float:
    """Return how far a place lies from grey matter.

    Parameters
    ----------
    reference : BrainReference
    xyz_mm : (3,) array-like, mm, MNI152

    Returns
    -------
    float, mm
        0 in a voxel of grey matter or on its face, else the distance to the nearest centre of one;
        infinity beyond 60 mm.

    Raises
    ------
    SpaceError
        If the coordinates are not three finite millimetres.

    Examples
    --------
    >>> distance_to_grey_mm(brain_reference(), (54, -54, 24))
    2.0
    """
    return _distance_to(reference, xyz_mm, (GREY,))


def _distance_to(reference: BrainReference, xyz_mm: ArrayLike, codes: tuple[int, ...]) -> float:
    """Return the distance to the nearest centre of a voxel with one of the codes, 0 inside one."""
    tenths = to_tenths(xyz_mm).reshape(-1, 3)
    if np.isin(_touched_codes(reference, tenths), codes).any():
        return 0.0
    point = tenths[0] / 10.0
    inverse = np.linalg.inv(reference.affine)
    centre = np.rint(inverse[:3, :3] @ point + inverse[:3, 3]).astype(np.int64)
    sizes = voxel_sizes(reference.affine)
    # Widening boxes: most places asked about lie near the brain, and a small box answers for them.
    for reach_mm in (4.0, 8.0, 16.0, 32.0, _FURTHEST_SEARCH_MM):
        half = np.ceil(reach_mm / sizes).astype(np.int64) + 1
        low = np.clip(centre - half, 0, reference.tissue.shape)
        high = np.clip(centre + half + 1, 0, reference.tissue.shape)
        box = reference.tissue[low[0] : high[0], low[1] : high[1], low[2] : high[2]]
        ijk = np.argwhere(np.isin(box, codes)) + low
        if len(ijk):
            away = ijk @ reference.affine[:3, :3].T + reference.affine[:3, 3] - point
            nearest = float(np.sqrt((away**2).sum(axis=1).min()))
            # Beyond the reach a nearer voxel may lie outside the box.
            if nearest <= reach_mm:
                return nearest
    return float("inf")


def hemisphere(xyz_mm: ArrayLike) -> Side:
    """Name the side of the brain.

    Parameters
    ----------
    xyz_mm : (3,) array-like, mm, MNI152

    Returns
    -------
    {"left", "right", "midline"}
        Midline is |x| <= 4 mm: the width is our choice (two voxels), not a published border.

    Raises
    ------
    SpaceError
        If the coordinates are not three finite millimetres.

    Examples
    --------
    >>> hemisphere((-48, 26, 12)), hemisphere((4, 20, 40)), hemisphere((4.1, 20, 40))
    ('left', 'midline', 'right')
    """
    x_mm = to_tenths(xyz_mm).reshape(-1, 3)[0, 0] / 10.0
    if abs(x_mm) <= _MIDLINE_MM:
        return "midline"
    return "left" if x_mm < 0 else "right"


def grey_lattice(reference: BrainReference, spacing_mm: float) -> NDArray[np.int16]:
    """List the grey-matter points of a regular lattice through the origin.

    Parameters
    ----------
    reference : BrainReference
    spacing_mm : float, mm, 1 to 50, whole tenths
        Distance between neighbours along each axis.

    Returns
    -------
    (N, 3) array of int16, tenths of a millimetre, MNI152
        Points whose coordinates are multiples of the spacing and where `tissue_at` says grey matter,
        sorted by x, then y, then z.

    Notes
    -----
    A spacing of an odd number of mm puts points on faces between voxels, where one grey voxel is
    enough: such a lattice is a little denser at the edge of the cortex than an even one.

    Raises
    ------
    SpaceError
        If the spacing lies outside its range or is no whole number of tenths.

    Examples
    --------
    >>> grey_lattice(brain_reference(), 50).tolist()
    [[-500, -500, 500], [0, 0, 500], [500, -500, 500]]
    """
    step = round(10 * spacing_mm) if 1.0 <= spacing_mm <= 50.0 else 0
    if not step or abs(10 * spacing_mm - step) > 1e-9:
        raise SpaceError(
            f"spacing_mm must be 1 to 50 mm in whole tenths, but got {spacing_mm!r}; 4 mm is the background's"
        )
    corners = np.array(np.meshgrid(*((-0.5, n - 0.5) for n in reference.tissue.shape)))
    corners_mm = reference.affine[:3, :3] @ corners.reshape(3, 8) + reference.affine[:3, 3:]
    first = np.ceil(corners_mm.min(axis=1) * 10 / step).astype(int)
    last = np.floor(corners_mm.max(axis=1) * 10 / step).astype(int)
    axes = [np.arange(a, b + 1) * step for a, b in zip(first, last, strict=True)]
    # One sheet of constant x at a time: a 1 mm lattice of the whole box would not fit in memory.
    sheets = []
    for x in axes[0]:
        sheet = np.stack(np.meshgrid([x], axes[1], axes[2], indexing="ij"), axis=-1).reshape(-1, 3)
        grey = (_touched_codes(reference, sheet) == GREY).any(axis=1)
        sheets.append(sheet[grey].astype(np.int16))
    return np.concatenate(sheets)


def place_in_words(reference: BrainReference, xyz_mm: ArrayLike) -> str:
    """Describe a place by side, tissue and the published points nearest to it.

    Parameters
    ----------
    reference : BrainReference
    xyz_mm : (3,) array-like, mm, MNI152

    Returns
    -------
    str
        Says how far the nearest label is and who gave it; never that the place lies in a region.

    Raises
    ------
    SpaceError
        If the coordinates are not three finite millimetres.

    Examples
    --------
    >>> place_in_words(brain_reference(), (0, 0, 110))
    'midline, outside the brain; no labelled point within 6 mm'
    """
    tissue: str = tissue_at(reference, xyz_mm)
    if tissue == "other brain":
        tissue = "brain, but neither grey nor white matter"
    elif tissue == "outside":
        tissue = "outside the brain"
    side: str = hemisphere(xyz_mm)
    if side != "midline":
        side += " side" if tissue == "outside the brain" else " hemisphere"
    parts = [f"{side}, {tissue}"]
    label = nearest_label(reference, xyz_mm)
    if label is None:
        parts.append("no labelled point within 6 mm")
    else:
        parts.append(f"{label.distance_mm:.0f} mm from a published point labelled '{label.label}' ({label.source})")
    network = nearest_network(reference, xyz_mm)
    if network is not None:
        parts.append(f"network of the nearest point of Seitzman et al. 2020: {network[0]}, {network[1]:.0f} mm")
    return "; ".join(parts)


def _touched_codes(reference: BrainReference, xyz_tenths: NDArray[np.integer]) -> NDArray[np.uint8]:
    """Return the tissue codes of the up to eight voxels that each point touches, 0 off the grid."""
    touched = touched_voxels(xyz_tenths, reference.affine, reference.tissue.shape)
    codes: NDArray[np.uint8] = reference.tissue.reshape(-1)[touched]
    codes[touched < 0] = OUTSIDE
    return codes
