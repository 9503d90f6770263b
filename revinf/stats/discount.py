"""The exponent that makes a product of likelihood ratios honest.

Peaks of one study come together, so multiplying their ratios counts the same evidence several times. With
log odds = logit(prior) + b * (sum of ln ratios), b is the maximum-likelihood exponent on studies that were not
counted: 1 where the ratios are independent, less where they repeat one another.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import InvalidCountError

__all__ = ["discounted", "fit_discount"]

_LARGEST = 10.0


def fit_discount(prior: ArrayLike, log_product: ArrayLike, outcomes: ArrayLike) -> float:
    """Return the exponent b that fits best.

    Parameters
    ----------
    prior : (n,) array-like, probability, strictly between 0 and 1
        Before the peaks were seen.
    log_product : (n,) array-like
        Sum of the logarithms of the single ratios.
    outcomes : (n,) array-like of 0 and 1
        Whether the process was there.

    Returns
    -------
    float
        At least 0 and at most 10; 0 where the product tells nothing.

    Raises
    ------
    InvalidCountError
        If the arrays do not fit each other.

    Examples
    --------
    >>> z = [-4.0, -2.0, 2.0, 4.0] * 25  # the odds are squared: every peak was counted twice
    >>> y = [0, 0, 1, 1] * 12 + [0, 1, 0, 1] * 13
    >>> fit_discount([0.5] * 100, z, y) < fit_discount([0.5] * 100, [x / 2 for x in z], y)
    True
    """
    p, z, y = (np.asarray(x, dtype=np.float64) for x in (prior, log_product, outcomes))
    if p.ndim != 1 or p.shape != z.shape or p.shape != y.shape or not ((p > 0) & (p < 1)).all():
        raise InvalidCountError("priors strictly between 0 and 1, products and outcomes must be equally many")
    offset = np.log(p) - np.log1p(-p)

    def slope(b: float) -> float:
        return float((z * (y - _logistic(offset + b * z))).sum())

    # The log likelihood is concave in b, so its slope falls: bisection cannot miss.
    low, high = 0.0, _LARGEST
    if slope(low) <= 0:
        return 0.0
    if slope(high) >= 0:
        return _LARGEST
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (middle, high) if slope(middle) > 0 else (low, middle)
    return (low + high) / 2


def discounted(prior: ArrayLike, log_product: ArrayLike, exponent: float = 1.0) -> NDArray[np.float64]:
    """Return the posterior of a product of ratios raised to an exponent.

    Parameters
    ----------
    prior : array-like, probability, strictly between 0 and 1
        Before.
    log_product : array-like
        Sum of the logarithms of the ratios.
    exponent : float, default 1
        As `fit_discount` gives it; 1 multiplies as if independent.

    Returns
    -------
    array, probability
        After.

    Examples
    --------
    >>> discounted([0.5], [np.log(9.0)], 0.5).tolist()
    [0.75]
    """
    p, z = np.asarray(prior, dtype=np.float64), np.asarray(log_product, dtype=np.float64)
    return _logistic(np.log(p) - np.log1p(-p) + exponent * z)


def _logistic(x: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return 1 / (1 + exp(-x)) without overflow."""
    e = np.exp(-np.abs(x))
    return np.asarray(np.where(x >= 0, 1 / (1 + e), e / (1 + e)))
