"""What is drawn is where the numbers say: curves, strips and places on the outlines of the brain."""

from __future__ import annotations

import json
import math
import re
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.evidence.audit import AuditedClaim
from revinf.evidence.claim import Claim
from revinf.reports.drawings import brain_marks, brain_views, curve, ratio_marks
from revinf.reports.glass_brain import VIEWS, View, outline
from revinf.stats.bayes import posterior_probability
from revinf.stats.estimates import Estimate


def points(path: str) -> list[tuple[float, float]]:
    return [(float(x), float(y)) for x, y in re.findall(r"(-?[\d.e-]+),(-?[\d.e-]+)", path)]


@given(st.floats(1e-3, 1e3))
def test_curve_goes_through_the_posteriors(ratio: float) -> None:
    for x, y in points(curve(Estimate(ratio, ratio / 2, ratio * 2))["line"])[1:-1]:
        prior = x / 100
        if 0.001 < prior < 0.999:
            # Both are rounded to 0.01 of a hundred; where the curve is steep, the one moves the other.
            slope = ratio / (1 - prior + prior * ratio) ** 2
            assert (100 - y) / 100 == pytest.approx(posterior_probability(prior, ratio), abs=1e-4 * (1 + slope))


def test_strip_has_one_in_the_middle_and_tells_a_cut_end() -> None:
    marks = ratio_marks(Estimate(1.0, 0.001, 10.0))
    assert (marks["low"], marks["middle"], marks["high"]) == (0.0, 50.0, 75.0)
    assert (marks["cut_low"], marks["cut_high"]) == (True, False)


def test_peaks_are_marked_in_mm_of_mni152_with_their_radius() -> None:
    claim = Claim(term="fear", peaks=[(20, -4, -18)], radius_mm=8)
    side, back, top = brain_marks(AuditedClaim(claim=claim, assessment=None, advice=None, problem=None))
    assert [view["circles"][0] for view in (side, back, top)] == [
        {"x": "-4", "y": "18", "radius": "8"},
        {"x": "20", "y": "18", "radius": "8"},
        {"x": "20", "y": "4", "radius": "8"},
    ]


def test_talairach_peaks_are_marked_where_they_are_in_mni152() -> None:
    claim = Claim(term="fear", peaks=[(20, -4, -18)], space="Talairach")
    (circle,) = brain_marks(AuditedClaim(claim=claim, assessment=None, advice=None, problem=None))[1]["circles"]
    x, _, z = claim.mni_peaks()[0]
    assert (float(circle["x"]), -float(circle["y"])) == pytest.approx((x, z))


@pytest.mark.parametrize("view", VIEWS, ids=lambda view: view.name)
def test_outline_is_placed_as_nilearn_places_it(view: View) -> None:
    glass_brain = pytest.importorskip("nilearn.plotting.glass_brain")
    direction = {"side": "x", "back": "y", "top": "z"}[view.name]
    file, transform = glass_brain._get_json_and_transform(direction)
    drawn = [point for stroke in outline(view) for point in points(stroke.path)]
    items = [item for path in json.loads(Path(file).read_text())["paths"] for item in path["items"]]
    expected = transform.transform([point for item in items for point in item["pts"]])
    for x, y in expected[:: max(1, len(expected) // 200)]:
        assert min(math.dist((x, -y), point) for point in drawn) < 0.08


def test_outlines_lie_within_their_frames() -> None:
    for view in VIEWS:
        left, bottom, width, height = view.frame
        for stroke in outline(view):
            for x, y in points(stroke.path):
                assert left < x < left + width
                assert bottom < -y < bottom + height


def test_a_nilearn_without_the_drawings_leaves_the_frames_empty(monkeypatch: pytest.MonkeyPatch) -> None:
    outline.cache_clear()
    monkeypatch.setattr("revinf.reports.glass_brain.find_spec", lambda name: None)
    assert [view["strokes"] for view in brain_views()] == [(), (), ()]
    monkeypatch.undo()
    outline.cache_clear()
