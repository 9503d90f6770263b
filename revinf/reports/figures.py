"""What every picture shares: a quiet style, shapes beside colours, and writing a file as a whole.

Colours are from the palette of Okabe and Ito, told apart by colour-blind readers; every difference is
also one of shape or position, so that greyscale print loses nothing.
"""

from __future__ import annotations

import os
from pathlib import Path
from typing import Any

from revinf.exceptions import InputFileError
from revinf.whole_file import replacing_file

__all__ = ["ACCENT", "INK", "MUTED", "new_figure", "ratio_axis", "write_figure"]

INK, MUTED, ACCENT = "#222222", "#8a8a8a", "#0072b2"
FORMATS = (".png", ".svg", ".pdf")


def new_figure(width: float, height: float, rows: int = 1, columns: int = 1, **grid: Any) -> tuple[Any, Any]:
    """Return a figure and its axes, sizes in inches, in our style.

    Parameters
    ----------
    width, height : float, inches
        Of the whole figure.
    rows, columns : int
        Of axes.
    **grid
        For the grid of axes, such as ``width_ratios``.

    Returns
    -------
    matplotlib.figure.Figure, axes
        Without any global state: nothing is left open.
    """
    from matplotlib.figure import Figure

    figure = Figure(figsize=(width, height), dpi=160, layout="constrained")
    axes = figure.subplots(rows, columns, gridspec_kw=grid or None)
    for axis in [axes] if rows * columns == 1 else axes.ravel():
        axis.spines[["top", "right"]].set_visible(False)
        axis.tick_params(labelsize=9, colors=INK)
    return figure, axes


def ratio_axis(axis: Any) -> None:
    """Make the x axis one of ratios: logarithmic, with a line at 1 and plain numbers that leave room.

    Parameters
    ----------
    axis : matplotlib.axes.Axes
        Everything is drawn and the limits are final.
    """
    from matplotlib.ticker import LogLocator, NullFormatter

    axis.axvline(1, color=INK, lw=1)
    axis.set_xscale("log")
    low, high = axis.get_xlim()
    axis.xaxis.set_major_locator(LogLocator(subs=(1.0, 2.0, 5.0) if high < 200 * low else (1.0,)))
    axis.xaxis.set_major_formatter(lambda x, _: f"{x:g}")
    axis.xaxis.set_minor_formatter(NullFormatter())


def write_figure(figure: Any, path: str | Path, *, title: str) -> Path:
    """Write a figure as a whole or not at all.

    Parameters
    ----------
    figure : matplotlib.figure.Figure
        Drawn.
    path : path
        Ends in .png, .svg or .pdf.
    title : str
        Told to screen readers and search, in the file's metadata.

    Returns
    -------
    pathlib.Path
        The file.

    Raises
    ------
    InputFileError
        If the ending is another one, or the file cannot be written.
    """
    import matplotlib

    path = Path(path)
    kind = path.suffix.lower()
    if kind not in FORMATS:
        raise InputFileError(f"a picture ends in {', '.join(FORMATS)}, but got {path.suffix!r}", path=path)
    # No clock and no random ids in the file: the same answer gives the same bytes.
    metadata: dict[str, Any] = {"Title": title}
    metadata |= {".svg": {"Date": None}, ".pdf": {"CreationDate": None}}.get(kind, {"Software": None})
    beside = path.with_name(f".{path.stem}.part-{os.getpid()}{kind}")
    with (
        replacing_file(path, beside, "choose another place"),
        matplotlib.rc_context({"svg.hashsalt": "revinf", "svg.fonttype": "none"}),
    ):
        figure.savefig(beside, metadata=metadata)
    return path
