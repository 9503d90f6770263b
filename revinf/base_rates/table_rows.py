"""The file format of base-rate tables: rows read, checked in every cell, and written.

Columns `region, term, term_active, term_total, other_active, other_total`, optionally
`x, y, z, radius_mm, source`; CSV or TSV, UTF-8, optionally gzipped.
"""

from __future__ import annotations

import csv
import gzip
import hashlib
import io
import os
import zlib
from collections.abc import Iterable, Iterator
from functools import lru_cache
from pathlib import Path

from revinf.base_rates.table_checks import TableChecks
from revinf.base_rates.table_row import TableRow
from revinf.exceptions import InputFileError
from revinf.literature.spelling import normalise_term
from revinf.whole_file import replacing_file

__all__ = ["COLUMNS", "COUNT_COLUMNS", "TableRow", "read_rows", "write_table"]

COUNT_COLUMNS = ("term_active", "term_total", "other_active", "other_total")
COLUMNS = ("region", "term", *COUNT_COLUMNS, "x", "y", "z", "radius_mm", "source")
_SIZE_LIMIT = 1_000_000_000


def read_rows(path: Path) -> tuple[list[TableRow], str]:
    """Read a table.

    Parameters
    ----------
    path : pathlib.Path
        The file, plain or gzipped.

    Returns
    -------
    list of TableRow
        At least one.
    str
        Sixteen hexadecimal digits that name the file's content.

    Raises
    ------
    InputFileError
        With file, line and column of the first cell that cannot be used.
    """
    raw = _read_bytes(path)
    try:
        text = raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise InputFileError(
            f"byte {error.start} is not UTF-8 text; save the table as CSV in UTF-8", path=path
        ) from None
    rows = list(_parse(text, path))
    if not rows:
        raise InputFileError("the table has no rows; give at least one region and term", path=path)
    return rows, hashlib.sha256(raw).hexdigest()[:16]


def write_table(rows: Iterable[TableRow], path: str | Path) -> int:
    """Write a table as a whole or not at all; gzipped where the name ends in .gz.

    Parameters
    ----------
    rows : iterable of TableRow
        In the order to write.
    path : path
        Target; an older file there is replaced.

    Returns
    -------
    int
        Number of rows.

    Raises
    ------
    InputFileError
        If the target cannot be written.
    """
    path = Path(path)
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(COLUMNS)
    n_rows = 0
    for row in rows:
        centre = [_short(value) for value in row.centre] if row.centre else ["", "", ""]
        radius = "" if row.radius_mm is None else _short(row.radius_mm)
        counts = [getattr(row, name) for name in COUNT_COLUMNS]
        writer.writerow([row.region, row.term, *counts, *centre, radius, row.source])
        n_rows += 1
    raw = text.getvalue().encode("utf-8")
    # No clock in the gzip header: the same counts give the same bytes.
    content = gzip.compress(raw, compresslevel=9, mtime=0) if path.suffix == ".gz" else raw
    beside = path.with_name(f".{path.name}.part-{os.getpid()}")
    with replacing_file(path, beside, "choose another place with --out"):
        beside.write_bytes(content)
    return n_rows


def _short(value: float) -> str:
    """Return a number of millimetres as it would be typed."""
    return f"{value + 0.0:.12g}"


def _read_bytes(path: Path) -> bytes:
    """Return the content of a file, unpacked, up to a size that no table of counts reaches."""
    try:
        with path.open("rb") as stream:
            packed = stream.read(2) == b"\x1f\x8b"
        with gzip.open(path) if packed else path.open("rb") as stream:
            raw = stream.read(_SIZE_LIMIT + 1)
    except FileNotFoundError:
        raise InputFileError("there is no such file; check the path", path=path) from None
    except (OSError, EOFError, zlib.error) as error:
        reason = getattr(error, "strerror", None) or "damaged gzip"
        raise InputFileError(f"cannot be read ({reason}); check the file", path=path) from None
    if len(raw) > _SIZE_LIMIT:
        raise InputFileError("this is far too large for a table of counts", path=path)
    return bytes(raw)


def _parse(text: str, path: Path) -> Iterator[TableRow]:
    """Yield the checked rows of a table."""
    delimiter = max(",\t;", key=text.partition("\n")[0].count)
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=delimiter, strict=True)
    check = TableChecks(path)
    line = 1  # a quoted cell can span lines: a row is named by its first
    try:
        header = [name.strip() for name in next(reader, [])]
        for name in ("region", "term", *COUNT_COLUMNS):
            if name not in header:
                raise InputFileError(
                    f"column {name!r} is missing; a base-rate table has {', '.join(COLUMNS[:6])}",
                    path=path,
                    row=1,
                )
        if len(set(header)) != len(header):
            raise InputFileError("a column stands twice in the header", path=path, row=1)
        parse = _RowParser(header, path)
        line = reader.line_num + 1
        for cells in reader:
            if any(cell.strip() for cell in cells):
                row = parse(cells, line)
                check(row, line)
                yield row
            line = reader.line_num + 1
    except csv.Error as error:
        raise InputFileError(
            f"the row cannot be split ({error}); check for stray quotes", path=path, row=line
        ) from None


class _RowParser:
    """Turns the cells of a line into a row, and knows where it is for the message."""

    def __init__(self, header: list[str], path: Path) -> None:
        self.path, self.width, self.line = path, len(header), 0
        self.at = {name: header.index(name) for name in COLUMNS if name in header}

    def __call__(self, cells: list[str], line: int) -> TableRow:
        """Return the checked row."""
        self.line = line
        if len(cells) != self.width:
            raise InputFileError(
                f"the row has {len(cells)} cells, the header {self.width}; check for stray separators",
                path=self.path,
                row=line,
            )
        region, term = cells[self.at["region"]].strip(), _term(cells[self.at["term"]])
        for name, value in (("region", region), ("term", term)):
            if not value:
                raise self._error(name, f"the {name} is empty; give it a name")
        n11, n1, n01, n0 = (self._number(cells, name) for name in COUNT_COLUMNS)
        for column, active, total in (("term_active", n11, n1), ("other_active", n01, n0)):
            if active > total:
                raise self._error(column, f"{active} active studies are more than the {total} there are")
        source = cells[self.at["source"]].strip() if "source" in self.at else ""
        radius = self._millimetres(cells, "radius_mm")
        if radius is not None and radius < 0:
            raise self._error("radius_mm", "a radius cannot be negative; write it in mm")
        return TableRow(region, term, n11, n1, n01, n0, self._centre(cells), radius, source)

    def _centre(self, cells: list[str]) -> tuple[float, float, float] | None:
        x, y, z = (self._millimetres(cells, axis) for axis in ("x", "y", "z"))
        if x is None and y is None and z is None:
            return None
        if x is None or y is None or z is None:
            raise self._error("x", "x, y and z must be given together or left empty together")
        return (x, y, z)

    def _number(self, cells: list[str], column: str) -> int:
        text = cells[self.at[column]]
        value = _count(text)
        if value is None:
            raise self._error(column, f"{text[:40]!r} is not a count; write a whole number of studies")
        return value

    def _millimetres(self, cells: list[str], column: str) -> float | None:
        text = cells[self.at[column]] if column in self.at else ""
        value = _length(text)
        if value is not None and not abs(value) <= 1000:
            raise self._error(column, f"{text[:40]!r} is not a number of millimetres")
        return value

    def _error(self, column: str, problem: str) -> InputFileError:
        return InputFileError(problem, path=self.path, row=self.line, column=column)


# A table repeats the same few cells thousands of times: the caches make reading four times as fast.
@lru_cache(maxsize=4096)
def _term(text: str) -> str:
    """Return the normalised term."""
    return normalise_term(text)


@lru_cache(maxsize=4096)
def _count(text: str) -> int | None:
    """Return the whole number that a cell holds, or None."""
    digits = text.strip()
    return int(digits) if digits.isascii() and digits.isdigit() and len(digits) <= 15 else None


@lru_cache(maxsize=4096)
def _length(text: str) -> float | None:
    """Return the number that a cell holds, NaN for what is not one, None for an empty cell."""
    if not text.strip():
        return None
    try:
        return float(text)
    except ValueError:
        return float("nan")
