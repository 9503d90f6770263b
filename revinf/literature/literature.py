"""`Literature`: a coordinate data set opened for asking; `build_literature` makes one from files."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Sequence
from difflib import get_close_matches
from functools import cached_property
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import LiteratureError, UnknownTermError
from revinf.knowledge import normalise_term
from revinf.literature.cells import candidate_slices
from revinf.literature.manifest import Description, Manifest
from revinf.literature.packing import Arrays, unpack_text
from revinf.literature.store import open_arrays, verify_arrays
from revinf.spaces.brain import BrainReference
from revinf.spaces.regions import Mask
from revinf.spaces.spheres import Sphere

__all__ = ["Literature", "Region"]

Region = Sphere | Mask


class Literature:
    """Studies, their peaks and their terms, on disk.

    Open one with `Literature.open`; make one with `revinf.build_literature`.

    Examples
    --------
    >>> from revinf.exceptions import LiteratureError
    >>> try:
    ...     Literature.open("nowhere")
    ... except LiteratureError as error:
    ...     print(error)
    nowhere: there is no such literature folder; make one with revinf build --out
    """

    def __init__(self, folder: Path, manifest: Manifest, arrays: Arrays) -> None:
        self.folder = folder
        self.manifest = manifest
        self._arrays = arrays

    @classmethod
    def open(cls, folder: str | Path, *, verify: bool = False) -> Literature:
        """Open a literature folder.

        Parameters
        ----------
        folder : path
            A folder made by `revinf build`.
        verify : bool, default False
            Recompute the hash of every array first.

        Returns
        -------
        Literature
            Opened; its arrays are memory maps.

        Raises
        ------
        LiteratureError
            If the folder is missing, damaged, foreign or of another format version.
        """
        path = Path(folder)
        if verify:
            verify_arrays(path)
        return cls(path, *open_arrays(path))

    def __repr__(self) -> str:
        return (
            f"<Literature {self.description.name!r}: {self.n_studies} studies "
            f"(here: {self.description.study_is}), {self.n_peaks} peaks, {self.n_terms} terms>"
        )

    @property
    def description(self) -> Description:
        """What its maker says of it."""
        return self.manifest.description

    @property
    def fingerprint(self) -> str:
        """Sixteen hexadecimal digits that name the content."""
        return self.manifest.fingerprint

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

    @cached_property
    def brain(self) -> BrainReference:
        """The standard brain that was stored when the literature was built."""
        return BrainReference(
            tissue=self._arrays["brain_tissue"],
            affine=self._arrays["brain_affine"],
            point_xyz_tenths=self._arrays["point_tenths"],
            point_labels=tuple(self._text("point_label")),
            point_sources=tuple(self._text("point_source")),
            point_networks=tuple(self._text("point_network")),
        )

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
        raise unknown_term(name, self.terms, f"the literature {self.description.name!r}")

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
        starts, terms = self._arrays["study_term_starts"], self._arrays["study_terms"]
        rows = [terms[starts[study] : starts[study + 1]] for study in studies.tolist()]
        joined = np.concatenate(rows) if rows else np.zeros(0, dtype=np.int32)
        return np.bincount(joined, minlength=self.n_terms).astype(np.int64)

    def summary(self) -> dict[str, Any]:
        """Return what `revinf inspect` shows, as plain data."""
        per_study = np.asarray(self._arrays["study_n_peaks"])
        return {
            "folder": str(self.folder),
            "name": self.description.name,
            "invented": self.description.invented,
            "study_is": self.description.study_is,
            "source": self.description.source,
            "licence": self.description.licence,
            "citation": self.description.citation,
            "fingerprint": self.fingerprint,
            "merged_by": self.manifest.merged_by,
            "n_studies": self.n_studies,
            "n_peaks": self.n_peaks,
            "n_terms": self.n_terms,
            "n_annotations": len(self._arrays["study_terms"]),
            "peaks_per_study": {
                "lowest": int(per_study.min()),
                "median": float(np.median(per_study)),
                "highest": int(per_study.max()),
            },
            "built_with": self.manifest.built_with,
            "import": self.manifest.report,
        }

    def _text(self, name: str) -> list[str]:
        """Return the items of a packed text."""
        try:
            return unpack_text(self._arrays[f"{name}_text"], self._arrays[f"{name}_ends"])
        except UnicodeDecodeError:
            raise LiteratureError(
                "this array is not UTF-8 text; build the literature again",
                path=self.folder / f"{name}_text.npy",
            ) from None


def unknown_term(term: str, known: Sequence[str], where: str, near: Sequence[str] = ()) -> UnknownTermError:
    """Return the error for a term that labels nothing, with the terms that look like it.

    Parameters
    ----------
    term : str
        Normalised.
    known : sequence of str
        The terms there are.
    where : str
        What was searched, for the message.
    near : sequence of str, optional
        Terms that are known to be close, shown first.

    Returns
    -------
    UnknownTermError
        To be raised by the caller.

    Examples
    --------
    >>> str(unknown_term("paim", ["fear", "pain"], "the table"))
    "no study in the table carries the term 'paim'; did you mean 'pain'?"
    """
    near = list(near)
    if term:
        near += [name for name in known if (term in name or name in term) and name not in near][:3]
    near += [name for name in get_close_matches(term, known, n=5, cutoff=0.6) if name not in near]
    if near:
        hint = "did you mean " + " or ".join(repr(name) for name in near[:5]) + "?"
    elif len(known) <= 20:
        hint = "it has " + ", ".join(repr(name) for name in known)
    else:
        hint = f"search its {len(known)} terms with revinf terms"
    return UnknownTermError(
        f"no study in {where} carries the term {term!r}; {hint}", term=term, near=tuple(near)
    )
