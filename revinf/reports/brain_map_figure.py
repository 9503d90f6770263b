"""The picture of a map: axial slices of the ratio, marked where its interval leaves out 1."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

from revinf.reports.drawn_text import drawable
from revinf.reports.figures import INK, new_figure, write_figure
from revinf.reports.numbers import count, probability

if TYPE_CHECKING:
    from revinf.evidence.brain_map import BrainMap

__all__ = ["write_brain_map_figure"]

_SLICES_MM = (-28, -16, -4, 8, 20, 32, 44, 56)


def write_brain_map_figure(found: BrainMap, path: str | Path) -> Path:
    """Draw eight axial slices.

    Parameters
    ----------
    found : BrainMap
        From `revinf.map_term`.
    path : path
        Ends in .png, .svg or .pdf.

    Returns
    -------
    pathlib.Path
        The file.

    Raises
    ------
    InputFileError
        If the file cannot be written.
    """
    from matplotlib.colors import LogNorm

    figure, axes = new_figure(11.0, 6.4, 2, 4)
    grid, ratio = found.grid_tenths / 10, found.values["ratio"]
    low, high = found.values["ratio-low"] > 1, found.values["ratio-high"] < 1
    limit = min(50.0, max(2.0, float(ratio.max()), float(1 / ratio.min())))
    size = 15.0 * found.spacing_mm / 4
    shown = None
    for axis, z in zip(axes.ravel(), _SLICES_MM, strict=True):
        here = abs(grid[:, 2] - z) < found.spacing_mm / 2 + 1e-9
        x, y = grid[here, 0], grid[here, 1]
        shown = axis.scatter(
            x, y, c=ratio[here], s=size, marker="s", lw=0, cmap="PuOr_r", norm=LogNorm(1 / limit, limit)
        )
        for flags, marker in ((low, "+"), (high, "_")):
            chosen = here & flags
            axis.scatter(grid[chosen, 0], grid[chosen, 1], s=size * 0.8, marker=marker, c=INK, lw=0.5)
        axis.set_xlim(-76, 76)
        axis.set_ylim(-110, 78)
        axis.set_aspect("equal")
        axis.set_title(f"z = {z}".replace("-", "−"), fontsize=9, loc="left")
        axis.set_axis_off()
    bar = figure.colorbar(shown, ax=axes, shrink=0.6, pad=0.01)
    bar.set_label("likelihood ratio;  + interval above 1,  − below 1", fontsize=9)
    facts = found.literature
    invented = "   INVENTED DATA" if facts.invented else ""
    figure.suptitle(
        f"{drawable(found.term[:60])}: {count(found.n_term)} of {count(found.n_term + found.n_other)} "
        f"{drawable(facts.study_is)}, {drawable(facts.name[:40])}{invented}\n"
        f"spheres of {found.radius_mm:g} mm every {found.spacing_mm:g} mm of grey matter; "
        f"left is left; highest posterior {probability(float(found.values['posterior'].max()))} at prior "
        f"{probability(found.prior)}",
        fontsize=10,
        x=0.01,
        ha="left",
    )
    return write_figure(figure, path, title=f"Likelihood ratio of {found.term}")
