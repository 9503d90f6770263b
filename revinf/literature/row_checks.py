"""The pieces that every reader of rows needs: refusing rows with a reason, numbering names, groups."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import InputFileError
from revinf.literature.rows import LINE

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["MINUS", "Numbering", "RowChecks", "distinct", "numbers", "record_groups", "trimmed"]

MINUS = "\N{MINUS SIGN}"
"""What word processors and publishers put in place of a hyphen."""


class RowChecks:
    """Which rows of a block are fine, and the first reason why each other one is not."""

    def __init__(self, block: pd.DataFrame) -> None:
        self.block = block
        self.fine: NDArray[np.bool_] = np.ones(len(block), dtype=bool)
        self._reasons: dict[int, str] = {}

    def refuse(self, rows: Any, reason: str) -> None:
        """Refuse the rows of a boolean mask; a row keeps its first reason."""
        fresh = np.asarray(rows, dtype=bool) & self.fine
        if fresh.any():
            self._reasons.update(dict.fromkeys(np.flatnonzero(fresh).tolist(), reason))
            self.fine &= ~fresh

    def leave_out(self, rows: Any) -> int:
        """Leave rows out that are not at fault; return how many."""
        fresh = np.asarray(rows, dtype=bool) & self.fine
        self.fine &= ~fresh
        return int(fresh.sum())

    def refused_rows(self, delimiter: str) -> Iterator[tuple[int, str, str]]:
        """Yield line, reason and text of the refused rows, in order."""
        rows = sorted(self._reasons)
        cells = self.block.drop(columns=LINE).to_numpy()[rows]
        lines = self.block[LINE].to_numpy()[rows]
        for row, line, row_cells in zip(rows, lines.tolist(), cells, strict=True):
            yield line, self._reasons[row], delimiter.join(row_cells)


class Numbering:
    """Gives each distinct name a number, in order of appearance over all blocks.

    Examples
    --------
    >>> import pandas as pd
    >>> numbering = Numbering()
    >>> numbering.codes(pd.Series(["b", "a", "b"])).tolist(), numbering.names
    ([0, 1, 0], ['b', 'a'])
    """

    def __init__(self) -> None:
        self._index: dict[str, int] = {}

    @property
    def names(self) -> list[str]:
        """The names in order of their numbers."""
        return list(self._index)

    def codes(self, names: pd.Series[str]) -> NDArray[np.int32]:
        """Return the number of each name, adding the new ones."""
        import pandas as pd

        local, uniques = pd.factorize(names)
        index = self._index
        known = [index.setdefault(str(name), len(index)) for name in uniques]
        return np.asarray(known, dtype=np.int32)[local] if len(known) else np.zeros(0, dtype=np.int32)


def distinct(text: pd.Series[str]) -> tuple[NDArray[np.intp], pd.Series[str]]:
    """Return the distinct cells, and for every row which one it holds: work on cells is done once for each.

    Examples
    --------
    >>> import pandas as pd
    >>> codes, cells = distinct(pd.Series(["b", "a", "b"]))
    >>> codes.tolist(), cells.tolist()
    ([0, 1, 0], ['b', 'a'])
    """
    import pandas as pd

    codes, cells = pd.factorize(text)
    return codes, pd.Series(cells, dtype=str)


def trimmed(text: pd.Series[str]) -> pd.Series[str]:
    """Return the cells without blanks around them.

    Examples
    --------
    >>> import pandas as pd
    >>> trimmed(pd.Series([" b", "a"], index=[5, 6])).to_dict()
    {5: 'b', 6: 'a'}
    """
    codes, cells = distinct(text)
    plain = cells.str.strip()
    return text if plain.equals(cells) else plain.iloc[codes].set_axis(text.index)


def numbers(text: pd.Series[str]) -> NDArray[np.float64]:
    """Return the cells as numbers, a typographic minus read as minus; NaN where a cell is not one."""
    import pandas as pd

    codes, cells = distinct(text)
    plain = cells.str.replace(MINUS, "-", regex=False)
    return np.asarray(pd.to_numeric(plain, errors="coerce"), dtype=np.float64)[codes]


def record_groups(known: dict[str, str], block: pd.DataFrame, column: str, path: Path) -> None:
    """Add the group of each study of a block to `known`, where the column exists and is filled.

    Raises
    ------
    InputFileError
        With the line, if a study is in two groups: the last row must not win in silence.
    """
    if column not in block.columns:
        return
    pairs = block.drop_duplicates(["study", column])
    cells = zip(trimmed(pairs["study"]), trimmed(pairs[column]), pairs[LINE], strict=True)
    for study, group, line in cells:
        if group and known.setdefault(study, group) != group:
            raise InputFileError(
                f"study {study!r} is in two groups, {known[study]!r} and {group!r}; give it one",
                path=path,
                row=int(line),
                column=column,
            )
