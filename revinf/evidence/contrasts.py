"""The same claim seen four other ways: by reporting volume, within a context, in the mirror, place by place."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from revinf.base_rates.study_level import StudyLevel
from revinf.evidence.asked_region import Point
from revinf.evidence.claim import Claim
from revinf.evidence.ratio_settings import RatioSettings
from revinf.evidence.sources import LiteratureSource
from revinf.stats.estimates import Counts, Estimate
from revinf.stats.product import product_of_ratios
from revinf.stats.ratio import observed_ratio
from revinf.stats.stratified import mantel_haenszel_ratio, quintile_strata

__all__ = [
    "Context",
    "Mirror",
    "Pattern",
    "PatternRegion",
    "ReportingVolume",
    "context_of",
    "mirror_of",
    "pattern_of",
    "reporting_volume",
]


@dataclass(frozen=True, slots=True, kw_only=True)
class ReportingVolume:
    """Formula 10: the ratio within fifths of the studies by number of peaks, beside the crude one."""

    crude_ratio: float | None
    adjusted_ratio: Estimate | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Context:
    """Formula 11: the claim within the studies that carry any of the context's terms."""

    n_studies: int
    counts: Counts
    ratio: Estimate | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Mirror:
    """The same claim on the other side; of the term's studies, those that hit one side only."""

    counts: Counts
    ratio: Estimate | None
    this_side_only: int
    other_side_only: int


@dataclass(frozen=True, slots=True, kw_only=True)
class PatternRegion:
    """One place of a pattern alone."""

    peak: Point
    counts: Counts
    ratio: Estimate | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Pattern:
    """Formula 12: the places together, and what multiplying them as if independent would claim.

    `discounted` is the product raised to the exponent that a calibration of the literature gave.
    """

    regions: tuple[PatternRegion, ...]
    joint: Estimate | None
    joint_hits: int
    product: float
    overstatement: float | None
    discount: float | None = None
    discounted: float | None = None


def reporting_volume(term: str, studies: StudyLevel, counts: Counts, settings: RatioSettings) -> ReportingVolume:
    """Adjust the ratio for how many peaks the studies report.

    Parameters
    ----------
    term : str
        The claimed term.
    studies : StudyLevel
        The studies and which of them hit.
    counts : Counts
        Of the claimed term.
    settings : RatioSettings
        Level of the interval.

    Returns
    -------
    ReportingVolume
        Crude and Mantel-Haenszel ratio.
    """
    stratum = quintile_strata(studies.literature.study_n_peaks)
    has_term = studies.carries(term)
    strata = [studies.table(has_term, studies.is_hit, within=stratum == level) for level in np.unique(stratum)]
    return ReportingVolume(
        crude_ratio=observed_ratio(counts), adjusted_ratio=mantel_haenszel_ratio(strata, level=settings.level)
    )


def context_of(term: str, terms: Sequence[str], studies: StudyLevel, settings: RatioSettings) -> Context:
    """Count again within a context.

    Parameters
    ----------
    term : str
        The claimed term.
    terms : sequence of str
        The context.
    studies : StudyLevel
        The studies and which of them hit.
    settings : RatioSettings
        How the ratio is estimated.

    Returns
    -------
    Context
        Reduced counts and their ratio.

    Raises
    ------
    UnknownTermError
        If a context term labels no counted study.

    References
    ----------
    Hutzler 2014, NeuroImage 84:1061-1069.
    """
    within = studies.restricted_to(terms)
    counts = within.counts(term)
    return Context(n_studies=within.n_studies, counts=counts, ratio=settings.solve(counts))


def mirror_of(claim: Claim, source: LiteratureSource, studies: StudyLevel, settings: RatioSettings) -> Mirror:
    """Ask the same claim at -x.

    Parameters
    ----------
    claim : Claim
        With one peak.
    source : LiteratureSource
        Where to count.
    studies : StudyLevel
        The studies that hit this side.
    settings : RatioSettings
        How the ratio is estimated.

    Returns
    -------
    Mirror
        The other side's counts and ratio.
    """
    (x, y, z), *_ = claim.mni_peaks()
    opposite = replace(claim, peaks=[(-x, y, z)], space="MNI152")
    there = source.studies(opposite, absent=claim.absent)
    has_term = studies.carries(claim.term)
    counts = there.counts(claim.term)
    return Mirror(
        counts=counts,
        ratio=settings.solve(counts),
        this_side_only=int(np.count_nonzero(has_term & studies.is_hit & ~there.is_hit)),
        other_side_only=int(np.count_nonzero(has_term & there.is_hit & ~studies.is_hit)),
    )


def pattern_of(
    claim: Claim, source: LiteratureSource, joint: Estimate | None, joint_hits: int, settings: RatioSettings
) -> Pattern:
    """Set the joint answer beside the product of the single ones.

    Parameters
    ----------
    claim : Claim
        With several peaks.
    source : LiteratureSource
        Where to count.
    joint : Estimate or None
        Ratio of the studies that hit every place.
    joint_hits : int
        Their number.
    settings : RatioSettings
        How ratios are estimated.

    Returns
    -------
    Pattern
        Single places, product, and how far it overstates.
    """
    tables = [
        source.studies(replace(claim, peaks=[peak], space="MNI152"), absent=claim.absent).counts(claim.term)
        for peak in claim.mni_peaks()
    ]
    ratios = settings.solve_all(tables)
    product = product_of_ratios(tables)
    overstatement = None
    if joint is not None:
        # How much further from 1 than the joint estimate, on its side of 1.
        overstatement = product / joint.estimate if product >= 1 else joint.estimate / product
    kept = source.literature.discount
    discount = kept[0] if kept is not None and kept[1] == claim.radius_mm and not claim.absent else None
    return Pattern(
        regions=tuple(
            PatternRegion(peak=peak, counts=table, ratio=ratio)
            for peak, table, ratio in zip(claim.mni_peaks(), tables, ratios, strict=True)
        ),
        joint=joint,
        joint_hits=joint_hits,
        product=product,
        overstatement=overstatement,
        discount=discount,
        discounted=None if discount is None else product**discount,
    )
