"""Reads the annotations: which study carries which term, in long or wide form."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import InputFileError
from revinf.knowledge import normalise_term
from revinf.literature.import_options import ImportOptions, Progress
from revinf.literature.refusals import ImportReport
from revinf.literature.row_checks import Numbering, RowChecks, distinct, numbers, record_groups, trimmed
from revinf.literature.rows import LINE, DelimitedFile, open_delimited

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["LabelRows", "read_annotations"]

_NOT_TERMS = ("study", LINE)


@dataclass(frozen=True, slots=True, kw_only=True)
class LabelRows:
    """The usable labels.

    Parameters
    ----------
    study_ids, terms : list of str
        Distinct ids, and distinct normalised terms, in order of appearance.
    study, term : (A,) int32 arrays
        Indices into them.
    group : dict
        Group of each study that has one.
    """

    study_ids: list[str]
    terms: list[str]
    study: NDArray[np.int32]
    term: NDArray[np.int32]
    group: dict[str, str]


def read_annotations(options: ImportOptions, group_column: str, report: ImportReport, tell: Progress) -> LabelRows:
    """Read the annotations.

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
    LabelRows
        The usable labels; a weighted one counts where its weight is above 0, or at least
        `options.min_weight`.

    Raises
    ------
    InputFileError
        If a column is missing, or a minimum weight is asked for and there is no weight.
    """
    table = open_delimited(options.annotations, options.rename)
    table.require("study")
    reader = _LabelReader(options, table, group_column, report)
    for block in table.blocks():
        reader.take(block)
        tell("reading annotations", report.read[table.path.name])
    return reader.finish()


class _LabelReader:
    """Takes the table block by block."""

    def __init__(self, options: ImportOptions, table: DelimitedFile, group_column: str, report: ImportReport) -> None:
        self.options, self.table, self.report = options, table, report
        self.group_column = group_column
        self.long = "term" in table.columns
        self.wide = [name for name in table.columns if name not in ("study", group_column)]
        if not self.long and not self.wide:
            raise InputFileError(
                "there is neither a column 'term' (long form) nor one numeric column a term (wide form)",
                path=table.path,
                row=1,
            )
        if not self.long and not all(normalise_term(name) for name in self.wide):
            raise InputFileError(
                "a column has no name, so its numbers label nothing; name it after its term or remove it",
                path=table.path,
                row=1,
            )
        if self.long and options.min_weight is not None:
            table.require("weight")
        self.study_numbering, self.term_numbering = Numbering(), Numbering()
        self.spellings: dict[str, str] = {}
        self.group: dict[str, str] = {}
        self.pairs: list[tuple[NDArray[np.int32], NDArray[np.int32]]] = []
        self.light = 0

    def take(self, block: pd.DataFrame) -> None:
        """Check and pack one block."""
        name = self.table.path.name
        self.report.read[name] += len(block)
        checks = RowChecks(block)
        checks.refuse(trimmed(block["study"]) == "", "empty study id")
        (self._take_long if self.long else self._take_wide)(block, checks)
        self.report.refuse(name, checks.refused_rows(self.table.delimiter))
        self.report.kept[name] += int(checks.fine.sum())
        record_groups(self.group, block[checks.fine], self.group_column, self.table.path)

    def _take_long(self, block: pd.DataFrame, checks: RowChecks) -> None:
        """Take rows of study, term, weight."""
        terms = self._normalised(block["term"])
        checks.refuse(terms == "", "empty term")
        counts = np.ones(len(block), dtype=bool)
        if "weight" in block.columns:
            weight = numbers(block["weight"])
            checks.refuse(~np.isfinite(weight), "weight is not a number")
            counts = self._heavy(weight)
        fine = checks.fine & counts
        self.light += int((checks.fine & ~counts).sum())
        self.pairs.append(
            (
                self.study_numbering.codes(trimmed(block["study"][fine])),
                self.term_numbering.codes(terms[fine]),
            )
        )

    def _take_wide(self, block: pd.DataFrame, checks: RowChecks) -> None:
        """Take rows of study and one weight a term; an empty cell is no label."""
        import pandas as pd

        weights = np.zeros((len(block), len(self.wide)))
        for position, column in enumerate(self.wide):
            text = block[column].str.strip()
            value = numbers(text)
            checks.refuse(~np.isfinite(value) & (text != ""), f"column {column!r} is not a number")
            weights[:, position] = value  # NaN for an empty cell: it is above no minimum, not even 0
        row, column_index = np.nonzero(self._heavy(weights) & checks.fine[:, None])
        study = self.study_numbering.codes(trimmed(block["study"]).iloc[row])
        terms = self._normalised(pd.Series(self.wide, dtype=str))
        code = self.term_numbering.codes(terms)
        self.pairs.append((study, code[column_index]))

    def _heavy(self, weight: NDArray[np.float64]) -> NDArray[np.bool_]:
        """Return which weights count."""
        least = self.options.min_weight
        return np.asarray(weight > 0 if least is None else weight >= least)

    def _normalised(self, text: pd.Series[str]) -> pd.Series[str]:
        """Return the terms as they are compared, remembering their spellings."""
        import pandas as pd

        codes, cells = distinct(text)
        spelled = {name: normalise_term(name) for name in cells}
        self.spellings.update(spelled)
        return pd.Series([spelled[name] for name in cells], dtype=str).iloc[codes].set_axis(text.index)

    def finish(self) -> LabelRows:
        """Join the blocks and say what was noticed."""
        name, notice = self.table.path.name, self.report.notice
        empty = np.zeros(0, dtype=np.int32)
        study = np.concatenate([pair[0] for pair in self.pairs] or [empty])
        term = np.concatenate([pair[1] for pair in self.pairs] or [empty])
        terms = self.term_numbering.names
        if self.table.has_bom:
            notice("byte-order-mark", f"{name} starts with a byte-order mark; it was skipped")
        repeated = len(study) - len(np.unique(study.astype(np.int64) * max(len(terms), 1) + term))
        if repeated:
            notice("duplicate-rows", f"{name}: {repeated} labels are given more than once; each counts once")
        merged = len(self.spellings) - len(set(self.spellings.values()))
        if merged:
            notice("spellings", f"{name}: {merged} spellings were merged with another of the same term")
        if self.light:
            notice("weights", f"{name}: {self.light} labels are too light to count and were left out")
        return LabelRows(study_ids=self.study_numbering.names, terms=terms, study=study, term=term, group=self.group)
