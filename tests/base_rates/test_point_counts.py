"""Counts at every point are those of one sphere after another."""

from __future__ import annotations

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from revinf.base_rates.counting import count_terms
from revinf.base_rates.point_counts import count_points
from revinf.literature.active_points import active_points
from revinf.literature.literature import Literature
from revinf.spaces.spheres import sphere


def test_points_are_counted_as_spheres_are(open_literature: Literature) -> None:
    grid = np.asarray(open_literature.arrays()["grid_tenths"])[::97]
    found = count_points(open_literature, grid, 10.0, spacing_tenths=40)
    for at in range(0, len(grid), 9):
        counts = count_terms(open_literature, sphere((grid[at] / 10).tolist(), 10.0))
        assert np.array_equal(found.hits[:, at], counts.term_active)
        assert found.active[at] == counts.term_active[0] + counts.other_active[0]


@settings(max_examples=60, deadline=None)
@given(
    peaks=st.lists(st.tuples(*[st.integers(-300, 300)] * 3, st.integers(0, 140)), min_size=1, max_size=60),
    radius=st.sampled_from([0.0, 2.5, 4.0, 10.0]),
    spacing=st.sampled_from([20, 40]),
)
def test_bits_are_those_of_a_plain_search(peaks: list[tuple[int, int, int, int]], radius: float, spacing: int) -> None:
    line = np.arange(-200, 201, spacing)
    grid = np.stack(np.meshgrid(line, line[:3], line[:2], indexing="ij"), axis=-1).reshape(-1, 3).astype(np.int16)
    xyz = np.array([peak[:3] for peak in peaks], dtype=np.int16)
    study = np.array([peak[3] for peak in peaks], dtype=np.int32)
    bits = active_points(xyz, study, 141, grid, radius, spacing_tenths=spacing)
    plain = np.zeros((141, len(grid)), dtype=np.uint8)
    near = ((xyz[:, None].astype(int) - grid[None].astype(int)) ** 2).sum(axis=2) <= (10 * radius) ** 2
    np.maximum.at(plain, study, near.astype(np.uint8))
    assert np.array_equal(np.unpackbits(bits, axis=1, count=len(grid)), plain)
