"""Parcels of an atlas: each is the mask of one number, however the image is stored or cropped."""

from __future__ import annotations

import nibabel as nib
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from hypothesis.extra import numpy as npst

from revinf.exceptions import InputFileError
from revinf.spaces.parcels import load_parcels
from revinf.spaces.regions import Mask

STRAIGHT = np.array([[2.0, 0, 0, -10], [0, 2, 0, -20], [0, 0, 2, 0], [0, 0, 0, 1]])
MIRRORED = np.array([[-3.0, 0, 0, 14.5], [0, 2, 0, -20], [0, 0, 1.5, 7], [0, 0, 0, 1]])
OBLIQUE = np.array([[1.9, 0.3, 0, -9.3], [-0.3, 1.9, 0.1, -4.4], [0, -0.1, 2.1, -6.1], [0, 0, 0, 1]])


def write(path, values, affine=STRAIGHT):
    image = nib.Nifti1Image(values, affine)
    image.set_sform(affine, code=4)
    nib.save(image, path)
    return path


@pytest.fixture(scope="module")
def file(tmp_path_factory):
    return tmp_path_factory.mktemp("atlas") / "atlas.nii.gz"


@pytest.mark.parametrize("affine", [STRAIGHT, MIRRORED, OBLIQUE], ids=["straight", "mirrored", "oblique"])
@settings(max_examples=40, deadline=None)
@given(
    values=npst.arrays(np.int16, (4, 5, 3), elements=st.sampled_from([0, 0, 1, 2, 7, 300])).filter(np.any),
    points=npst.arrays(np.int16, (60, 3), elements=st.integers(-250, 150)),
)
def test_each_parcel_is_the_uncropped_mask_of_its_number(file, affine, values, points):
    found = dict(load_parcels(write(file, values, affine)))
    assert list(found) == sorted(set(values.reshape(-1).tolist()) - {0})
    # The centres and corners of voxels, where a shifted origin could round another way.
    ijk = np.stack(np.meshgrid(*(np.arange(0, n + 0.5, 0.5) - 0.5 for n in values.shape)), axis=-1).reshape(-1, 3)
    at = np.rint(10 * (ijk @ affine[:3, :3].T + affine[:3, 3])).astype(np.int16)
    asked = np.concatenate([points, at])
    for number, mask in found.items():
        whole = Mask(ijk_inside=values == number, affine=affine.astype(np.float32).astype(float), name="whole")
        np.testing.assert_array_equal(mask.contains(asked), whole.contains(asked))
        assert mask.ijk_inside.sum() == np.count_nonzero(values == number)
        assert mask.centre_mm == pytest.approx(whole.centre_mm, abs=1e-5)
        assert mask.name == f"parcel {number}"


def test_parcel_is_cropped_to_its_own_box(file):
    values = np.zeros((30, 40, 20), dtype=np.uint16)
    values[3:5, 30:33, 10] = 9
    values[28, 2, 2] = 4
    shapes = {number: mask.ijk_inside.shape for number, mask in load_parcels(write(file, values))}
    assert shapes == {4: (1, 1, 1), 9: (2, 3, 1)}


@pytest.mark.parametrize("dtype", ["uint8", "int8", "int16", "uint16", "int32", "uint32", "float32", "float64"])
def test_type_of_the_voxels_does_not_matter(file, dtype):
    values = np.zeros((4, 4, 4), dtype=dtype)
    values[1, 1, 1], values[2, 2, 2] = 1, 120
    assert [number for number, _ in load_parcels(write(file, values))] == [1, 120]


@pytest.mark.parametrize("number", [2_049, 65_535, 2**24 + 1, 2**31 - 1])
def test_large_number_is_kept_to_the_last_digit(file, number):
    values = np.zeros((3, 3, 3), dtype=np.uint32)
    values[1, 1, 1] = number
    assert [found for found, _ in load_parcels(write(file, values))] == [number]


def test_atlas_without_background_has_all_its_parcels(file):
    values = np.ones((3, 3, 3), dtype=np.uint8)
    values[0] = 2
    assert [int(mask.ijk_inside.sum()) for _, mask in load_parcels(write(file, values))] == [18, 9]


def filled(value, dtype):
    values = np.zeros((3, 3, 3), dtype=dtype)
    values[1, 1, 1] = value
    return values


@pytest.mark.parametrize(
    ("values", "words"),
    [
        (filled(0.5, np.float32), "the voxels of an atlas must be whole numbers from 0"),
        (filled(1.0000001, np.float64), "the voxels of an atlas must be whole numbers from 0"),
        (filled(-1, np.int16), "the voxels of an atlas must be whole numbers from 0"),
        (filled(-2.0, np.float32), "the voxels of an atlas must be whole numbers from 0"),
        (filled(2**31, np.uint32), "the voxels of an atlas must be whole numbers from 0"),
        (filled(0, np.uint8), "an atlas has 1 to 20000 parcels, but this image has 0"),
        (np.arange(20_001, dtype=np.int32).reshape(59, 339, 1) + 1, "but this image has 20001"),
        (filled(np.nan, np.float32), "voxels must be finite"),
        (np.zeros((3, 3, 3, 2), dtype=np.uint8), "the atlas must be one 3-D volume, but the image has shape"),
    ],
)
def test_image_that_is_no_atlas_is_refused_in_one_line(file, values, words):
    with pytest.raises(InputFileError) as caught:
        list(load_parcels(write(file, values)))
    assert str(caught.value).startswith(f"{file}: ")
    assert words in str(caught.value)
    assert "\n" not in str(caught.value)


def test_parcel_far_from_any_head_is_refused_with_the_file(file):
    affine = STRAIGHT.copy()
    affine[:3, 3] = 5000
    with pytest.raises(InputFileError, match="affine must place the mask within 1000 mm") as caught:
        list(load_parcels(write(file, filled(1, np.uint8), affine)))
    assert str(caught.value).startswith(f"{file}: ")


@pytest.mark.parametrize("name", ["atlas.txt", "absent.nii.gz"])
def test_file_that_is_no_image_is_refused(tmp_path, name):
    (tmp_path / "atlas.txt").write_text("1 2 3")
    with pytest.raises(InputFileError, match=r"the atlas must be a \.nii|give the path of the atlas image"):
        list(load_parcels(tmp_path / name))
