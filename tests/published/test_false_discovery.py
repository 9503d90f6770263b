"""The worked example of Benjamini & Hochberg 1995, J R Stat Soc B 57:289-300."""

from __future__ import annotations

import numpy as np

from revinf.stats.association import benjamini_hochberg

# The fifteen p-values of their example (from memory, as is what follows from them).
P_VALUES = [
    0.0001, 0.0004, 0.0019, 0.0095, 0.0201, 0.0278, 0.0298, 0.0344,
    0.0459, 0.3240, 0.4262, 0.5719, 0.6528, 0.7590, 1.0000,
]  # fmt: skip


def test_the_first_four_of_fifteen_are_rejected_at_five_percent():
    assert (benjamini_hochberg(P_VALUES) <= 0.05).tolist() == [True] * 4 + [False] * 11


def test_bonferroni_would_have_rejected_three():
    # Their comparison: the step-up procedure finds one more than the older method.
    assert sum(p <= 0.05 / len(P_VALUES) for p in P_VALUES) == 3


def test_the_order_of_the_p_values_does_not_matter():
    backwards = benjamini_hochberg(P_VALUES[::-1])
    assert np.array_equal(backwards[::-1], benjamini_hochberg(P_VALUES))
