"""Grouped folds: all studies of a group are held out together."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import InvalidClaimError

__all__ = ["grouped_folds"]


def grouped_folds(groups: NDArray[np.int64], n_folds: int, *, seed: int = 7) -> NDArray[np.int64]:
    """Return the fold of every study.

    Parameters
    ----------
    groups : (S,) int64 array
        Number of each study's group; a study without one is its own.
    n_folds : int
        At least 2, at most the number of groups.
    seed : int, fixed
        Of the order of equally large groups.

    Returns
    -------
    (S,) int64 array
        From 0; groups are dealt out, the largest first, each to the fold with fewest studies.

    Raises
    ------
    InvalidClaimError
        If there are fewer groups than folds, or fewer than two folds.

    Examples
    --------
    >>> folds = grouped_folds(np.array([0, 0, 1, 2, 3]), 2)
    >>> bool(folds[0] == folds[1]), sorted(np.bincount(folds).tolist())
    (True, [2, 3])
    """
    names, sizes = np.unique(groups, return_counts=True)
    if n_folds < 2 or n_folds > len(names):
        raise InvalidClaimError(
            f"the number of folds must lie between 2 and the number of groups, {len(names)}, but got {n_folds}"
        )
    order = np.random.default_rng(seed).permutation(len(names))
    order = order[np.argsort(-sizes[order], kind="stable")]
    load = np.zeros(n_folds, dtype=np.int64)
    fold_of = np.zeros(len(names), dtype=np.int64)
    for at in order:
        fold = int(np.argmin(load))
        fold_of[at] = fold
        load[fold] += sizes[at]
    return np.asarray(fold_of[np.searchsorted(names, groups)])
