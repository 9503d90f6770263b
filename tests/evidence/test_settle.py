"""What would settle a claim: the places that the source meta-analyses name, and the gain by a plain loop."""

from __future__ import annotations

from math import dist, log2

import numpy as np
import pytest

from revinf.evidence.claim import Claim
from revinf.evidence.settle import FEWEST, settle
from revinf.evidence.settlement import Settlement
from revinf.exceptions import InvalidClaimError, UnknownTermError
from revinf.literature.literature import Literature
from revinf.spaces.spheres import sphere

POSTERIOR_CINGULATE = (-6.0, -52.0, 28.0)
"""A peak of the posterior cingulate; common practice, no source."""


@pytest.fixture(scope="module")
def minds(open_literature: Literature) -> Settlement:
    return settle(Claim(term="theory of mind", peaks=[POSTERIOR_CINGULATE]), open_literature, ["navigation"])


def near(found: Settlement, *points: tuple[float, float, float]) -> list[bool]:
    return [any(dist(place.peak, point) <= 16 for place in found.places) for point in points]


def test_theory_of_mind_against_navigation_is_decided_where_the_sources_say(minds: Settlement) -> None:
    """Mar 2011 and Spreng, Mar & Kim 2009: temporo-parietal junctions and medial prefrontal cortex for theory of
    mind, the parahippocampal gyri for navigation."""
    left_junction, medial, parahippocampal = (-54.0, -58.0, 22.0), (2.0, 56.0, 22.0), (-24.0, -40.0, -12.0)
    assert near(minds, left_junction, medial, parahippocampal) == [True, True, True]
    for place in minds.places:
        towards = place.if_active[0] > minds.candidates[0].probability
        assert towards == (place.peak[2] > -10)  # the parahippocampal ones speak for navigation


def test_autobiographical_memory_against_theory_of_mind_is_decided_where_the_sources_say(
    open_literature: Literature,
) -> None:
    """Spreng, Mar & Kim 2009: the hippocampi for autobiographical memory; lateral temporo-parietal for the other."""
    claim = Claim(term="autobiographical memory", peaks=[POSTERIOR_CINGULATE])
    found = settle(claim, open_literature, ["theory of mind"])
    assert near(found, (-26.0, -22.0, -18.0), (-56.0, -62.0, 18.0)) == [True, True]


def test_gain_is_the_drop_in_expected_entropy_by_a_plain_loop(open_literature: Literature, minds: Settlement) -> None:
    carried = [set(open_literature.studies_with(candidate.term).tolist()) for candidate in minds.candidates]
    own = [carried[0] - carried[1], carried[1] - carried[0]]
    there = set(open_literature.studies_hitting(sphere(POSTERIOR_CINGULATE, 10)).tolist())
    weights = [(len(studies & there) + 0.5) / (len(studies) + 1) for studies in own]
    weights = [weight / sum(weights) for weight in weights]
    asked = [studies & there if len(studies & there) >= FEWEST else studies for studies in own]

    def entropy(values: list[float]) -> float:
        return -sum(value * log2(value) for value in values if value > 0)

    for place in minds.places:
        here = set(open_literature.studies_hitting(sphere(place.peak, 10)).tolist())
        rates = [(len(studies & here) + 0.5) / (len(studies) + 1) for studies in asked]
        after = 0.0
        for outcome in (True, False):
            joint = [w * (r if outcome else 1 - r) for w, r in zip(weights, rates, strict=True)]
            after += sum(joint) * entropy([value / sum(joint) for value in joint])
        assert place.gain.estimate == pytest.approx(entropy(weights) - after, abs=1e-12)
        assert place.gain.low <= place.gain.estimate <= place.gain.high


def test_places_overlap_neither_the_claims_nor_one_another(minds: Settlement) -> None:
    points = [POSTERIOR_CINGULATE, *(place.peak for place in minds.places)]
    for at, point in enumerate(points):
        for other in points[at + 1 :]:
            assert dist(point, other) >= 20


def test_posteriors_average_to_what_was_known(minds: Settlement) -> None:
    before = [candidate.probability for candidate in minds.candidates]
    assert sum(before) == pytest.approx(1)
    for place in minds.places:
        p = place.probability_active
        mean = p * np.array(place.if_active) + (1 - p) * np.array(place.if_silent)
        assert mean.tolist() == pytest.approx(before)


def test_the_leading_rivals_are_taken_where_none_is_named(open_literature: Literature) -> None:
    found = settle(Claim(term="theory of mind", peaks=[(54, -54, 24)]), open_literature)
    assert found.candidates[0].term == "theory of mind"
    assert len(found.candidates) > 2
    assert settle(Claim(term="theory of mind", peaks=[(54, -54, 24)]), open_literature) == found
    assert found.to_dict()["schema"] == "revinf/settlement/1"


def test_what_cannot_be_settled_is_refused(open_literature: Literature, invented_literature: Literature) -> None:
    claim = Claim(term="theory of mind", peaks=[POSTERIOR_CINGULATE])
    with pytest.raises(UnknownTermError):
        settle(claim, open_literature, ["juggling"])
    with pytest.raises(InvalidClaimError, match="no rival"):
        settle(claim, open_literature, ["theory of mind"])
    with pytest.raises(InvalidClaimError, match="give --peak"):
        settle(Claim(term="theory of mind", peaks=[(0, 0, 0)], absent=True), open_literature)
    with pytest.raises(InvalidClaimError, match="are needed"):
        settle(Claim(term="invented naming", peaks=[(-40, 20, 10)]), invented_literature)
