"""How much an observation is expected to tell: the fall in entropy over rival processes.

For candidates c with probabilities w_c and an event that each makes with rate r_c: the posterior after the event is
w_c r_c / sum w r, after its absence w_c (1 - r_c) / sum w (1 - r), and the expected gain is the entropy before
less the mean entropy after (mutual information of candidate and event; Lindley 1956, Ann Math Stat 27:986-1005).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import InvalidCountError

__all__ = ["entropy_bits", "expected_gain", "updated"]


def entropy_bits(weights: ArrayLike) -> NDArray[np.float64]:
    """Return the entropy of probabilities along the last axis.

    Parameters
    ----------
    weights : (..., C) array-like, probability
        Each row sums to 1.

    Returns
    -------
    (...) array, bits
        0 where one candidate is certain.

    Examples
    --------
    >>> float(entropy_bits([0.5, 0.5]))
    1.0
    """
    w = np.asarray(weights, dtype=np.float64)
    return np.asarray(-(w * np.log2(np.maximum(w, np.finfo(np.float64).tiny))).sum(axis=-1) + 0.0)


def updated(weights: ArrayLike, rates: ArrayLike) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return the candidates' probabilities after the event and after its absence.

    Parameters
    ----------
    weights : (C,) array-like, probability
        Before; sums to 1.
    rates : (..., C) array-like, probability, strictly between 0 and 1
        Of the event under each candidate.

    Returns
    -------
    after : (..., C) array
        Given the event.
    without : (..., C) array
        Given its absence.

    Examples
    --------
    >>> after, without = updated([0.5, 0.5], [0.75, 0.25])
    >>> after.tolist(), without.tolist()
    ([0.75, 0.25], [0.25, 0.75])
    """
    w, r = _checked(weights, rates)
    after, without = w * r, w * (1 - r)
    return (
        np.asarray(after / after.sum(axis=-1, keepdims=True)),
        np.asarray(without / without.sum(axis=-1, keepdims=True)),
    )


def expected_gain(weights: ArrayLike, rates: ArrayLike) -> NDArray[np.float64]:
    """Return the expected fall in entropy when it is learned whether the event happened.

    Parameters
    ----------
    weights : (C,) array-like, probability
        Before; sums to 1.
    rates : (..., C) array-like, probability, strictly between 0 and 1
        Of the event under each candidate.

    Returns
    -------
    (...) array, bits
        Between 0 and the entropy before.

    Raises
    ------
    InvalidCountError
        If the weights do not sum to 1, or a rate is not strictly between 0 and 1.

    Examples
    --------
    >>> round(float(expected_gain([0.5, 0.5], [0.75, 0.25])), 4)  # 1 - H(0.75)
    0.1887
    >>> float(expected_gain([0.5, 0.5], [0.3, 0.3]))
    0.0
    """
    w, r = _checked(weights, rates)
    after, without = updated(w, r)
    happens = (w * r).sum(axis=-1)
    gain = entropy_bits(w) - happens * entropy_bits(after) - (1 - happens) * entropy_bits(without)
    return np.asarray(np.maximum(gain, 0.0))


def _checked(weights: ArrayLike, rates: ArrayLike) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return both as arrays that fit each other."""
    w, r = np.asarray(weights, dtype=np.float64), np.asarray(rates, dtype=np.float64)
    if w.ndim != 1 or not len(w) or not (w >= 0).all() or abs(w.sum() - 1) > 1e-9:
        raise InvalidCountError("weights must be probabilities that sum to 1; divide them by their sum")
    if r.shape[-1:] != w.shape or not ((r > 0) & (r < 1)).all():
        raise InvalidCountError("rates must be one a candidate, strictly between 0 and 1; add 1/2 to each count")
    return w, r
