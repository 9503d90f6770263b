"""What would settle a claim, as frozen data and as the JSON of schema revinf/settlement/1."""

from __future__ import annotations

from dataclasses import asdict, dataclass
from typing import Any

from revinf.evidence.asked_region import Point
from revinf.evidence.parts import LiteratureFacts
from revinf.stats.estimates import Estimate

__all__ = ["Candidate", "Settlement", "SettlingPlace"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Candidate:
    """A process that the activity could speak for.

    Parameters
    ----------
    term : str
        Its name.
    n_studies, n_active : int
        Studies that carry it and none of the other candidates; those among them active at the claim's place.
    n_asked : int
        Studies that are asked where else they are active: those active at the claim's place, or, where these are
        fewer than `FEWEST`, all of them, as if the two places were independent under this process.
    probability : float
        Given the claim's activity, at even odds before it.
    """

    term: str
    n_studies: int
    n_active: int
    n_asked: int
    probability: float


@dataclass(frozen=True, slots=True, kw_only=True)
class SettlingPlace:
    """A place to look at, with what either outcome would do.

    Parameters
    ----------
    peak : (x, y, z), mm, MNI152
        Centre of the sphere.
    words : str
        Where it is.
    gain : Estimate, bits
        Expected fall in entropy over the candidates.
    active : tuple of int
        For each candidate, how many of the studies that were asked are active here.
    probability_active : float
        Of activity here, given the claim's.
    if_active, if_silent : tuple of float
        Each candidate's probability after either outcome.
    """

    peak: Point
    words: str
    gain: Estimate
    active: tuple[int, ...]
    probability_active: float
    if_active: tuple[float, ...]
    if_silent: tuple[float, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Settlement:
    """Where to look, best first; `left_out` names rivals with too few studies, and how many they have."""

    term: str
    peaks: tuple[Point, ...]
    radius_mm: float
    literature: LiteratureFacts
    candidates: tuple[Candidate, ...]
    entropy_bits: float
    places: tuple[SettlingPlace, ...]
    left_out: tuple[tuple[str, int], ...]
    level: float

    def to_dict(self) -> dict[str, Any]:
        """Return it as plain data of schema revinf/settlement/1."""
        return {
            "schema": "revinf/settlement/1",
            "term": self.term,
            "peaks": [list(peak) for peak in self.peaks],
            "radius_mm": self.radius_mm,
            "literature": self.literature.to_dict(),
            "candidates": [asdict(candidate) for candidate in self.candidates],
            "entropy_bits": self.entropy_bits,
            "places": [
                {**asdict(place), "peak": list(place.peak), "active": list(place.active)} for place in self.places
            ],
            "left_out": [{"term": term, "n_active": number} for term, number in self.left_out],
            "level": self.level,
        }
