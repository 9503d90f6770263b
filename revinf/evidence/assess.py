"""`assess`: the order of the steps from a claim to its assessment, and nothing else."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from revinf.base_rates.table import BaseRateTable
from revinf.evidence.assessment import Assessment
from revinf.evidence.balance import balanced_against
from revinf.evidence.breadth import breadth_of
from revinf.evidence.cautions.registry import cautions_of
from revinf.evidence.choices import Choices, choices_of
from revinf.evidence.claim import Claim
from revinf.evidence.contrasts import (
    context_of,
    mirror_of,
    pattern_of,
    reporting_volume,
)
from revinf.evidence.judging import associate, grade, rates_of, required_priors, update
from revinf.evidence.parts import AssessedClaim
from revinf.evidence.ratio_settings import RatioSettings
from revinf.evidence.robustness import Asked, robustness_of
from revinf.evidence.selectivity import RivalRequest, select
from revinf.evidence.sources import Answer, LiteratureSource, Source, as_source
from revinf.evidence.unevenness import unevenness_of
from revinf.evidence.vocabulary import Vocabulary, shipped_vocabulary
from revinf.exceptions import InvalidClaimError, UnknownTermError
from revinf.literature.literature import Literature
from revinf.literature.unknown_terms import unknown_term
from revinf.spaces.coordinates import to_tenths
from revinf.stats.bayes import prevalence
from revinf.stats.estimates import Counts

__all__ = ["Choices", "assess", "choices_of"]


def assess(claim: Claim, source: Literature | BaseRateTable | Source, choices: Choices | None = None) -> Assessment:
    """Assess one claim against the base rates of a source.

    Parameters
    ----------
    claim : Claim
        Activity in a region, taken as a sign of a process.
    source : Literature or BaseRateTable
        Where the counts come from.
    choices : Choices, optional
        Level, prior of the ratio, vocabulary, thresholds.

    Returns
    -------
    Assessment
        Counts, rates, likelihood ratio, posteriors, rivals, breadth, robustness and cautions.

    Raises
    ------
    UnknownTermError
        If the term labels no counted study.
    InvalidClaimError
        If the source cannot answer this kind of claim, or every study carries the term.
    SpaceError, InputFileError
        If the region cannot be placed or read.

    References
    ----------
    Poldrack 2006, Trends Cogn Sci 10:59-63.

    Examples
    --------
    >>> from revinf.base_rates.table import BaseRateTable
    >>> from revinf.knowledge import table_path
    >>> table = BaseRateTable.read(table_path("published_frequencies"))
    >>> answer = assess(Claim(term="language", region="Broca's area"), table)
    >>> round(answer.posterior.value.estimate, 3), answer.likelihood_ratio.direction
    (0.692, 'for')
    """
    choices = choices or Choices()
    words = choices.vocabulary or shipped_vocabulary()
    asked = as_source(source)
    answer = asked.answer(claim, absent=claim.absent)
    counts, position = _claimed(claim.term, answer, asked, words)
    settings = RatioSettings(level=choices.level, ratio_prior=choices.ratio_prior, ratio_limit=choices.ratio_limit)
    ratio, share = settings.solve(counts), prevalence(counts)
    if ratio is None or share is None:
        raise InvalidClaimError(
            f"every counted study carries {claim.term!r}, so there is nothing to compare with; use a wider literature"
        )
    prior = share if claim.prior == "prevalence" else float(claim.prior)
    selectivity = select(
        position,
        answer.counts,
        answer.studies,
        words,
        RivalRequest(
            named=tuple(claim.rivals),
            excluded=tuple(claim.excluded),
            shown=choices.shown_rivals,
            prior=prior,
        ),
        settings,
    )
    assessment = Assessment(
        claim=_assessed(claim, answer, prior),
        place=answer.place,
        literature=asked.facts,
        counts=counts,
        rates=rates_of(counts, choices.level),
        likelihood_ratio=grade(counts, ratio),
        posterior=update(counts, ratio, prior),
        posterior_at_prevalence=update(counts, ratio, share),
        required_prior=required_priors(ratio),
        association=associate(answer.counts, position, words),
        selectivity=selectivity,
        breadth=breadth_of(answer, words, level=choices.level),
        unevenness=unevenness_of(answer.counts, words),
        robustness=robustness_of(
            Asked(claim=claim, counts=counts, prior=prior, settings=settings),
            asked,
            answer,
            selectivity.kin_positions,
        ),
        level=choices.level,
        ratio_prior=choices.ratio_prior,
        ratio_limit=choices.ratio_limit,
    )
    assessment = _contrasted(assessment, claim, asked, answer, settings)
    if not claim.absent:
        kin = np.zeros(len(answer.counts.terms), dtype=bool)
        kin[list(selectivity.kin_positions)] = True
        balanced = balanced_against(position, answer.counts, answer.studies, words, kin, level=choices.level)
        assessment = replace(assessment, balanced_ratio=balanced)
    return replace(assessment, cautions=cautions_of(assessment, claim, words, choices.thresholds))


def _contrasted(
    assessment: Assessment, claim: Claim, asked: Source, answer: Answer, settings: RatioSettings
) -> Assessment:
    """Add what needs the studies themselves."""
    studies = answer.studies
    if studies is None or not isinstance(asked, LiteratureSource):
        if claim.context:
            raise InvalidClaimError("a context needs the studies themselves; use a literature, not a table")
        return assessment
    single, joint = len(claim.peaks) == 1, assessment.likelihood_ratio.value
    own = [study for study in _own_studies(claim, asked) if studies.carries(claim.term)[study]] if claim.peaks else []
    return replace(
        assessment,
        reporting_volume=reporting_volume(claim.term, studies, assessment.counts, settings),
        context=context_of(claim.term, claim.context, studies, settings) if claim.context else None,
        mirror=mirror_of(claim, asked, studies, settings) if single and claim.mni_peaks()[0][0] else None,
        pattern=pattern_of(claim, asked, joint, answer.hits, settings) if len(claim.peaks) > 1 else None,
        own_studies=tuple(asked.literature.study_ids[study] for study in own),
    )


def _own_studies(claim: Claim, asked: LiteratureSource) -> list[int]:
    """Return the studies that report exactly the claim's peaks."""
    found: list[int] = asked.literature.studies_reporting(to_tenths(claim.mni_peaks())).tolist()
    return found


def _claimed(term: str, answer: Answer, source: Source, words: Vocabulary) -> tuple[Counts, int]:
    """Return the counts of the claimed term and its position; names near misses and synonyms otherwise."""
    terms = answer.counts.terms
    if term in terms:
        position = terms.index(term)
        if answer.counts.term_total[position]:
            return answer.counts.at(position), position
    same = sorted(words.names_of(term) & set(terms))
    where = f"the {source.facts.kind} {source.facts.name!r}"
    if same:
        raise UnknownTermError(
            f"no study in {where} carries the term {term!r}; it calls the same process {same[0]!r}",
            term=term,
            near=tuple(same),
        )
    raise unknown_term(term, terms, where, words.sounding_like(term, terms))


def _assessed(claim: Claim, answer: Answer, prior: float) -> AssessedClaim:
    """Return the claim as it was assessed."""
    return AssessedClaim(
        id=claim.id,
        term=claim.term,
        region_kind=answer.region_kind,
        peaks=tuple((x, y, z) for x, y, z in claim.peaks),
        space=str(claim.space),
        radius_mm=answer.radius_mm,
        prior=prior,
        absent=claim.absent,
        context=tuple(claim.context),
        quote=claim.quote,
        location=claim.location,
    )
