"""A claim: activity in a region is taken as a sign of a process."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Literal

from revinf.exceptions import InvalidClaimError, InvalidProbabilityError, SpaceError
from revinf.knowledge import normalise_term
from revinf.spaces.coordinates import normalise_space, round_mm
from revinf.spaces.spheres import Sphere, sphere
from revinf.spaces.transforms import talairach_to_mni
from revinf.stats.estimates import check_probability

__all__ = ["DEFAULT_PRIOR", "DEFAULT_RADIUS_MM", "Claim", "Point", "parsed_prior"]

Point = tuple[float, float, float]

DEFAULT_RADIUS_MM = 10.0
DEFAULT_PRIOR = 0.5


@dataclass(frozen=True, slots=True, kw_only=True)
class Claim:
    """Activity in a region, taken as a sign that a process was engaged.

    Parameters
    ----------
    term : str
        The claimed process, as the literature names it.
    peaks : sequence of (x, y, z), mm
        Where the activity was; one point for a sphere.
    mask : path, optional
        An image whose non-zero voxels are the region, instead of a peak.
    region : str, optional
        The name of a region of a base-rate table, instead of a peak.
    radius_mm : float, mm, default 10
        Radius of the sphere around the peak.
    space : str, default "MNI152"
        Space in which the peaks are written: MNI152 or Talairach.
    transform : str, default "pooled"
        Which published transform fits peaks in Talairach space.
    prior : float or "prevalence", probability, default 0.5
        P(process engaged) before the activity was seen; "prevalence" takes the share of the studies that
        carry the term.
    quote, location : str, optional
        The sentence and where it stands.
    id : str, optional
        The claim's name in a list of claims.

    Raises
    ------
    InvalidClaimError
        If there is no term, or not exactly one of peak, mask and region.
    SpaceError
        If a coordinate or the radius is out of range, or space or transform is unknown.
    InvalidProbabilityError
        If the prior is not strictly between 0 and 1.

    Examples
    --------
    >>> claim = Claim(term="Theory_of_Mind", peaks=[(54, -54, 24)])
    >>> claim.term, claim.peaks, claim.radius_mm
    ('theory of mind', ((54.0, -54.0, 24.0),), 10.0)
    """

    term: str
    peaks: Sequence[Sequence[float]] = ()
    mask: str | Path | None = None
    region: str | None = None
    radius_mm: float = DEFAULT_RADIUS_MM
    space: str = "MNI152"
    transform: str = "pooled"
    prior: float | Literal["prevalence"] = DEFAULT_PRIOR
    quote: str = ""
    location: str = ""
    id: str = ""

    def __post_init__(self) -> None:
        term = normalise_term(self.term)
        if not term:
            raise InvalidClaimError("a claim needs a term; name the claimed process with --term")
        ways = [bool(len(self.peaks)), self.mask is not None, self.region is not None]
        if sum(ways) != 1:
            raise InvalidClaimError(
                f"a claim looks in exactly one place, but got {sum(ways)}; give a peak, a mask, or a region "
                "of a table"
            )
        if len(self.peaks) > 1:
            raise InvalidClaimError(
                f"a claim about several places at once ({len(self.peaks)} peaks) cannot be assessed yet; "
                "check one --peak at a time"
            )
        if self.prior != "prevalence":
            prior = check_probability(
                self.prior, "prior", "use 0.5 for even odds, 0.99 for near-certainty, or prevalence"
            )
            object.__setattr__(self, "prior", prior)
        space = normalise_space(self.space)
        talairach_to_mni((0.0, 0.0, 0.0), self.transform)  # an unknown name fails even where none is needed
        points = tuple(self._checked(point) for point in self.peaks)
        for name, value in (("term", term), ("peaks", points), ("space", space)):
            object.__setattr__(self, name, value)
        self.sphere_at((0.0, 0.0, 0.0))  # the radius is checked even where no sphere is wanted

    def _checked(self, point: Sequence[float]) -> Point:
        """Return one peak as three rounded millimetres."""
        values = tuple(point)
        if len(values) != 3:
            raise SpaceError(f"a peak must have x, y and z in mm, but got {len(values)} numbers")
        x, y, z = round_mm(values).tolist()
        return (x, y, z)

    def mni_peaks(self) -> tuple[Point, ...]:
        """Return the peaks in MNI152 space, mm, rounded to 0.1 mm."""
        if self.space == "MNI152":
            return tuple((x, y, z) for x, y, z in self.peaks)
        moved = (round_mm(talairach_to_mni(point, self.transform)).tolist() for point in self.peaks)
        return tuple((x, y, z) for x, y, z in moved)

    def sphere_at(self, point: Sequence[float]) -> Sphere:
        """Return the claim's sphere around a point in mm, MNI152."""
        return sphere(point, self.radius_mm)


def parsed_prior(text: str) -> float | Literal["prevalence"]:
    """Return a prior as somebody typed it: a probability, or the word prevalence.

    Parameters
    ----------
    text : str
        What was typed.

    Returns
    -------
    float or "prevalence"
        Its range is checked by the claim.

    Raises
    ------
    InvalidProbabilityError
        If it is neither a number nor the word.

    Examples
    --------
    >>> parsed_prior("0.3"), parsed_prior(" Prevalence ")
    (0.3, 'prevalence')
    """
    word = text.strip().lower()
    if word == "prevalence":
        return "prevalence"
    try:
        return float(word)
    except ValueError:
        raise InvalidProbabilityError(
            f"prior must be a probability or the word prevalence, but got {text!r}; use 0.5 for even odds"
        ) from None
