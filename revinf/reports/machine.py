"""Strict JSON on stdout, for machines."""

from __future__ import annotations

import json
import sys
from typing import Any

__all__ = ["print_json"]


def print_json(content: Any) -> None:
    """Print plain data as JSON; NaN and Infinity are refused, since they are not JSON.

    Parameters
    ----------
    content : dict or list
        Plain data.

    Raises
    ------
    ValueError
        If a number is not finite.

    Examples
    --------
    >>> print_json({"a": [1.5, None]})
    {
      "a": [
        1.5,
        null
      ]
    }
    """
    sys.stdout.write(json.dumps(content, indent=2, ensure_ascii=False, allow_nan=False) + "\n")
