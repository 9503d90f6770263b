"""What a calibration leaves with its literature: the discount of products of ratios.

`calibration.json` stands in the literature's folder beside its arrays; it is no part of the fingerprint, and it
holds only for the literature and the radius that it names.
"""

from __future__ import annotations

import json
import math
import os
from pathlib import Path
from typing import Any

from revinf.whole_file import replacing_file

__all__ = ["FILE", "keep_calibration", "kept_discount"]

FILE = "calibration.json"
_LIMIT = 20_000_000


def keep_calibration(folder: Path, content: dict[str, Any]) -> Path:
    """Write a calibration into its literature's folder, whole or not at all.

    Parameters
    ----------
    folder : pathlib.Path
        Of the literature.
    content : dict
        Plain data of schema revinf/calibration/1.

    Returns
    -------
    pathlib.Path
        The file.

    Raises
    ------
    InputFileError
        If it cannot be written.
    """
    target = folder / FILE
    beside = folder.parent / f".{folder.name}.calibration-{os.getpid()}"
    with replacing_file(target, beside, "use a literature folder of your own"):
        text = json.dumps(content, indent=1, ensure_ascii=False, allow_nan=False) + "\n"
        beside.write_text(text, encoding="utf-8")
    return target


def kept_discount(folder: Path, fingerprint: str) -> tuple[float, float] | None:
    """Return the exponent that a calibration left, and the radius it holds for.

    Parameters
    ----------
    folder : pathlib.Path
        Of the literature.
    fingerprint : str
        Of the literature; a calibration of another one is none.

    Returns
    -------
    (float, float mm) or None
        None where there is no calibration, or not a sound one: it only adds a line to an answer.
    """
    path = folder / FILE
    try:
        if path.is_symlink() or path.stat().st_size > _LIMIT:
            return None
        content = json.loads(path.read_text(encoding="utf-8"))
        exponent, radius = float(content["discount"]["exponent"]), float(content["radius_mm"])
        stated = content["literature"]["fingerprint"]
    except (OSError, ValueError, KeyError, TypeError, RecursionError):
        return None
    sound = math.isfinite(exponent) and 0 <= exponent <= 10 and math.isfinite(radius) and radius > 0
    return (exponent, radius) if sound and stated == fingerprint else None
