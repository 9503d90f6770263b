"""Reads the peaks table: coordinates checked, brought to MNI152, rounded to 0.1 mm."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import SpaceError
from revinf.literature.import_options import ImportOptions, Progress
from revinf.literature.refusals import ImportReport
from revinf.literature.row_checks import MINUS, Numbering, RowChecks, distinct, numbers, record_groups, trimmed
from revinf.literature.rows import LINE, DelimitedFile, open_delimited
from revinf.spaces.coordinates import normalise_space, to_tenths
from revinf.spaces.transforms import talairach_to_mni

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["HEAD_MM", "PeakRows", "read_peaks"]

HEAD_MM = ((-100.0, 100.0), (-140.0, 110.0), (-110.0, 110.0))
"""Limits of x, y, z beyond which no head reaches; wider than any template by 2 cm or more."""

_AXES = ("x", "y", "z")


@dataclass(frozen=True, slots=True, kw_only=True)
class PeakRows:
    """The usable peaks in the order of the file.

    Parameters
    ----------
    study_ids : list of str
        Distinct ids in order of appearance.
    study : (P,) int32 array
        Index into `study_ids` of each peak.
    tenths : (P, 3) int16 array, tenths of a millimetre, MNI152
        The peaks.
    group : dict
        Group of each study that has one.
    n_negative : int
        Peaks with a negative statistic.
    """

    study_ids: list[str]
    study: NDArray[np.int32]
    tenths: NDArray[np.int16]
    group: dict[str, str]
    n_negative: int


def read_peaks(options: ImportOptions, group_column: str, report: ImportReport, tell: Progress) -> PeakRows:
    """Read the peaks table.

    Parameters
    ----------
    options : ImportOptions
        What to read and how.
    group_column : str
        Column that holds the group, if the table has it.
    report : ImportReport
        Takes what is refused and noticed.
    tell : callable
        Told how many rows are through.

    Returns
    -------
    PeakRows
        The usable peaks.

    Raises
    ------
    InputFileError
        If a column is missing, or the sign is asked for and there is no `stat` column.
    SpaceError
        If `options.space` is not a known space, or `options.transform` not a known transform.
    """
    table = open_delimited(options.peaks, options.rename)
    table.require("study", *_AXES, *(("stat",) if options.sign != "all" else ()))
    if options.space is not None:
        normalise_space(options.space)
    talairach_to_mni((0.0, 0.0, 0.0), options.transform)  # an unknown name fails before any row is read
    reader = _PeakReader(options, table, group_column, report)
    for block in table.blocks():
        reader.take(block)
        tell("reading peaks", report.read[table.path.name])
    return reader.finish()


class _PeakReader:
    """Takes the table block by block, so that memory holds packed arrays and one block of text."""

    def __init__(self, options: ImportOptions, table: DelimitedFile, group_column: str, report: ImportReport) -> None:
        self.options, self.table, self.report = options, table, report
        self.group_column = group_column
        self.numbering = Numbering()
        self.group: dict[str, str] = {}
        self.studies: list[NDArray[np.int32]] = []
        self.tenths: list[NDArray[np.int16]] = []
        self.lines: list[NDArray[np.int64]] = []
        self.counts = dict.fromkeys(("unstated", "talairach", "negative_stat", "minus", "other_sign"), 0)
        self.any_negative = False

    def take(self, block: pd.DataFrame) -> None:
        """Check and pack one block."""
        name = self.table.path.name
        self.report.read[name] += len(block)
        checks = RowChecks(block)
        study = trimmed(block["study"])
        checks.refuse(study == "", "empty study id")
        xyz = np.column_stack([self._axis(block, axis, checks) for axis in _AXES])
        _refuse_outside(xyz, checks, "")
        talairach = self._talairach(block, checks)
        if self.options.sign != "all":
            self._select_sign(block, checks)
        self.any_negative |= bool((xyz[checks.fine] < 0).any())
        moved = talairach & checks.fine
        if moved.any():
            xyz[moved] = talairach_to_mni(xyz[moved], self.options.transform)
            # A Talairach brain is the smaller one: what fits into it can come to lie outside.
            _refuse_outside(xyz, checks, " after the transform to MNI152")
        self.report.refuse(name, checks.refused_rows(self.table.delimiter))
        fine = checks.fine
        self.counts["talairach"] += int((moved & fine).sum())
        if "stat" in block.columns:
            self.counts["negative_stat"] += int((numbers(block["stat"][fine]) < 0).sum())
        self.tenths.append(to_tenths(xyz[fine]).astype(np.int16))
        self.studies.append(self.numbering.codes(study[fine]))
        self.lines.append(block[LINE].to_numpy()[fine])
        self.report.kept[name] += int(fine.sum())
        record_groups(self.group, block[fine], self.group_column, self.table.path)

    def _axis(self, block: pd.DataFrame, axis: str, checks: RowChecks) -> NDArray[np.float64]:
        """Return one coordinate in mm; refuse the rows where it is not a finite number."""
        codes, cells = distinct(block[axis])
        cells = cells.str.strip()
        self.counts["minus"] += int(cells.str.startswith(MINUS).to_numpy(dtype=bool)[codes].sum())
        value = numbers(cells)
        missing = ~np.isfinite(value)
        if missing.any():
            comma = cells.str.fullmatch(rf"[-+{MINUS}]?\d+,\d+").to_numpy(dtype=bool)
            checks.refuse((cells == "").to_numpy(dtype=bool)[codes], f"{axis} is empty")
            checks.refuse(comma[codes], f"{axis} has a decimal comma; write a decimal point")
            checks.refuse(missing[codes], f"{axis} is not a finite number")
        return np.where(missing, 0.0, value)[codes]

    def _talairach(self, block: pd.DataFrame, checks: RowChecks) -> NDArray[np.bool_]:
        """Return which rows are in Talairach space; refuse the rows whose space is unknown."""
        if self.options.space is not None:
            return np.full(len(block), normalise_space(self.options.space) == "Talairach")
        if "space" not in block.columns:
            self.counts["unstated"] += len(block)
            return np.zeros(len(block), dtype=bool)
        stated = trimmed(block["space"])
        meaning: dict[str, str] = {"": "MNI152"}
        for text in stated.unique():
            try:
                meaning[text] = normalise_space(text) if text else "MNI152"
            except SpaceError:
                checks.refuse(stated == text, f"unknown space {text!r}; write MNI152 or Talairach")
        self.counts["unstated"] += int((stated == "").sum())
        return np.asarray(stated.map(meaning) == "Talairach")

    def _select_sign(self, block: pd.DataFrame, checks: RowChecks) -> None:
        """Refuse rows of unknown sign and leave out those of the sign that was not asked for."""
        stat = numbers(block["stat"])
        checks.refuse(~np.isfinite(stat), "stat is not a number, so the sign is unknown")
        wrong = (stat <= 0) if self.options.sign == "positive" else (stat >= 0)
        self.counts["other_sign"] += checks.leave_out(wrong)

    def finish(self) -> PeakRows:
        """Join the blocks and say what was noticed."""
        empty = np.zeros(0, dtype=np.int32)
        study = np.concatenate(self.studies or [empty])
        tenths = np.concatenate(self.tenths or [np.zeros((0, 3), dtype=np.int16)])
        lines = np.concatenate(self.lines or [np.zeros(0, dtype=np.int64)])
        self._notice(study, tenths, lines)
        return PeakRows(
            study_ids=self.numbering.names,
            study=study,
            tenths=tenths,
            group=self.group,
            n_negative=self.counts["negative_stat"],
        )

    def _notice(self, study: NDArray[np.int32], tenths: NDArray[np.int16], lines: NDArray[np.int64]) -> None:
        """Record what a careful person would want to know of the peaks."""
        name, counts, notice = self.table.path.name, self.counts, self.report.notice
        if self.table.has_bom:
            notice("byte-order-mark", f"{name} starts with a byte-order mark; it was skipped")
        if len(study) and not self.any_negative:
            notice(
                "all-non-negative",
                f"{name}: no coordinate is negative; this looks like voxel indices, not millimetres",
            )
        duplicate = _repeated(study, tenths)
        if duplicate.any():
            notice(
                "duplicate-rows",
                f"{name}: {int(duplicate.sum())} rows repeat a peak of the same study; kept, since a study "
                "counts once anyway",
                lines[duplicate].tolist(),
            )
        if counts["unstated"]:
            notice("space-unstated", f"{name}: {counts['unstated']} rows state no space; read as MNI152")
        if counts["talairach"]:
            notice(
                "talairach",
                f"{name}: {counts['talairach']} peaks in Talairach space brought to MNI152 by the "
                f"{self.options.transform!r} transform",
            )
        if counts["minus"]:
            notice("minus-signs", f"{name}: {counts['minus']} typographic minus signs read as minus")
        if counts["negative_stat"]:
            notice(
                "negative-peaks",
                f"{name}: {counts['negative_stat']} of the kept peaks have a negative statistic (decreases)",
            )
        if counts["other_sign"]:
            notice("sign", f"{name}: {counts['other_sign']} peaks of the other sign left out as asked")


def _refuse_outside(xyz: NDArray[np.float64], checks: RowChecks, when: str) -> None:
    """Refuse the rows that no head reaches."""
    for axis, (low, high) in enumerate(HEAD_MM):
        outside = (xyz[:, axis] < low) | (xyz[:, axis] > high)
        checks.refuse(outside, f"{_AXES[axis]} lies outside any head{when} ({low:g} to {high:g} mm)")


def _repeated(study: NDArray[np.int32], tenths: NDArray[np.int16]) -> NDArray[np.bool_]:
    """Return which peaks repeat an earlier one of the same study."""
    repeated = np.zeros(len(study), dtype=bool)
    if len(study):
        order = np.lexsort((tenths[:, 2], tenths[:, 1], tenths[:, 0], study))
        same = (np.diff(study[order]) == 0) & (np.diff(tenths[order], axis=0) == 0).all(axis=1)
        repeated[order[1:][same]] = True  # lexsort is stable: the first of equals comes first
    return repeated
