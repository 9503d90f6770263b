"""How good probabilities were: Brier score and its parts, logarithmic score, area under the curve, reliability.

All take forecasts f (probabilities) and outcomes y (0 or 1) of the same length.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Estimate
from revinf.stats.rates import jeffreys_rates

__all__ = [
    "BrierParts",
    "ReliabilityBin",
    "area_under_curve",
    "brier_parts",
    "brier_score",
    "log_score",
    "reliability_curve",
    "skill",
]


@dataclass(frozen=True, slots=True, kw_only=True)
class BrierParts:
    """Murphy's decomposition over bins of forecasts: score = reliability - resolution + uncertainty + rest.

    Parameters
    ----------
    reliability : float
        Mean squared distance of a bin's forecast from what came true in it; 0 is best.
    resolution : float
        Mean squared distance of what came true in a bin from the overall share; more is better.
    uncertainty : float
        Variance of the outcomes.
    rest : float
        What binning hides: forecasts that differ within a bin.
    """

    reliability: float
    resolution: float
    uncertainty: float
    rest: float


@dataclass(frozen=True, slots=True, kw_only=True)
class ReliabilityBin:
    """One bin of a reliability curve: mean forecast, share that came true with its interval, and their number."""

    forecast: float
    share: Estimate
    observed: float
    n: int


def brier_score(forecasts: ArrayLike, outcomes: ArrayLike) -> float:
    """Return the mean squared distance of forecasts from outcomes.

    Parameters
    ----------
    forecasts : (n,) array-like, probability
        At least one.
    outcomes : (n,) array-like of 0 and 1
        What came true.

    Returns
    -------
    float
        0 is best; a constant 1/2 scores 1/4.

    References
    ----------
    Brier 1950, Mon Weather Rev 78:1-3.

    Examples
    --------
    >>> brier_score([0.5, 1.0], [1, 1])
    0.125
    """
    f, y = _checked(forecasts, outcomes)
    return float(((f - y) ** 2).mean())


def log_score(forecasts: ArrayLike, outcomes: ArrayLike) -> float:
    """Return the mean of minus the logarithm of the probability that was given to what came true.

    Parameters
    ----------
    forecasts, outcomes
        As for `brier_score`.

    Returns
    -------
    float, nats
        0 is best; forecasts of 0 and 1 are taken as 1e-15 and 1 - 1e-15.

    Examples
    --------
    >>> round(log_score([0.5, 0.5], [1, 0]), 4)
    0.6931
    """
    f, y = _checked(forecasts, outcomes)
    safe = np.clip(f, 1e-15, 1 - 1e-15)
    return float(-(y * np.log(safe) + (1 - y) * np.log1p(-safe)).mean())


def skill(score: float, reference: float) -> float | None:
    """Return how much of a reference's score is saved: 1 is perfect, 0 no better, negative worse.

    Examples
    --------
    >>> skill(0.1, 0.2), skill(0.1, 0.0)
    (0.5, None)
    """
    return 1 - score / reference if reference > 0 else None


def area_under_curve(forecasts: ArrayLike, outcomes: ArrayLike) -> float | None:
    """Return the probability that a random positive case has the higher forecast; ties count half.

    Parameters
    ----------
    forecasts, outcomes
        As for `brier_score`; the forecasts may be any numbers.

    Returns
    -------
    float or None
        None where all outcomes are alike.

    Examples
    --------
    >>> area_under_curve([0.1, 0.4, 0.35, 0.8], [0, 0, 1, 1])
    0.75
    """
    f, y = np.asarray(forecasts, dtype=np.float64), np.asarray(outcomes, dtype=np.float64)
    positive = int(y.sum())
    if not positive or positive == len(y):
        return None
    _, inverse, counts = np.unique(f, return_inverse=True, return_counts=True)
    ends = np.cumsum(counts)
    ranks = (ends - (counts - 1) / 2)[inverse]  # mean rank of ties
    return float((ranks[y == 1].sum() - positive * (positive + 1) / 2) / (positive * (len(y) - positive)))


def reliability_curve(
    forecasts: ArrayLike, outcomes: ArrayLike, *, bins: int = 10, level: float = 0.95
) -> list[ReliabilityBin]:
    """Return what came true by what was forecast, in bins of equal width that hold any forecast.

    Parameters
    ----------
    forecasts, outcomes
        As for `brier_score`.
    bins : int, default 10
        Of the line from 0 to 1.
    level : float, probability, default 0.95
        Of the Jeffreys intervals, which take the cases as independent.

    Returns
    -------
    list of ReliabilityBin
        Lowest forecasts first.

    Examples
    --------
    >>> [(round(b.forecast, 2), b.observed, b.n) for b in reliability_curve([0.1, 0.12, 0.9], [0, 1, 1])]
    [(0.11, 0.5, 2), (0.9, 1.0, 1)]
    """
    f, y = _checked(forecasts, outcomes)
    number = _bins(f, bins)
    found = [(number == at) for at in range(bins) if (number == at).any()]
    pairs = [(int(y[inside].sum()), int(inside.sum())) for inside in found]
    rates = jeffreys_rates(pairs, level=level)
    return [
        ReliabilityBin(forecast=float(f[inside].mean()), share=rate, observed=hits / n, n=n)
        for inside, (hits, n), rate in zip(found, pairs, rates, strict=True)
        if rate is not None
    ]


def brier_parts(forecasts: ArrayLike, outcomes: ArrayLike, *, bins: int = 10) -> BrierParts:
    """Return the decomposition of the Brier score over bins of equal width.

    Parameters
    ----------
    forecasts, outcomes
        As for `brier_score`.
    bins : int, default 10
        Of the line from 0 to 1.

    Returns
    -------
    BrierParts
        Its parts add up to the score.

    References
    ----------
    Murphy 1973, J Appl Meteorol 12:595-600.

    Examples
    --------
    >>> parts = brier_parts([0.2, 0.2, 0.8, 0.8], [0, 0, 1, 1])
    >>> round(parts.reliability, 4), parts.resolution, parts.uncertainty
    (0.04, 0.25, 0.25)
    """
    f, y = _checked(forecasts, outcomes)
    number, overall = _bins(f, bins), float(y.mean())
    reliability = resolution = 0.0
    for at in np.unique(number):
        inside = number == at
        reliability += inside.sum() * (f[inside].mean() - y[inside].mean()) ** 2
        resolution += inside.sum() * (y[inside].mean() - overall) ** 2
    n = len(f)
    uncertainty = overall * (1 - overall)
    rest = brier_score(f, y) - (reliability / n - resolution / n + uncertainty)
    return BrierParts(
        reliability=float(reliability / n), resolution=float(resolution / n), uncertainty=uncertainty, rest=float(rest)
    )


def _bins(f: NDArray[np.float64], bins: int) -> NDArray[np.intp]:
    """Return the bin of each forecast; 1 belongs to the last."""
    return np.minimum((f * bins).astype(np.intp), bins - 1)


def _checked(forecasts: ArrayLike, outcomes: ArrayLike) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return both as arrays that fit each other."""
    f, y = np.asarray(forecasts, dtype=np.float64), np.asarray(outcomes, dtype=np.float64)
    if f.ndim != 1 or f.shape != y.shape or not len(f):
        raise InvalidCountError("forecasts and outcomes must be equally many, and at least one")
    if not ((f >= 0) & (f <= 1)).all() or not np.isin(y, (0.0, 1.0)).all():
        raise InvalidCountError("forecasts must be probabilities and outcomes 0 or 1; check their order")
    return f, y
