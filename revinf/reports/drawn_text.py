"""Text in a picture: shown as it is written, in glyphs that the font has, and fitted to the room by measure."""

from __future__ import annotations

from functools import lru_cache
from textwrap import wrap
from typing import Any

from revinf.reports.cells import one_line

__all__ = ["drawable", "fitted"]

_NO_GLYPH = "\u25af"
"""Stands for a character that the drawing library's own font lacks; no other font can be counted on."""


def drawable(text: str) -> str:
    r"""Return one line that the drawing library shows as it is.

    Parameters
    ----------
    text : str
        Of a stranger: a dollar sign would start a formula, an unknown script would print warnings.

    Returns
    -------
    str
        With a white box for every character that the font lacks.

    Examples
    --------
    >>> drawable("two\nlines for $5"), drawable("\u6050\u6016 fear")
    ('two lines for \\$5', '▯▯ fear')
    """
    known = _glyphs()
    shown = "".join(character if ord(character) in known else _NO_GLYPH for character in one_line(text))
    return shown.replace("$", r"\$")


@lru_cache(maxsize=1)
def _glyphs() -> frozenset[int]:
    """Return the code points that the font of our pictures has."""
    from matplotlib.font_manager import FontProperties, findfont, get_font

    return frozenset(get_font(findfont(FontProperties(family="DejaVu Sans"))).get_charmap())


def fitted(figure: Any, text: str, size: float, *, width: float, lines: int, weight: str = "normal") -> str:
    """Return text broken into lines that fit a width, shortened with an ellipsis where there are too many.

    Parameters
    ----------
    figure : matplotlib.figure.Figure
        It is to stand in.
    text : str
        What to write; `drawable` is applied here.
    size : float, points
        Of the letters.
    width : float
        As a share of the figure's width.
    lines : int
        At most.
    weight : str
        "normal" or "bold".

    Returns
    -------
    str
        At most `lines` lines, each within `width` as measured, not as counted.

    Examples
    --------
    >>> from matplotlib.figure import Figure
    >>> print(fitted(Figure(figsize=(4, 3)), "a question of several words", 20, width=0.5, lines=2))
    a question of
    several words
    """
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.font_manager import FontProperties

    renderer: Any = FigureCanvasAgg(figure).get_renderer()  # type: ignore[no-untyped-call]
    font = FontProperties(size=size, weight=weight)
    room = width * figure.bbox.width
    shown = drawable(text).replace(r"\$", "$")

    def measured(line: str) -> float:
        return float(renderer.get_text_width_height_descent(line, font, ismath=False)[0])

    # Letters differ in width; start from more of them than an average line holds and let the measure decide.
    whole = max(1.0, measured(shown))
    for letters in range(max(4, int(1.3 * room / whole * len(shown)) + 4), 3, -1):
        broken = wrap(shown, letters, max_lines=lines, placeholder="…")
        if all(measured(line) <= room for line in broken):
            return "\n".join(broken).replace("$", r"\$")
    return "…"
