"""`assess`: the order of the steps from a claim to its assessment; the mathematics is in `revinf.stats`."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from pathlib import Path

from revinf.base_rates.counting import TermCounts
from revinf.base_rates.table import BaseRateTable
from revinf.evidence.assessment import (
    AssessedClaim,
    Assessment,
    Association,
    LikelihoodRatio,
    Posterior,
    Rates,
    RequiredPrior,
)
from revinf.evidence.cautions.registry import cautions_of
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.evidence.claim import Claim
from revinf.evidence.grading import direction_of, grade_of, headline_grade
from revinf.evidence.sources import Answer, LiteratureSource, Source, TableSource
from revinf.evidence.vocabulary import Vocabulary, chosen_vocabulary, shipped_vocabulary
from revinf.exceptions import InvalidClaimError, UnknownTermError
from revinf.literature.literature import Literature, unknown_term
from revinf.stats.association import benjamini_hochberg, fisher_p
from revinf.stats.bayes import observed_posterior, posterior_estimate, prevalence, required_prior
from revinf.stats.estimates import Counts, Estimate, check_level
from revinf.stats.rates import jeffreys_rates
from revinf.stats.ratio import DEFAULT_LIMIT, RatioPrior, likelihood_ratio, observed_ratio

__all__ = ["TARGETS", "Choices", "assess", "choices_of"]

TARGETS = (0.80, 0.95)
"""Posteriors for which the required prior is told."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Choices:
    """How an assessment is made, apart from the claim itself.

    Parameters
    ----------
    level : float, probability
        Posterior probability that each interval holds.
    ratio_prior : {"shared", "independent"}
        Prior of the two rates behind the likelihood ratio.
    ratio_limit : float
        95 % of the shared prior lies between 1/limit and limit.
    vocabulary : Vocabulary, optional
        Kinds and domains of terms; the shipped ones where left out.
    thresholds : Thresholds
        Where cautions begin.
    """

    level: float = 0.95
    ratio_prior: RatioPrior = "shared"
    ratio_limit: float = DEFAULT_LIMIT
    vocabulary: Vocabulary | None = None
    thresholds: Thresholds = field(default_factory=Thresholds)


def choices_of(
    *, level: float, ratio_prior: str, ratio_limit: float, kinds: str | Path | None = None
) -> Choices:
    """Return choices as somebody typed them, checked.

    Parameters
    ----------
    level : float, probability
        Posterior probability that each interval holds.
    ratio_prior : str
        "shared" or "independent".
    ratio_limit : float, ratio > 1
        Limit of the shared prior.
    kinds : path, optional
        A table of kinds, domains and synonyms.

    Returns
    -------
    Choices
        Checked.

    Raises
    ------
    InvalidClaimError
        If the prior's name is unknown.
    InputFileError
        If the table of kinds cannot be used.

    Examples
    --------
    >>> choices_of(level=0.9, ratio_prior="shared", ratio_limit=20).level
    0.9
    """
    if ratio_prior not in ("shared", "independent"):
        raise InvalidClaimError(
            f"ratio prior must be shared or independent, but got {ratio_prior!r}; use shared"
        )
    return Choices(
        level=check_level(level),
        ratio_prior="shared" if ratio_prior == "shared" else "independent",
        ratio_limit=ratio_limit,
        vocabulary=chosen_vocabulary(kinds),
    )


def assess(
    claim: Claim, source: Literature | BaseRateTable | Source, choices: Choices | None = None
) -> Assessment:
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
        Counts, rates, likelihood ratio, posteriors, required priors and cautions.

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
    asked = _as_source(source)
    answer = asked.answer(claim)
    counts, position = _claimed(claim.term, answer, asked, words)
    share = prevalence(counts)
    ratio = likelihood_ratio(
        counts, level=choices.level, prior=choices.ratio_prior, limit=choices.ratio_limit
    )
    if ratio is None or share is None:
        raise InvalidClaimError(
            f"every counted study carries {claim.term!r}, so there is nothing to compare with; use a wider "
            "literature"
        )
    prior = share if claim.prior == "prevalence" else float(claim.prior)
    assessment = Assessment(
        claim=_assessed(claim, answer, prior),
        place=answer.place,
        literature=asked.facts,
        counts=counts,
        rates=_rates(counts, choices.level),
        likelihood_ratio=_graded(counts, ratio),
        posterior=_posterior(counts, ratio, prior),
        posterior_at_prevalence=_posterior(counts, ratio, share),
        required_prior=tuple(
            RequiredPrior(
                target=target,
                estimate=required_prior(target, ratio.estimate),
                at_low=required_prior(target, ratio.low),
            )
            for target in TARGETS
        ),
        association=_association(answer.counts, position, words),
        level=choices.level,
    )
    return replace(assessment, cautions=cautions_of(assessment, answer.counts, words, choices.thresholds))


def _as_source(source: Literature | BaseRateTable | Source) -> Source:
    """Return the common face of whatever was given."""
    if isinstance(source, Literature):
        return LiteratureSource(source)
    return TableSource(source) if isinstance(source, BaseRateTable) else source


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
        space=claim.space,
        radius_mm=answer.radius_mm,
        prior=prior,
        quote=claim.quote,
        location=claim.location,
    )


def _rates(counts: Counts, level: float) -> Rates:
    """Return the four rates of formula 1."""
    term, other, activation, share = jeffreys_rates(
        [
            (counts.term_active, counts.term_total),
            (counts.other_active, counts.other_total),
            (counts.active_total, counts.total),
            (counts.term_total, counts.total),
        ],
        level=level,
    )
    return Rates(active_given_term=term, active_given_other=other, activation=activation, prevalence=share)


def _graded(counts: Counts, ratio: Estimate) -> LikelihoodRatio:
    """Return the ratio with its direction and grades."""
    return LikelihoodRatio(
        value=ratio,
        observed=observed_ratio(counts),
        direction=direction_of(ratio),
        headline_grade=headline_grade(ratio),
        estimate_grade=grade_of(ratio.estimate),
    )


def _posterior(counts: Counts, ratio: Estimate, prior: float) -> Posterior:
    """Return the posterior at a prior."""
    value = posterior_estimate(prior, ratio)
    if value is None:
        raise InvalidClaimError("there is no likelihood ratio to update a prior with")
    return Posterior(
        value=value,
        # At the prevalence exactly n11 / (n11 + n01), without a rounding error from the prior.
        observed=observed_posterior(counts, None if prior == prevalence(counts) else prior),
        prior=prior,
    )


def _association(counts: TermCounts, claimed: int, words: Vocabulary) -> Association:
    """Return Fisher's p of the claimed term and its q over the process terms, itself among them."""
    family = [
        position
        for position, term in enumerate(counts.terms)
        if position == claimed or (counts.term_total[position] and words.counts_as_process(term))
    ]
    solved: dict[Counts, float | None] = {}
    p_values = {}
    for position in family:
        table = counts.at(position)
        if table not in solved:
            solved[table] = fisher_p(table)
        p = solved[table]
        if p is not None:
            p_values[position] = p
    if claimed not in p_values:
        return Association(fisher_p=None, q=None)
    q_values = benjamini_hochberg(list(p_values.values()))
    return Association(fisher_p=p_values[claimed], q=float(q_values[list(p_values).index(claimed)]))
