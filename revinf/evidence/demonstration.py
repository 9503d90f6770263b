"""Copies the invented scenario to a folder of the user's."""

from __future__ import annotations

import shutil
from pathlib import Path

from revinf.exceptions import InputFileError
from revinf.knowledge import demo_folder

__all__ = ["FILES", "write_demonstration"]

FILES = (
    "README.md",
    "peaks.csv",
    "annotations.csv",
    "studies.csv",
    "claims.csv",
    "manuscript.md",
    "manuscript.docx",
    "manuscript.pdf",
)
"""What a user needs; the script that made them stays with the source."""


def write_demonstration(out: str | Path) -> Path:
    """Write the invented scenario.

    Parameters
    ----------
    out : path
        A folder that is new or empty.

    Returns
    -------
    pathlib.Path
        The folder.

    Raises
    ------
    InputFileError
        If the folder holds anything, or cannot be written.

    Examples
    --------
    >>> import tempfile
    >>> with tempfile.TemporaryDirectory() as folder:
    ...     sorted(path.name for path in write_demonstration(Path(folder) / "demo").iterdir())[:2]
    ['README.md', 'annotations.csv']
    """
    target = Path(out)
    try:
        if target.exists() and (not target.is_dir() or any(target.iterdir())):
            raise InputFileError("something stands here already; name a new or empty folder with --out", path=target)
        target.mkdir(parents=True, exist_ok=True)
        for name in FILES:
            shutil.copyfile(demo_folder() / name, target / name)
    except OSError as error:
        raise InputFileError(
            f"cannot be written ({error.strerror or error}); choose another folder with --out", path=target
        ) from None
    return target
