"""`Caution`: one warning about a claim."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, Literal

__all__ = ["Caution", "Severity"]

Severity = Literal["stop", "weigh", "note"]
"""stop: settle this first; weigh: the answer is weaker than it looks; note: know it."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Caution:
    """A warning attached to an assessment.

    Parameters
    ----------
    code : str
        Stable name; never reused for another meaning.
    severity : {"stop", "weigh", "note"}
        How much attention it needs.
    message : str
        One sentence for the reader, with its numbers.
    evidence : mapping
        The numbers behind it, by name.

    Examples
    --------
    >>> Caution(code="invented-data", severity="stop", message="Invented.").to_dict()["severity"]
    'stop'
    """

    code: str
    severity: Severity
    message: str
    evidence: Mapping[str, Any] = field(default_factory=dict)

    def to_dict(self) -> dict[str, Any]:
        """Return the caution as plain data."""
        return {
            "code": self.code,
            "severity": self.severity,
            "message": self.message,
            "evidence": dict(self.evidence),
        }
