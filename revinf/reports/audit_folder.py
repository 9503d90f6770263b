"""The folder of an audit: written beside its target and put in place as a whole."""

from __future__ import annotations

import re
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from revinf.evidence.audit import checked_readers
from revinf.reports.audit_markdown import audit_markdown, author_markdown, reviewer_markdown
from revinf.reports.audit_tables import audit_csv, audit_jsonl
from revinf.reports.html_report import html_text
from revinf.whole_folder import replacing

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
    with replacing(out, _refusal) as beside:
        return _fill(audit, beside, readers, command, progress)


def _refusal(target: Path) -> str | None:
    """Say why a folder must not be replaced; None for an empty one, or an audit of ours and nothing else."""
    if not (target.is_dir() and ((target / _MARK).is_file() or not any(target.iterdir()))):
        return "something that is not an audit stands here; give --out another name"
    foreign = sorted(path.name for path in target.iterdir() if not _is_ours(path))
    if foreign:
        return f"the older audit here also holds {foreign[0]!r}, which would be lost; move it, or choose another --out"
    return None


def _is_ours(path: Path) -> bool:
    """Tell whether a file in an older audit is one that an audit writes."""
    return (
        path.is_file()
        and re.fullmatch(
            r"report\.(?:html|md)|claims\.csv|assessments\.jsonl|for-\w+\.md|slides\.pdf|slide-\d+\.png|\..*", path.name
        )
        is not None
    )


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
