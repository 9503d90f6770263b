"""The background is what a plain loop over locations and studies counts, in blocks of any size."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from revinf.literature import background
from revinf.literature.background import Background, compute_background
from revinf.literature.packing import pack_background
from revinf.spaces.brain import brain_reference, grey_lattice
from revinf.spaces.spheres import sphere
from tests.literature.in_memory import NEAR

# Radii whose squares in tenths are whole, so that the loop needs no care at the surface.
RADII = (0.0, 4.0, 7.3, 10.0, 20.0)
NEAR_CELLS = st.lists(st.tuples(*(st.integers(-5, 5),) * 3), min_size=1, max_size=60, unique=True)
STUDY_PEAKS = st.lists(st.lists(st.one_of(NEAR, st.tuples(*(st.sampled_from([-80, -40, 0, 40, 123]),) * 3)),
                                max_size=5), min_size=1, max_size=12)  # fmt: skip


def by_loop(studies, cells, radius_mm):
    """Return hits by location and locations by study."""
    limit = round(10 * radius_mm) ** 2
    hit = [
        [
            any(sum((p - 40 * c) ** 2 for p, c in zip(peak, cell, strict=True)) <= limit for peak in peaks)
            for peaks in studies
        ]
        for cell in cells
    ]
    return [sum(row) for row in hit], [sum(column) for column in zip(*hit, strict=True)]


def counted(studies, cells, radius_mm, shuffle=None):
    rows = [(i, *peak) for i, peaks in enumerate(studies) for peak in peaks]
    if shuffle is not None:
        shuffle.shuffle(rows)
    table = np.array(rows, dtype=np.int64).reshape(-1, 4)
    return compute_background(
        table[:, 1:].astype(np.int16),
        table[:, 0].astype(np.int32),
        len(studies),
        np.array(cells, dtype=np.int16) * 40,
        radius_mm,
    )


@pytest.mark.parametrize("radius_mm", RADII)
@settings(max_examples=40, deadline=None)
@given(studies=STUDY_PEAKS, cells=NEAR_CELLS, shuffle=st.randoms(use_true_random=False))
def test_background_equals_a_plain_loop(radius_mm, studies, cells, shuffle):
    found = counted(studies, cells, radius_mm, shuffle)
    by_location, by_study = by_loop(studies, cells, radius_mm)
    assert found.location_hits.tolist() == by_location
    assert found.study_locations.tolist() == by_study
    assert (found.location_hits.dtype, found.study_locations.dtype) == (np.int32, np.int32)


@pytest.mark.parametrize("block", [1, 3, 7])
@pytest.mark.parametrize("radius_mm", RADII)
def test_background_does_not_depend_on_the_size_of_its_blocks(monkeypatch, radius_mm, block):
    generator = np.random.default_rng(3)
    studies = [generator.integers(-200, 200, (generator.integers(0, 9), 3)).tolist() for _ in range(30)]
    cells = [tuple(cell) for cell in np.unique(generator.integers(-5, 6, (200, 3)), axis=0).tolist()]
    whole = counted(studies, cells, radius_mm)
    for name in ("_STUDIES", "_PEAKS", "_RESIDUES"):
        monkeypatch.setattr(background, name, block)
    split = counted(studies, cells, radius_mm)
    by_location, by_study = by_loop(studies, cells, radius_mm)
    assert split.location_hits.tolist() == whole.location_hits.tolist() == by_location
    assert split.study_locations.tolist() == whole.study_locations.tolist() == by_study
    assert radius_mm < 4 or sum(by_location)


def test_peaks_far_from_the_grid_reach_nothing_and_harm_nothing():
    far = [[(3000, 0, 0)], [(0, 0, 0)], [(-3000, 3000, -3000), (0, 0, 5)]]
    found = counted(far, [(0, 0, 0), (1, 0, 0)], 4.0)
    by_location, by_study = by_loop(far, [(0, 0, 0), (1, 0, 0)], 4.0)
    assert found.location_hits.tolist() == by_location
    assert found.study_locations.tolist() == by_study


def test_studies_without_peaks_hit_nowhere():
    found = counted([[], [], []], [(0, 0, 0), (1, 0, 0)], 20.0)
    assert found.location_hits.tolist() == [0, 0]
    assert found.study_locations.tolist() == [0, 0, 0]


@settings(max_examples=200, deadline=None)
@given(st.lists(st.integers(0, 6), min_size=1, max_size=30), st.integers(0, 7))
def test_percentile_counts_the_locations_below_and_half_of_the_ties(hits, asked):
    found = Background(location_hits=np.array(hits, dtype=np.int32), study_locations=np.zeros(1, dtype=np.int32))
    below, equal = sum(hit < asked for hit in hits), hits.count(asked)
    assert found.percentile(asked) == pytest.approx(100 * (below + 0.5 * equal) / len(hits), rel=1e-12)


def test_percentile_is_50_where_all_are_tied_and_0_or_100_beyond_all():
    found = Background(location_hits=np.full(8, 3, dtype=np.int32), study_locations=np.zeros(1, dtype=np.int32))
    assert (found.percentile(2), found.percentile(3), found.percentile(4)) == (0.0, 50.0, 100.0)


def test_stored_arrays_are_those_that_counting_again_gives(invented_literature):
    arrays = invented_literature._arrays
    again = pack_background(arrays, invented_literature.brain)
    assert again.keys() == {"grid_tenths", "grid_hits", "grid_study_hits"}
    for name, array in again.items():
        assert array.dtype == arrays[name].dtype
        assert np.array_equal(array, arrays[name])
    assert np.array_equal(again["grid_tenths"], grey_lattice(brain_reference(), 4.0))


def test_ten_millimetres_are_read_and_other_radii_counted_when_asked_for(invented_literature):
    arrays = invented_literature._arrays
    stored, other = invented_literature.background(10.0), invented_literature.background(14.0)
    assert stored.location_hits is arrays["grid_hits"]
    assert stored.study_locations is arrays["grid_study_hits"]
    again = compute_background(arrays["peak_tenths"], arrays["peak_study"], 8, arrays["grid_tenths"], 14.0)
    assert other.location_hits.tolist() == again.location_hits.tolist()
    assert (other.location_hits >= stored.location_hits).all()
    assert other.location_hits.sum() == other.study_locations.sum() > stored.location_hits.sum() > 0


def test_each_grid_location_has_the_hits_of_a_sphere_there(open_literature):
    grid = np.asarray(open_literature._arrays["grid_tenths"])
    for radius_mm in (10.0, 7.3):
        found = open_literature.background(radius_mm)
        for place in range(5, len(grid), 1500):
            hits = open_literature.studies_hitting(sphere(grid[place] / 10, radius_mm))
            assert found.location_hits[place] == len(hits)
