"""The folder of a map: volumes, sidecar and picture, put in place as a whole."""

from __future__ import annotations

import csv
import json
from collections.abc import Callable, Iterable
from pathlib import Path
from typing import TYPE_CHECKING, Any

from revinf.reports.brain_map_figure import write_brain_map_figure
from revinf.reports.cells import csv_cell, file_name
from revinf.whole_folder import replacing

if TYPE_CHECKING:
    from revinf.evidence.brain_map import BrainMap
    from revinf.evidence.map_terms import TermHits

__all__ = ["write_brain_map", "write_brain_maps", "write_term_hits"]

_MARK, _TERMS = "map.json", "terms.csv"


def write_brain_map(found: BrainMap, out: str | Path) -> list[str]:
    """Write one map.

    Parameters
    ----------
    found : BrainMap
        From `revinf.map_term`.
    out : path
        A folder; an older map there is replaced as a whole.

    Returns
    -------
    list of str
        Names of the files.

    Raises
    ------
    InputFileError
        If the target is something else than a map, or cannot be written.
    """
    return _written(Path(out), lambda folder: _fill(found, folder))


def write_brain_maps(
    maps: Iterable[tuple[int, int, BrainMap]],
    out: str | Path,
    *,
    progress: Callable[[int, int], None] | None = None,
) -> list[str]:
    """Write a map a term into sub-folders, one after another.

    Parameters
    ----------
    maps : iterable
        From `revinf.map_terms`.
    out : path
        A folder; older maps there are replaced as a whole.
    progress : callable, optional
        Told how many terms are done, of how many.

    Returns
    -------
    list of str
        Names of the sub-folders.

    Raises
    ------
    InputFileError
        If the target is something else, or cannot be written.
    """

    def fill(folder: Path) -> None:
        names: list[str] = []
        for done, of, found in maps:
            name = file_name(found.term, taken=names)
            (folder / name).mkdir()
            _fill(found, folder / name)
            names.append(name)
            if progress is not None:
                progress(done, of)
        (folder / _MARK).write_text(json.dumps({"schema": "revinf/maps/1", "maps": names}, indent=1) + "\n")

    return _written(Path(out), fill)


def write_term_hits(found: TermHits, out: str | Path) -> list[str]:
    """Write the counts of every process: volumes, the table of terms, and a sidecar.

    Parameters
    ----------
    found : TermHits
        From `revinf.hits_of_terms`.
    out : path
        A folder; an older map there is replaced as a whole.

    Returns
    -------
    list of str
        Names of the files.

    Raises
    ------
    InputFileError
        If the target is something else than a map, or cannot be written.
    """

    def fill(folder: Path) -> None:
        for name, chunks in found.volumes():
            with (folder / name).open("wb") as stream:
                stream.writelines(chunks)
        with (folder / _TERMS).open("w", encoding="utf-8", newline="") as stream:
            table = csv.writer(stream, lineterminator="\n")
            table.writerow(["volume", "term", "n_studies"])
            for number, (term, total) in enumerate(zip(found.terms, found.n_term.tolist(), strict=True)):
                table.writerow([number, csv_cell(term), total])
        _write_sidecar(found.to_dict(), folder)

    return _written(Path(out), fill)


def _write_sidecar(content: dict[str, Any], folder: Path) -> None:
    """Write what a folder holds."""
    text = json.dumps(content, indent=2, ensure_ascii=False, allow_nan=False) + "\n"
    (folder / _MARK).write_text(text, encoding="utf-8")


def _fill(found: BrainMap, folder: Path) -> None:
    """Write the files of one map into a folder."""
    for name, content in found.volumes():
        (folder / name).write_bytes(content)
    _write_sidecar(found.to_dict(), folder)
    write_brain_map_figure(found, folder / "map.png")


def _written(target: Path, fill: Callable[[Path], None]) -> list[str]:
    """Fill a folder beside the target and put it in place."""
    with replacing(target, _refusal) as beside:
        fill(beside)
        return sorted(path.name for path in beside.iterdir())


def _refusal(target: Path) -> str | None:
    """Say why a folder must not be replaced; None for an empty one, or a map of ours and nothing else."""
    return None if _may_replace(target) else "something that is not a map stands here; give --out another name"


def _may_replace(target: Path) -> bool:
    """Tell whether a folder is empty or a map of ours and nothing else."""
    if not target.is_dir():
        return False
    names = [path.name for path in target.iterdir()]
    if not names:
        return True
    try:
        schema = str(json.loads((target / _MARK).read_text(encoding="utf-8"))["schema"])
    except (OSError, ValueError, KeyError, TypeError, RecursionError):
        return False
    if schema == "revinf/maps/1":
        return all((target / name).is_dir() or name == _MARK for name in names)
    known = {"revinf/map/1": (_MARK, "map.png"), "revinf/hits/1": (_MARK, _TERMS)}.get(schema)
    return known is not None and all(name.endswith(".nii.gz") or name in known for name in names)
