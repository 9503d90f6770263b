"""The core numbers of an assessment, from the four counts: rates, graded ratio, posteriors, association."""

from __future__ import annotations

from revinf.base_rates.counting import TermCounts
from revinf.evidence.grading import direction_of, grade_of, headline_grade
from revinf.evidence.parts import Association, LikelihoodRatio, Posterior, Rates, RequiredPrior
from revinf.evidence.vocabulary import Vocabulary
from revinf.exceptions import InvalidClaimError
from revinf.stats.association import benjamini_hochberg, fisher_p
from revinf.stats.bayes import observed_posterior, posterior_estimate, prevalence, required_prior
from revinf.stats.estimates import Counts, Estimate
from revinf.stats.rates import jeffreys_rates
from revinf.stats.ratio import observed_ratio

__all__ = ["TARGETS", "associate", "family_q_values", "grade", "rates_of", "required_priors", "update"]

TARGETS = (0.80, 0.95)
"""Posteriors for which the required prior is told."""


def rates_of(counts: Counts, level: float) -> Rates:
    """Return the four rates of formula 1.

    Parameters
    ----------
    counts : Counts
        The four counts.
    level : float, probability
        Of the intervals.

    Returns
    -------
    Rates
        Given term, given other, of the region, and of the term.
    """
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


def grade(counts: Counts, ratio: Estimate) -> LikelihoodRatio:
    """Return the ratio with its direction and grades.

    Parameters
    ----------
    counts : Counts
        The four counts.
    ratio : Estimate
        Their likelihood ratio.

    Returns
    -------
    LikelihoodRatio
        Graded.
    """
    return LikelihoodRatio(
        value=ratio,
        observed=observed_ratio(counts),
        direction=direction_of(ratio),
        headline_grade=headline_grade(ratio),
        estimate_grade=grade_of(ratio.estimate),
    )


def update(counts: Counts, ratio: Estimate, prior: float) -> Posterior:
    """Return the posterior at a prior.

    Parameters
    ----------
    counts : Counts
        The four counts.
    ratio : Estimate
        Their likelihood ratio.
    prior : float, probability
        Before the activity was seen.

    Returns
    -------
    Posterior
        With the observed one beside it.
    """
    value = posterior_estimate(prior, ratio)
    if value is None:
        raise InvalidClaimError("there is no likelihood ratio to update a prior with")
    return Posterior(
        value=value,
        # At the prevalence exactly n11 / (n11 + n01), without a rounding error from the prior.
        observed=observed_posterior(counts, None if prior == prevalence(counts) else prior),
        prior=prior,
    )


def required_priors(ratio: Estimate) -> tuple[RequiredPrior, ...]:
    """Return the priors one must have held for the target posteriors.

    Parameters
    ----------
    ratio : Estimate
        Likelihood ratio.

    Returns
    -------
    tuple of RequiredPrior
        One a target.
    """
    return tuple(
        RequiredPrior(
            target=target,
            estimate=required_prior(target, ratio.estimate),
            at_low=required_prior(target, ratio.low),
        )
        for target in TARGETS
    )


def associate(counts: TermCounts, claimed: int, words: Vocabulary) -> Association:
    """Return Fisher's p of the claimed term and its q over the process terms, itself among them.

    Parameters
    ----------
    counts : TermCounts
        Of every term at the region.
    claimed : int
        Position of the claimed term.
    words : Vocabulary
        Kinds of terms.

    Returns
    -------
    Association
        None where a side has no study.
    """
    family = [
        position
        for position, term in enumerate(counts.terms)
        if position == claimed or (counts.term_total[position] and words.counts_as_process(term))
    ]
    p_values, q_values = family_q_values([counts.at(position) for position in family])
    at = family.index(claimed)
    return Association(fisher_p=p_values[at], q=q_values[at])


def family_q_values(
    tables: list[Counts],
) -> tuple[list[float | None], list[float | None]]:
    """Return Fisher's p and the false-discovery q of each table; equal tables are solved once.

    Parameters
    ----------
    tables : list of Counts
        The family.

    Returns
    -------
    list, list of float or None
        p and q; None where a side has no study.
    """
    solved = {table: fisher_p(table) for table in dict.fromkeys(tables)}
    p_values = [solved[table] for table in tables]
    known = [i for i, p in enumerate(p_values) if p is not None]
    q_values: list[float | None] = [None] * len(tables)
    adjusted = benjamini_hochberg([p for p in p_values if p is not None])
    for i, q in zip(known, adjusted.tolist(), strict=True):
        q_values[i] = q
    return p_values, q_values
