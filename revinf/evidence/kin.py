"""Which terms are kin of the claimed one: largely the same studies, or a synonym; never rivals."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from revinf.base_rates.counting import TermCounts
from revinf.base_rates.study_level import SharedCounts
from revinf.evidence.vocabulary import Vocabulary
from revinf.literature.kin_pairs import KIN_LIFT, KIN_SHARE

__all__ = ["KIN_LIFT", "KIN_SHARE", "kin_of"]


def kin_of(claimed: int, counts: TermCounts, shared: SharedCounts | None, words: Vocabulary) -> NDArray[np.bool_]:
    """Return which terms are kin of the claimed one.

    Parameters
    ----------
    claimed : int
        Position of the claimed term.
    counts : TermCounts
        Of every term.
    shared : SharedCounts or None
        Studies shared with the claimed term; without them only synonyms are known.
    words : Vocabulary
        Synonyms.

    Returns
    -------
    (T,) bool array
        The claimed term itself is not among them.
    """
    names = words.names_of(counts.terms[claimed])
    kin = np.array([term in names for term in counts.terms], dtype=bool)
    if shared is not None:
        own, others = counts.term_total[claimed], counts.term_total
        n_studies = int(own + counts.other_total[claimed])
        smaller = np.minimum(own, others).clip(min=1)
        lift = shared.total * n_studies / (own * others).clip(min=1)
        kin |= (shared.total / smaller >= KIN_SHARE) & (lift >= KIN_LIFT)
    kin[claimed] = False
    return kin
