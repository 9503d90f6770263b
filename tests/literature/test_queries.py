"""Queries: the studies that hit a region are those of a plain loop, whatever the region."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st

from revinf.exceptions import SpaceError, UnknownTermError
from revinf.literature.cells import CELL_SHAPE, candidate_slices, cell_numbers, cell_starts
from revinf.spaces.regions import Mask
from revinf.spaces.spheres import Sphere, sphere
from tests.literature.in_memory import NEAR, PEAK, STUDIES, in_memory

CENTRE = st.one_of(PEAK, NEAR, st.tuples(*(st.integers(-10_000, 10_000),) * 3))
RADIUS = st.one_of(st.sampled_from(["0", "10", "200"]), st.decimals(0, 200, places=2).map(str))


def hit_by_loop(studies, is_inside) -> list[int]:
    return [i for i, (peaks, _) in enumerate(studies) if any(is_inside(peak) for peak in peaks)]


def within(centre, radius: str):
    limit = (10 * Fraction(radius)) ** 2
    return lambda peak: sum((p - c) ** 2 for p, c in zip(peak, centre, strict=True)) <= limit


@settings(max_examples=300, deadline=None)
@given(STUDIES, CENTRE, RADIUS)
@example([([(-1000, -1400, -1100)], [0]), ([(1000, 1100, 1100)], [0])], (-1000, -1400, -1100), "0")
@example([([(-1000, -1400, -1100)], [0]), ([(1000, 1100, 1100)], [0])], (1000, 1100, 1100), "0")
@example([([(-1000, -1400, -1100)], [0])], (-1060, -1400, -1180), "10")  # centre outside the head
@example([([(-1000, -1400, -1100)], [0])], (-1060, -1400, -1181), "10")
def test_studies_hitting_a_sphere_are_those_of_a_plain_loop(studies, centre, radius):
    ball = Sphere(centre_tenths=centre, radius_mm=float(radius))
    hits = in_memory(studies).studies_hitting(ball)
    assert hits.tolist() == hit_by_loop(studies, within(centre, radius))
    assert hits.dtype == np.int64


@settings(max_examples=150, deadline=None)
@given(STUDIES, st.data())
def test_a_peak_exactly_at_the_radius_is_hit_and_one_beyond_is_not(studies, data):
    peak = data.draw(st.sampled_from([peak for peaks, _ in studies for peak in peaks] or [(0, 0, 0)]))
    offset = data.draw(st.sampled_from([(60, 80, 0), (0, -100, 0), (20, 20, 10), (-120, 0, 160), (7, 0, 0)]))
    centre = tuple(p + o for p, o in zip(peak, offset, strict=True))
    square = sum(o * o for o in offset)
    radius = round(square**0.5) / 10
    assert (10 * Fraction(str(radius))) ** 2 == square  # these offsets have whole lengths
    literature = in_memory(studies)
    at = Sphere(centre_tenths=centre, radius_mm=radius)
    below = Sphere(centre_tenths=centre, radius_mm=radius - 0.001)
    owners = {i for i, (peaks, _) in enumerate(studies) if peak in peaks}
    assert owners <= set(literature.studies_hitting(at).tolist())
    inside = hit_by_loop(studies, within(centre, f"{radius - 0.001:.3f}"))
    assert literature.studies_hitting(below).tolist() == inside


@settings(max_examples=100, deadline=None)
@given(STUDIES, CENTRE, st.floats(0, 200), st.floats(0, 200))
def test_hits_grow_with_the_radius(studies, centre, one, two):
    literature = in_memory(studies)
    small, large = (
        set(literature.studies_hitting(Sphere(centre_tenths=centre, radius_mm=radius)).tolist())
        for radius in sorted((one, two))
    )
    assert small <= large


def test_the_largest_sphere_hits_every_study_with_a_peak():
    corners = [(x, y, z) for x in (-1000, 1000) for y in (-1400, 1100) for z in (-1100, 1100)]
    literature = in_memory([([corner], [0]) for corner in corners] + [([], [0])])
    middle = (0, -15, 0)  # 194.2 mm from every corner of the limits
    assert literature.studies_hitting(sphere(middle, 200)).tolist() == list(range(8))


def test_a_radius_beyond_the_largest_is_refused():
    with pytest.raises(SpaceError, match="radius_mm must lie between 0 and 200 mm"):
        in_memory([([(0, 0, 0)], [0])]).studies_hitting(sphere((0, 0, 0), 200.1))


@settings(max_examples=150, deadline=None)
@given(
    studies=STUDIES,
    voxels=st.sets(st.tuples(*(st.integers(0, 5),) * 3), min_size=1, max_size=12),
    origin=st.tuples(*(st.integers(-60, 40),) * 3),
    flipped=st.booleans(),
)
def test_studies_hitting_a_mask_are_those_of_a_plain_loop_over_closed_boxes(studies, voxels, origin, flipped):
    inside = np.zeros((6, 6, 6), dtype=bool)
    for voxel in voxels:
        inside[voxel] = True
    affine = np.diag([-4.0 if flipped else 4.0, 4.0, 4.0, 1.0])
    affine[:3, 3] = origin
    mask = Mask(ijk_inside=inside, affine=affine, name="invented")
    sides = (-40 if flipped else 40, 40, 40)  # tenths: 4 mm voxels, half of one is 20

    def in_a_box(peak):
        return any(
            all(abs(p - (10 * o + side * v)) <= 20 for p, o, side, v in zip(peak, origin, sides, voxel, strict=True))
            for voxel in voxels
        )

    assert in_memory(studies).studies_hitting(mask).tolist() == hit_by_loop(studies, in_a_box)


def test_a_mask_away_from_the_head_hits_nothing():
    affine = np.diag([2.0, 2.0, 2.0, 1.0])
    affine[:3, 3] = 500
    mask = Mask(ijk_inside=np.ones((2, 2, 2), dtype=bool), affine=affine, name="invented")
    assert in_memory([([(0, 0, 0)], [0])]).studies_hitting(mask).tolist() == []


@settings(max_examples=100, deadline=None)
@given(STUDIES, st.data())
def test_term_hits_are_those_of_a_plain_loop(studies, data):
    literature = in_memory(studies)
    chosen = sorted(data.draw(st.sets(st.integers(0, len(studies) - 1))))
    by_loop = [
        sum(f"term {number:02}" == term for i in chosen for number in set(studies[i][1])) for term in literature.terms
    ]
    assert literature.term_hits(np.array(chosen, dtype=np.int64)).tolist() == by_loop
    everyone = np.arange(len(studies), dtype=np.int64)
    assert literature.term_hits(everyone).tolist() == literature.term_totals.tolist()


@settings(max_examples=50, deadline=None)
@given(STUDIES)
def test_studies_with_a_term_are_those_that_were_given_it(studies):
    literature = in_memory(studies)
    for term in literature.terms:
        carriers = [i for i, (_, numbers) in enumerate(studies) if int(term[-2:]) in numbers]
        assert literature.studies_with(term).tolist() == carriers


def test_the_folder_on_disk_answers_as_its_files_say(invented_literature):
    def hits(centre, radius):
        found = invented_literature.studies_hitting(sphere(centre, radius))
        return [invented_literature.study_ids[i] for i in found]

    assert hits((-40, 20, 10), 10) == ["s1", "s2", "s3"]
    assert hits((30, -60, 40), 10) == ["s3", "s4", "s5", "s6"]  # s4 lies exactly 10 mm away
    assert hits((30, -60, 40), 9.9) == ["s3", "s5", "s6"]
    assert hits((-40, 20, 10), 0) == ["s1"]
    assert hits((0, 0, -80), 10) == []


def test_a_term_is_found_however_it_is_spelled(invented_literature):
    index = invented_literature.term_index
    assert index("Invented_Reading") == index("  invented   READING ") == 1
    assert [index(term) for term in invented_literature.terms] == [0, 1, 2]


@pytest.mark.parametrize(
    ("asked", "near"),
    [
        ("invented wating", ("invented waiting",)),
        ("naming", ("invented naming",)),
        ("Invented Naming task", ("invented naming",)),
    ],
)
def test_an_unknown_term_comes_with_near_misses(invented_literature, asked, near):
    with pytest.raises(UnknownTermError) as caught:
        invented_literature.term_index(asked)
    assert caught.value.near[: len(near)] == near
    assert caught.value.term == asked.lower()
    assert f"did you mean {near[0]!r}" in str(caught.value)
    assert "the literature 'tiny invented literature'" in str(caught.value)


@pytest.mark.parametrize("asked", ["qqq", "", "  _ "])
def test_a_term_like_no_other_gets_the_list_of_a_small_literature(invented_literature, asked):
    with pytest.raises(UnknownTermError, match="it has 'invented naming', 'invented reading', ") as caught:
        invented_literature.studies_with(asked)
    assert caught.value.near == ()


def test_a_term_like_no_other_is_sent_to_the_search_of_a_large_literature():
    literature = in_memory([([(0, 0, 0)], list(range(30)))])
    with pytest.raises(UnknownTermError, match="search its 30 terms with revinf terms"):
        literature.term_index("qqq")


@settings(max_examples=100, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(st.lists(PEAK, max_size=40), CENTRE, st.integers(0, 2000))
def test_candidates_are_disjoint_increasing_and_lose_no_peak_of_the_box(peaks, centre, reach):
    tenths = np.array(peaks, dtype=np.int16).reshape(-1, 3)
    numbers = cell_numbers(tenths)
    order = np.argsort(numbers, kind="stable")
    starts = cell_starts(numbers[order])
    assert len(starts) == np.prod(CELL_SHAPE) + 1
    low = np.array(centre, dtype=np.int32) - reach
    high = np.array(centre, dtype=np.int32) + reach
    slices = candidate_slices(starts, low, high)
    ends = [end for pair in slices for end in pair]
    assert ends == sorted(ends)
    assert all(a < b for a, b in slices)
    proposed = {int(i) for a, b in slices for i in order[a:b]}
    in_box = ((tenths >= low) & (tenths <= high)).all(axis=1)
    assert set(np.flatnonzero(in_box).tolist()) <= proposed
