"""Which terms label largely the same studies: found once, when a literature is built."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

__all__ = ["KIN_LIFT", "KIN_SHARE", "find_kin_pairs"]

KIN_SHARE = 0.5
"""Share of the smaller term's studies that two terms must share ..."""

KIN_LIFT = 1.5
"""... and how many times more they must share than chance would have them share."""


def find_kin_pairs(
    study_starts: NDArray[np.int64],
    study_terms: NDArray[np.int32],
    term_starts: NDArray[np.int64],
    term_studies: NDArray[np.int32],
) -> NDArray[np.int32]:
    """Return the pairs of terms that are kin.

    Parameters
    ----------
    study_starts, study_terms : arrays
        Terms of each study, packed.
    term_starts, term_studies : arrays
        Studies of each term, packed.

    Returns
    -------
    (K, 2) int32 array
        Each pair once, the smaller position first, in order.

    Examples
    --------
    >>> starts, terms = np.array([0, 2, 4, 5, 6]), np.array([0, 1, 0, 1, 2, 2], dtype=np.int32)
    >>> back, studies = np.array([0, 2, 4, 6]), np.array([0, 1, 0, 1, 2, 3], dtype=np.int32)
    >>> find_kin_pairs(starts, terms, back, studies).tolist()
    [[0, 1]]
    """
    totals = np.diff(term_starts).astype(np.int64)
    n_studies, n_terms = len(study_starts) - 1, len(totals)
    lengths = np.diff(study_starts)
    found = []
    for term in range(n_terms):
        mine = term_studies[term_starts[term] : term_starts[term + 1]]
        if not len(mine):
            continue
        # All terms of its studies in one gather: where each study's terms begin, and a running count within.
        sizes = lengths[mine]
        offsets = np.repeat(study_starts[:-1][mine] - np.concatenate([[0], np.cumsum(sizes[:-1])]), sizes)
        shared = np.bincount(study_terms[offsets + np.arange(int(sizes.sum()))], minlength=n_terms)
        smaller = np.minimum(totals[term], totals).clip(min=1)
        lift = shared * n_studies / (totals[term] * totals).clip(min=1)
        kin = np.flatnonzero((shared / smaller >= KIN_SHARE) & (lift >= KIN_LIFT))
        kin = kin[kin > term]
        found.append(np.stack([np.full(len(kin), term), kin], axis=1))
    pairs = np.concatenate(found) if found else np.zeros((0, 2))
    return np.ascontiguousarray(pairs.astype(np.int32).reshape(-1, 2))
