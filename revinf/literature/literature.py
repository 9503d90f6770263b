"""`Literature`: a coordinate data set opened for asking; `build_literature` makes one from files."""

from __future__ import annotations

from functools import cached_property
from pathlib import Path
from typing import Any

import numpy as np

from revinf.literature.kept_calibration import kept_discount
from revinf.literature.manifest import Description, Manifest
from revinf.literature.packing import Arrays
from revinf.literature.queries import Queries
from revinf.literature.store import open_arrays, verify_arrays
from revinf.spaces.brain import BrainReference

__all__ = ["Literature"]


class Literature(Queries):
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
        super().__init__(folder, manifest.description.name, arrays)
        self.manifest = manifest
        self.left_out: tuple[str, ...] = ()
        self.own_fingerprint: str | None = None

    @classmethod
    def open(cls, folder: str | Path, *, verify: bool = True) -> Literature:
        """Open a literature folder.

        Parameters
        ----------
        folder : path
            A folder made by `revinf build`.
        verify : bool, default True
            Recompute the hash of every array; 10 MB take some 10 ms. Without it only types, shapes and offsets are
            checked.

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
        manifest, arrays = open_arrays(path)
        if verify:
            verify_arrays(path)
        return cls(path, manifest, arrays)

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
        return self.own_fingerprint or self.manifest.fingerprint

    @cached_property
    def discount(self) -> tuple[float, float] | None:
        """Exponent and radius (mm) that a calibration left with it; see `revinf.calibration`."""
        return kept_discount(self.folder, self.manifest.fingerprint)

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
