"""From prior and likelihood ratio to the posterior, and back to the prior one must have held (3 and 4).

Odds form throughout: posterior odds = prior odds x R. The posterior is monotone in R, so the ends of its
interval are the images of the ends of R's. The uncertainty of the prior itself is not in that interval.
"""

from __future__ import annotations

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Counts, Estimate, check_probability

__all__ = [
    "observed_posterior",
    "posterior_estimate",
    "posterior_probability",
    "prevalence",
    "required_prior",
]

_PRIOR_REMEDY = "use 0.5 for even odds"


def posterior_probability(prior: float, ratio: float) -> float:
    """Return P(H1 | active) by Bayes' rule.

    Parameters
    ----------
    prior : float, probability, 0 < prior < 1
        P(H1) before the activation was seen.
    ratio : float, >= 0
        Likelihood ratio P(active | H1) / P(active | H0).

    Returns
    -------
    float, probability
        ratio * odds / (1 + ratio * odds), odds = prior / (1 - prior).

    Raises
    ------
    InvalidProbabilityError
        If the prior is not strictly between 0 and 1.
    InvalidCountError
        If the ratio is negative or not a number.

    References
    ----------
    Eddy 1982 (value from memory): a prior of 0.01, sensitivity 0.79 and false-positive rate 0.096.

    Examples
    --------
    >>> round(posterior_probability(0.01, 0.79 / 0.096), 3)
    0.077
    """
    check_probability(prior, "prior", _PRIOR_REMEDY)
    if not ratio >= 0:
        raise InvalidCountError(f"the likelihood ratio must not be negative, but got {ratio!r}; check the rates")
    if ratio == 0:
        return 0.0
    return 1 / (1 + (1 - prior) / prior / ratio)


def posterior_estimate(prior: float, ratio: Estimate | None) -> Estimate | None:
    """Return the posterior with its interval: the image of the ratio's.

    Parameters
    ----------
    prior : float, probability, 0 < prior < 1
        P(H1) before the activation was seen.
    ratio : Estimate or None
        Likelihood ratio.

    Returns
    -------
    Estimate or None
        Posterior probability; None where the ratio is.

    Raises
    ------
    InvalidProbabilityError
        If the prior is not strictly between 0 and 1.

    Examples
    --------
    >>> posterior = posterior_estimate(0.5, Estimate(2.249, 1.857, 2.720))
    >>> f"{posterior.estimate:.3f} ({posterior.low:.3f}-{posterior.high:.3f})"
    '0.692 (0.650-0.731)'
    """
    if ratio is None:
        check_probability(prior, "prior", _PRIOR_REMEDY)
        return None
    return Estimate(
        posterior_probability(prior, ratio.estimate),
        posterior_probability(prior, ratio.low),
        posterior_probability(prior, ratio.high),
    )


def prevalence(counts: Counts) -> float | None:
    """Return the share of the studies that carry the term, n1 / (n1 + n0).

    Parameters
    ----------
    counts : Counts
        The four counts.

    Returns
    -------
    float or None
        Probability; None without studies.

    Examples
    --------
    >>> prevalence(Counts(1, 0, 1, 2))
    0.25
    """
    return counts.term_total / counts.total if counts.total else None


def observed_posterior(counts: Counts, prior: float | None = None) -> float | None:
    """Return the posterior of the plain observed rates.

    Parameters
    ----------
    counts : Counts
        The four counts.
    prior : float, probability, optional
        P(H1); left out, the prevalence, where the answer is exactly n11 / (n11 + n01).

    Returns
    -------
    float or None
        Probability; None where no counted study is active or a side has no study.

    Raises
    ------
    InvalidProbabilityError
        If the prior is not strictly between 0 and 1.

    References
    ----------
    Altman & Bland 1994, BMJ 309:102 (predictive value of the liver scan: 0.88 at its prevalence).

    Examples
    --------
    >>> observed_posterior(Counts(15, 48, 17, 371)) == 15 / 32
    True
    >>> round(observed_posterior(Counts(231, 27, 32, 54), 0.25), 2)
    0.45
    """
    if prior is not None:
        check_probability(prior, "prior", _PRIOR_REMEDY)
    if not counts.active_total or not counts.term_total or not counts.other_total:
        return None
    if prior is None:
        return counts.term_active / counts.active_total
    given_term = prior * counts.term_active / counts.term_total
    given_other = (1 - prior) * counts.other_active / counts.other_total
    return given_term / (given_term + given_other)


def required_prior(target: float, ratio: float) -> float:
    """Return the prior one must have held for the posterior to reach a target.

    Parameters
    ----------
    target : float, probability, 0 < target < 1
        Wanted posterior, such as 0.80.
    ratio : float, > 0
        Likelihood ratio.

    Returns
    -------
    float, probability
        target / (target + (1 - target) * ratio).

    Raises
    ------
    InvalidProbabilityError
        If the target is not strictly between 0 and 1.
    InvalidCountError
        If the ratio is not above 0.

    Examples
    --------
    >>> round(required_prior(0.8, 4.0), 3)
    0.5
    """
    check_probability(target, "target", "use 0.8 or 0.95")
    if not ratio > 0:
        raise InvalidCountError(f"the likelihood ratio must be above 0, but got {ratio!r}; check the rates")
    return target / (target + (1 - target) * ratio)
