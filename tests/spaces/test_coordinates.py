"""Rounding to tenths of a millimetre and names of spaces."""

from __future__ import annotations

from decimal import ROUND_HALF_UP, Decimal

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from hypothesis.extra import numpy as npst

from revinf.exceptions import SpaceError
from revinf.spaces.coordinates import finite_xyz, normalise_space, round_mm, to_tenths

MILLIMETRES = st.floats(-999.9, 999.9)


def test_every_typed_half_of_a_tenth_rounds_away_from_zero():
    halves = np.arange(5, 100_000, 10)
    typed = np.array([float(Decimal(int(k)) / 100) for k in halves])
    expected = (halves + 5) // 10
    np.testing.assert_array_equal(to_tenths(np.stack([typed, -typed, typed], -1))[:, 0], expected)
    np.testing.assert_array_equal(to_tenths(np.stack([typed, -typed, typed], -1))[:, 1], -expected)


@given(st.decimals(-999, 999, places=4))
def test_rounding_is_that_of_decimal_arithmetic(value):
    # ROUND_HALF_UP of the decimal module rounds halves away from zero.
    expected = int((value * 10).quantize(Decimal(1), rounding=ROUND_HALF_UP))
    assert to_tenths((float(value), 0, 0)).tolist() == [expected, 0, 0]


@given(npst.arrays(np.float64, (4, 3), elements=MILLIMETRES))
def test_rounding_is_symmetric_about_zero_and_never_further_than_half_a_tenth(xyz):
    np.testing.assert_array_equal(to_tenths(-xyz), -to_tenths(xyz))
    assert np.abs(round_mm(xyz) - xyz).max() <= 0.05 + 1e-6


@given(npst.arrays(np.float64, (4, 3), elements=MILLIMETRES))
def test_rounding_twice_is_rounding_once(xyz):
    np.testing.assert_array_equal(round_mm(round_mm(xyz)), round_mm(xyz))


def test_noise_of_a_matrix_product_does_not_decide_a_half():
    assert to_tenths((10.05 - 1e-13, 10.05 + 1e-13, 10.05)).tolist() == [101, 101, 101]


def test_shape_and_type_of_the_result():
    assert to_tenths(np.zeros((2, 5, 3))).shape == (2, 5, 3)
    assert to_tenths([1, 2, 3]).dtype == np.int32
    assert round_mm([1, 2, 3]).dtype == np.float64
    assert to_tenths(np.empty((0, 3))).shape == (0, 3)


@pytest.mark.parametrize("bad", [np.nan, np.inf, -np.inf, 1000.1, -2e9])
def test_values_that_are_no_place_in_a_head_are_refused(bad):
    with pytest.raises(SpaceError, match=r"finite and within 1000 mm .* but got .*; give mill"):
        to_tenths((0, bad, 0))


def test_a_kilometre_less_one_step_is_still_accepted():
    assert to_tenths((1000, -1000, 0)).tolist() == [10000, -10000, 0]


@pytest.mark.parametrize("bad", [5, [1, 2], [[1, 2, 3, 4]], []])
def test_anything_but_three_values_a_point_is_refused(bad):
    with pytest.raises(SpaceError, match="three values a point"):
        finite_xyz(bad)


@pytest.mark.parametrize("bad", ["x", ["a", "b", "c"], [[1, 2, 3], [1, 2]], None, {"x": 1}])
def test_anything_but_numbers_is_refused_in_one_line(bad):
    with pytest.raises(SpaceError) as caught:
        finite_xyz(bad)
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize(
    ("text", "space"),
    [
        ("MNI", "MNI152"),
        ("MNI152", "MNI152"),
        ("mni-152", "MNI152"),
        (" Mni 152 ", "MNI152"),
        ("MNI_152", "MNI152"),
        ("TAL", "Talairach"),
        ("tal88", "Talairach"),
        ("Talairach", "Talairach"),
        ("TALAIRACH ", "Talairach"),
    ],
)
def test_usual_spellings_of_a_space_are_understood(text, space):
    assert normalise_space(text) == space


@pytest.mark.parametrize("text", ["", "MNI305", "native", "MNI Talairach", "152", "x" * 500, "a\nb"])
def test_other_spaces_are_refused_in_one_short_line(text):
    with pytest.raises(SpaceError, match="space must be MNI152 or Talairach") as caught:
        normalise_space(text)
    assert "\n" not in str(caught.value)
    assert len(str(caught.value)) < 200
