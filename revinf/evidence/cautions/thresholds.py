"""Where each caution begins, with the reason; the one place that holds these numbers."""

from __future__ import annotations

import tomllib
from dataclasses import dataclass, fields
from pathlib import Path
from typing import Any

from revinf.exceptions import InputFileError

__all__ = ["Thresholds", "read_thresholds"]

_LARGEST = 1e15


@dataclass(frozen=True, slots=True, kw_only=True)
class Thresholds:
    """Where each caution begins. All are our own choices, made on open coordinates unless said otherwise.

    Parameters
    ----------
    thin_weigh, thin_stop : float, ratio
        High over low end of the likelihood ratio. Ten: an interval as wide as a whole grade and more.
        Fifty: it spans from "positive" past "strong".
    prior_distance : float, probability
        How far from 1/2 a prior must be for an undecided posterior to look like a finding.
    off_brain_mm : float, mm
        Distance outside the brain mask that no smoothing explains (common practice, no source).
    far_share : float
        Share of the table's radius beyond which its nearest place answers for another neighbourhood.
    rival_weigh, rival_stop : float, probability
        Probability that the claimed process leads its best rival. One in five: the rival is the better
        bet; one in twenty: the usual mark of a decided comparison.
    broad_percentile : float, percent
        Activation percentile: the busiest twentieth of the grey matter.
    broad_share : float
        Low end of the effective number of processes over their number: more than half serve alike.
    broad_hits : int
        Hits below which diversity looks falsely small.
    radii_estimate : tuple of float, mm
        Radii at which the estimate must stay inside the interval.
    radii_interval : tuple of float, mm
        Neighbouring radii at which the answer should stay decided.
    mirror_low : float, probability
        Between this and its complement the two sides cannot be told apart.
    volume_change : float, ratio
        Adjusted over crude ratio: a quarter either way.
    joint_hits : int
        Joint hits below which a pattern's own counts say little.
    context_studies, context_side : int
        Studies that a context must leave in all, and on either side.
    uneven_share : float
        Share of the studies that one process labels.
    uneven_effective : float
        Effective over plain number of processes in the literature.
    """

    thin_weigh: float = 10.0
    thin_stop: float = 50.0
    prior_distance: float = 0.2
    off_brain_mm: float = 4.0
    far_share: float = 0.5
    rival_weigh: float = 0.20
    rival_stop: float = 0.05
    broad_percentile: float = 95.0
    broad_share: float = 0.6
    broad_hits: int = 20
    radii_estimate: tuple[float, ...] = (6.0, 8.0, 12.0, 15.0)
    radii_interval: tuple[float, ...] = (8.0, 12.0)
    mirror_low: float = 0.1
    volume_change: float = 1.25
    joint_hits: int = 5
    context_studies: int = 30
    context_side: int = 5
    uneven_share: float = 0.4
    uneven_effective: float = 0.5


def read_thresholds(path: str | Path | None) -> Thresholds:
    """Read the user's own thresholds; those that are not named keep their defaults.

    Parameters
    ----------
    path : path or None
        A TOML file of ``name = number`` lines; None gives the defaults.

    Returns
    -------
    Thresholds
        Checked.

    Raises
    ------
    InputFileError
        If the file is not TOML, a name is unknown, or a value is not a number of the right kind.

    Examples
    --------
    >>> read_thresholds(None).thin_weigh
    10.0
    """
    if path is None:
        return Thresholds()
    path = Path(path)
    try:
        content = tomllib.loads(path.read_text(encoding="utf-8-sig"))
    # A number of thousands of digits is a plain ValueError, as are faults of encoding and of TOML.
    except (OSError, ValueError, RecursionError) as error:
        reason = getattr(error, "strerror", None) or " ".join(str(error).split())[:120]
        raise InputFileError(
            f"cannot be read as TOML ({reason}); write lines such as thin_weigh = 10", path=path
        ) from None
    defaults = {field.name: field.default for field in fields(Thresholds)}
    for name, value in content.items():
        if name not in defaults:
            raise InputFileError(f"there is no threshold {name!r}; use one of {', '.join(defaults)}", path=path)
        content[name] = _checked(name, value, defaults[name], path)
    return Thresholds(**content)


def _checked(name: str, value: Any, default: Any, path: Path) -> Any:
    """Return a value of the same kind as the default."""
    if isinstance(default, tuple):
        if isinstance(value, list) and all(_is_number(item) for item in value):
            return tuple(float(item) for item in value)
    elif _is_number(value) and (isinstance(default, float) or float(value).is_integer()):
        return type(default)(value)
    kind = "a list of numbers" if isinstance(default, tuple) else f"a number, such as {default}"
    raise InputFileError(f"threshold {name!r} must be {kind}, but got {value!r}", path=path)


def _is_number(value: Any) -> bool:
    """Tell whether a TOML value is a non-negative number of a size that a threshold can have."""
    return isinstance(value, (int, float)) and not isinstance(value, bool) and 0 <= value <= _LARGEST
