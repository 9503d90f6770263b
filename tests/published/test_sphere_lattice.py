"""Number of lattice points in a sphere: OEIS A000605, radius 0, 1, 2, ... (points on it included)."""

from __future__ import annotations

import numpy as np
import pytest

from revinf.spaces.regions import sphere

A000605 = [1, 7, 33, 123, 257, 515, 925, 1419, 2109]


@pytest.mark.parametrize(("radius", "count"), list(enumerate(A000605)))
@pytest.mark.parametrize("step_mm", [1, 2, 0.1])
def test_sphere_holds_as_many_lattice_points_as_oeis_a000605(radius, count, step_mm):
    axis = np.arange(-10, 11) * round(10 * step_mm)
    lattice = np.stack(np.meshgrid(axis, axis, axis), axis=-1).reshape(-1, 3).astype(np.int16)
    assert sphere((0, 0, 0), radius * step_mm).contains(lattice).sum() == count


@pytest.mark.parametrize(("radius", "count"), list(enumerate(A000605)))
def test_the_count_does_not_depend_on_where_the_sphere_lies(radius, count):
    axis = np.arange(-10, 11) * 10
    lattice = np.stack(np.meshgrid(axis, axis, axis), axis=-1).reshape(-1, 3)
    moved = (lattice + np.array([-543, 1004, 27])).astype(np.int16)
    assert sphere((-54.3, 100.4, 2.7), radius).contains(moved).sum() == count
