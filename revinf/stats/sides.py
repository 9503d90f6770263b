"""Which of two sides is hit more often? The sign of a difference between two counts, with its uncertainty."""

from __future__ import annotations

from math import exp, lgamma, log

__all__ = ["probability_above_half"]


def probability_above_half(successes: int, failures: int) -> float:
    """Return P(p > 1/2) of the Jeffreys posterior Beta(successes + 1/2, failures + 1/2).

    Parameters
    ----------
    successes, failures : int
        Counts.

    Returns
    -------
    float, probability
        Exactly 1 minus that of the exchanged counts.

    Examples
    --------
    >>> probability_above_half(3, 3)
    0.5
    >>> round(probability_above_half(5, 1), 3)
    0.953
    """
    if successes < failures:
        return 1 - probability_above_half(failures, successes)
    if successes == failures:
        return 0.5
    a, b = successes + 0.5, failures + 0.5
    return 1 - _incomplete_beta_half(a, b)


def _incomplete_beta_half(a: float, b: float) -> float:
    """Return the regularised incomplete beta function at 1/2 for a > b, by its continued fraction.

    Lentz's method; the fraction converges fast on this side of the mean (DLMF 8.17.22).
    """
    tiny, d, c = 1e-300, 0.0, 1.0
    fraction = 1.0
    for step in range(100_000):
        half = step // 2
        if step == 0:
            numerator = 1.0
        elif step % 2 == 0:
            numerator = half * (b - half) * 0.5 / ((a + 2 * half - 1) * (a + 2 * half))
        else:
            numerator = -(a + half) * (a + b + half) * 0.5 / ((a + 2 * half) * (a + 2 * half + 1))
        d = 1 / ((1 + numerator * d) or tiny)
        c = (1 + numerator / c) or tiny
        fraction *= d * c
        if abs(1 - d * c) < 1e-15:
            break
    log_front = lgamma(a + b) - lgamma(a) - lgamma(b) + (a + b) * log(0.5) - log(a)
    return exp(log_front) * (fraction - 1)
