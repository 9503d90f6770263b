"""The one line that says which package a kind of file needs."""

from __future__ import annotations

from importlib import import_module
from pathlib import Path
from typing import Any

from revinf.exceptions import InputFileError

__all__ = ["needed"]


def needed(module: str, package: str, path: Path) -> Any:
    """Import a reader of documents.

    Parameters
    ----------
    module, package : str
        What to import, and what pip calls it.
    path : pathlib.Path
        The file that needs it.

    Returns
    -------
    module
        Imported.

    Raises
    ------
    InputFileError
        If it is not installed.
    """
    try:
        return import_module(module)
    except ModuleNotFoundError:
        raise InputFileError(
            f"{path.suffix} files need the package {package}; pip install 'revinf[documents]', or save as .txt",
            path=path,
        ) from None
