"""Where things stand in the page's drawings: curves, strips and brains as plain numbers and path strings.

All drawings are in units of 1/100 of their plot, so that the page can move a mark to a prior without knowing
more than the prior.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

from revinf.reports.glass_brain import VIEWS, View, outline
from revinf.reports.numbers import HasInterval

if TYPE_CHECKING:
    from revinf.evidence.audit import AuditedClaim

__all__ = ["brain_marks", "brain_views", "curve", "ratio_marks"]

_STEPS = 40
_DECADES = 2.0
"""Strips of ratios run from 1/100 to 100; what lies beyond is drawn at the end and marked."""


def curve(value: HasInterval) -> dict[str, str]:
    """Return posterior against prior as paths: the line, and the band between the ends of the interval.

    Parameters
    ----------
    value : Estimate
        The likelihood ratio.

    Returns
    -------
    dict
        "line" and "band": x = 100 prior, y = 100 (1 - posterior).

    Examples
    --------
    >>> from collections import namedtuple
    >>> curve(namedtuple("E", "estimate low high")(1.0, 0.5, 2.0))["line"][:11]
    'M0,100L2.5,'
    """
    line = _bend(value.estimate)
    band = [*_bend(value.high), *reversed(_bend(value.low))]
    return {"line": _path(line), "band": _path(band) + "Z"}


def _bend(ratio: float) -> list[tuple[float, float]]:
    """Return points of the curve, close together where it bends."""
    points = []
    for step in range(_STEPS + 1):
        share = step / _STEPS
        # Odds before spread around 1/sqrt(ratio), so that odds after spread around sqrt(ratio).
        before = share / (share + (1 - share) * math.sqrt(ratio))
        after = share * math.sqrt(ratio) / (share * math.sqrt(ratio) + (1 - share))
        points.append((100 * before, 100 - 100 * after))
    return points


def _path(points: Sequence[tuple[float, float]]) -> str:
    """Return an SVG path."""
    return "M" + "L".join(f"{round(x, 2) + 0.0:g},{round(y, 2) + 0.0:g}" for x, y in points)


def ratio_marks(value: HasInterval) -> dict[str, Any]:
    """Return where a ratio and its interval stand on a strip from 1/100 to 100, and whether an end is cut.

    Parameters
    ----------
    value : Estimate
        A ratio.

    Returns
    -------
    dict
        "low", "middle", "high" from 0 to 100; "cut_low", "cut_high".

    Examples
    --------
    >>> from collections import namedtuple
    >>> ratio_marks(namedtuple("E", "estimate low high")(1.0, 0.1, 500.0))
    {'low': 25.0, 'middle': 50.0, 'high': 100.0, 'cut_low': False, 'cut_high': True}
    """
    at = [100 * (math.log10(x) + _DECADES) / (2 * _DECADES) for x in (value.low, value.estimate, value.high)]
    kept = [round(min(100.0, max(0.0, x)), 2) for x in at]
    return {"low": kept[0], "middle": kept[1], "high": kept[2], "cut_low": at[0] < 0, "cut_high": at[2] > 100}


def brain_views() -> list[dict[str, Any]]:
    """Return the outlines, once for the whole page.

    Returns
    -------
    list of dict
        "name", "words", "box" (an SVG viewBox in mm, y downwards) and "strokes".
    """
    return [
        {
            "name": view.name,
            "words": view.words,
            "box": _box(view),
            "strokes": outline(view),
            "frame": view.frame,
        }
        for view in VIEWS
    ]


def _box(view: View) -> str:
    """Return the frame with y downwards."""
    left, bottom, width, height = view.frame
    return f"{left:g} {-(bottom + height):g} {width:g} {height:g}"


def brain_marks(item: AuditedClaim) -> list[dict[str, Any]]:
    """Return, for each view, the circles of a claim's spheres in mm; empty where the region has no peak.

    Parameters
    ----------
    item : AuditedClaim
        Its peaks are shown in MNI152, whatever they were given in.

    Returns
    -------
    list of dict
        "name" of the view, "box", and "circles" with "x", "y" (downwards) and "radius".
    """
    peaks = item.claim.mni_peaks()
    radius = item.claim.radius_mm
    if item.assessment is not None and item.assessment.claim.radius_mm is not None:
        radius = item.assessment.claim.radius_mm
    if not peaks:
        return []
    return [
        {
            "name": view.name,
            "box": _box(view),
            "circles": [
                {
                    "x": f"{peak[view.across]:g}",
                    "y": f"{-peak[view.up] + 0.0:g}",
                    "radius": f"{radius:g}",
                }
                for peak in peaks
            ],
        }
        for view in VIEWS
    ]
