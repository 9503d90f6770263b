"""Scores against scikit-learn (reference library), their limits and their laws."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError
from revinf.stats.discount import discounted, fit_discount
from revinf.stats.scores import area_under_curve, brier_parts, brier_score, log_score, reliability_curve, skill

PAIRS = st.lists(st.tuples(st.floats(0, 1), st.integers(0, 1)), min_size=2, max_size=60)


@pytest.fixture(params=range(4))
def cases(request) -> tuple[np.ndarray, np.ndarray]:
    random = np.random.default_rng(request.param)
    forecasts = np.round(random.random(500), 2)  # with ties
    return forecasts, (random.random(500) < forecasts**1.5).astype(float)


def test_scores_equal_those_of_scikit_learn(cases: tuple[np.ndarray, np.ndarray]) -> None:
    metrics = pytest.importorskip("sklearn.metrics")
    f, y = cases
    assert brier_score(f, y) == pytest.approx(metrics.brier_score_loss(y, f), abs=1e-12)
    assert log_score(f, y) == pytest.approx(metrics.log_loss(y, np.clip(f, 1e-15, 1 - 1e-15)), abs=1e-9)
    assert area_under_curve(f, y) == pytest.approx(metrics.roc_auc_score(y, f), abs=1e-12)


def test_reliability_curve_equals_that_of_scikit_learn(cases: tuple[np.ndarray, np.ndarray]) -> None:
    calibration = pytest.importorskip("sklearn.calibration")
    f, y = cases
    f = np.clip(f + 0.003, 0, 1)  # no forecast on an edge: the two put those into different bins
    share, mean = calibration.calibration_curve(y, f, n_bins=10)
    curve = reliability_curve(f, y)
    assert [one.observed for one in curve] == pytest.approx(share.tolist())
    assert [one.forecast for one in curve] == pytest.approx(mean.tolist())


def test_discount_is_the_exponent_of_a_logistic_regression_through_the_prior() -> None:
    linear = pytest.importorskip("sklearn.linear_model")
    random = np.random.default_rng(1)
    z = random.normal(0, 3, 4000)
    y = (random.random(4000) < 1 / (1 + np.exp(-0.4 * z))).astype(float)
    reference = linear.LogisticRegression(C=np.inf, fit_intercept=False, tol=1e-10).fit(z[:, None], y)
    assert fit_discount(np.full(4000, 0.5), z, y) == pytest.approx(float(reference.coef_[0, 0]), abs=1e-5)


@given(PAIRS)
def test_parts_add_up_to_the_score(pairs: list[tuple[float, int]]) -> None:
    f, y = [a for a, _ in pairs], [b for _, b in pairs]
    parts = brier_parts(f, y)
    total = parts.reliability - parts.resolution + parts.uncertainty + parts.rest
    assert total == pytest.approx(brier_score(f, y), abs=1e-12)
    assert parts.reliability >= 0
    assert parts.resolution >= 0


@given(PAIRS)
def test_area_of_turned_forecasts_is_the_rest(pairs: list[tuple[float, int]]) -> None:
    f, y = np.array([a for a, _ in pairs]), np.array([b for _, b in pairs])
    area = area_under_curve(f, y)
    if area is None:
        assert y.min() == y.max()
    else:
        assert 0 <= area <= 1
        assert area_under_curve(-f, y) == pytest.approx(1 - area)


def test_limits() -> None:
    assert brier_score([1, 0], [1, 0]) == 0
    assert log_score([1.0, 0.0], [1, 0]) == pytest.approx(0, abs=1e-12)
    assert np.isfinite(log_score([0.0], [1]))
    assert skill(0.0, 0.2) == 1
    assert skill(0.4, 0.2) == -1
    assert [one.n for one in reliability_curve([1.0, 1.0], [1, 0])] == [2]


@given(st.floats(0.01, 0.99), st.floats(-50, 50))
def test_a_product_without_exponent_is_the_prior(prior: float, z: float) -> None:
    assert discounted([prior], [z], 0.0)[0] == pytest.approx(prior)
    assert 0 <= discounted([prior], [z])[0] <= 1


def test_a_product_that_tells_nothing_or_the_contrary_gets_no_weight() -> None:
    assert fit_discount([0.5, 0.5], [1.0, 1.0], [0, 0]) == 0
    assert fit_discount([0.5] * 4, [-1.0, -1.0, 1.0, 1.0], [1, 1, 0, 0]) == 0
    assert fit_discount([0.5, 0.5], [-1.0, 1.0], [0, 1]) == 10


def test_wrong_input_is_refused() -> None:
    for bad in (([], []), ([0.5], [0, 1]), ([1.5], [1]), ([0.5], [2])):
        with pytest.raises(InvalidCountError):
            brier_score(*bad)
    with pytest.raises(InvalidCountError):
        fit_discount([1.0], [0.0], [1])
