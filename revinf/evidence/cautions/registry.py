"""All cautions of an assessment, most severe first."""

from __future__ import annotations

from typing import TYPE_CHECKING

from revinf.base_rates.counting import TermCounts
from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.location import far_from_table, off_brain
from revinf.evidence.cautions.sample import prior_driven, thin_evidence
from revinf.evidence.cautions.source import invented_data, small_default, ungrouped_studies
from revinf.evidence.cautions.term import not_a_process
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.evidence.vocabulary import Vocabulary

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment

__all__ = ["cautions_of"]

_ORDER = ("stop", "weigh", "note")


def cautions_of(
    assessment: Assessment, counts: TermCounts, words: Vocabulary, limits: Thresholds
) -> tuple[Caution, ...]:
    """Return the cautions that hold for an assessment.

    Parameters
    ----------
    assessment : Assessment
        Without its cautions.
    counts : TermCounts
        Of every term at the claim's region.
    words : Vocabulary
        Kinds of terms.
    limits : Thresholds
        Where cautions begin.

    Returns
    -------
    tuple of Caution
        Most severe first; within a severity in a fixed order.
    """
    ratio, place, facts = assessment.likelihood_ratio.value, assessment.place, assessment.literature
    term = assessment.claim.term
    totals = counts.term_total + counts.other_total
    largest = float((counts.term_total / totals.clip(min=1)).max()) if len(counts.terms) else 0.0
    table_region = place.table_region
    candidates = (
        invented_data(facts.invented),
        off_brain(place.tissue, place.outside_mm, place.grey_mm, limits),
        thin_evidence(assessment.counts, ratio, limits),
        prior_driven(ratio, assessment.posterior.prior, limits),
        not_a_process(term, words.what(term)),
        far_from_table(
            table_region.distance_mm if table_region else None, assessment.claim.radius_mm, limits
        ),
        small_default(facts.kind == "shipped table", facts.n_studies, largest),
        ungrouped_studies(facts.merged, facts.study_is),
    )
    held = [caution for caution in candidates if caution is not None]
    return tuple(sorted(held, key=lambda caution: _ORDER.index(caution.severity)))
