"""Three outlines of the standard brain as SVG paths in mm, so that a peak stands on them exactly where it is.

The outlines are the line drawings that the nilearn package carries for its glass-brain plots; they are read
from its files without importing it, with the placing that it gives them (a test holds ours to nilearn's).
Where a file is not where this version of nilearn keeps it, a view has no outline and its frame says so.
"""

from __future__ import annotations

import json
from dataclasses import dataclass
from functools import cache
from importlib.util import find_spec
from pathlib import Path
from typing import Any

__all__ = ["VIEWS", "Stroke", "View", "outline"]


@dataclass(frozen=True, slots=True, kw_only=True)
class View:
    """One way of looking at the brain.

    Parameters
    ----------
    name : str
        "side", "back" or "top", as the file is called.
    words : str
        For a reader.
    across, up : int
        Which of x, y, z runs to the right and which upwards.
    scale, shift : (float, float)
        Drawing units to mm: mm = scale * units + shift.
    frame : (float, float, float, float), mm
        Left, bottom, width and height of what is shown.
    """

    name: str
    words: str
    across: int
    up: int
    scale: tuple[float, float]
    shift: tuple[float, float]
    frame: tuple[float, float, float, float]


VIEWS = (
    View(
        name="side",
        words="from the side, front to the right",
        across=1,
        up=2,
        scale=(0.38, 0.38),
        shift=(-108, -70),
        frame=(-112, -76, 194, 164),
    ),
    View(
        name="back",
        words="from behind, left on the left",
        across=0,
        up=2,
        scale=(0.39, 0.39),
        shift=(-73, -73),
        frame=(-80, -76, 160, 164),
    ),
    View(
        name="top",
        words="from above, left on the left, front upwards",
        across=0,
        up=1,
        scale=(0.36, 0.37),
        shift=(-71, -107),
        frame=(-80, -112, 160, 194),
    ),
)
"""The placing is nilearn's, which was fitted to the MNI template by hand."""


@dataclass(frozen=True, slots=True)
class Stroke:
    """One path of an outline, x right and y down in mm, and whether it is the faint kind."""

    path: str
    faint: bool


@cache
def outline(view: View) -> tuple[Stroke, ...]:
    """Return the paths of a view, rounded to 0.1 mm.

    Parameters
    ----------
    view : View
        One of `VIEWS`.

    Returns
    -------
    tuple of Stroke
        Ready for SVG, where y runs downwards; empty where nilearn keeps its drawings elsewhere.

    Examples
    --------
    >>> outline(VIEWS[0])[0].path[:1]
    'M'
    """
    found = find_spec("nilearn")
    if found is None or found.origin is None:
        return ()
    file = Path(found.origin).parent / "plotting" / "glass_brain_files" / f"brain_schematics_{view.name}.json"
    if not file.is_file():
        return ()
    drawing = json.loads(file.read_text(encoding="utf-8"))
    pieces: dict[bool, list[str]] = {False: [], True: []}
    for path in drawing["paths"]:
        pieces[_is_faint(path["edgecolor"])].append(_joined(path["items"], view))
    return tuple(Stroke("".join(paths), faint) for faint, paths in pieces.items() if paths)


def _is_faint(colour: str) -> bool:
    """Tell the light grey inner lines from the dark contour."""
    return int(colour.lstrip("#")[:2], 16) > 0x80


def _joined(items: list[dict[str, Any]], view: View) -> str:
    """Return curves and segments as one path; a piece that starts where the last one ended goes on from it."""
    commands, last = [], ""
    for item in items:
        points = [_placed(point, view) for point in item["pts"]]
        if points[0] != last:
            commands.append(f"M{points[0]}")
        letter = {2: "L", 3: "Q", 4: "C"}[len(points)]
        commands.append(letter + " ".join(points[1:]))
        last = points[-1]
    return "".join(commands)


def _placed(point: list[float], view: View) -> str:
    """Return a drawing point in mm, y downwards."""
    x = view.scale[0] * point[0] + view.shift[0]
    y = -(view.scale[1] * point[1] + view.shift[1])
    return f"{round(x, 1) + 0.0:g},{round(y, 1) + 0.0:g}"
