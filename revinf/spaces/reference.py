"""The standard brain as one object: tissue image, affine and published points.

`brain_reference` gathers it from what nilearn carries; a literature can store it and answer without
nilearn. *Grey matter* is a template above 0.5, a statement about an average brain. What it says of a
place is the business of `revinf.spaces.brain`.
"""

from __future__ import annotations

import warnings
from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import SpaceError
from revinf.spaces.packaged import Templates, packaged_templates
from revinf.spaces.published_points import published_points
from revinf.spaces.voxels import checked_affine

__all__ = ["GREY", "OTHER", "OUTSIDE", "WHITE", "BrainReference", "brain_reference"]

OUTSIDE, OTHER, GREY, WHITE = range(4)
"""Codes of the tissue image."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class BrainReference:
    """The standard brain as far as revinf knows it.

    Parameters
    ----------
    tissue : (99, 117, 95) array of uint8
        0 outside the brain, 1 other brain, 2 grey matter, 3 white matter.
    affine : (4, 4) array of float64
        Voxel indices of `tissue` to mm, MNI152.
    point_xyz_tenths : (P, 3) array of int16, tenths of a millimetre, MNI152
        Published points.
    point_labels : tuple of P str
        "" where a point has no anatomical label.
    point_sources : tuple of P str
    point_networks : tuple of P str
        "" where a point has no network.

    Raises
    ------
    SpaceError
        If the parts do not fit together.
    """

    tissue: NDArray[np.uint8]
    affine: NDArray[np.float64]
    point_xyz_tenths: NDArray[np.int16]
    point_labels: tuple[str, ...]
    point_sources: tuple[str, ...]
    point_networks: tuple[str, ...]

    def __post_init__(self) -> None:
        lengths = {
            len(self.point_xyz_tenths),
            len(self.point_labels),
            len(self.point_sources),
            len(self.point_networks),
        }
        if self.tissue.ndim != 3 or len(lengths) != 1:
            raise SpaceError(
                "a brain reference must have a 3-D tissue image and one label, source and network "
                f"a point, but got {self.tissue.ndim} dimensions and lengths {sorted(lengths)}; "
                "make it with brain_reference()"
            )
        checked_affine(self.affine)


@cache
def brain_reference() -> BrainReference:
    """Build the reference from the templates and points that nilearn carries (no network).

    Returns
    -------
    BrainReference
        The same object at each call; its arrays cannot be written to.

    Notes
    -----
    Grey: grey-matter template above 0.5; white: white-matter template above 0.5; where both are, the
    larger wins. The rest of the brain mask is "other brain": ventricles, and voxels that the
    templates divide.

    References
    ----------
    Fonov et al. 2011, NeuroImage 54:313-327, doi:10.1016/j.neuroimage.2010.07.033 (templates).

    Examples
    --------
    >>> brain_reference().tissue.shape
    (99, 117, 95)
    """
    brain, grey, white, affine = packaged_templates() or _asked_templates()
    tissue = brain.astype(np.uint8)
    tissue[(white > 0.5) & (white > grey)] = WHITE
    tissue[(grey > 0.5) & (grey >= white)] = GREY
    points = published_points()
    for array in (tissue, affine, points.xyz_tenths):
        array.setflags(write=False)
    return BrainReference(
        tissue=tissue,
        affine=affine,
        point_xyz_tenths=points.xyz_tenths,
        point_labels=points.labels,
        point_sources=points.sources,
        point_networks=points.networks,
    )


def _asked_templates() -> Templates:
    """Return the same from nilearn itself, whatever version it is."""
    with warnings.catch_warnings():
        # nilearn announces changes of its own interface; no news for our users.
        warnings.simplefilter("ignore")
        from nilearn import datasets

        mask_image = datasets.load_mni152_brain_mask(resolution=2)
        grey = np.asarray(datasets.load_mni152_gm_template(resolution=2).dataobj)
        white = np.asarray(datasets.load_mni152_wm_template(resolution=2).dataobj)
    brain = np.asarray(mask_image.dataobj) > 0
    return brain, grey, white, np.array(mask_image.affine, dtype=np.float64)
