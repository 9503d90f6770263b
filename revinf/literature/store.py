"""Writes a literature folder as a whole or not at all, and opens one without trusting it.

Arrays are plain .npy files, memory-mapped and never pickled.
"""

from __future__ import annotations

import hashlib
import json
import warnings
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import LiteratureError
from revinf.literature.kept_calibration import FILE as CALIBRATION
from revinf.literature.manifest import MANIFEST, ArrayEntry, Manifest, read_manifest
from revinf.literature.packing import ARRAY_TYPES, Arrays
from revinf.whole_folder import replacing

__all__ = ["array_entries", "open_arrays", "verify_arrays", "write_folder"]

_HASH_BLOCK = 1 << 20


def array_entries(arrays: Arrays) -> dict[str, ArrayEntry]:
    """Return type, shape and SHA-256 of the bytes of each array.

    Parameters
    ----------
    arrays : dict of str to array
        The arrays by name.

    Returns
    -------
    dict of str to ArrayEntry
        What the manifest says of them.
    """
    return {
        name: ArrayEntry(dtype=str(array.dtype), shape=array.shape, sha256=_array_hash(array))
        for name, array in arrays.items()
    }


def write_folder(target: Path, arrays: Arrays, manifest: Manifest) -> None:
    """Write a literature folder, replacing an older literature of that name.

    Parameters
    ----------
    target : pathlib.Path
        The folder to make.
    arrays : dict of str to array
        The arrays by name.
    manifest : Manifest
        What goes into literature.json.

    Raises
    ------
    InputFileError
        If the target exists and is not a literature, or cannot be written.
    """
    with replacing(target, _refusal) as beside:
        for name, array in arrays.items():
            np.save(beside / f"{name}.npy", np.ascontiguousarray(array), allow_pickle=False)
        (beside / MANIFEST).write_text(manifest.to_json(), encoding="utf-8")


def _refusal(folder: Path) -> str | None:
    """Say why a folder must not be replaced; None for an empty one, or one with nothing but parts of a literature.

    A damaged literature may be (building again is its only cure); a folder in which somebody keeps a file
    of his own, or another program's literature.json, may not.
    """
    return None if _is_literature(folder) else "something that is not a literature stands here; give --out another name"


def _is_literature(folder: Path) -> bool:
    """Tell whether nothing but parts of a literature stands in a folder."""
    if not folder.is_dir():
        return False
    names = {entry.name for entry in folder.iterdir()}
    if not names <= {MANIFEST, CALIBRATION, *(f"{name}.npy" for name in ARRAY_TYPES)}:
        return False
    return names != {MANIFEST} or _states_our_format(folder / MANIFEST)


def _states_our_format(path: Path) -> bool:
    """Tell whether a manifest without arrays says that it is ours."""
    try:
        return str(json.loads(path.read_text(encoding="utf-8"))["format"]).startswith("revinf/")
    except (OSError, ValueError, KeyError, TypeError, RecursionError):
        return False


def open_arrays(folder: Path) -> tuple[Manifest, Arrays]:
    """Open a literature folder: the manifest, and every array memory-mapped.

    Parameters
    ----------
    folder : pathlib.Path
        The folder.

    Returns
    -------
    Manifest
        What literature.json says.
    dict of str to array
        Read-only memory maps by name.

    Raises
    ------
    LiteratureError
        If an array is missing, or its type, shape or offsets disagree with the manifest.
    """
    manifest = read_manifest(folder)
    arrays: Arrays = {}
    for name, (dtype, shape) in ARRAY_TYPES.items():
        entry = manifest.arrays.get(name)
        if entry is None or entry.dtype != dtype or not _fits(entry.shape, shape, manifest.counts):
            raise LiteratureError(
                f"the manifest does not describe array {name!r} as {dtype}{list(shape)}; build it again",
                path=folder / MANIFEST,
            )
        arrays[name] = _open_array(folder / f"{name}.npy", entry)
    _check_offsets(folder, arrays)
    return manifest, arrays


def verify_arrays(folder: Path) -> None:
    """Recompute the hash of every array.

    Parameters
    ----------
    folder : pathlib.Path
        A literature folder.

    Raises
    ------
    LiteratureError
        If an array's bytes are not those that were built.
    """
    manifest, arrays = open_arrays(folder)
    for name, array in arrays.items():
        if _array_hash(array) != manifest.arrays[name].sha256:
            raise LiteratureError(
                "the content is not what was built (SHA-256 differs); build the literature again",
                path=folder / f"{name}.npy",
            )


def _open_array(path: Path, entry: ArrayEntry) -> NDArray[Any]:
    """Map one .npy file after checking that it is what the manifest says."""
    try:
        if path.is_symlink():
            raise ValueError("a symbolic link")
        with warnings.catch_warnings():
            warnings.simplefilter("error", UserWarning)  # numpy only warns of a header that needs repair
            array = np.lib.format.open_memmap(path, mode="r")  # knows neither pickles nor archives
    except FileNotFoundError:
        raise LiteratureError("this array is missing; build the literature again", path=path) from None
    # A broken header can raise nearly anything: numpy hands it to the tokenizer of Python.
    except Exception as error:
        raise LiteratureError(
            f"this array cannot be read ({' '.join(str(error).split())[:80]}); build the literature again",
            path=path,
        ) from None
    if (str(array.dtype), array.shape) != (entry.dtype, entry.shape):
        raise LiteratureError(
            "this array's type or shape is not what the manifest says; build the literature again",
            path=path,
        )
    return array


def _fits(shape: tuple[int, ...], wanted: tuple[int | str, ...], counts: dict[str, int]) -> bool:
    """Tell whether a shape agrees with the format and the manifest's counts."""
    if len(shape) != len(wanted):
        return False
    for length, rule in zip(shape, wanted, strict=True):
        if rule == "*":
            continue
        word, _, more = str(rule).partition("+")
        expected = int(rule) if isinstance(rule, int) else counts.get(word, -1) + int(more or 0)
        if length != expected:
            return False
    return True


_OFFSETS = (
    ("cell_starts", "peak_tenths", True),
    ("study_term_starts", "study_terms", True),
    ("term_study_starts", "term_studies", True),
    *(
        (f"{name}_ends", f"{name}_text", False)
        for name in (
            "study_id",
            "study_group",
            "study_doi",
            "term",
            "point_label",
            "point_source",
            "point_network",
        )
    ),
)
_INDICES = (
    ("peak_study", "study_n_peaks"),
    ("study_terms", "term_ends"),
    ("term_studies", "study_n_peaks"),
    ("kin_pairs", "term_ends"),
)


def _check_offsets(folder: Path, arrays: Arrays) -> None:
    """Refuse offsets that run backwards or beyond their array, and indices that point nowhere."""
    for offsets, target, from_zero in _OFFSETS:
        at = np.asarray(arrays[offsets], dtype=np.int64)
        fine = not at.size or (
            at[0] >= 0
            and (not from_zero or at[0] == 0)
            and at[-1] == len(arrays[target])
            and bool((np.diff(at) >= 0).all())
        )
        if not fine:
            raise LiteratureError(
                "the offsets in this array do not fit what they point into; build the literature again",
                path=folder / f"{offsets}.npy",
            )
    for index, target in _INDICES:
        values = np.asarray(arrays[index], dtype=np.int64)
        if values.size and not (values.min() >= 0 and values.max() < len(arrays[target])):
            raise LiteratureError(
                "this array points outside the literature; build the literature again",
                path=folder / f"{index}.npy",
            )


def _array_hash(array: NDArray[Any]) -> str:
    """Return the SHA-256 of an array's bytes in C order, block by block."""
    digest = hashlib.sha256()
    flat = np.ascontiguousarray(array).reshape(-1).view(np.uint8)
    for start in range(0, len(flat), _HASH_BLOCK):
        digest.update(flat[start : start + _HASH_BLOCK].tobytes())
    return digest.hexdigest()
