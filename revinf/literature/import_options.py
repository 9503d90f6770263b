"""What an import reads and how: the options of `revinf build` that concern the files themselves."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from math import isfinite
from pathlib import Path
from typing import Any, Literal, cast

from revinf.exceptions import InvalidClaimError
from revinf.spaces.transforms import TRANSFORMS

__all__ = ["SIGNS", "ImportOptions", "Progress", "Sign", "import_options"]

Sign = Literal["all", "positive", "negative"]
SIGNS: tuple[str, ...] = ("all", "positive", "negative")

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
    sign: Sign = "all"
    min_weight: float | None = None
    space: str | None = None
    transform: str = "pooled"
    keep_empty: bool = False


def import_options(*, sign: str = "all", **rest: Any) -> ImportOptions:
    """Return import options as somebody typed them, checked.

    Parameters
    ----------
    sign : str
        "all", "positive" or "negative".
    **rest
        As for `ImportOptions`.

    Returns
    -------
    ImportOptions
        Checked.

    Raises
    ------
    InvalidClaimError
        If a word is not one of those allowed, or the weight is not a number.

    Examples
    --------
    >>> import_options(peaks=Path("p.csv"), annotations=Path("a.csv"), sign="positive").sign
    'positive'
    """
    transform = rest.get("transform", "pooled")
    for name, value, known in (("sign", sign, SIGNS), ("transform", transform, TRANSFORMS)):
        if value not in known:
            raise InvalidClaimError(f"{name} must be one of {', '.join(known)}, but got {value!r}")
    weight = rest.get("min_weight")
    if weight is not None and not isfinite(weight):
        raise InvalidClaimError(f"the smallest weight must be a number, but got {weight!r}; use 0.001")
    return ImportOptions(sign=cast("Sign", sign), **rest)
