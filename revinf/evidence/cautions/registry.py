"""All cautions of an assessment, most severe first."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction
from itertools import combinations
from typing import TYPE_CHECKING

from revinf.evidence.cautions.breadth import broad_region
from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.choices import mirror_equal, radius_sensitive, single_study, space_doubt
from revinf.evidence.cautions.counting import (
    absence_unsearched,
    busy_reporters,
    context_small,
    overlapping_regions,
    pattern_overstated,
)
from revinf.evidence.cautions.location import far_from_table, off_brain
from revinf.evidence.cautions.rivals import rival_ahead, rivals_tied
from revinf.evidence.cautions.sample import prior_driven, thin_evidence
from revinf.evidence.cautions.source import (
    invented_data,
    mixed_direction,
    own_study_counted,
    small_default,
    uneven_literature,
    ungrouped_studies,
)
from revinf.evidence.cautions.term import not_a_process
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.evidence.vocabulary import Vocabulary
from revinf.spaces.coordinates import to_tenths

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.claim import Claim

__all__ = ["CODES", "cautions_of"]

CODES = (
    "invented-data",
    "off-brain",
    "thin-evidence",
    "prior-driven",
    "not-a-process",
    "rival-ahead",
    "rivals-tied",
    "broad-region",
    "radius-sensitive",
    "single-study",
    "space-doubt",
    "mirror-equal",
    "busy-reporters",
    "pattern-overstated",
    "overlapping-regions",
    "absence-unsearched",
    "context-small",
    "own-study-counted",
    "far-from-table",
    "small-default",
    "uneven-literature",
    "ungrouped-studies",
    "mixed-direction",
    "term-unlabelled",
)
"""Every code, in the order in which equally severe cautions are shown; none is ever reused."""

_ORDER = ("stop", "weigh", "note")


def cautions_of(assessment: Assessment, claim: Claim, words: Vocabulary, limits: Thresholds) -> tuple[Caution, ...]:
    """Return the cautions that hold for an assessment.

    Parameters
    ----------
    assessment : Assessment
        Without its cautions.
    claim : Claim
        As it was asked.
    words : Vocabulary
        Kinds of terms.
    limits : Thresholds
        Where cautions begin.

    Returns
    -------
    tuple of Caution
        Most severe first; within a severity in the order of `CODES`.
    """
    families = (
        _of_place(assessment, limits),
        _of_evidence(assessment, words, limits),
        _of_rivals(assessment, limits),
        _of_choices(assessment, claim, limits),
        _of_counting(assessment, claim, limits),
        _of_source(assessment, limits),
    )
    held = [caution for family in families for caution in family if caution is not None]
    return tuple(sorted(held, key=lambda caution: (_ORDER.index(caution.severity), CODES.index(caution.code))))


def _of_place(assessment: Assessment, limits: Thresholds) -> Iterator[Caution | None]:
    """Judge where the region is."""
    place, table = assessment.place, assessment.place.table_region
    yield off_brain(place.tissue, place.outside_mm, place.grey_mm, limits)
    yield far_from_table(table.distance_mm if table else None, assessment.claim.radius_mm, limits)


def _of_evidence(assessment: Assessment, words: Vocabulary, limits: Thresholds) -> Iterator[Caution | None]:
    """Judge how much evidence there is, and of what."""
    ratio, term = assessment.likelihood_ratio.value, assessment.claim.term
    yield thin_evidence(assessment.counts, ratio, limits, absent=assessment.claim.absent)
    yield prior_driven(ratio, assessment.posterior.prior, limits)
    yield not_a_process(term, words.what(term))


def _of_rivals(assessment: Assessment, limits: Thresholds) -> Iterator[Caution | None]:
    """Judge what else the activity could mean."""
    term, chosen, breadth = assessment.claim.term, assessment.selectivity, assessment.breadth
    yield rival_ahead(term, chosen.best_rival, chosen.probability_ahead, limits, absent=assessment.claim.absent)
    yield rivals_tied(term, chosen.best_rival, chosen.probability_ahead, limits)
    yield broad_region(
        breadth.activation_percentile,
        breadth.effective_processes,
        breadth.n_processes,
        assessment.counts.active_total,
        limits,
    )


def _of_choices(assessment: Assessment, claim: Claim, limits: Thresholds) -> Iterator[Caution | None]:
    """Judge whether other choices would have answered otherwise."""
    ratio, robust = assessment.likelihood_ratio, assessment.robustness
    by_radius = {float(row.setting.split()[0]): row.ratio for row in robust.of("radius")}
    yield radius_sensitive(ratio.value, by_radius, limits)
    left_out = robust.left_out
    yield single_study(
        ratio.value,
        robust.direction_changes_without_one,
        left_out.name if left_out else None,
        assessment.literature.study_is,
    )
    for row in robust.of("space"):
        yield space_doubt(
            ratio.direction, row.direction, bool(claim.space_stated), row.setting.removeprefix("read as ")
        )
    mirror = assessment.mirror
    if mirror is not None and not claim.absent:
        yield mirror_equal(
            ratio.direction,
            claim.mni_peaks()[0][0],
            claim.radius_mm,
            (mirror.this_side_only, mirror.other_side_only),
            limits,
        )


def _of_counting(assessment: Assessment, claim: Claim, limits: Thresholds) -> Iterator[Caution | None]:
    """Judge what was counted together."""
    volume, context, pattern = assessment.reporting_volume, assessment.context, assessment.pattern
    if volume is not None:
        yield busy_reporters(assessment.likelihood_ratio.value, volume.crude_ratio, volume.adjusted_ratio, limits)
    if context is not None:
        yield context_small(context.n_studies, context.counts, limits)
    if pattern is not None:
        yield pattern_overstated(pattern.joint, pattern.product, pattern.joint_hits, limits)
        # In whole tenths: spheres that only touch do not share ground, whatever their decimals.
        centres = combinations(to_tenths(claim.mni_peaks()).tolist(), 2)
        reach = (20 * Fraction(str(claim.radius_mm))) ** 2
        yield overlapping_regions(
            sum(sum((a - b) ** 2 for a, b in zip(*pair, strict=True)) < reach for pair in centres)
        )
    yield absence_unsearched(claim.absent)
    yield own_study_counted(assessment.own_studies)


def _of_source(assessment: Assessment, limits: Thresholds) -> Iterator[Caution | None]:
    """Judge the source of the counts."""
    facts, uneven = assessment.literature, assessment.unevenness
    yield invented_data(facts.invented)
    yield small_default(facts.kind == "shipped table", facts.n_studies, uneven.largest_share)
    yield uneven_literature(
        uneven, limits, observed=assessment.likelihood_ratio.observed, balanced=assessment.balanced_ratio
    )
    yield ungrouped_studies(facts.merged, facts.study_is)
    yield mixed_direction(facts.negative_peaks, uneven.decrease_terms)
