"""How numbers are written: never rounded to certainty, never more digits than are known."""

from __future__ import annotations

from collections import namedtuple

import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.reports.numbers import coordinates, count, interval, p_value, percent, probability, ratio, strip

E = namedtuple("E", "estimate low high")


@pytest.mark.parametrize(
    ("value", "text"), [(0, "0"), (7, "7"), (999, "999"), (5451, "5,451"), (1_000_000, "1,000,000")]
)
def test_count_has_its_thousands_apart(value, text):
    assert count(value) == text


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0.0, "0"),
        (1e-12, "<0.001"),
        (0.000499, "<0.001"),
        (0.0005, "0.001"),
        (0.0014, "0.001"),
        (0.05, "0.050"),
        (0.5, "0.500"),
        (0.8327, "0.833"),
        (0.9994, "0.999"),
        (0.9995, ">0.999"),
        (1 - 1e-12, ">0.999"),
        (1.0, "1"),
    ],
)
def test_probability_has_three_decimals(value, text):
    assert probability(value) == text


@given(st.floats(0, 1, exclude_min=True, exclude_max=True))
def test_probability_strictly_between_0_and_1_is_never_written_as_certain(value):
    text = probability(value)
    assert text not in {"0", "1", "0.000", "1.000"}
    assert float(text.strip("<>")) == pytest.approx(value, abs=0.0011)


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0, "0"),
        (1.234e-5, "1.23e-05"),
        (0.0042, "0.00420"),
        (0.04224, "0.0422"),
        (0.5, "0.500"),
        (0.9996, "1.00"),
        (1, "1.00"),
        (2.249, "2.25"),
        (4.977, "4.98"),
        (9.996, "10.0"),
        (19.96, "20.0"),
        (100.0, "100"),
        (117.5, "118"),
        (999.6, "1,000"),
        (202918.3, "203,000"),
    ],
)
def test_ratio_has_three_significant_digits(value, text):
    assert ratio(value) == text


@given(st.floats(1e-12, 1e12))
def test_ratio_is_within_half_a_unit_of_its_third_digit(value):
    assert float(ratio(value).replace(",", "")) == pytest.approx(value, rel=0.0051)


@pytest.mark.parametrize(("value", "text"), [(1.0, "1"), (0.0123, "0.012"), (2.69e-6, "2.7e-06"), (0.05, "0.05")])
def test_p_value_has_two_significant_digits(value, text):
    assert p_value(value) == text


@pytest.mark.parametrize(
    ("level", "text"),
    [(0.95, "95%"), (0.9, "90%"), (0.999, "99.9%"), (0.975, "97.5%"), (0.07, "7%"), (2 / 3, "66.6666667%")],
)
def test_level_of_an_interval_keeps_its_digits(level, text):
    assert percent(level) == text


def test_interval_has_its_estimate_first_and_its_ends_in_brackets():
    assert interval(E(0.833, 0.722, 0.904)) == "0.833 (0.722–0.904)"
    assert interval(E(2.2491, 1.857, 2.7204), ratio) == "2.25 (1.86–2.72)"
    with pytest.raises(TypeError, match="write must be one of the formats"):
        interval(E(1, 1, 1), "ratio")


def test_coordinates_have_real_minus_signs_and_no_needless_decimals():
    assert coordinates((54.0, -54.0, 24.5)) == "(54, −54, 24.5)"
    assert coordinates((0, -0.1, 0)) == "(0, −0.1, 0)"


@pytest.mark.parametrize(
    ("at", "width", "mark", "drawn"),
    [
        ((0.2, 0.5, 0.8), 11, None, "··├──●──┤··"),
        ((0.0, 0.5, 1.0), 11, None, "├────●────┤"),
        ((0.0, 0.0, 0.2), 11, None, "●─┤········"),
        ((0.5, 0.5, 0.5), 11, None, "·····●·····"),
        ((0.8, 1.0, 1.0), 11, None, "········├─●"),
        ((-3.0, 0.5, 7.0), 11, None, "├────●────┤"),
        ((-3.0, -2.0, -1.0), 11, None, "●··········"),
        ((0.6, 0.8, 0.9), 11, 0.5, "·····│├─●┤·"),
        ((0.4, 0.8, 0.9), 11, 0.5, "····├───●┤·"),
    ],
)
def test_strip_draws_the_interval_between_its_ends_with_the_estimate_inside(at, width, mark, drawn):
    assert strip(*at, width, mark=mark) == drawn


@given(
    st.lists(st.floats(-1, 2), min_size=3, max_size=3).map(sorted),
    st.integers(3, 60),
    st.none() | st.floats(0, 1),
)
def test_strip_has_its_width_one_estimate_and_nothing_but_its_signs(at, width, mark):
    drawn = strip(*at, width, mark=mark)
    assert len(drawn) == width
    assert drawn.count("●") == 1
    assert set(drawn) <= set("·│├─●┤")
    assert drawn.count("├") <= 1
    assert drawn.count("┤") <= 1
