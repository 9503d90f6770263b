"""Expected information gain against a plain loop, its limits, and its laws."""

from __future__ import annotations

from math import log2

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError
from revinf.stats.information import entropy_bits, expected_gain, updated

RATES = st.floats(0.001, 0.999)


def plain_gain(weights: list[float], rates: list[float]) -> float:
    """The drop in expected posterior entropy, one step at a time."""

    def entropy(values: list[float]) -> float:
        return -sum(value * log2(value) for value in values if value > 0)

    expected = 0.0
    for outcome in (True, False):
        joint = [w * (r if outcome else 1 - r) for w, r in zip(weights, rates, strict=True)]
        expected += sum(joint) * entropy([value / sum(joint) for value in joint])
    return entropy(weights) - expected


@given(st.lists(st.tuples(st.floats(0.01, 1), RATES), min_size=2, max_size=6))
def test_gain_is_the_drop_in_expected_entropy_and_never_negative(pairs: list[tuple[float, float]]) -> None:
    total = sum(weight for weight, _ in pairs)
    weights, rates = [weight / total for weight, _ in pairs], [rate for _, rate in pairs]
    gain = float(expected_gain(weights, rates))
    assert gain == pytest.approx(plain_gain(weights, rates), abs=1e-12)
    assert 0 <= gain <= float(entropy_bits(weights)) + 1e-12


@given(st.lists(st.tuples(st.floats(0.01, 1), RATES), min_size=2, max_size=6))
def test_event_and_its_absence_tell_the_same(pairs: list[tuple[float, float]]) -> None:
    total = sum(weight for weight, _ in pairs)
    weights, rates = np.array([w / total for w, _ in pairs]), np.array([r for _, r in pairs])
    assert float(expected_gain(weights, rates)) == pytest.approx(float(expected_gain(weights, 1 - rates)), abs=1e-12)


def test_a_symmetric_channel() -> None:
    """A binary symmetric channel that errs in 0.1 carries 1 - H(0.1) = 0.531 bits (Cover & Thomas, from memory)."""
    assert float(expected_gain([0.5, 0.5], [0.9, 0.1])) == pytest.approx(0.531, abs=5e-4)


def test_equal_rates_tell_nothing_and_certainty_leaves_nothing_to_tell() -> None:
    assert float(expected_gain([0.3, 0.7], [0.2, 0.2])) == 0
    assert float(expected_gain([1.0, 0.0], [0.2, 0.9])) == pytest.approx(0, abs=1e-12)


def test_updating_is_bayes_rule() -> None:
    after, without = updated([0.25, 0.75], [[0.5, 0.1], [0.2, 0.2]])
    assert after[0].tolist() == pytest.approx([0.625, 0.375])
    assert without[0].tolist() == pytest.approx([0.125 / 0.8, 0.675 / 0.8])
    assert after[1].tolist() == pytest.approx([0.25, 0.75])


@pytest.mark.parametrize(
    ("weights", "rates"), [([0.5, 0.6], [0.5, 0.5]), ([0.5, 0.5], [0.5, 1.0]), ([1.0], [0.5, 0.5])]
)
def test_wrong_input_is_refused(weights: list[float], rates: list[float]) -> None:
    with pytest.raises(InvalidCountError):
        expected_gain(weights, rates)
