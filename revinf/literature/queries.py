"""What the arrays of a literature can be asked: which studies hit, which terms they carry."""

from __future__ import annotations

from bisect import bisect_left
from functools import cached_property
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import LiteratureError
from revinf.literature.background import BACKGROUND_RADIUS_MM, Background, compute_background
from revinf.literature.cells import candidate_slices
from revinf.literature.packing import Arrays, unpack_text
from revinf.literature.spelling import normalise_term
from revinf.literature.unknown_terms import unknown_term
from revinf.spaces.regions import Mask
from revinf.spaces.spheres import Sphere

__all__ = ["Queries", "Region"]

Region = Sphere | Mask


class Queries:
    """The questions that need the arrays only.

    Parameters
    ----------
    folder : pathlib.Path
        Where the arrays are, for messages.
    name : str
        What the literature is called, for messages.
    arrays : dict of str to array
        As `revinf.literature.packing.ARRAY_TYPES` names them.
    """

    def __init__(self, folder: Path, name: str, arrays: Arrays) -> None:
        self.folder = folder
        self._name = name
        self._arrays = arrays

    @property
    def n_studies(self) -> int:
        """Number of counted studies."""
        return len(self._arrays["study_n_peaks"])

    @property
    def n_peaks(self) -> int:
        """Number of peaks."""
        return len(self._arrays["peak_tenths"])

    @property
    def n_terms(self) -> int:
        """Number of terms, processes or not."""
        return len(self._arrays["term_ends"])

    @cached_property
    def terms(self) -> list[str]:
        """The terms, sorted."""
        return self._text("term")

    @cached_property
    def study_ids(self) -> list[str]:
        """The ids of the studies, sorted."""
        return self._text("study_id")

    @cached_property
    def term_totals(self) -> NDArray[np.int64]:
        """Number of studies that carry each term, (n_terms,)."""
        return np.diff(self._arrays["term_study_starts"]).astype(np.int64)

    def term_index(self, term: str) -> int:
        """Return the position of a term in `terms`.

        Parameters
        ----------
        term : str
            Compared after normalisation.

        Returns
        -------
        int
            Position.

        Raises
        ------
        UnknownTermError
            If no counted study carries it; names the terms that look like it.
        """
        name = normalise_term(term)
        position = bisect_left(self.terms, name)
        if position < len(self.terms) and self.terms[position] == name:
            return position
        raise unknown_term(name, self.terms, f"the literature {self._name!r}")

    def studies_with(self, term: str) -> NDArray[np.int64]:
        """Return the indices of the studies that carry a term, increasing.

        Parameters
        ----------
        term : str
            Compared after normalisation.

        Returns
        -------
        (n,) int64 array
            Indices into `study_ids`.

        Raises
        ------
        UnknownTermError
            If no counted study carries it.
        """
        index = self.term_index(term)
        starts = self._arrays["term_study_starts"]
        return np.asarray(self._arrays["term_studies"][starts[index] : starts[index + 1]], dtype=np.int64)

    def studies_hitting(self, region: Region) -> NDArray[np.int64]:
        """Return the indices of the studies with at least one peak in a region, increasing.

        Parameters
        ----------
        region : Sphere or Mask
            The boundary belongs to it.

        Returns
        -------
        (n,) int64 array
            Indices into `study_ids`.
        """
        slices = candidate_slices(self._arrays["cell_starts"], *region.bounds_tenths())
        if not slices:
            return np.zeros(0, dtype=np.int64)
        peaks = np.concatenate([self._arrays["peak_tenths"][a:b] for a, b in slices])
        studies = np.concatenate([self._arrays["peak_study"][a:b] for a, b in slices])
        return np.unique(studies[region.contains(peaks)]).astype(np.int64)

    def term_hits(self, studies: NDArray[np.int64]) -> NDArray[np.int64]:
        """Count, for every term, how many of the given studies carry it.

        Parameters
        ----------
        studies : (n,) int64 array
            Indices into `study_ids`, each once.

        Returns
        -------
        (n_terms,) int64 array
            Counts.
        """
        starts = self._arrays["study_term_starts"]
        first = starts[studies]
        sizes = starts[studies + 1] - first
        # Where each study's terms begin, less what stands before them, and a running count: one gather for all.
        offsets = np.repeat(first - np.cumsum(sizes) + sizes, sizes)
        joined = self._arrays["study_terms"][offsets + np.arange(len(offsets))]
        return np.bincount(joined, minlength=self.n_terms).astype(np.int64)

    @property
    def study_n_peaks(self) -> NDArray[np.int32]:
        """Number of peaks of each study, (n_studies,)."""
        return np.asarray(self._arrays["study_n_peaks"])

    @cached_property
    def study_groups(self) -> list[str]:
        """The group of each study; empty where none is known."""
        return self._text("study_group")

    @cached_property
    def study_dois(self) -> list[str]:
        """The DOI of each study; empty where none is known."""
        return self._text("study_doi")

    def kin_pairs(self) -> NDArray[np.int32]:
        """Return the pairs of terms that label largely the same studies, (K, 2)."""
        return np.asarray(self._arrays["kin_pairs"])

    def arrays(self) -> Arrays:
        """Return the arrays by name; not to be written to."""
        return dict(self._arrays)

    def studies_carrying_any(self, wanted: NDArray[np.bool_]) -> NDArray[np.bool_]:
        """Return which studies carry at least one of the terms that are flagged.

        Parameters
        ----------
        wanted : (n_terms,) bool array
            Flags, in the order of `terms`.

        Returns
        -------
        (n_studies,) bool array
            Flags, in the order of `study_ids`.
        """
        before = np.concatenate([[0], np.cumsum(wanted[self._arrays["study_terms"]])])
        starts = self._arrays["study_term_starts"]
        return np.asarray(before[starts[1:]] > before[starts[:-1]])

    def term_means(self, values: NDArray[np.float64]) -> NDArray[np.float64]:
        """Return, for every term, the mean of a value over the studies that carry it.

        Parameters
        ----------
        values : (n_studies,) array
            One value a study.

        Returns
        -------
        (n_terms,) array
            Means.
        """
        before = np.concatenate([[0.0], np.cumsum(values[self._arrays["term_studies"]])])
        starts = self._arrays["term_study_starts"]
        return np.asarray((before[starts[1:]] - before[starts[:-1]]) / np.diff(starts))

    def studies_reporting(self, points_tenths: NDArray[np.int32]) -> NDArray[np.int64]:
        """Return the studies that report every one of some points, to the tenth of a millimetre.

        Parameters
        ----------
        points_tenths : (N, 3) int32 array, tenths of a millimetre, MNI152
            At least one point.

        Returns
        -------
        (n,) int64 array
            Indices into `study_ids`, increasing.
        """
        found: NDArray[np.int64] | None = None
        for x, y, z in points_tenths.tolist():
            here = self.studies_hitting(Sphere(centre_tenths=(x, y, z), radius_mm=0.0))
            found = here if found is None else np.intersect1d(found, here)
        return found if found is not None else np.zeros(0, dtype=np.int64)

    def background(self, radius_mm: float) -> Background:
        """Return how often a sphere of this radius is hit at every grey-matter location of a 4 mm grid.

        Parameters
        ----------
        radius_mm : float, mm
            For 10 mm it was stored when the literature was built; others are counted now.

        Returns
        -------
        Background
            Hits by location and by study.
        """
        if radius_mm == BACKGROUND_RADIUS_MM:
            return Background(location_hits=self._arrays["grid_hits"], study_locations=self._arrays["grid_study_hits"])
        return compute_background(
            self._arrays["peak_tenths"],
            self._arrays["peak_study"],
            self.n_studies,
            self._arrays["grid_tenths"],
            radius_mm,
        )

    def _text(self, name: str) -> list[str]:
        """Return the items of a packed text."""
        try:
            return unpack_text(self._arrays[f"{name}_text"], self._arrays[f"{name}_ends"])
        except UnicodeDecodeError:
            raise LiteratureError(
                "this array is not UTF-8 text; build the literature again",
                path=self.folder / f"{name}_text.npy",
            ) from None
