"""Diversities that papers print.

Anderson 2007, The Neuroscientist 13:13-21, table 1: category diversity of three rows of shares over four
domains, printed to two digits. Jost 2006, Oikos 113:363-375: 16 equally common species have the effective
number 16. Anderson, Kinnison & Pessoa 2013, NeuroImage 73:50-58: diversity as the entropy of a region's
profile over domains, here over ln K; no value of theirs is repeated, only the definition.
"""

from __future__ import annotations

from math import log

import pytest
from scipy import stats

from revinf.stats.diversity import (
    category_diversity,
    category_diversity_minimum,
    effective_number,
    functional_diversity,
)

ANDERSON_2007 = [
    ((0.55, 0.24, 0, 0.21), 0.80),
    ((0.26, 0.21, 0.28, 0.24), 0.97),  # the printed shares sum to 0.99
    ((0, 0, 1, 0), 0.57),
]


@pytest.mark.parametrize(("profile", "printed"), ANDERSON_2007)
def test_category_diversity_is_that_of_anderson_2007(profile, printed):
    assert round(category_diversity(profile), 2) == printed


def test_the_last_row_of_anderson_2007_is_the_minimum_of_four_categories():
    assert round(category_diversity_minimum(4), 2) == 0.57


def test_sixteen_equally_common_categories_count_as_sixteen_in_jost_2006():
    assert effective_number([1 / 16] * 16) == pytest.approx(16, rel=1e-12)


def test_the_effective_number_obeys_the_doubling_of_jost_2006():
    # Two pools without a common species, equally large and diverse: twice the effective number.
    pool = [0.5, 0.3, 0.15, 0.05]
    assert effective_number(pool + pool) == pytest.approx(2 * effective_number(pool), rel=1e-12)


@pytest.mark.parametrize(("profile", "_"), ANDERSON_2007)
def test_functional_diversity_is_the_entropy_of_anderson_2013_over_ln_k(profile, _):
    assert functional_diversity(profile) == pytest.approx(stats.entropy(profile) / log(4), rel=1e-12)
