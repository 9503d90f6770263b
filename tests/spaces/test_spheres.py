"""Spheres: exact boundaries, growth with the radius, refusals."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from hypothesis import example, given
from hypothesis import strategies as st
from hypothesis.extra import numpy as npst

from revinf.exceptions import SpaceError
from revinf.spaces.regions import Sphere, sphere
from revinf.spaces.spheres import squared_tenths

TENTHS = npst.arrays(np.int16, (20, 3), elements=st.integers(-1200, 1200))
CENTRES = st.tuples(*(st.integers(-1200, 1200),) * 3)


def brute_force(points, centre, radius: str):
    limit = (Fraction(radius) * 10) ** 2
    return [sum((Fraction(int(p)) - c) ** 2 for p, c in zip(point, centre, strict=True)) <= limit for point in points]


@given(TENTHS, CENTRES, st.decimals(0, 200, places=2))
def test_hits_equal_those_of_exact_fractions(points, centre, radius):
    ball = Sphere(centre_tenths=centre, radius_mm=float(radius))
    assert ball.contains(points).tolist() == brute_force(points, centre, str(radius))


@pytest.mark.parametrize(
    ("offset", "radius", "inside"),
    [
        ((60, 80, 0), 10, True),
        ((60, 80, 1), 10, False),
        ((100, 22, 4), 10.25, True),  # 10500 <= 10506.25
        ((100, 22, 5), 10.25, False),  # 10509
        ((7, 0, 0), 0.7, True),
        ((8, 0, 0), 0.1 * 8, True),
        ((3, 0, 0), 0.1 + 0.2, True),
        ((11, 0, 0), 1.1, True),
        ((0, 0, 0), 0, True),
        ((1, 0, 0), 0, False),
        ((1, 0, 0), 0.0999, False),
    ],
)
def test_boundary_is_inside_and_the_next_tenth_is_not(offset, radius, inside):
    centre = np.array([540, -540, 240])
    point = (centre + np.array(offset)).reshape(1, 3)
    ball = sphere(centre / 10, radius)
    assert ball.contains(point).tolist() == [inside]


@example(radius=0.7 - 1e-12)
@example(radius=199.99999999999997)
@given(radius=st.floats(0, 200))
def test_squared_limit_is_the_floor_of_the_square(radius):
    exact = (Fraction(radius) * 10) ** 2
    # The radius is read to 1e-9 of a tenth, so the limit may differ by that and by no more.
    assert exact - 1 - Fraction(1, 10**5) < squared_tenths(radius) <= exact + Fraction(1, 10**5)


@given(TENTHS, CENTRES, st.floats(0, 200), st.floats(0, 200))
def test_a_larger_radius_loses_no_hit(points, centre, first, second):
    small, large = sorted((first, second))
    fewer = Sphere(centre_tenths=centre, radius_mm=small).contains(points)
    more = Sphere(centre_tenths=centre, radius_mm=large).contains(points)
    assert (fewer <= more).all()


@given(TENTHS, CENTRES, st.floats(0, 200))
def test_the_box_holds_every_hit(points, centre, radius):
    ball = Sphere(centre_tenths=centre, radius_mm=radius)
    low, high = ball.bounds_tenths()
    hits = points[ball.contains(points)]
    assert ((hits >= low) & (hits <= high)).all()
    assert ((high - low) / 20 < radius + 0.1 + 1e-9).all()


@given(TENTHS, CENTRES, st.floats(0, 200))
def test_mirrored_points_hit_the_mirrored_sphere(points, centre, radius):
    x, y, z = centre
    here = Sphere(centre_tenths=centre, radius_mm=radius).contains(points)
    there = Sphere(centre_tenths=(-x, y, z), radius_mm=radius).contains(points * [-1, 1, 1])
    np.testing.assert_array_equal(here, there)


def test_small_integers_do_not_overflow():
    far = np.array([[32767, 32767, 32767], [-32768, -32768, -32768], [182, 0, 0]], dtype=np.int16)
    # 182 tenths squared is 33124, beyond int16.
    assert sphere((0, 0, 0), 18.2).contains(far).tolist() == [False, False, True]
    assert sphere((0, 0, 0), 18.1).contains(far).tolist() == [False, False, False]


def test_no_points_no_hits():
    assert sphere((0, 0, 0), 10).contains(np.empty((0, 3), dtype=np.int16)).shape == (0,)


def test_sphere_names_its_kind_and_rounds_its_centre():
    ball = sphere([-49.77, -34.36, 25.74], 8)
    assert ball.kind == "sphere"
    assert ball.centre_tenths == (-498, -344, 257)
    assert ball.centre_mm == (-49.8, -34.4, 25.7)
    assert all(type(value) is int for value in ball.centre_tenths)
    assert ball == sphere((-49.8, -34.4, 25.7), 8.0)


@pytest.mark.parametrize("radius", [-0.1, 200.1, np.nan, np.inf])
def test_a_radius_out_of_range_is_refused(radius):
    with pytest.raises(SpaceError, match="radius_mm must lie between 0 and 200 mm, but got"):
        sphere((0, 0, 0), radius)


@pytest.mark.parametrize("centre", [(0, 0), (0, 0, 10_001), (0, 0, 0, 0)])
def test_a_centre_that_is_no_place_is_refused(centre):
    with pytest.raises(SpaceError, match="centre_tenths must be three"):
        Sphere(centre_tenths=centre, radius_mm=10)


@pytest.mark.parametrize("centre", [(0, 0), [[0, 0, 0], [1, 1, 1]], (0, 0, np.nan)])
def test_a_centre_in_mm_that_is_no_point_is_refused(centre):
    with pytest.raises(SpaceError):
        sphere(centre, 10)


@pytest.mark.parametrize("points", [np.zeros((2, 3)), np.zeros(3, dtype=int), np.zeros((2, 2), int)])
def test_points_that_are_not_whole_tenths_in_rows_of_three_are_refused(points):
    with pytest.raises(SpaceError, match="round coordinates with to_tenths"):
        sphere((0, 0, 0), 10).contains(points)
