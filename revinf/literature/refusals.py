"""Keeps account of what an import read, kept, refused and noticed; nothing is dropped without a line."""

from __future__ import annotations

import csv
import os
from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from revinf.exceptions import InputFileError
from revinf.whole_file import replacing_file

__all__ = ["ImportReport", "Notice"]

_HEADER = ("file", "line", "reason", "row")
_SHOWN_LINES = 5


def _is_ours(path: Path) -> bool:
    """Tell whether a file is a list of refused rows."""
    if path.is_symlink() or not path.is_file():
        return False
    first_line = ",".join(_HEADER) + "\n"
    with path.open("rb") as stream:
        return stream.read(len(first_line)) == first_line.encode()


@dataclass(frozen=True, slots=True)
class Notice:
    """Something a careful person would want to know of the files, though rows were kept.

    Parameters
    ----------
    code : str
        Stable name, such as ``"duplicate-rows"``.
    message : str
        One sentence with the count.
    lines : tuple of int
        The first few lines concerned.
    """

    code: str
    message: str
    lines: tuple[int, ...] = ()


@dataclass(slots=True)
class ImportReport:
    """Rows read, kept and refused by file, the refused rows themselves, and the notices.

    Examples
    --------
    >>> report = ImportReport()
    >>> report.refuse("peaks.csv", [(7, "x is not a number", "a,?,2,3")])
    >>> report.by_reason()
    [('peaks.csv', 'x is not a number', 1, (7,))]
    """

    read: Counter[str] = field(default_factory=Counter)
    kept: Counter[str] = field(default_factory=Counter)
    left_out: Counter[str] = field(default_factory=Counter)
    refused: list[tuple[str, int, str, str]] = field(default_factory=list)
    notices: list[Notice] = field(default_factory=list)

    def refuse(self, file: str, rows: Iterable[tuple[int, str, str]]) -> None:
        """Record refused rows as (line, reason, the row's text)."""
        self.refused.extend((file, line, reason, text) for line, reason, text in rows)

    def notice(self, code: str, message: str, lines: Iterable[int] = ()) -> None:
        """Record something noticed."""
        self.notices.append(Notice(code, message, tuple(lines)[:_SHOWN_LINES]))

    def by_reason(self) -> list[tuple[str, str, int, tuple[int, ...]]]:
        """Return (file, reason, number of rows, first lines), in order of appearance."""
        groups: dict[tuple[str, str], list[int]] = {}
        for file, line, reason, _ in self.refused:
            groups.setdefault((file, reason), []).append(line)
        return [(file, reason, len(lines), tuple(lines[:_SHOWN_LINES])) for (file, reason), lines in groups.items()]

    def write_refused(self, path: Path) -> bool:
        """Write the refused rows beside the output; remove an old list of ours when there are none.

        Parameters
        ----------
        path : pathlib.Path
            Target, replaced as a whole.

        Returns
        -------
        bool
            Whether there was anything to write.

        Raises
        ------
        InputFileError
            If the target is not a list of ours, or cannot be written.
        """
        if not self.refused:
            if _is_ours(path):
                path.unlink()
            return False
        self.check_target(path)
        beside = path.with_name(f".{path.name}.part-{os.getpid()}")
        with (
            replacing_file(path, beside, "choose another place with --out"),
            beside.open("w", encoding="utf-8", newline="") as stream,
        ):
            writer = csv.writer(stream, lineterminator="\n")
            writer.writerow(_HEADER)
            writer.writerows(self.refused)
        return True

    def check_target(self, path: Path) -> None:
        """Refuse to write over a file that is not a list of refused rows.

        Raises
        ------
        InputFileError
            If there are refused rows to write and something else stands there.
        """
        if self.refused and (path.exists() or path.is_symlink()) and not _is_ours(path):
            raise InputFileError(
                f"{len(self.refused)} refused rows are to be listed here, but this is not a list of ours; "
                "move it, or choose another place with --out",
                path=path,
            )

    def to_dict(self) -> dict[str, Any]:
        """Return the account as the manifest keeps it (refused rows by reason only)."""
        return {
            "read": dict(self.read),
            "kept": dict(self.kept),
            "studies_left_out": dict(self.left_out),
            "refused": [
                {"file": file, "reason": reason, "rows": rows, "first_lines": list(lines)}
                for file, reason, rows, lines in self.by_reason()
            ],
            "notices": [
                {"code": item.code, "message": item.message, "first_lines": list(item.lines)} for item in self.notices
            ],
        }
