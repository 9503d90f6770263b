"""Does the answer survive other reasonable choices? The same claim, asked again with one choice changed."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import asdict, dataclass, replace
from typing import Any

import numpy as np

from revinf.base_rates.study_level import StudyLevel
from revinf.evidence.asked_region import Point
from revinf.evidence.claim import Claim
from revinf.evidence.grading import Direction, direction_of, headline_grade
from revinf.evidence.ratio_settings import RatioSettings
from revinf.evidence.sources import Answer, LiteratureSource, Source
from revinf.exceptions import SpaceError
from revinf.stats.bayes import posterior_estimate
from revinf.stats.estimates import Counts, Estimate
from revinf.stats.ratio import RatioPrior

__all__ = [
    "JITTERS_MM",
    "PRIORS",
    "RADII_MM",
    "Asked",
    "Influence",
    "Robustness",
    "RobustnessRow",
    "robustness_of",
]

RADII_MM = (4.0, 6.0, 8.0, 10.0, 12.0, 15.0, 20.0)
PRIORS = (0.05, 0.1, 0.25, 0.5, 0.75, 0.9, 0.95)
JITTERS_MM = (2.0, 4.0)
"""A peak is known to about a voxel's size, and smoothing moves it as much (common practice, no source)."""

_RATIO_PRIORS: tuple[tuple[str, RatioPrior, float], ...] = (
    ("shared, 1/5 to 5", "shared", 5.0),
    ("shared, 1/20 to 20", "shared", 20.0),
    ("shared, 1/100 to 100", "shared", 100.0),
    ("independent rates", "independent", 20.0),
)


@dataclass(frozen=True, slots=True, kw_only=True)
class RobustnessRow:
    """One other choice and its answer; `holds` tells whether direction and headline grade stay."""

    choice: str
    setting: str
    counts: Counts
    ratio: Estimate | None
    direction: Direction | None
    headline_grade: str | None
    posterior: Estimate | None
    holds: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Influence:
    """The study, or group of studies, whose absence changes the ratio most."""

    name: str
    alike: int
    counts: Counts
    ratio: Estimate | None
    direction: Direction | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Robustness:
    """All other choices; rows that a source cannot answer are missing."""

    rows: tuple[RobustnessRow, ...]
    left_out: Influence | None
    direction_changes_without_one: bool

    def of(self, choice: str) -> list[RobustnessRow]:
        """Return the rows of one choice."""
        return [row for row in self.rows if row.choice == choice]

    def holds(self) -> dict[str, bool]:
        """Return, for each choice, whether the answer holds over all its settings."""
        names = dict.fromkeys(row.choice for row in self.rows)
        return {name: all(row.holds for row in self.of(name)) for name in names}

    def to_dict(self) -> dict[str, Any]:
        """Return the rows, over which choices the answer holds, and the largest influence, as plain data."""
        return {
            "holds": self.holds(),
            "rows": [asdict(row) for row in self.rows],
            "largest_influence": None if self.left_out is None else asdict(self.left_out),
            "direction_changes_without_one": self.direction_changes_without_one,
        }


@dataclass(frozen=True, slots=True, kw_only=True)
class Asked:
    """What the robustness of an answer is held against."""

    claim: Claim
    counts: Counts
    prior: float
    settings: RatioSettings


def robustness_of(asked: Asked, source: Source, answer: Answer, kin: Sequence[int] = ()) -> Robustness:
    """Ask a claim again with one choice changed at a time.

    Parameters
    ----------
    asked : Asked
        The claim, its counts, and how its ratio was estimated.
    source : Source
        Where it was counted; only a literature can be asked about other radii, peaks and spaces.
    answer : Answer
        What the source said.
    kin : sequence of int
        Positions of the kin terms, whose studies are left out of the others in one row.

    Returns
    -------
    Robustness
        Every row solved.
    """
    claim, studies = asked.claim, answer.studies
    plans: list[_Plan] = []
    if isinstance(source, LiteratureSource) and claim.peaks:
        for choice, setting, base, change in _moved(claim):
            try:
                counts = source.studies(replace(base, **change), absent=claim.absent).counts(claim.term)
            except SpaceError:  # a peak at the far end of space, moved out of it
                continue
            plans.append(_Plan(choice, setting, counts))
    plans += [_Plan("prior", f"{prior:g}", asked.counts, prior=prior) for prior in PRIORS]
    plans += [
        _Plan(
            "prior of the ratio",
            name,
            asked.counts,
            settings=replace(asked.settings, ratio_prior=prior, ratio_limit=limit),
        )
        for name, prior, limit in _RATIO_PRIORS
    ]
    if studies is not None and len(kin):
        flags = np.zeros(studies.literature.n_terms, dtype=bool)
        flags[list(kin)] = True
        plans.append(_Plan("kin", "left out of the others", studies.without_kin(claim.term, flags)))
    influence, changes = _leave_one_out(asked, studies)
    return Robustness(rows=tuple(_solve(asked, plans)), left_out=influence, direction_changes_without_one=changes)


@dataclass(frozen=True, slots=True)
class _Plan:
    """A row to be solved; what is None is as asked."""

    choice: str
    setting: str
    counts: Counts
    prior: float | None = None
    settings: RatioSettings | None = None


def _moved(claim: Claim) -> Iterable[tuple[str, str, Claim, dict[str, Any]]]:
    """Yield the claim and what to change: other radii, the other space, and shifted peaks."""
    for radius in RADII_MM:
        yield "radius", f"{radius:g} mm", claim, {"radius_mm": radius}
    other = "Talairach" if claim.space == "MNI152" else "MNI152"
    yield "space", f"read as {other}", claim, {"space": other}
    here = replace(claim, peaks=claim.mni_peaks(), space="MNI152")
    for distance in JITTERS_MM:
        for axis, name in enumerate("xyz"):
            for sign in (-1, 1):
                moved = [_shifted(point, axis, sign * distance) for point in here.mni_peaks()]
                yield "peak", f"{name} {sign * distance:+g} mm", here, {"peaks": moved}


def _shifted(point: Point, axis: int, distance: float) -> Point:
    """Return a point moved along one axis."""
    moved = list(point)
    moved[axis] += distance
    return (moved[0], moved[1], moved[2])


def _solve(asked: Asked, plans: list[_Plan]) -> Iterable[RobustnessRow]:
    """Yield the solved rows; equal tables under equal settings are solved once."""
    by_settings: dict[RatioSettings, list[Counts]] = {asked.settings: [asked.counts]}
    for plan in plans:
        by_settings.setdefault(plan.settings or asked.settings, []).append(plan.counts)
    solved = {
        settings: dict(zip(tables, settings.solve_all(tables), strict=True)) for settings, tables in by_settings.items()
    }
    base = solved[asked.settings][asked.counts]
    for plan in plans:
        ratio = solved[plan.settings or asked.settings][plan.counts]
        yield RobustnessRow(
            choice=plan.choice,
            setting=plan.setting,
            counts=plan.counts,
            ratio=ratio,
            direction=None if ratio is None else direction_of(ratio),
            headline_grade=None if ratio is None else headline_grade(ratio),
            posterior=posterior_estimate(asked.prior if plan.prior is None else plan.prior, ratio),
            holds=_same(base, ratio),
        )


def _same(base: Estimate | None, other: Estimate | None) -> bool:
    """Tell whether two ratios have the same direction and headline grade."""
    if base is None or other is None:
        return base is other
    return direction_of(base) == direction_of(other) and headline_grade(base) == headline_grade(other)


def _leave_one_out(asked: Asked, studies: StudyLevel | None) -> tuple[Influence | None, bool]:
    """Return whose absence changes the ratio most, and whether any changes the direction.

    Studies of one group leave together. Only a few distinct tables arise, so each is solved once.
    """
    if studies is None:
        return None, False
    names, groups = studies.groups()
    has_term = studies.carries(asked.claim.term)
    cell = np.where(has_term, np.where(studies.is_hit, 0, 1), np.where(studies.is_hit, 2, 3))
    lost = np.zeros((len(names), 4), dtype=np.int64)
    np.add.at(lost, (groups[studies.counted], cell[studies.counted]), 1)
    distinct, first, inverse = np.unique(lost, axis=0, return_index=True, return_inverse=True)
    tables = [Counts(*(np.array(asked.counts.as_tuple()) - row).tolist()) for row in distinct]
    solved = asked.settings.solve_all([asked.counts, *tables])
    base, others = solved[0], solved[1:]
    if base is None:
        return None, False
    moves = [0.0 if other is None else abs(float(np.log(other.estimate / base.estimate))) for other in others]
    strongest = int(np.argmax(moves))
    winner = others[strongest]
    changes = any(other is not None and direction_of(other) != direction_of(base) for other in others)
    influence = Influence(
        name=names[int(first[strongest])],
        alike=int(np.count_nonzero(inverse.reshape(-1) == strongest)),
        counts=tables[strongest],
        ratio=winner,
        direction=None if winner is None else direction_of(winner),
    )
    return influence, changes
