"""Reads delimited text files in blocks of text cells, and knows the line of every row.

Holds no rule about what a cell means. A *line* is the line of the file that a text editor shows,
counted from 1, also where a quoted cell spans several lines.
"""

from __future__ import annotations

import gzip
import io
import warnings
import zlib
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import IO, TYPE_CHECKING

from revinf.exceptions import InputFileError

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["BLOCK_ROWS", "DelimitedFile", "open_delimited"]

BLOCK_ROWS = 100_000
"""Rows held in memory at a time."""

LINE = "\x00line"
"""Name of the column that carries the line; no header can contain it."""

_DELIMITERS = {",": "commas", "\t": "tabs", ";": "semicolons"}
_HEADER_LIMIT = 1_000_000
"""A header longer than this many characters is not a table of ours."""


@dataclass(frozen=True, slots=True, kw_only=True)
class DelimitedFile:
    """A table whose header has been read.

    Parameters
    ----------
    path : pathlib.Path
        The file.
    columns : tuple of str
        Names in the order of the file, after renaming.
    delimiter : str
        What separates the cells.
    has_bom : bool
        Whether the file starts with a byte-order mark (it is skipped).
    """

    path: Path
    columns: tuple[str, ...]
    delimiter: str
    has_bom: bool

    def require(self, *names: str) -> None:
        """Refuse the file where a column is missing.

        Raises
        ------
        InputFileError
            Naming the missing column and the columns that are there.
        """
        for name in names:
            if name not in self.columns:
                there = ", ".join(repr(column) for column in self.columns[:12])
                raise InputFileError(
                    f"column {name!r} is missing (the header has {there}); rename it, or say which one it "
                    f"is with --column {name}=NAME",
                    path=self.path,
                    row=1,
                )

    def blocks(self) -> Iterator[pd.DataFrame]:
        """Yield the rows as text cells, `BLOCK_ROWS` at a time; empty cells are empty strings.

        Yields
        ------
        pandas.DataFrame
            One column a header name and the column `LINE`; blank lines are left out.

        Raises
        ------
        InputFileError
            If a row has too many cells, a quote never closes, or the text is not UTF-8.
        """
        import pandas as pd

        line = 2
        try:
            with open_text(self.path) as stream:
                reader = pd.read_csv(
                    stream,
                    sep=self.delimiter,
                    header=0,
                    names=list(self.columns),
                    index_col=False,
                    dtype=str,
                    keep_default_na=False,
                    na_filter=False,
                    skip_blank_lines=False,
                    chunksize=BLOCK_ROWS,
                    on_bad_lines="error",
                )
                while (block := _next_block(reader)) is not None:
                    line = _number_lines(block, line)
                    filled = (block.drop(columns=LINE) != "").any(axis=1)
                    yield block[filled].reset_index(drop=True)
        except (pd.errors.ParserError, pd.errors.ParserWarning) as error:
            raise InputFileError(_plain(error), path=self.path) from None
        except (UnicodeDecodeError, OSError, EOFError, zlib.error, ValueError) as error:
            raise _unreadable(self.path, error) from None

    def rows(self) -> Iterator[tuple[int, list[str]]]:
        """Yield line and cells of one row after another, whatever their number; for tables refused row by row.

        Yields
        ------
        int, list of str
            Trimmed cells; rows of blanks only are left out.

        Raises
        ------
        InputFileError
            If the text is not UTF-8, holds NUL bytes, or a cell is absurdly long.
        """
        import csv

        try:
            with open_text(self.path) as stream:
                reader = csv.reader(stream, delimiter=self.delimiter)
                next(reader, None)
                line = reader.line_num + 1
                for cells in reader:
                    trimmed = [cell.strip() for cell in cells]
                    if any(trimmed):
                        yield line, trimmed
                    line = reader.line_num + 1
        except csv.Error as error:
            raise InputFileError(
                f"cannot be read as a table ({error}); check for an open quote", path=self.path
            ) from None
        except (UnicodeDecodeError, OSError, EOFError, zlib.error) as error:
            raise _unreadable(self.path, error) from None


def open_delimited(path: Path, rename: Mapping[str, str] | None = None) -> DelimitedFile:
    r"""Read the header of a CSV or TSV file, plain or gzipped.

    Parameters
    ----------
    path : pathlib.Path
        The file.
    rename : mapping, optional
        Our name of a column to the file's name of it.

    Returns
    -------
    DelimitedFile
        Ready to yield its rows.

    Raises
    ------
    InputFileError
        If the file is missing, empty, not text, or its header names a column twice.

    Examples
    --------
    >>> import tempfile
    >>> with tempfile.TemporaryDirectory() as folder:
    ...     path = Path(folder) / "peaks.csv"
    ...     _ = path.write_text("experiment,x,y,z\nx1,1,2,3\n")
    ...     open_delimited(path, {"study": "experiment"}).columns
    ('study', 'x', 'y', 'z')
    """
    path = Path(path)
    try:
        with open_text(path) as stream:
            header = stream.readline(_HEADER_LIMIT)
        with _open_bytes(path) as raw:
            has_bom = raw.read(3) == b"\xef\xbb\xbf"
    except (UnicodeDecodeError, OSError, EOFError, zlib.error) as error:
        raise _unreadable(path, error) from None
    if "\x00" in header or len(header) >= _HEADER_LIMIT:
        raise InputFileError("this is not a text table; give a CSV or TSV file", path=path, row=1)
    if header.count('"') % 2:
        raise InputFileError("a quote in the header never closes; keep the header on one line", path=path, row=1)
    if not header.strip():
        raise InputFileError("the file has no header line; the first line must name the columns", path=path)
    delimiter = "\t" if path.name.removesuffix(".gz").endswith(".tsv") else ","
    if delimiter not in header:
        delimiter = max(_DELIMITERS, key=header.count)
    names = _split_header(header, delimiter)
    columns = _renamed(names, rename or {}, path)
    return DelimitedFile(path=path, columns=columns, delimiter=delimiter, has_bom=has_bom)


def open_text(path: Path) -> IO[str]:
    """Open a plain or gzipped UTF-8 file for reading, past a byte-order mark."""
    return io.TextIOWrapper(_open_bytes(path), encoding="utf-8-sig", newline="")


def _open_bytes(path: Path) -> IO[bytes]:
    """Open a file, unpacking gzip by its first bytes, not by its name."""
    stream = path.open("rb")
    if stream.read(2) == b"\x1f\x8b":
        stream.close()
        return gzip.open(path, "rb")  # type: ignore[return-value]
    stream.seek(0)
    return stream


def _split_header(header: str, delimiter: str) -> list[str]:
    """Return the trimmed names of a header line."""
    import csv

    return [name.strip() for name in next(csv.reader([header.rstrip("\r\n")], delimiter=delimiter))]


def _renamed(names: list[str], rename: Mapping[str, str], path: Path) -> tuple[str, ...]:
    """Return the header with the user's column names replaced by ours."""
    ours = {theirs: our for our, theirs in rename.items()}
    # A spreadsheet leaves empty names behind its last column; they name nothing and cannot clash.
    columns = [ours.get(name, name) for name in names]
    for number in range(len(columns), 0, -1):
        if columns[number - 1]:
            break
        columns[number - 1] = f"column {number}"
    for position, name in enumerate(columns):
        if name in columns[:position]:
            raise InputFileError(f"column {name!r} stands twice in the header; rename one of them", path=path, row=1)
    return tuple(columns)


def _next_block(reader: Iterator[pd.DataFrame]) -> pd.DataFrame | None:
    """Return the next block, None at the end."""
    import pandas as pd

    # pandas only warns where it would drop the cells beyond the header's. The filter must not stay on
    # while a consumer works on the block.
    with warnings.catch_warnings():
        warnings.simplefilter("error", pd.errors.ParserWarning)
        return next(reader, None)


def _number_lines(block: pd.DataFrame, first: int) -> int:
    """Add the column `LINE` to a block and return the line that follows it."""
    import numpy as np

    extra = np.zeros(len(block), dtype=np.int64)
    for column in block.columns:
        cells = block[column]
        # Quoted cells over several lines; one search through all is much faster than one a cell.
        if "\n" in "".join(cells.to_numpy(dtype=object)):
            extra += cells.str.count("\n").to_numpy(dtype=np.int64)
    ends = np.cumsum(extra + 1)
    block[LINE] = first + ends - extra - 1
    return int(first + (ends[-1] if len(ends) else 0))


def _plain(error: Exception) -> str:
    """Turn a parser's message into one line with a remedy."""
    text = " ".join(str(error).split()).removeprefix("Error tokenizing data. C error: ")
    return f"the rows do not fit the header ({text}); check for stray separators or an open quote"


def _undecodable_line(path: Path) -> int | None:
    """Return the first line that is not UTF-8: a decoder only knows the place within its buffer."""
    try:
        with _open_bytes(path) as stream:
            for number, line in enumerate(stream, start=1):
                try:
                    line.decode("utf-8")
                except UnicodeDecodeError:
                    return number
    except (OSError, EOFError, zlib.error):
        pass
    return None


def _unreadable(path: Path, error: Exception) -> InputFileError:
    """Say in one line why a file cannot be read."""
    if isinstance(error, UnicodeDecodeError):
        return InputFileError(
            "this is not UTF-8 text; save the file as CSV in UTF-8", path=path, row=_undecodable_line(path)
        )
    if isinstance(error, FileNotFoundError):
        return InputFileError("there is no such file; check the path", path=path)
    if isinstance(error, IsADirectoryError):
        return InputFileError("this is a folder; give a CSV or TSV file", path=path)
    if isinstance(error, (EOFError, zlib.error, gzip.BadGzipFile)):
        return InputFileError("the gzip file is damaged or cut short; copy it again", path=path)
    reason = getattr(error, "strerror", None) or " ".join(str(error).split())
    return InputFileError(f"cannot be read ({reason}); check the file and its permissions", path=path)
