"""Does the ratio survive when busy studies are compared with busy ones only? (formula 10)

Studies that report many peaks hit every region. Compared within strata of like number of peaks, the rates
of the two groups no longer differ for that reason alone.
"""

from __future__ import annotations

from collections.abc import Sequence
from math import exp, log, sqrt
from statistics import NormalDist

import numpy as np
from numpy.typing import ArrayLike, NDArray

from revinf.exceptions import InvalidCountError
from revinf.stats.estimates import Counts, Estimate, check_level

__all__ = ["mantel_haenszel_ratio", "quintile_strata"]


def mantel_haenszel_ratio(strata: Sequence[Counts], *, level: float = 0.95, minimum_strata: int = 2) -> Estimate | None:
    """Return the Mantel-Haenszel ratio of the two rates with its large-sample interval.

    Parameters
    ----------
    strata : sequence of Counts
        The four counts within each stratum; strata without a study on either side are skipped.
    level : float, probability, default 0.95
        Coverage of the interval (a confidence interval, unlike those of formula 2).
    minimum_strata : int, default 2
        Fewer usable strata than this give None.

    Returns
    -------
    Estimate or None
        Ratio P(active | term) / P(active | other) common to the strata; None with too few usable strata
        or no hits on a side.

    Raises
    ------
    InvalidProbabilityError
        If `level` is not strictly between 0 and 1.

    Notes
    -----
    The estimate is the weighted quotient itself, not a median. With one stratum the interval is that of
    the log method.

    References
    ----------
    Greenland & Robins 1985, Biometrics 41:55-68 (variance of the logarithm).

    Examples
    --------
    >>> ratio = mantel_haenszel_ratio([Counts(8, 12, 10, 40), Counts(12, 8, 30, 50)])
    >>> f"{ratio.estimate:.2f} ({ratio.low:.2f}-{ratio.high:.2f})"
    '1.73 (1.16-2.58)'
    """
    reach = NormalDist().inv_cdf((1 + check_level(level)) / 2)
    usable = [stratum for stratum in strata if stratum.term_total and stratum.other_total]
    if len(usable) < max(minimum_strata, 1):
        return None
    above = sum(stratum.term_active * stratum.other_total / stratum.total for stratum in usable)
    below = sum(stratum.other_active * stratum.term_total / stratum.total for stratum in usable)
    if not above or not below:
        return None
    # In whole numbers up to the division: active n1 n0 - n11 n01 N cancels where every study is a hit.
    spread = sum(
        (s.active_total * s.term_total * s.other_total - s.term_active * s.other_active * s.total) / s.total**2
        for s in usable
    )
    half = reach * sqrt(spread / (above * below))
    middle = log(above) - log(below)
    return Estimate(exp(middle), exp(middle - half), exp(middle + half))


def quintile_strata(n_peaks: ArrayLike) -> NDArray[np.intp]:
    """Return the quintile of the number of peaks of each study.

    Parameters
    ----------
    n_peaks : (S,) array-like of int
        Peaks that each study reports.

    Returns
    -------
    (S,) array of int, 0 to 4
        floor(5 (below + equal / 2) / S), where `below` studies have fewer peaks and `equal` as many, the
        study itself included: studies with the same number of peaks fall into the same stratum, hence
        strata may be uneven or empty.

    Raises
    ------
    InvalidCountError
        If a number of peaks is negative or not whole, or the numbers are not one list.

    Examples
    --------
    >>> quintile_strata([5, 1, 9, 3, 7]).tolist()
    [2, 0, 4, 1, 3]
    >>> quintile_strata([1, 1, 1, 8]).tolist()
    [1, 1, 1, 4]
    """
    peaks = np.asarray(n_peaks)
    if peaks.ndim != 1:
        raise InvalidCountError(
            f"n_peaks must be one list, but got shape {peaks.shape}; give one number for each study"
        )
    if not peaks.size:
        return np.zeros(0, dtype=np.intp)
    if peaks.dtype.kind not in "iu" or peaks.min() < 0:
        raise InvalidCountError(
            f"n_peaks must hold whole numbers of 0 or more, but got {peaks.tolist()[:4]!r}; count the peaks"
        )
    _, place, equal = np.unique(peaks, return_inverse=True, return_counts=True)
    below = np.cumsum(equal) - equal
    return np.asarray((5 * (2 * below + equal) // (2 * peaks.size))[place.reshape(-1)], dtype=np.intp)
