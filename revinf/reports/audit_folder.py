"""The folder of an audit: written beside its target and put in place as a whole."""

from __future__ import annotations

import os
import re
import shutil
import tempfile
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from revinf.evidence.audit import checked_readers
from revinf.exceptions import InputFileError
from revinf.reports.audit_markdown import audit_markdown, author_markdown, reviewer_markdown
from revinf.reports.audit_tables import audit_csv, audit_jsonl
from revinf.reports.html_report import html_text

if TYPE_CHECKING:
    from revinf.evidence.audit import Audit

__all__ = ["write_audit_folder"]

_MARK = ".revinf-audit"
"""An empty file that says that a folder is an audit of ours and may be replaced."""


def write_audit_folder(
    audit: Audit,
    out: str | Path,
    *,
    readers: tuple[str, ...] = (),
    command: str = "",
    progress: Callable[[int, int], None] | None = None,
) -> list[str]:
    """Write report, tables and what each reader asked for.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.
    out : path
        A folder; an older audit there is replaced as a whole.
    readers : tuple of str
        Of "author", "reviewer", "presenter".
    command : str, optional
        What reproduces it.
    progress : callable, optional
        Told how many slides are drawn, of how many; the rest takes no time.

    Returns
    -------
    list of str
        Names of the files.

    Raises
    ------
    InvalidClaimError
        If a reader is none of the three.
    InputFileError
        If the target is something else than an audit, or cannot be written.
    """
    readers = checked_readers(readers)
    target = Path(os.path.realpath(out))
    if target.exists() and not (target.is_dir() and ((target / _MARK).is_file() or not any(target.iterdir()))):
        raise InputFileError("something that is not an audit stands here; give --out another name", path=out)
    foreign = sorted(path.name for path in target.glob("*") if not _is_ours(path)) if target.is_dir() else []
    if foreign:
        raise InputFileError(
            f"the older audit here also holds {foreign[0]!r}, which would be lost; move it, or choose another --out",
            path=out,
        )
    beside: Path | None = None
    try:
        target.parent.mkdir(parents=True, exist_ok=True)
        _sweep(target)
        beside = Path(tempfile.mkdtemp(prefix=f".{target.name}.audit-{os.getpid()}-", dir=target.parent))
        names = _fill(audit, beside, readers, command, progress)
        beside.chmod(0o777 & ~_umask())  # as any folder that the user makes; until now it was private
        if target.exists():
            old = Path(tempfile.mkdtemp(prefix=f".{target.name}.audit-{os.getpid()}-", dir=target.parent))
            target.rename(old / "old")
            beside.rename(target)
            shutil.rmtree(old)
        else:
            beside.rename(target)
    except OSError as error:
        raise InputFileError(
            f"cannot be written ({error.strerror or error}); choose another place with --out", path=out
        ) from None
    finally:
        if beside is not None and beside.exists():
            shutil.rmtree(beside, ignore_errors=True)
    return names


def _is_ours(path: Path) -> bool:
    """Tell whether a file in an older audit is one that an audit writes."""
    return (
        path.is_file()
        and re.fullmatch(
            r"report\.(?:html|md)|claims\.csv|assessments\.jsonl|for-\w+\.md|slides\.pdf|slide-\d+\.png|\..*", path.name
        )
        is not None
    )


def _sweep(target: Path) -> None:
    """Remove what a killed run left behind, but not what a living one is writing."""
    for litter in target.parent.glob(f".{_escaped(target.name)}.audit-*"):
        found = re.search(r"\.audit-(\d+)-", litter.name)
        if found is None or not _is_alive(int(found[1])):
            shutil.rmtree(litter, ignore_errors=True)


def _is_alive(process: int) -> bool:
    """Tell whether a process runs."""
    try:
        os.kill(process, 0)
    except ProcessLookupError:
        return False
    except OSError:
        return True
    return process != os.getpid()


def _umask() -> int:
    """Return the user's mask for new files."""
    mask = os.umask(0)
    os.umask(mask)
    return mask


def _escaped(name: str) -> str:
    """Return a file name with its wildcards taken literally."""
    return "".join(f"[{character}]" if character in "*?[" else character for character in name)


def _fill(
    audit: Audit,
    folder: Path,
    readers: tuple[str, ...],
    command: str,
    progress: Callable[[int, int], None] | None,
) -> list[str]:
    """Write every file into a folder and return their names, sorted."""
    texts = {
        "report.html": html_text(audit, command=command),
        "report.md": audit_markdown(audit, command=command),
        "claims.csv": audit_csv(audit),
        "assessments.jsonl": audit_jsonl(audit),
    }
    if "author" in readers:
        texts["for-author.md"] = author_markdown(audit)
    if "reviewer" in readers:
        texts["for-reviewer.md"] = reviewer_markdown(audit)
    for name, text in texts.items():
        (folder / name).write_text(text, encoding="utf-8", newline="\n")
    if "presenter" in readers:
        from revinf.reports.slides import write_slides

        write_slides(audit, folder, progress=progress)
    names = sorted(path.name for path in folder.iterdir())
    (folder / _MARK).touch()
    return names
