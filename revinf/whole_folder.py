"""Puts a folder in place as a whole or not at all: written beside its target, renamed when it is complete.

A run that is killed leaves the old folder, the new one, or none; the next run puts back what was moved aside
and removes the rest, unless the process that wrote it is still alive.
"""

from __future__ import annotations

import os
import re
import shutil
import tempfile
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path

from revinf.exceptions import InputFileError

__all__ = ["replacing"]

_OLD = "old"
"""Name of the older folder while it stands aside."""


@contextmanager
def replacing(out: str | Path, refusal: Callable[[Path], str | None]) -> Iterator[Path]:
    """Give a fresh private folder; on success it becomes `out`, else it is removed.

    Parameters
    ----------
    out : path
        The folder to make; links are followed.
    refusal : callable
        Told the folder that stands there already; returns why it must not be replaced, or None.

    Yields
    ------
    pathlib.Path
        Where to write.

    Raises
    ------
    InputFileError
        If `out` must not be replaced, or cannot be written.

    Examples
    --------
    >>> import tempfile
    >>> place = Path(tempfile.mkdtemp()) / "made"
    >>> with replacing(place, lambda _: None) as folder:
    ...     _ = (folder / "file.txt").write_text("whole")
    >>> [path.name for path in place.iterdir()]
    ['file.txt']
    """
    target = Path(os.path.realpath(out))
    beside: Path | None = None
    try:
        _tidy(target)
        reason = refusal(target) if os.path.lexists(target) else None
        if reason is not None:
            raise InputFileError(reason, path=Path(out))
        target.parent.mkdir(parents=True, exist_ok=True)
        beside = _aside(target)
        yield beside
        beside.chmod(0o777 & ~_umask())  # as any folder that the user makes; until now it was private
        if target.exists():
            aside = _aside(target)
            target.rename(aside / _OLD)
            beside.rename(target)
            shutil.rmtree(aside, ignore_errors=True)
        else:
            beside.rename(target)
    except OSError as error:
        raise InputFileError(
            f"cannot be written ({error.strerror or error}); choose another place with --out", path=Path(out)
        ) from None
    finally:
        if beside is not None and beside.exists():
            shutil.rmtree(beside, ignore_errors=True)


def _aside(target: Path) -> Path:
    """Make a private folder beside the target that names this process."""
    return Path(tempfile.mkdtemp(prefix=f".{target.name}.revinf-{os.getpid()}-", dir=target.parent))


def _tidy(target: Path) -> None:
    """Put back, or remove, what a killed run left behind, but touch nothing that a living one is writing."""
    pattern = re.compile(rf"\.{re.escape(target.name)}\.revinf-(\d+)-[^.]+")
    if not target.parent.is_dir():
        return
    for litter in sorted(target.parent.iterdir()):
        found = pattern.fullmatch(litter.name)
        if found is None or _is_alive(int(found[1])):
            continue
        if not os.path.lexists(target) and (litter / _OLD).is_dir():
            (litter / _OLD).rename(target)  # killed between the two renamings
        shutil.rmtree(litter, ignore_errors=True)


def _is_alive(process: int) -> bool:
    """Tell whether another process runs."""
    if process == os.getpid():
        return False
    try:
        os.kill(process, 0)
    except ProcessLookupError:
        return False
    except OSError:
        return True
    return True


def _umask() -> int:
    """Return the user's mask for new files."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
