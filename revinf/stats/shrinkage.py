"""Rates of many processes at one region, pulled towards their common mean (formula 7).

P(active | process) of each process is drawn from one Beta(mu M, (1 - mu) M); the mean mu and the strength
M, in studies, maximise the marginal (beta-binomial) likelihood of all the counts. Ranking by the posterior
median neither rewards a process for being common nor lets 2 of 3 lead by luck. For ranking only: the
claim's own ratio is formula 2.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import InvalidCountError
from revinf.stats.rates import beta_quantiles, count_arrays
from revinf.stats.special import digamma, log_gamma, trigamma

__all__ = [
    "STRENGTH_LIMITS",
    "BetaBinomial",
    "fit_beta_binomial",
    "rank_by_shrunk_rate",
    "shrunk_rates",
]

STRENGTH_LIMITS = (1.0, 1000.0)
"""M is sought between these; at the upper one the rates differ by less than their own scatter."""

_GRID = np.linspace(np.log(STRENGTH_LIMITS[0]), np.log(STRENGTH_LIMITS[1]), 7)
"""Values of ln M at which the likelihood is looked at before the highest is refined."""

_COARSE, _FINE = 1e-3, 1e-7
"""Newton's method ends with the first step below this; what then remains is of the order of its square."""
_STEPS = 60
_FLAT = 1e-9
"""A fall of the log likelihood towards the upper limit that is too small to mean anything."""


@dataclass(frozen=True, slots=True)
class BetaBinomial:
    """The common distribution of the rates.

    Parameters
    ----------
    mean : float, probability
        mu, strictly between 0 and 1.
    strength : float, studies
        M: how many studies the common mean counts for.
    log_likelihood : float
        Natural logarithm of the beta-binomial probability of all counts.
    at_upper_limit : bool
        Whether M reached its upper limit: the rates cannot be told apart.
    """

    mean: float
    strength: float
    log_likelihood: float
    at_upper_limit: bool

    @property
    def rank_informative(self) -> bool:
        """Whether a rank among these processes says anything."""
        return not self.at_upper_limit


def fit_beta_binomial(active: ArrayLike, total: ArrayLike) -> BetaBinomial:
    """Fit the common distribution of the rates by maximum marginal likelihood.

    Parameters
    ----------
    active : (T,) array-like of int
        Studies of each term that hit the region.
    total : (T,) array-like of int
        All studies of each term; terms without any are ignored.

    Returns
    -------
    BetaBinomial
        Mean and strength, M between 1 and 1000.

    Raises
    ------
    InvalidCountError
        If the lengths differ, a count is not whole, or `active` is not between 0 and `total`.

    Notes
    -----
    For a fixed M the log likelihood is concave in mu; M is refined from the highest of seven values. Where
    the counts do not tell M, its upper limit is returned: one term, one study a term, and the two cases
    whose likelihood grows towards mu = 0 or 1 (no hit at all, nothing but hits; also no study at all).
    In those two the mean is that of a pooled Jeffreys rate, (hits + 1/2) / (studies + 1).

    References
    ----------
    Griffiths 1973, Biometrics 29:637-648 (maximum likelihood for the beta-binomial law; from memory).

    Examples
    --------
    >>> fit = fit_beta_binomial([2, 15, 1, 40], [3, 63, 20, 80])
    >>> f"{fit.mean:.3f} {fit.strength:.2f} {fit.rank_informative}"
    '0.317 5.70 True'
    >>> fit_beta_binomial([0, 0], [10, 20]).at_upper_limit
    True
    """
    k, n = count_arrays(active, total)
    k, n = k[n > 0], n[n > 0]
    hits, studies = int(k.sum()), int(n.sum())
    likelihood = _Likelihood.of(k, n)
    upper = STRENGTH_LIMITS[1]
    if hits in (0, studies):
        mean = (hits + 0.5) / (studies + 1)
        return BetaBinomial(mean, upper, likelihood.value(mean, upper), True)
    means, values = [hits / studies], []
    for strength in np.exp(_GRID).tolist():
        means.append(likelihood.best_mean(means[-1], strength, _COARSE))
        values.append(likelihood.value(means[-1], strength))
    best = int(np.argmax(values))
    mean, log_strength = _refine(likelihood, means[best + 1], best)
    strength = min(max(float(np.exp(log_strength)), STRENGTH_LIMITS[0]), upper)
    value = likelihood.value(mean, strength)
    limit_mean = likelihood.best_mean(means[-1], upper, _FINE)
    limit_value = likelihood.value(limit_mean, upper)
    if strength == upper or value - limit_value < _FLAT:
        return BetaBinomial(limit_mean, upper, limit_value, True)
    return BetaBinomial(mean, strength, value, False)


def shrunk_rates(active: ArrayLike, total: ArrayLike, fit: BetaBinomial) -> NDArray[np.float64]:
    """Return the posterior medians of the rates.

    Parameters
    ----------
    active, total : (T,) array-like of int
        Hits and studies of each term.
    fit : BetaBinomial
        The common distribution.

    Returns
    -------
    (T,) array, probability
        Medians of Beta(mu M + active, (1 - mu) M + total - active); the common median without studies.

    Raises
    ------
    InvalidCountError
        If the lengths differ, a count is not whole, or `active` is not between 0 and `total`.

    Examples
    --------
    >>> fit = fit_beta_binomial([2, 15, 1, 40], [3, 63, 20, 80])
    >>> [round(float(rate), 3) for rate in shrunk_rates([2, 40], [3, 80], fit)]  # 2 of 3 does not lead
    [0.432, 0.488]
    """
    k, n = count_arrays(active, total)
    pairs, place = np.unique(np.stack([k, n]), axis=1, return_inverse=True)
    if not k.size:
        return np.zeros(0)
    a = fit.mean * fit.strength + pairs[0]
    b = (1 - fit.mean) * fit.strength + pairs[1] - pairs[0]
    return np.asarray(beta_quantiles(a, b, np.array([0.5]))[place.reshape(-1), 0])


def rank_by_shrunk_rate(
    names: Sequence[str], active: ArrayLike, total: ArrayLike, fit: BetaBinomial
) -> NDArray[np.intp]:
    """Rank the terms by their shrunk rates, best first.

    Parameters
    ----------
    names : sequence of str
        The terms.
    active, total : (T,) array-like of int
        Hits and studies of each term.
    fit : BetaBinomial
        The common distribution; `fit.rank_informative` tells whether the ranks mean anything.

    Returns
    -------
    (R,) array of int
        Places of the ranked terms in `names`. Terms without studies are left out. Ties go by the number
        of studies, the larger first, then by name.

    Raises
    ------
    InvalidCountError
        If the lengths differ, a count is not whole, or `active` is not between 0 and `total`.

    Examples
    --------
    >>> fit = fit_beta_binomial([2, 15, 1, 40], [3, 63, 20, 80])
    >>> rank_by_shrunk_rate(["a", "b", "c", "d"], [2, 15, 1, 40], [3, 63, 20, 80], fit).tolist()
    [3, 0, 1, 2]
    """
    k, n = count_arrays(active, total)
    if len(names) != len(n):
        raise InvalidCountError(
            f"names must be as many as the counts, but got {len(names)} for {len(n)}; name each term once"
        )
    medians, studies = shrunk_rates(k, n, fit).tolist(), n.tolist()
    known = [i for i, count in enumerate(studies) if count > 0]
    return np.array(sorted(known, key=lambda i: (-medians[i], -studies[i], names[i])), dtype=np.intp)


@dataclass(frozen=True, slots=True)
class _Likelihood:
    """The beta-binomial log likelihood; hits, misses and totals as distinct values and how often each is."""

    values: NDArray[np.float64]  # of hits, then misses, then totals
    often: NDArray[np.float64]
    owner: NDArray[np.intp]  # 0 for hits, 1 for misses, 2 for totals
    constant: float  # sum of the logarithms of the binomial coefficients

    @classmethod
    def of(cls, k: NDArray[np.int64], n: NDArray[np.int64]) -> _Likelihood:
        """Gather the counts."""
        parts = [np.unique(counts[counts > 0], return_counts=True) for counts in (k, n - k, n)]
        values = np.concatenate([part[0] for part in parts]).astype(np.float64)
        often = np.concatenate([part[1] for part in parts]).astype(np.float64)
        owner = np.repeat(np.arange(3), [len(part[0]) for part in parts])
        up, down, total = np.bincount(owner, often * log_gamma(values + 1), 3)
        return cls(values, often, owner, float(total - up - down))

    def rises(
        self, function: Callable[[ArrayLike], NDArray[np.float64]], mean: float, strength: float
    ) -> NDArray[np.float64]:
        """Return the three sums of f(count + shape) - f(shape)."""
        shapes = np.array([mean * strength, (1 - mean) * strength, strength])
        found = function(np.concatenate([shapes, self.values + shapes[self.owner]]))
        return np.asarray(
            np.bincount(self.owner, self.often * (found[3:] - found[:3][self.owner]), 3), dtype=np.float64
        )

    def value(self, mean: float, strength: float) -> float:
        """Return the log likelihood."""
        up, down, total = self.rises(log_gamma, mean, strength)
        return float(self.constant + up + down - total)

    def best_mean(self, mean: float, strength: float, near: float) -> float:
        """Return the mu that fits best with this M: Newton's method on its logit, inside a bracket."""
        low, high = 0.0, 1.0
        for _ in range(_STEPS):
            up, down, _ = self.rises(digamma, mean, strength)
            bend_up, bend_down, _ = self.rises(trigamma, mean, strength)
            # On the logit steps stay bounded near 0 and 1, where the slope runs as 1/mu.
            slope, width = up - down, mean * (1 - mean)
            bend = strength * width * (bend_up + bend_down) + (1 - 2 * mean) * slope
            step = float(-slope / bend) if bend < 0 else float(np.sign(slope))
            moved = float(1 / (1 + (1 - mean) / mean * np.exp(-np.clip(step, -30, 30))))
            if abs(step) < near:
                return moved
            low, high = (mean, high) if slope > 0 else (low, mean)
            mean = moved if low < moved < high else (low + high) / 2
        return mean

    def strength_slope(self, mean: float, strength: float) -> tuple[float, float]:
        """Return the slope and bend in ln M of the likelihood along the best mu."""
        up, down, total = self.rises(digamma, mean, strength)
        bend_up, bend_down, bend_total = self.rises(trigamma, mean, strength)
        slope = mean * up + (1 - mean) * down - total
        own = mean**2 * bend_up + (1 - mean) ** 2 * bend_down - bend_total
        cross = (up - down) + strength * (mean * bend_up - (1 - mean) * bend_down)
        profile = own - cross**2 / (strength**2 * (bend_up + bend_down))
        return float(strength * slope), float(strength * slope + strength**2 * profile)


def _refine(likelihood: _Likelihood, mean: float, best: int) -> tuple[float, float]:
    """Return mu and ln M of the top beside the highest grid value: Newton's method inside a bracket."""
    low, high = float(_GRID[max(best - 1, 0)]), float(_GRID[min(best + 1, len(_GRID) - 1)])
    place = float(_GRID[best])
    for _ in range(_STEPS):
        mean = likelihood.best_mean(mean, float(np.exp(place)), _FINE)
        slope, bend = likelihood.strength_slope(mean, float(np.exp(place)))
        low, high = (place, high) if slope > 0 else (low, place)
        moved = place - slope / bend if bend < 0 else (low + high) / 2
        if not low < moved < high:
            moved = (low + high) / 2
        if abs(moved - place) < _FINE:
            break
        place = moved
    return mean, place
