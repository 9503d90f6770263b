"""Puts a file in place as a whole or not at all: written beside its target, renamed when it is complete."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from revinf.exceptions import InputFileError

__all__ = ["replacing_file"]


@contextmanager
def replacing_file(path: Path, beside: Path, remedy: str) -> Iterator[Path]:
    """Give a place to write; on success it becomes `path`, else it is removed and an older file stays.

    Parameters
    ----------
    path : pathlib.Path
        The file to make.
    beside : pathlib.Path
        Where to write until it is complete, on the same file system.
    remedy : str
        What to do where it cannot be written.

    Yields
    ------
    pathlib.Path
        `beside`.

    Raises
    ------
    InputFileError
        If it cannot be written.

    Examples
    --------
    >>> import tempfile
    >>> place = Path(tempfile.mkdtemp()) / "made.txt"
    >>> with replacing_file(place, place.with_name(".made"), "choose another place") as beside:
    ...     _ = beside.write_text("whole")
    >>> place.read_text(), [path.name for path in place.parent.iterdir()]
    ('whole', ['made.txt'])
    """
    try:
        yield beside
        beside.replace(path)
    except OSError as error:
        raise InputFileError(f"cannot be written ({error.strerror or error}); {remedy}", path=path) from None
    finally:  # also where somebody interrupts
        beside.unlink(missing_ok=True)
