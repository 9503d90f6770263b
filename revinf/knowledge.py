"""Finds and reads what the package knows: the tables of data_tables/ and the invented story of demo/.

Holds no fact itself. In a wheel both folders lie inside the package, in a checkout and an editable
install beside it; one function each finds either. Reading uses the standard library only, since the
plain `revinf check` needs some of these tables and must not wait for pandas.
"""

from __future__ import annotations

import csv
import gzip
import io
import json
import unicodedata
from functools import cache
from pathlib import Path
from typing import Any

from revinf.exceptions import InputFileError

__all__ = [
    "VERSION",
    "demo_folder",
    "describe_table",
    "normalise_term",
    "read_table",
    "shipped_tables",
    "table_path",
]

VERSION = "0.1.0"
"""Version of revinf; pyproject.toml reads it here."""

_PACKAGE = Path(__file__).resolve().parent


def shipped_tables() -> Path:
    """Return the folder of the shipped tables, installed or in a checkout.

    Returns
    -------
    pathlib.Path
        A folder that holds ``datapackage.json``.

    Raises
    ------
    InputFileError
        If the installation lacks the folder.

    Examples
    --------
    >>> (shipped_tables() / "datapackage.json").is_file()
    True
    """
    return _beside_or_inside("data_tables", "datapackage.json")


def demo_folder() -> Path:
    """Return the folder of the invented scenario, installed or in a checkout.

    Returns
    -------
    pathlib.Path
        A folder of invented files; nothing in it is real.

    Raises
    ------
    InputFileError
        If the installation lacks the folder.

    Examples
    --------
    >>> (demo_folder() / "README.md").is_file()
    True
    """
    return _beside_or_inside("demo", "README.md")


def table_path(name: str) -> Path:
    """Return the path of one shipped table.

    Parameters
    ----------
    name : str
        Name of the table as in datapackage.json, such as ``"evidence_grades"``.

    Returns
    -------
    pathlib.Path
        The CSV file, possibly gzipped.

    Raises
    ------
    InputFileError
        If datapackage.json lists no such table.

    Examples
    --------
    >>> table_path("evidence_grades").name
    'evidence_grades.csv'
    """
    return shipped_tables() / str(describe_table(name)["path"])


def describe_table(name: str) -> dict[str, Any]:
    """Return what datapackage.json says of one table: fields, sources, licence, making, rows, hash.

    Parameters
    ----------
    name : str
        Name of the table.

    Returns
    -------
    dict
        The resource entry of the Frictionless Data Package.

    Raises
    ------
    InputFileError
        If datapackage.json lists no such table.

    Examples
    --------
    >>> describe_table("evidence_grades")["path"]
    'evidence_grades.csv'
    """
    for resource in _package()["resources"]:
        if resource["name"] == name:
            return dict(resource)
    known = ", ".join(str(resource["name"]) for resource in _package()["resources"])
    raise InputFileError(
        f"there is no shipped table named {name!r}; use one of {known}",
        path=shipped_tables() / "datapackage.json",
    )


@cache
def read_table(name: str) -> tuple[dict[str, str], ...]:
    """Read a shipped table as text cells.

    Parameters
    ----------
    name : str
        Name of the table as in datapackage.json.

    Returns
    -------
    tuple of dict
        One dictionary a row, column name to text, in the order of the file.

    Raises
    ------
    InputFileError
        If there is no such table.

    Examples
    --------
    >>> read_table("evidence_grades")[0]["grade"]
    'bare'
    """
    path = table_path(name)
    raw = path.read_bytes()
    text = (gzip.decompress(raw) if path.suffix == ".gz" else raw).decode("utf-8")
    return tuple(csv.DictReader(io.StringIO(text)))


def normalise_term(text: str) -> str:
    """Return a term as it is compared: NFC, lower case, underscores and runs of white space as one space.

    Parameters
    ----------
    text : str
        A term as somebody wrote it.

    Returns
    -------
    str
        The spelling under which it is stored and looked up.

    Examples
    --------
    >>> normalise_term("  Theory_of  MIND ")
    'theory of mind'
    """
    composed = unicodedata.normalize("NFC", text).lower().replace("_", " ")
    # Lower-casing can decompose a letter, so compose once more.
    return unicodedata.normalize("NFC", " ".join(composed.split()))


@cache
def _package() -> dict[str, Any]:
    """Return the parsed datapackage.json."""
    content: dict[str, Any] = json.loads((shipped_tables() / "datapackage.json").read_text(encoding="utf-8"))
    return content


def _beside_or_inside(folder: str, witness: str) -> Path:
    """Return the folder inside the package (wheel) or beside it (checkout)."""
    for candidate in (_PACKAGE / folder, _PACKAGE.parent / folder):
        if (candidate / witness).is_file():
            return candidate
    raise InputFileError(
        f"this installation lacks its folder {folder}/; install revinf again",
        path=_PACKAGE,
    )
