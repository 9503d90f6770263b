"""An estimate with its interval, a 2x2 table, and the checks of probabilities."""

from __future__ import annotations

from dataclasses import FrozenInstanceError

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.estimates import Counts, Estimate, check_level, check_probability
from tests.strategies import BILLION, tables

NAMES = ("term_active", "term_inactive", "other_active", "other_inactive")


@given(tables(BILLION))
def test_totals_are_the_sums_of_the_four_counts(table):
    n11, n10, n01, n00 = table.as_tuple()
    assert table.term_total == n11 + n10
    assert table.other_total == n01 + n00
    assert table.active_total == n11 + n01
    assert table.total == n11 + n10 + n01 + n00


@given(tables(BILLION))
def test_swapping_twice_gives_the_table_back(table):
    assert table.swapped().swapped() == table
    assert table.swapped().term_total == table.other_total
    assert table.swapped().active_total == table.active_total


def test_whole_numbers_of_numpy_become_plain_ones():
    table = Counts(np.int64(1), np.uint8(2), np.int32(3), 4)
    assert table == Counts(1, 2, 3, 4)
    assert {type(value) for value in table.as_tuple()} == {int}


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.parametrize("value", [1.0, "3", None, float("nan"), np.float64(2)])
def test_a_count_that_is_not_whole_is_refused_by_name(name, value):
    counts = dict.fromkeys(NAMES, 1) | {name: value}
    with pytest.raises(InvalidCountError, match=rf"^{name} must be a whole number, but got .*give a count"):
        Counts(**counts)


@pytest.mark.parametrize("name", NAMES)
def test_a_negative_count_is_refused_by_name(name):
    with pytest.raises(InvalidCountError, match=rf"^{name} must not be negative, but got -1; give a count"):
        Counts(**(dict.fromkeys(NAMES, 1) | {name: -1}))


def test_an_estimate_covers_its_ends_and_nothing_beyond():
    estimate = Estimate(0.5, 0.2, 0.8)
    assert estimate.covers(0.2)
    assert estimate.covers(0.8)
    assert not estimate.covers(np.nextafter(0.2, 0))
    assert not estimate.covers(np.nextafter(0.8, 1))


def test_results_cannot_be_changed():
    with pytest.raises(FrozenInstanceError):
        Estimate(0.5, 0.2, 0.8).low = 0.1
    with pytest.raises(FrozenInstanceError):
        Counts(1, 2, 3, 4).term_active = 2


@given(st.floats(0, 1, exclude_min=True, exclude_max=True))
def test_a_probability_inside_is_returned_unchanged(value):
    assert check_probability(value, "prior", "use 0.5") == value
    assert check_level(value) == value


@pytest.mark.parametrize("value", [0, 1, -0.1, 1.5, float("nan"), float("inf"), "half", None])
def test_a_probability_outside_is_refused_with_name_value_and_remedy(value):
    with pytest.raises(InvalidProbabilityError) as caught:
        check_probability(value, "target", "use 0.8 or 0.95")
    assert str(caught.value) == (f"target must lie strictly between 0 and 1, but got {value!r}; use 0.8 or 0.95")


def test_a_level_outside_is_refused():
    with pytest.raises(InvalidProbabilityError, match=r"^level must .* but got 95; use 0\.95 for a 95 % interval$"):
        check_level(95)
