"""The published labelled points of the brain, as nilearn carries them.

Two open sets are read, never copied: 160 points (Dosenbach et al. 2010) and 300 points (Seitzman et
al. 2020). Which of them is near a place is the business of `revinf.spaces.landmarks`.
"""

from __future__ import annotations

import re
import warnings
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from revinf.spaces.coordinates import to_tenths
from revinf.spaces.packaged import PointRow, packaged_points

__all__ = ["DOSENBACH", "SEITZMAN", "PublishedPoints", "published_points"]

DOSENBACH = "160-point set of Dosenbach et al. 2010"
SEITZMAN = "300-point set of Seitzman et al. 2020"

# The 300-point set calls its cortical points only left, right or middle: no label for a reader.
_SUBCORTICAL = {
    "amygdala": "amygdala",
    "basalGanglia": "basal ganglia",
    "cerebellum": "cerebellum",
    "hippocampus": "hippocampus",
    "thalamus": "thalamus",
}


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class PublishedPoints:
    """Both sets, one entry a point, the 160-point set first.

    Parameters
    ----------
    xyz_tenths : (P, 3) array of int16, tenths of a millimetre, MNI152
    labels : tuple of P str
        "" where the authors give no anatomical label.
    sources : tuple of P str
    networks : tuple of P str
        "" where the authors assign none.
    """

    xyz_tenths: NDArray[np.int16]
    labels: tuple[str, ...]
    sources: tuple[str, ...]
    networks: tuple[str, ...]


def published_points() -> PublishedPoints:
    """Read both sets of labelled points from nilearn.

    Returns
    -------
    PublishedPoints
        460 points.

    Notes
    -----
    Some networks of the 160-point set carry the name of a lobe ("occipital"); they are kept as
    published.

    References
    ----------
    Dosenbach et al. 2010, Science 329:1358-1361, doi:10.1126/science.1194144.
    Seitzman et al. 2020, NeuroImage 206:116290, doi:10.1016/j.neuroimage.2019.116290.

    Examples
    --------
    >>> points = published_points()
    >>> len(points.labels), points.labels[0], points.sources[0]
    (460, 'inf cerebellum', '160-point set of Dosenbach et al. 2010')
    """
    first, second = packaged_points() or _asked_points()
    labels = [label for *_, label, _ in first]
    labels += [_SUBCORTICAL.get(region, "") for *_, region, _ in second]
    return PublishedPoints(
        xyz_tenths=to_tenths([row[:3] for row in first + second]).astype(np.int16),
        labels=tuple(labels),
        sources=(DOSENBACH,) * len(first) + (SEITZMAN,) * len(second),
        networks=tuple(_in_words(network) for *_, network in first + second),
    )


def _asked_points() -> tuple[list[PointRow], list[PointRow]]:
    """Return both sets from nilearn itself, whatever version it is."""
    # nilearn announces changes of its own interface when it is imported or asked; no news for users.
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        from nilearn import datasets

        first = datasets.fetch_coords_dosenbach_2010()
        second = datasets.fetch_coords_seitzman_2018()
    # The first set's labels carry a running number.
    names = [re.sub(r"\s*\d+$", "", str(label)) for label in first.labels]
    return (
        [
            (float(x), float(y), float(z), name, str(network))
            for (x, y, z), name, network in zip(
                first.rois[["x", "y", "z"]].to_numpy(), names, first.networks, strict=True
            )
        ],
        [
            (float(x), float(y), float(z), str(region), str(network))
            for (x, y, z), region, network in zip(
                second.rois[["x", "y", "z"]].to_numpy(), second.regions, second.networks, strict=True
            )
        ],
    )


def _in_words(network: str) -> str:
    """Return "DefaultMode" as "default mode" and "FrontoParietal" as "fronto-parietal"."""
    if network == "unassigned":
        return ""
    parts = re.sub(r"(?<=[a-z])(?=[A-Z])", " ", network).lower()
    return re.sub(r"o (?=\w)", "o-", parts)
