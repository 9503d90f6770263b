"""Where a claim, or a reader, looks: peaks with a sphere each, a mask, or a region of a table."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from revinf.exceptions import InvalidClaimError, SpaceError
from revinf.spaces.coordinates import normalise_space, round_mm
from revinf.spaces.spheres import Sphere, sphere
from revinf.spaces.transforms import talairach_to_mni

__all__ = ["DEFAULT_RADIUS_MM", "AskedRegion", "Point"]

Point = tuple[float, float, float]

DEFAULT_RADIUS_MM = 10.0


@dataclass(frozen=True, slots=True, kw_only=True)
class AskedRegion:
    """A place to look at.

    Parameters
    ----------
    peaks : sequence of (x, y, z), mm
        Where the activity was; several form a pattern, which a study must hit everywhere.
    mask : path, optional
        An image whose non-zero voxels are the region, instead of peaks.
    region : str, optional
        The name of a region of a base-rate table, instead of peaks.
    radius_mm : float, mm, default 10
        Radius of the sphere around each peak.
    space : str, optional
        Space in which the peaks are written, MNI152 or Talairach; MNI152 where it is not stated.
    transform : str, default "pooled"
        Which published transform fits peaks in Talairach space.

    Raises
    ------
    InvalidClaimError
        If not exactly one of peaks, mask and region is given, or a peak stands twice.
    SpaceError
        If a coordinate or the radius is out of range, or space or transform is unknown.

    Examples
    --------
    >>> place = AskedRegion(peaks=[(54, -54, 24)], space="tal")
    >>> place.space, place.space_stated, place.mni_peaks()
    ('Talairach', True, ((59.2, -53.5, 26.5),))
    """

    peaks: Sequence[Sequence[float]] = ()
    mask: str | Path | None = None
    region: str | None = None
    radius_mm: float = DEFAULT_RADIUS_MM
    space: str | None = None
    transform: str = "pooled"
    space_stated: bool | None = None

    def __post_init__(self) -> None:
        ways = [bool(len(self.peaks)), self.mask is not None, self.region is not None]
        if sum(ways) != 1:
            raise InvalidClaimError(
                f"a claim looks in exactly one kind of place, but got {sum(ways)}; give peaks, a mask, or a "
                "region of a table"
            )
        if self.space_stated is None:
            object.__setattr__(self, "space_stated", self.space is not None)
        object.__setattr__(self, "space", normalise_space(self.space or "MNI152"))
        talairach_to_mni((0.0, 0.0, 0.0), self.transform)  # an unknown name fails even where none is needed
        points = tuple(_checked(point) for point in self.peaks)
        if len(set(points)) < len(points):
            raise InvalidClaimError("a peak of the pattern stands twice; give each place once")
        object.__setattr__(self, "peaks", points)
        self.sphere_at((0.0, 0.0, 0.0))  # the radius is checked even where no sphere is wanted

    def mni_peaks(self) -> tuple[Point, ...]:
        """Return the peaks in MNI152 space, mm, rounded to 0.1 mm."""
        if self.space == "MNI152":
            return tuple((x, y, z) for x, y, z in self.peaks)
        moved = (round_mm(talairach_to_mni(point, self.transform)).tolist() for point in self.peaks)
        return tuple((x, y, z) for x, y, z in moved)

    def sphere_at(self, point: Sequence[float]) -> Sphere:
        """Return the sphere of this radius around a point in mm, MNI152."""
        return sphere(point, self.radius_mm)


def _checked(point: Sequence[float]) -> Point:
    """Return one peak as three rounded millimetres."""
    values = tuple(point)
    if len(values) != 3:
        raise SpaceError(f"a peak must have x, y and z in mm, but got {len(values)} numbers")
    x, y, z = round_mm(values).tolist()
    return (x, y, z)
