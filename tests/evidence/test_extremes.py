"""At the ends of what can be asked every number is finite and in order, or null with a caution."""

from __future__ import annotations

import json
import math
from collections.abc import Iterator
from typing import Any

import pytest

from revinf.evidence.assess import assess
from revinf.evidence.assessment import Assessment
from revinf.evidence.claim import Claim
from revinf.literature.literature import Literature

PLACES = {"hit by some": (-40, 20, 10), "hit by none": (60, 60, -40)}


def numbers(value: Any, path: str = "") -> Iterator[tuple[str, float]]:
    """Yield every number of an answer with its place in it."""
    if isinstance(value, dict):
        for name, item in value.items():
            yield from numbers(item, f"{path}.{name}")
    elif isinstance(value, list):
        for item in value:
            yield from numbers(item, path)
    elif isinstance(value, (int, float)) and not isinstance(value, bool):
        yield path, float(value)


def check_in_order(answer: Assessment) -> None:
    content = answer.to_dict()
    json.dumps(content, allow_nan=False)
    for path, number in numbers(content):
        assert math.isfinite(number), path
    for value in (answer.likelihood_ratio.value, answer.posterior.value):
        assert 0 <= value.low <= value.estimate <= value.high
    assert answer.posterior.value.high <= 1


@pytest.mark.parametrize("radius", [0.0, 0.1, 10.0, 200.0])
@pytest.mark.parametrize("prior", [1e-12, 0.5, 1 - 1e-12])
@pytest.mark.parametrize("place", PLACES)
@pytest.mark.parametrize("absent", [False, True])
def test_extreme_questions_have_finite_ordered_answers(
    radius: float, prior: float, place: str, absent: bool, invented_literature: Literature
) -> None:
    claim = Claim(term="invented naming", peaks=[PLACES[place]], radius_mm=radius, prior=prior, absent=absent)
    check_in_order(assess(claim, invented_literature))


def test_a_region_hit_by_all_studies_tells_nothing(invented_literature: Literature) -> None:
    answer = assess(Claim(term="invented naming", peaks=[(0, 0, 0)], radius_mm=200.0), invented_literature)
    assert answer.counts.term_inactive == answer.counts.other_inactive == 0
    assert answer.likelihood_ratio.value.low < 1 < answer.likelihood_ratio.value.high
    assert answer.likelihood_ratio.direction == "undecided"


def test_a_prior_near_0_or_1_stays_where_the_ratio_cannot_move_it(invented_literature: Literature) -> None:
    for prior in (1e-12, 1 - 1e-12):
        claim = Claim(term="invented naming", peaks=[PLACES["hit by some"]], prior=prior)
        answer = assess(claim, invented_literature)
        odds = prior / (1 - prior) * answer.likelihood_ratio.value.estimate
        assert answer.posterior.value.estimate == pytest.approx(odds / (1 + odds), rel=1e-3)
