"""Reads a claims table: one claim a row, or a pattern over the rows that share a claim's id.

Columns `claim, term, x, y, z`, optionally `space, radius_mm, prior, context, rivals, region, quote,
location`; `context` and `rivals` hold terms separated by ``;``. A faulty row refuses its claim, with the
line; the other claims go on. A row without coordinates and region is a claim that still needs them.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from revinf.evidence.claim import DEFAULT_RADIUS_MM, Claim, parsed_prior
from revinf.evidence.named_peaks import filled, read_named_peaks
from revinf.exceptions import InputFileError, InvalidClaimError, RevinfError
from revinf.literature.rows import open_delimited

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["COLUMNS", "ClaimsTable", "Refusal", "Unplaced", "claims_from_frame", "read_claims"]

COLUMNS = (
    "claim",
    "term",
    "x",
    "y",
    "z",
    "space",
    "radius_mm",
    "prior",
    "context",
    "rivals",
    "region",
    "quote",
    "location",
)
_OF_THE_CLAIM = ("term", "space", "radius_mm", "prior", "context", "rivals", "quote", "location")
"""Columns in which the rows of a pattern must agree, or leave the later ones empty."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Refusal:
    """A row that cannot be used, and why."""

    claim: str
    line: int
    reason: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Unplaced:
    """A claim that names no place yet."""

    claim: str
    line: int
    term: str
    quote: str
    location: str


@dataclass(frozen=True, slots=True, kw_only=True)
class ClaimsTable:
    """What a claims table holds, in its order."""

    name: str
    claims: tuple[Claim, ...]
    unplaced: tuple[Unplaced, ...]
    refused: tuple[Refusal, ...]


def read_claims(
    path: str | Path,
    *,
    rename: Mapping[str, str] | None = None,
    transform: str = "pooled",
    peaks: str | Path | None = None,
) -> ClaimsTable:
    """Read a claims table.

    Parameters
    ----------
    path : path
        CSV or TSV, UTF-8, optionally gzipped.
    rename : mapping, optional
        Our name of a column to the file's.
    transform : str, default "pooled"
        Which published transform fits rows in Talairach space.
    peaks : path, optional
        Peaks with the names of their places; a row without coordinates whose `place` is named there, once,
        takes them.

    Returns
    -------
    ClaimsTable
        Claims, claims that still need a place, and refused rows.

    Raises
    ------
    InputFileError
        If a file cannot be read as a table, or has no row.
    """
    table = open_delimited(Path(path), rename)
    table.require("claim", "term")
    rows: list[tuple[int, dict[str, str]]] = []
    misfits: list[Refusal] = []
    for line, cells in table.rows():
        if any(cells[len(table.columns) :]):
            reason = (
                f"the row has {len(cells)} cells, the header {len(table.columns)}; put quotes around a cell that "
                "holds a separator"
            )
            misfits.append(Refusal(claim=cells[table.columns.index("claim")], line=line, reason=reason))
            continue
        padded = [*cells, *[""] * (len(table.columns) - len(cells))]
        rows.append((line, dict(zip(table.columns, padded, strict=False))))
    if not rows and not misfits:
        raise InputFileError("the claims table has no rows; give at least one claim", path=path)
    if peaks is not None:
        places = read_named_peaks(peaks)
        rows = [(line, filled(row, places)) for line, row in rows]
    return _grouped(rows, transform, Path(path).name, misfits)


def claims_from_frame(frame: pd.DataFrame, *, transform: str = "pooled") -> ClaimsTable:
    """Read the same from a data frame; lines are the positions of the rows, from 1.

    Parameters
    ----------
    frame : pandas.DataFrame
        Columns as in a claims table; missing values are empty cells.
    transform : str, default "pooled"
        Which published transform fits rows in Talairach space.

    Returns
    -------
    ClaimsTable
        Claims, claims that still need a place, and refused rows.

    Raises
    ------
    InvalidClaimError
        If a column is missing, or there is no row.

    Examples
    --------
    >>> import pandas as pd
    >>> frame = pd.DataFrame({"claim": ["c1"], "term": ["fear"], "x": [-22], "y": [-4], "z": [-18]})
    >>> claims_from_frame(frame).claims[0].peaks
    ((-22.0, -4.0, -18.0),)
    """
    for column in ("claim", "term"):
        if column not in frame.columns:
            raise InvalidClaimError(f"the data frame has no column {column!r}; a claims table needs it")
    if not len(frame):
        raise InvalidClaimError("the data frame has no rows; give at least one claim")
    filled = frame.astype(object).where(frame.notna(), "")
    rows = [
        (position, {str(name): str(cell).strip() for name, cell in cells.items()})
        for position, cells in enumerate(filled.to_dict("records"), start=1)
    ]
    return _grouped(rows, transform, "data frame")


def _grouped(
    rows: list[tuple[int, dict[str, str]]], transform: str, name: str, misfits: Sequence[Refusal] = ()
) -> ClaimsTable:
    """Group the rows by their claim's id and make the claims."""
    by_id: dict[str, list[dict[str, str]]] = {}
    lines: dict[str, list[int]] = {}
    refused: list[Refusal] = list(misfits)
    spoiled = {misfit.claim for misfit in misfits}
    for line, row in rows:
        if not row["claim"]:
            refused.append(Refusal(claim="", line=line, reason="the claim has no id; number the claims"))
            continue
        by_id.setdefault(row["claim"], []).append(row)
        lines.setdefault(row["claim"], []).append(line)
    claims: list[Claim] = []
    unplaced: list[Unplaced] = []
    for claim, members in by_id.items():
        outcome = _claim_of(claim, members, lines[claim], transform)
        if claim in spoiled:
            reason = "another row of this pattern is refused, and the rest would be a different claim"
            refused.extend(Refusal(claim=claim, line=line, reason=reason) for line in lines[claim])
        elif isinstance(outcome, Claim):
            claims.append(outcome)
        elif isinstance(outcome, Unplaced):
            unplaced.append(outcome)
        else:
            refused.extend(outcome)
    return ClaimsTable(
        name=name,
        claims=tuple(claims),
        unplaced=tuple(unplaced),
        refused=tuple(sorted(refused, key=lambda item: item.line)),
    )


def _claim_of(
    name: str, rows: list[dict[str, str]], lines: list[int], transform: str
) -> Claim | Unplaced | list[Refusal]:
    """Return the claim of the rows that share an id, or what is wrong with them."""
    faults: list[Refusal] = []
    points: list[list[float]] = []
    for row, line in zip(rows, lines, strict=True):
        try:
            point = _point(row)
            _agree(rows[0], row)
        except RevinfError as error:
            faults.append(Refusal(claim=name, line=line, reason=str(error)))
            continue
        if point is not None:
            points.append(point)
    first = rows[0]
    regions = {row["region"] for row in rows if row.get("region")}
    if not faults and len(points) < len(rows) and not (regions and not points):
        # A pattern of which one place is not known yet is no smaller claim; it waits as a whole.
        return Unplaced(
            claim=name,
            line=lines[0],
            term=first["term"],
            quote=first.get("quote", ""),
            location=first.get("location", ""),
        )
    if not faults:
        try:
            return _built(name, first, points, regions, transform)
        except RevinfError as error:
            faults = [Refusal(claim=name, line=lines[0], reason=str(error))]
    known = {fault.line for fault in faults}
    others = "another row of this pattern is refused, and the rest would be a different claim"
    return faults + [Refusal(claim=name, line=line, reason=others) for line in lines if line not in known]


def _point(row: dict[str, str]) -> list[float] | None:
    """Return the coordinates of a row; None where it has none."""
    cells = {axis: row.get(axis, "") for axis in ("x", "y", "z")}
    if not any(cells.values()):
        return None
    values = []
    for axis, text in cells.items():
        try:
            values.append(float(text.replace("\N{MINUS SIGN}", "-")))
        except ValueError:
            raise InvalidClaimError(
                f"{axis} is {text[:40]!r}, not a number; write millimetres with a decimal point"
            ) from None
    return values


def _agree(first: dict[str, str], row: dict[str, str]) -> None:
    """Refuse a row of a pattern that says something else than the first."""
    for column in _OF_THE_CLAIM:
        if row.get(column) and row[column] != first.get(column, ""):
            raise InvalidClaimError(
                f"{column} is {row[column][:40]!r}, but {first.get(column, '')[:40]!r} in the claim's first row; "
                "rows of one pattern must agree"
            )


def _built(name: str, row: dict[str, str], points: list[list[float]], regions: set[str], transform: str) -> Claim:
    """Return the claim; any fault raises."""
    if len(regions) > 1 and not points:
        raise InvalidClaimError("a claim names one region of a table; give each its own id")
    radius = row.get("radius_mm", "")
    try:
        radius_mm = float(radius) if radius else DEFAULT_RADIUS_MM
    except ValueError:
        raise InvalidClaimError(f"radius_mm is {radius[:40]!r}, not a number; write millimetres") from None
    return Claim(
        id=name,
        term=row["term"],
        # A claim with coordinates is asked by them; the region is then only a name for the reader.
        peaks=points,
        region=None if points else regions.pop(),
        space=row.get("space") or None,
        transform=transform,
        prior=parsed_prior(row["prior"]) if row.get("prior") else 0.5,
        context=_terms(row.get("context", "")),
        rivals=_terms(row.get("rivals", "")),
        label=(row.get("place") or row.get("region") or "") if points else "",
        quote=row.get("quote", ""),
        location=row.get("location", ""),
        radius_mm=radius_mm,
    )


def _terms(text: str) -> list[str]:
    """Return the terms of a cell."""
    return [term for term in (part.strip() for part in text.split(";")) if term]
