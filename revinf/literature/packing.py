"""The arrays of a literature: their names, types, shapes, and how imported studies become them.

Every array is plain, one- to three-dimensional, and can be memory-mapped. Text is kept as the UTF-8
bytes of all items in one array (`*_text`) and where each item ends in another (`*_ends`).
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from revinf.literature.background import BACKGROUND_RADIUS_MM, SPACING_TENTHS, compute_background
from revinf.literature.cells import CELL_SHAPE, cell_numbers, cell_starts
from revinf.literature.importing import ImportedStudies
from revinf.literature.kin_pairs import find_kin_pairs
from revinf.spaces.brain import BrainReference, grey_lattice

__all__ = [
    "ARRAY_TYPES",
    "Arrays",
    "pack_background",
    "pack_brain",
    "pack_studies",
    "pack_text",
    "unpack_text",
]

Arrays = dict[str, NDArray[Any]]

ARRAY_TYPES: dict[str, tuple[str, tuple[int | str, ...]]] = {
    # name: type, shape; a word stands for a length that the manifest's counts give
    "peak_tenths": ("int16", ("peaks", 3)),
    "peak_study": ("int32", ("peaks",)),
    "cell_starts": ("int64", (int(np.prod(CELL_SHAPE)) + 1,)),
    "study_n_peaks": ("int32", ("studies",)),
    "study_term_starts": ("int64", ("studies+1",)),
    "study_terms": ("int32", ("annotations",)),
    "term_study_starts": ("int64", ("terms+1",)),
    "term_studies": ("int32", ("annotations",)),
    "study_id_text": ("uint8", ("*",)),
    "study_id_ends": ("int64", ("studies",)),
    "study_group_text": ("uint8", ("*",)),
    "study_group_ends": ("int64", ("studies",)),
    "study_doi_text": ("uint8", ("*",)),
    "study_doi_ends": ("int64", ("studies",)),
    "term_text": ("uint8", ("*",)),
    "term_ends": ("int64", ("terms",)),
    "kin_pairs": ("int32", ("*", 2)),
    "brain_tissue": ("uint8", ("*", "*", "*")),
    "brain_affine": ("float64", (4, 4)),
    "grid_tenths": ("int16", ("grid", 3)),
    "grid_hits": ("int32", ("grid",)),
    "grid_study_hits": ("int32", ("studies",)),
    "point_tenths": ("int16", ("points", 3)),
    "point_label_text": ("uint8", ("*",)),
    "point_label_ends": ("int64", ("points",)),
    "point_source_text": ("uint8", ("*",)),
    "point_source_ends": ("int64", ("points",)),
    "point_network_text": ("uint8", ("*",)),
    "point_network_ends": ("int64", ("points",)),
}
"""The file format: each array is NAME.npy in the folder."""


def pack_studies(studies: ImportedStudies) -> Arrays:
    """Turn imported studies into the arrays that queries use.

    Parameters
    ----------
    studies : ImportedStudies
        The counted studies.

    Returns
    -------
    dict of str to array
        The arrays of `ARRAY_TYPES` that describe studies, peaks and terms.
    """
    number = cell_numbers(studies.peak_tenths)
    by_cell = np.argsort(number, kind="stable")
    n_studies, n_terms = len(studies.study_ids), len(studies.terms)
    by_term = np.argsort(studies.annotation_term, kind="stable")
    arrays: Arrays = {
        "peak_tenths": studies.peak_tenths[by_cell],
        "peak_study": studies.peak_study[by_cell],
        "cell_starts": cell_starts(number[by_cell]),
        "study_n_peaks": np.bincount(studies.peak_study, minlength=n_studies).astype(np.int32),
        "study_term_starts": _starts(studies.annotation_study, n_studies),
        "study_terms": studies.annotation_term,
        "term_study_starts": _starts(studies.annotation_term[by_term], n_terms),
        "term_studies": studies.annotation_study[by_term],
    }
    for name, items in (
        ("study_id", studies.study_ids),
        ("study_group", studies.group_ids),
        ("study_doi", studies.dois),
        ("term", studies.terms),
    ):
        arrays[f"{name}_text"], arrays[f"{name}_ends"] = pack_text(items)
    arrays["kin_pairs"] = find_kin_pairs(
        arrays["study_term_starts"], arrays["study_terms"], arrays["term_study_starts"], arrays["term_studies"]
    )
    return arrays


def pack_brain(brain: BrainReference) -> Arrays:
    """Turn the brain reference into arrays.

    Parameters
    ----------
    brain : BrainReference
        Tissue image and labelled points.

    Returns
    -------
    dict of str to array
        The arrays of `ARRAY_TYPES` that describe the brain.
    """
    arrays: Arrays = {
        "brain_tissue": brain.tissue,
        "brain_affine": brain.affine,
        "point_tenths": brain.point_xyz_tenths,
    }
    for name, items in (
        ("point_label", brain.point_labels),
        ("point_source", brain.point_sources),
        ("point_network", brain.point_networks),
    ):
        arrays[f"{name}_text"], arrays[f"{name}_ends"] = pack_text(items)
    return arrays


def pack_background(studies: Arrays, brain: BrainReference) -> Arrays:
    """Count how often a 10 mm sphere is hit at every grey-matter location of a 4 mm grid.

    Parameters
    ----------
    studies : dict of str to array
        As from `pack_studies`.
    brain : BrainReference
        Carries the grey matter.

    Returns
    -------
    dict of str to array
        The arrays of `ARRAY_TYPES` that describe the grid.
    """
    grid = grey_lattice(brain, SPACING_TENTHS / 10)
    background = compute_background(
        studies["peak_tenths"],
        studies["peak_study"],
        len(studies["study_n_peaks"]),
        grid,
        BACKGROUND_RADIUS_MM,
    )
    return {
        "grid_tenths": grid,
        "grid_hits": background.location_hits,
        "grid_study_hits": background.study_locations,
    }


def pack_text(items: Sequence[str]) -> tuple[NDArray[np.uint8], NDArray[np.int64]]:
    """Return the UTF-8 bytes of all items and where each ends.

    Parameters
    ----------
    items : sequence of str
        Any text.

    Returns
    -------
    (B,) uint8 array, (N,) int64 array
        Bytes and ends.

    Examples
    --------
    >>> text, ends = pack_text(["fear", "pain"])
    >>> unpack_text(text, ends)
    ['fear', 'pain']
    """
    encoded = [item.encode("utf-8") for item in items]
    ends = np.cumsum([len(item) for item in encoded], dtype=np.int64)
    return np.frombuffer(b"".join(encoded), dtype=np.uint8), ends


def unpack_text(text: NDArray[np.uint8], ends: NDArray[np.int64]) -> list[str]:
    """Return the items that `pack_text` packed.

    Parameters
    ----------
    text : (B,) uint8 array
        Bytes.
    ends : (N,) int64 array
        Where each item ends.

    Returns
    -------
    list of str
        The items.

    Raises
    ------
    UnicodeDecodeError
        If the bytes are not UTF-8.
    """
    raw = text.tobytes()
    stops = ends.tolist()
    return [raw[a:b].decode("utf-8") for a, b in zip([0, *stops[:-1]], stops, strict=True)]


def _starts(sorted_index: NDArray[np.int32], size: int) -> NDArray[np.int64]:
    """Return where each row of a sorted index begins, and at the end its length."""
    return np.searchsorted(sorted_index, np.arange(size + 1)).astype(np.int64)
