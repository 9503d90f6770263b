"""Laws of the Talairach transforms; their published numbers are in tests/published."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from hypothesis.extra import numpy as npst

from revinf.exceptions import SpaceError
from revinf.spaces.transforms import TRANSFORMS, mni_to_talairach, talairach_to_mni

POINTS = npst.arrays(np.float64, (5, 3), elements=st.floats(-150, 150))


@pytest.mark.parametrize("transform", TRANSFORMS)
@given(xyz=POINTS)
def test_there_and_back_is_where_we_were(transform, xyz):
    there = mni_to_talairach(xyz, transform)
    assert np.abs(talairach_to_mni(there, transform) - xyz).max() < 1e-6
    back = talairach_to_mni(xyz, transform)
    assert np.abs(mni_to_talairach(back, transform) - xyz).max() < 1e-6


@pytest.mark.parametrize("transform", TRANSFORMS)
@given(xyz=POINTS)
def test_a_point_alone_moves_as_it_does_among_others(transform, xyz):
    together = talairach_to_mni(xyz, transform)
    alone = np.array([talairach_to_mni(point, transform) for point in xyz])
    assert alone.shape == together.shape
    np.testing.assert_allclose(alone, together, rtol=0, atol=1e-9)


@pytest.mark.parametrize("transform", TRANSFORMS)
def test_the_talairach_brain_is_the_smaller_one(transform):
    edges = np.array([[50.0, 0, 0], [0, 50, 0], [0, 0, 50]])
    moved = mni_to_talairach(edges, transform) - mni_to_talairach((0, 0, 0), transform)
    assert 0.6 * 50**3 < np.linalg.det(moved) < 50**3


def test_pooled_is_the_default_and_the_four_differ():
    point = (40.0, -60.0, 30.0)
    moved = {name: tuple(talairach_to_mni(point, name)) for name in TRANSFORMS}
    assert tuple(talairach_to_mni(point)) == moved["pooled"]
    assert len(set(moved.values())) == 4


def test_an_unknown_transform_is_refused_with_the_names_of_the_known():
    with pytest.raises(SpaceError, match="one of pooled, spm, fsl, piecewise, but got 'afni'"):
        talairach_to_mni((0, 0, 0), "afni")


def test_coordinates_that_are_none_are_refused():
    with pytest.raises(SpaceError, match="finite"):
        mni_to_talairach((0, 0, np.nan))
