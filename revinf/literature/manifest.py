"""literature.json: what a literature is, what it holds, how it was built, and the hash of every array."""

from __future__ import annotations

import hashlib
import json
from dataclasses import asdict, dataclass
from pathlib import Path
from typing import Any

from revinf.exceptions import LiteratureError

__all__ = ["FORMAT", "MANIFEST", "ArrayEntry", "Description", "Manifest", "read_manifest"]

FORMAT = "revinf/literature/2"
MANIFEST = "literature.json"
_MANIFEST_LIMIT = 16_000_000
"""Bytes; one of ours is a few kilobytes."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Description:
    """What its maker says of a literature.

    Parameters
    ----------
    name : str
        What reports call it.
    study_is : str
        What one study is, in the plural: ``"experiments"``, ``"papers"``, ``"contrasts"``.
    source, licence, citation : str
        Where the coordinates come from and on what terms; empty where it was not said.
    invented : bool
        Whether the data are made up; every screen then says so.
    """

    name: str
    study_is: str = "studies"
    source: str = ""
    licence: str = ""
    citation: str = ""
    invented: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class ArrayEntry:
    """Type, shape and hash of one array."""

    dtype: str
    shape: tuple[int, ...]
    sha256: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Manifest:
    """The parsed literature.json."""

    description: Description
    counts: dict[str, int]
    merged_by: str | None
    arrays: dict[str, ArrayEntry]
    built_with: dict[str, Any]
    report: dict[str, Any]

    @property
    def fingerprint(self) -> str:
        """Sixteen hexadecimal digits that name the content: the same studies give the same digits.

        The stored brain is left out: another nilearn does not make another literature.
        """
        content = "\n".join(
            f"{name} {entry.sha256}"
            for name, entry in sorted(self.arrays.items())
            if not name.startswith(("brain_", "point_", "grid_", "kin_"))
        )
        return hashlib.sha256(f"{FORMAT}\n{content}".encode()).hexdigest()[:16]

    def to_json(self) -> str:
        """Return the text of the file; no clock and no path, so that equal builds are equal bytes."""
        content = {
            "format": FORMAT,
            "description": asdict(self.description),
            "fingerprint": self.fingerprint,
            "counts": self.counts,
            "merged_by": self.merged_by,
            "arrays": {
                name: {"dtype": entry.dtype, "shape": list(entry.shape), "sha256": entry.sha256}
                for name, entry in sorted(self.arrays.items())
            },
            "built_with": self.built_with,
            "import": self.report,
        }
        return json.dumps(content, indent=2, ensure_ascii=False, allow_nan=False) + "\n"


def read_manifest(folder: Path) -> Manifest:
    """Read literature.json.

    Parameters
    ----------
    folder : pathlib.Path
        A literature folder.

    Returns
    -------
    Manifest
        The parsed file.

    Raises
    ------
    LiteratureError
        If the folder or the file is missing, is not ours, or is of another format version.
    """
    path = folder / MANIFEST
    if not folder.is_dir():
        raise LiteratureError("there is no such literature folder; make one with revinf build --out", path=folder)
    if not path.is_file():
        raise LiteratureError(
            f"this folder holds no {MANIFEST}, so it is not a literature; make one with revinf build --out",
            path=folder,
        )
    try:
        if path.stat().st_size > _MANIFEST_LIMIT:
            raise ValueError("far too large")
        content = json.loads(path.read_text(encoding="utf-8"))
        stated = content["format"]
    except (OSError, ValueError, KeyError, TypeError, RecursionError):
        raise LiteratureError("this is not a literature manifest; build the literature again", path=path) from None
    if stated != FORMAT:
        raise LiteratureError(
            f"this literature has format {str(stated)[:60]!r}, this revinf reads {FORMAT!r}; build it again",
            path=path,
        )
    try:
        return _parsed(content)
    except (KeyError, TypeError, ValueError, AttributeError, OverflowError) as error:
        raise LiteratureError(
            f"the manifest is damaged ({type(error).__name__}: {str(error)[:80]}); build it again",
            path=path,
        ) from None


def _parsed(content: dict[str, Any]) -> Manifest:
    """Return the manifest of a parsed file; any surprise raises."""
    description = Description(**content["description"])
    texts = (description.name, description.study_is, description.source, description.licence)
    if not all(isinstance(text, str) for text in (*texts, description.citation)):
        raise TypeError("the description is not text")
    if not isinstance(description.invented, bool):
        raise TypeError("'invented' is not true or false")
    counts = dict(content["counts"])
    if not all(type(value) is int and value >= 0 for value in counts.values()):
        raise ValueError("a count is not a whole number")
    if not counts["studies"] or not counts["terms"]:
        raise ValueError("there is no study or no term")
    merged_by = content["merged_by"]
    if not (merged_by is None or isinstance(merged_by, str)):
        raise TypeError("'merged_by' is not a column name")
    if not isinstance(content["built_with"], dict) or not isinstance(content["import"], dict):
        raise TypeError("'built_with' or 'import' is not an object")
    manifest = Manifest(
        description=description,
        counts=counts,
        merged_by=merged_by,
        arrays={
            str(name): ArrayEntry(
                dtype=str(entry["dtype"]),
                shape=tuple(int(length) for length in entry["shape"]),
                sha256=str(entry["sha256"]),
            )
            for name, entry in content["arrays"].items()
        },
        built_with=content["built_with"],
        report=content["import"],
    )
    if content["fingerprint"] != manifest.fingerprint:
        raise ValueError("the fingerprint is not that of the hashes")
    return manifest
