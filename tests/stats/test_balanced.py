"""The ratio in which every other process counts once."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.balanced import balanced_ratio


def test_reversal_of_the_open_coordinates() -> None:
    """Semantic cognition at (-28, -38, -16): 36 of 272 against 19 of 179 is 1.25, five processes once each 0.92."""
    assert pytest.approx(1.247, abs=1e-3) == 36 / 272 / (19 / 179)
    found = balanced_ratio((36, 272), [7, 2, 3, 2, 2], [20, 40, 23, 13, 63])
    assert found is not None
    assert found.estimate == pytest.approx(0.924, abs=1e-3)
    assert found.low < 0.7 < 1.2 < found.high


def test_one_rival_is_the_plain_ratio() -> None:
    found = balanced_ratio((10, 20), [5], [20])
    assert found is not None
    assert found.estimate == 2.0


@given(st.integers(0, 30), st.integers(30, 60), st.lists(st.tuples(st.integers(0, 9), st.integers(9, 40)), min_size=1))
def test_interval_holds_the_estimate_and_repeats_itself(k: int, n: int, rivals: list[tuple[int, int]]) -> None:
    active, total = [a for a, _ in rivals], [b for _, b in rivals]
    found = balanced_ratio((k, n), active, total, draws=200)
    assert found == balanced_ratio((k, n), active, total, draws=200)
    if sum(active) == 0:
        assert found is None
    else:
        assert found is not None
        assert 0 <= found.low <= found.estimate <= found.high


def test_nothing_to_compare_with_is_none() -> None:
    assert balanced_ratio((1, 2), [], []) is None
    assert balanced_ratio((0, 0), [1], [2]) is None
    assert balanced_ratio((1, 2), [0, 0], [3, 4]) is None


def test_wrong_input_is_refused() -> None:
    with pytest.raises(InvalidCountError):
        balanced_ratio((3, 2), [1], [2])
    with pytest.raises(InvalidCountError, match="draws"):
        balanced_ratio((1, 2), [1], [2], draws=0)
    with pytest.raises(InvalidProbabilityError):
        balanced_ratio((1, 2), [1], [2], level=1.0)


@pytest.mark.parametrize("k", [[7, 2, 3, 2, 2], [0, 1], [5], [1, 0, 0, 2, 9, 4, 1]])
def test_interval_is_that_of_independent_rates_drawn_one_by_one(k: list[int]) -> None:
    import numpy as np

    n = [20 + 7 * at for at in range(len(k))]
    random = np.random.default_rng(3)
    drawn = [random.beta(a + 0.5, b - a + 0.5, 200_000) for a, b in zip(k, n, strict=True)]
    ratio = random.beta(10.5, 30.5, 200_000) / np.mean(drawn, axis=0)
    low, high = np.quantile(ratio, [0.025, 0.975])
    found = balanced_ratio((10, 40), k, n, draws=200_000)
    assert found is not None
    assert found.low == pytest.approx(min(low, found.estimate), rel=0.04)
    assert found.high == pytest.approx(max(high, found.estimate), rel=0.04)
