"""The peaks of a statistical map, named as an assessment names places."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any

from revinf.evidence.parts import Place
from revinf.evidence.place import place_of_peak
from revinf.spaces.reference import brain_reference
from revinf.spaces.statistical_map import MapPeak, peaks_of_map

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["PEAK_COLUMNS", "NamedPeak", "map_peaks", "peak_rows", "peaks_frame"]

PEAK_COLUMNS = ("study", "x", "y", "z", "space", "stat", "place", "words", "cluster", "cluster_mm3")


@dataclass(frozen=True, slots=True, kw_only=True)
class NamedPeak:
    """A peak of a map and where it is."""

    peak: MapPeak
    place: Place

    @property
    def name(self) -> str:
        """A short name: the side, and the nearest published label or the tissue."""
        what = self.place.nearest.label if self.place.nearest is not None else self.place.tissue or ""
        return f"{self.place.hemisphere or ''} {what}".strip()


def map_peaks(
    file: str | Path,
    threshold: float,
    *,
    extent_voxels: int = 0,
    min_distance_mm: float = 8.0,
    two_sided: bool = False,
) -> list[NamedPeak]:
    """Return the peaks of a statistical map in MNI152 space with their places.

    Parameters
    ----------
    file : path
        NIfTI image, MNI152.
    threshold : float, > 0
        What a voxel must reach, in the map's own units.
    extent_voxels : int, default 0
        Clusters with fewer voxels are left out.
    min_distance_mm : float, mm, default 8
        Between the peaks of one cluster.
    two_sided : bool, default False
        Also report decreases.

    Returns
    -------
    list of NamedPeak
        Cluster by cluster.

    Raises
    ------
    InputFileError, SpaceError
        If the map cannot be read, or a number is out of range.
    """
    found = peaks_of_map(
        file, threshold, extent_voxels=extent_voxels, min_distance_mm=min_distance_mm, two_sided=two_sided
    )
    brain = brain_reference()
    return [NamedPeak(peak=peak, place=place_of_peak(brain, peak.xyz)) for peak in found]


def peak_rows(peaks: Sequence[NamedPeak], study: str) -> list[dict[str, Any]]:
    """Return one row a peak, which `build`, `audit --peaks` and `scan --peaks` take.

    Parameters
    ----------
    peaks : sequence of NamedPeak
        From `map_peaks`.
    study : str
        Name of the map.

    Returns
    -------
    list of dict
        Keys as in `PEAK_COLUMNS`.
    """
    return [
        {
            "study": study,
            **dict(zip("xyz", item.peak.xyz, strict=True)),
            "space": "MNI152",
            "stat": item.peak.statistic,
            "place": item.name,
            "words": item.place.words,
            "cluster": item.peak.cluster,
            "cluster_mm3": item.peak.cluster_mm3,
        }
        for item in peaks
    ]


def peaks_frame(peaks: Sequence[NamedPeak], study: str = "map") -> pd.DataFrame:
    """Return the rows of `peak_rows` as a data frame."""
    import pandas as pd

    return pd.DataFrame(peak_rows(peaks, study), columns=list(PEAK_COLUMNS))
