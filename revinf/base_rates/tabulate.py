"""Counts of many regions and terms: a lattice of grey matter, or a list of places."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from revinf.base_rates.counting import count_terms
from revinf.base_rates.table_checks import region_key
from revinf.base_rates.table_rows import TableRow
from revinf.exceptions import InputFileError, InvalidClaimError, SpaceError
from revinf.literature.literature import Literature
from revinf.literature.rows import LINE, open_delimited
from revinf.spaces.brain import grey_lattice
from revinf.spaces.coordinates import normalise_space
from revinf.spaces.spheres import Sphere, sphere
from revinf.spaces.transforms import talairach_to_mni

__all__ = ["NamedSphere", "chosen_places", "lattice_places", "listed_places", "tabulate"]


@dataclass(frozen=True, slots=True)
class NamedSphere:
    """A region of a base-rate table to be."""

    name: str
    region: Sphere


def lattice_places(literature: Literature, spacing_mm: float, radius_mm: float) -> list[NamedSphere]:
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
    list of NamedSphere
        Named by their coordinates, such as ``"54 -54 24"``.

    Raises
    ------
    SpaceError
        If spacing or radius is out of range.
    """
    places = []
    for row in grey_lattice(literature.brain, spacing_mm).tolist():
        name = " ".join(f"{value / 10:g}" for value in row)
        places.append(NamedSphere(name, Sphere(centre_tenths=(row[0], row[1], row[2]), radius_mm=radius_mm)))
    return places


def chosen_places(
    literature: Literature,
    spacing_mm: float | None,
    listed: Path | None,
    radius_mm: float,
    *,
    rename: dict[str, str] | None = None,
    transform: str = "pooled",
) -> list[NamedSphere]:
    """Return the places of a lattice or of a list, whichever was named.

    Parameters
    ----------
    literature : Literature
        Carries the grey matter.
    spacing_mm : float or None, mm
        Spacing of the lattice.
    listed : pathlib.Path or None
        A list of places.
    radius_mm : float, mm
        Radius of every sphere, but for rows of a list that give their own.
    rename, transform
        As for `listed_places`.

    Returns
    -------
    list of NamedSphere
        At least one.

    Raises
    ------
    InvalidClaimError
        If not exactly one of lattice and list is named.
    """
    if (spacing_mm is None) == (listed is None):
        raise InvalidClaimError("places come from one source; give either --lattice MM or --regions FILE")
    if listed is not None:
        return listed_places(listed, radius_mm, rename=rename, transform=transform)
    return lattice_places(literature, float(spacing_mm or 0), radius_mm)


def listed_places(
    path: Path, radius_mm: float, *, rename: dict[str, str] | None = None, transform: str = "pooled"
) -> list[NamedSphere]:
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
    list of NamedSphere
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
    places: dict[str, NamedSphere] = {}
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
            places[region_key(name)] = NamedSphere(
                name, _listed_sphere(texts, radius_mm, transform, path, line)
            )
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


def tabulate(
    literature: Literature,
    places: Sequence[NamedSphere],
    *,
    terms: Sequence[str] = (),
    progress: Callable[[int, int], None] | None = None,
) -> Iterator[TableRow]:
    """Count every place and term.

    Parameters
    ----------
    literature : Literature
        Where to count.
    places : sequence of NamedSphere
        The regions.
    terms : sequence of str, optional
        Which terms; all of the literature's where left out.
    progress : callable, optional
        Told how many places are done, of how many.

    Yields
    ------
    TableRow
        Place by place, terms sorted.

    Raises
    ------
    UnknownTermError
        If a wanted term labels no counted study.
    """
    wanted = sorted({literature.term_index(term) for term in terms}) or range(literature.n_terms)
    source = _source(literature)
    for done, place in enumerate(places, start=1):
        counts = count_terms(literature, place.region)
        for term in wanted:
            yield TableRow(
                place.name,
                counts.terms[term],
                int(counts.term_active[term]),
                int(counts.term_total[term]),
                int(counts.other_active[term]),
                int(counts.other_total[term]),
                place.region.centre_mm,
                place.region.radius_mm,
                source,
            )
        if progress is not None:
            progress(done, len(places))


def _source(literature: Literature) -> str:
    """Return what the source column says: short, and marked where the data are invented."""
    mark = "invented data: " if literature.description.invented else ""
    return f"{mark}{literature.description.name}, fingerprint {literature.fingerprint}"
