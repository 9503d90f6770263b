"""What must hold between the rows of a base-rate table."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

from revinf.exceptions import InputFileError

if TYPE_CHECKING:
    from revinf.base_rates.table_row import TableRow

__all__ = ["TableChecks", "region_key"]


def region_key(name: str) -> str:
    """Return a region's name as it is compared: upper and lower case, and runs of spaces, alike.

    Parameters
    ----------
    name : str
        As somebody wrote it.

    Returns
    -------
    str
        Equal for names that mean the same region.

    Examples
    --------
    >>> region_key(" Left  IFG")
    'left ifg'
    """
    return " ".join(name.split()).casefold()


class TableChecks:
    """Refuses a row that contradicts an earlier one of its region.

    Parameters
    ----------
    path : pathlib.Path
        The file, for the messages.
    """

    def __init__(self, path: Path) -> None:
        self.path = path
        self.seen: set[tuple[str, str]] = set()
        self.first: dict[str, TableRow] = {}
        self.spelling: dict[str, str] = {}

    def __call__(self, row: TableRow, line: int) -> None:
        """Check one row.

        Raises
        ------
        InputFileError
            With line and column, if region and term stand a second time, if the region is spelled in two
            ways, or if it has two places.
        """
        if (row.region, row.term) in self.seen:
            raise self._error(
                line, "term", f"region {row.region!r} and term {row.term!r} stand here again; keep one row"
            )
        self.seen.add((row.region, row.term))
        first = self.first.get(row.region)
        if first is None:
            self.first[row.region] = row
            other = self.spelling.setdefault(region_key(row.region), row.region)
            if other != row.region:
                raise self._error(line, "region", f"{row.region!r} also stands as {other!r}; write it one way")
        elif (row.centre, row.radius_mm) != (first.centre, first.radius_mm):
            raise self._error(
                line,
                "x",
                f"region {row.region!r} has another place or radius above; give each row of it the same",
            )

    def _error(self, line: int, column: str, problem: str) -> InputFileError:
        return InputFileError(problem, path=self.path, row=line, column=column)
