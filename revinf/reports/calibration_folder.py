"""The files of a calibration."""

from __future__ import annotations

import json
from pathlib import Path
from typing import TYPE_CHECKING

from revinf.reports.calibration_figure import write_calibration_figure
from revinf.reports.calibration_markdown import calibration_markdown
from revinf.reports.scan_tables import write_table

if TYPE_CHECKING:
    from revinf.calibration.summaries import Calibration

__all__ = ["write_calibration"]


def write_calibration(found: Calibration, out: str | Path, *, command: str = "") -> list[str]:
    """Write Markdown, JSON and picture, each whole or not at all.

    Parameters
    ----------
    found : Calibration
        From `revinf.calibrate`.
    out : path
        A folder; older files of these names are replaced.
    command : str, optional
        What reproduces it.

    Returns
    -------
    list of str
        The files.

    Raises
    ------
    InputFileError
        If a file cannot be written.
    """
    folder = Path(out)
    text = json.dumps(found.to_dict(), indent=2, ensure_ascii=False, allow_nan=False) + "\n"
    written = [
        write_table(calibration_markdown(found, command=command), folder / "calibration.md"),
        write_table(text, folder / "calibration.json"),
        write_calibration_figure(found, folder / "calibration.png"),
    ]
    return [str(path) for path in written]
