"""What an import reads and how: the options of `revinf build` that concern the files themselves."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path
from typing import Literal

__all__ = ["ImportOptions", "Progress"]

Progress = Callable[[str, int], None]
"""Called with what is being done and how many rows are through."""


@dataclass(frozen=True, slots=True, kw_only=True)
class ImportOptions:
    """What to read and how.

    Parameters
    ----------
    peaks, annotations : pathlib.Path
        The two tables.
    studies : pathlib.Path, optional
        One row a study.
    rename : dict
        Our name of a column to the files' name of it.
    group : str, optional
        Column whose equal values are one unit of counting (several experiments of one paper).
    sign : {"all", "positive", "negative"}
        Which peaks count, by the sign of their statistic.
    min_weight : float, optional
        Smallest weight of an annotation that counts; left out, every weight above 0.
    space : str, optional
        Space of all coordinates, over what the table says.
    transform : str
        Which published Talairach transform fits; see `revinf.spaces.transforms`.
    keep_empty : bool
        Keep studies without peaks as real null results.
    """

    peaks: Path
    annotations: Path
    studies: Path | None = None
    rename: dict[str, str] = field(default_factory=dict)
    group: str | None = None
    sign: Literal["all", "positive", "negative"] = "all"
    min_weight: float | None = None
    space: str | None = None
    transform: str = "pooled"
    keep_empty: bool = False
