"""The places of a table to be: a lattice of grey matter, a list, or the parcels of an atlas."""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

from revinf.base_rates.table_checks import region_key
from revinf.exceptions import InputFileError, InvalidClaimError, SpaceError
from revinf.literature.literature import Literature
from revinf.literature.rows import LINE, open_delimited
from revinf.spaces.brain import grey_lattice
from revinf.spaces.coordinates import normalise_space
from revinf.spaces.parcels import load_parcels
from revinf.spaces.regions import Mask
from revinf.spaces.spheres import Sphere, sphere
from revinf.spaces.transforms import talairach_to_mni

__all__ = ["NamedPlace", "PlaceRequest", "atlas_places", "chosen_places", "lattice_places", "listed_places"]


@dataclass(frozen=True, slots=True)
class NamedPlace:
    """A region of a base-rate table to be."""

    name: str
    region: Sphere | Mask


def lattice_places(literature: Literature, spacing_mm: float, radius_mm: float) -> list[NamedPlace]:
    """Return a sphere at every lattice point of grey matter.

    Parameters
    ----------
    literature : Literature
        Carries the grey matter.
    spacing_mm : float, mm
        Distance of neighbours; coordinates are multiples of it.
    radius_mm : float, mm
        Radius of every sphere.

    Returns
    -------
    list of NamedPlace
        Named by their coordinates, such as ``"54 -54 24"``.

    Raises
    ------
    SpaceError
        If spacing or radius is out of range.
    """
    places = []
    for row in grey_lattice(literature.brain, spacing_mm).tolist():
        name = " ".join(f"{value / 10:g}" for value in row)
        places.append(NamedPlace(name, Sphere(centre_tenths=(row[0], row[1], row[2]), radius_mm=radius_mm)))
    return places


@dataclass(frozen=True, slots=True, kw_only=True)
class PlaceRequest:
    """Which places somebody asked for: exactly one of lattice, list and atlas.

    Parameters
    ----------
    radius_mm : float, mm
        Radius of every sphere, but for rows of a list that give their own.
    spacing_mm : float, optional, mm
        Spacing of a lattice of grey matter.
    listed : pathlib.Path, optional
        A list of places.
    atlas, labels : pathlib.Path, optional
        An atlas image and the names of its parcels.
    rename : dict
        Our name of a column to the file's.
    transform : str
        Which published transform fits the rows in Talairach space.
    """

    radius_mm: float
    spacing_mm: float | None = None
    listed: Path | None = None
    atlas: Path | None = None
    labels: Path | None = None
    rename: dict[str, str] = field(default_factory=dict)
    transform: str = "pooled"


def chosen_places(literature: Literature, request: PlaceRequest) -> list[NamedPlace]:
    """Return the places of a lattice, of a list, or of an atlas, whichever was asked for.

    Parameters
    ----------
    literature : Literature
        Carries the grey matter.
    request : PlaceRequest
        Which places.

    Returns
    -------
    list of NamedPlace
        At least one.

    Raises
    ------
    InvalidClaimError
        If not exactly one of lattice, list and atlas is named, or a renamed column is in no file.
    """
    ways = (request.spacing_mm, request.listed, request.atlas)
    if sum(way is not None for way in ways) != 1 or (request.labels and not request.atlas):
        raise InvalidClaimError(
            "places come from one source; give --lattice MM, --regions FILE, or --atlas FILE with --labels FILE"
        )
    _check_renamed(request)
    if request.atlas is not None:
        return atlas_places(request.atlas, request.labels, rename=request.rename)
    if request.listed is not None:
        return listed_places(request.listed, request.radius_mm, rename=request.rename, transform=request.transform)
    return lattice_places(literature, float(request.spacing_mm or 0), request.radius_mm)


def _check_renamed(request: PlaceRequest) -> None:
    """Refuse a column that the user named and no file has: it would be ignored in silence."""
    files = [file for file in (request.listed, request.labels) if file is not None]
    headers = {column for file in files for column in open_delimited(file).columns} if request.rename else set()
    for ours, theirs in request.rename.items():
        if theirs not in headers:
            raise InvalidClaimError(
                f"no file has the column {theirs!r} that --column {ours}={theirs} names; check its spelling"
            )


def listed_places(
    path: Path, radius_mm: float, *, rename: dict[str, str] | None = None, transform: str = "pooled"
) -> list[NamedPlace]:
    """Read a list of places: columns `region, x, y, z`, optionally `radius_mm` and `space`.

    Parameters
    ----------
    path : pathlib.Path
        CSV or TSV, plain or gzipped.
    radius_mm : float, mm
        Radius where the row gives none.
    rename : dict, optional
        Our name of a column to the file's.
    transform : str, default "pooled"
        Which published transform fits the rows in Talairach space.

    Returns
    -------
    list of NamedPlace
        In the order of the file.

    Raises
    ------
    InputFileError
        With line and column, for a cell that cannot be used or a name that stands twice.
    SpaceError
        If the transform is not a known one.
    """
    table = open_delimited(path, rename)
    table.require("region", "x", "y", "z")
    talairach_to_mni((0.0, 0.0, 0.0), transform)  # an unknown name fails whether or not a row needs it
    places: dict[str, NamedPlace] = {}
    for block in table.blocks():
        for cells in block.to_dict("records"):
            line, name = int(cells[LINE]), str(cells["region"]).strip()
            if not name or region_key(name) in places:
                raise InputFileError(
                    f"region {name!r} is empty or stands twice; give each place its own name",
                    path=path,
                    row=line,
                    column="region",
                )
            texts = {str(column): str(cell).strip() for column, cell in cells.items()}
            places[region_key(name)] = NamedPlace(name, _listed_sphere(texts, radius_mm, transform, path, line))
    if not places:
        raise InputFileError("the list has no places; give at least one row", path=path)
    return list(places.values())


def _listed_sphere(texts: dict[str, str], radius_mm: float, transform: str, path: Path, line: int) -> Sphere:
    """Return the sphere of one row; name the cell that cannot be used."""
    values = {"radius_mm": radius_mm}
    for column in ("x", "y", "z", "radius_mm"):
        text = texts.get(column, "")
        if column != "radius_mm" or text:
            try:
                values[column] = float(text)
            except ValueError:
                raise InputFileError(
                    f"{text[:40]!r} is not a number; write millimetres with a decimal point",
                    path=path,
                    row=line,
                    column=column,
                ) from None
    column = "space"
    try:
        space = normalise_space(texts.get("space") or "MNI152")
        column = "x"
        xyz = [values[axis] for axis in ("x", "y", "z")]
        centre = talairach_to_mni(xyz, transform) if space == "Talairach" else xyz
        sphere(centre, 0.0)
        column = "radius_mm"
        return sphere(centre, values["radius_mm"])
    except SpaceError as error:
        raise InputFileError(str(error), path=path, row=line, column=column) from None


def atlas_places(path: Path, labels: Path | None = None, *, rename: dict[str, str] | None = None) -> list[NamedPlace]:
    """Read the parcels of an atlas image, and their names.

    Parameters
    ----------
    path : pathlib.Path
        An atlas image in MNI152 space.
    labels : pathlib.Path, optional
        CSV or TSV with columns `value` and `region`; parcels without a row, or all where there is no
        file, are called by their number.
    rename : dict, optional
        Our name of a column to the file's.

    Returns
    -------
    list of NamedPlace
        In the order of the parcels' numbers.

    Raises
    ------
    InputFileError
        If a file cannot be used, a value is no whole number, or a name stands twice.
    """
    names = {} if labels is None else _parcel_names(labels, rename)
    parcels = list(load_parcels(path))
    places = [NamedPlace(names.get(number, mask.name), mask) for number, mask in parcels]
    if names and not set(names) & {number for number, _ in parcels}:
        raise InputFileError(
            f"no value of this table is a parcel of {path.name}; check that the two belong together", path=labels
        )
    if len({region_key(place.name) for place in places}) < len(places):
        raise InputFileError("two parcels have the same name; name each differently", path=labels or path)
    return places


def _parcel_names(path: Path, rename: dict[str, str] | None) -> dict[int, str]:
    """Return the name of each parcel's number."""
    table = open_delimited(path, rename)
    table.require("value", "region")
    names: dict[int, str] = {}
    for block in table.blocks():
        for value, region, line in zip(block["value"], block["region"], block[LINE], strict=True):
            text, name = str(value).strip(), str(region).strip()
            if not (text.isascii() and text.isdigit() and len(text) <= 15) or not name or int(text) in names:
                raise InputFileError(
                    f"value {text[:40]!r} is no whole number, stands twice, or has no name; keep one row a parcel",
                    path=path,
                    row=int(line),
                    column="value",
                )
            names[int(text)] = name
    return names
