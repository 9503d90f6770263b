"""Which voxels a point touches."""

from __future__ import annotations

import itertools

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.exceptions import SpaceError
from revinf.spaces.voxels import checked_affine, touched_voxels, voxel_sizes

SHAPE = (4, 5, 6)


@given(st.tuples(*(st.integers(-30, 140),) * 3))
def test_touched_voxels_are_those_whose_closed_box_holds_the_point(point):
    affine = np.diag([2.0, 2.0, 2.0, 1.0])
    found = set(touched_voxels(np.array([point]), affine, SHAPE)[0].tolist()) - {-1}
    expected = {
        int(np.ravel_multi_index(ijk, SHAPE))
        for ijk in itertools.product(*(range(n) for n in SHAPE))
        if all(abs(20 * i - value) <= 10 for i, value in zip(ijk, point, strict=True))
    }
    assert found == expected


@given(st.tuples(*(st.integers(-30, 140),) * 3))
def test_the_order_of_storage_does_not_matter(point):
    """The same image stored right to left names the mirrored voxels."""
    forward = touched_voxels(np.array([point]), np.diag([2.0, 2, 2, 1]), SHAPE)[0]
    flipped = np.diag([-2.0, 2, 2, 1])
    flipped[0, 3] = 2.0 * (SHAPE[0] - 1)
    backward = touched_voxels(np.array([point]), flipped, SHAPE)[0]
    numbers = np.arange(np.prod(SHAPE)).reshape(SHAPE)
    mirrored = numbers[::-1].reshape(-1)
    assert set(forward.tolist()) == {int(mirrored[v]) if v >= 0 else -1 for v in backward}


def test_voxel_sizes_do_not_depend_on_orientation():
    turned = np.array([[0, -3.0, 0, 5], [2, 0, 0, 7], [0, 0, 4, 1], [0, 0, 0, 1]])
    assert voxel_sizes(turned).tolist() == [2, 3, 4]


@pytest.mark.parametrize(
    "affine",
    [
        np.diag([2.0, 2, 0, 1]),
        np.zeros((4, 4)),
        np.array([[1.0, 1, 0, 0], [1, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1]]),
        np.diag([2.0, 2, 2, 2]),
        np.diag([2.0, 2, np.nan, 1]),
        np.eye(3),
    ],
)
def test_an_affine_that_cannot_be_inverted_is_refused(affine):
    with pytest.raises(SpaceError, match="affine must be"):
        checked_affine(affine)


def test_small_voxels_are_not_taken_for_a_singular_affine():
    assert checked_affine(np.diag([1e-3, 1e-3, 1e-3, 1])).shape == (4, 4)
