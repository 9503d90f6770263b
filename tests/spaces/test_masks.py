"""Masks: what they contain, and every file that is refused in one line."""

from __future__ import annotations

import gzip
from typing import ClassVar

import nibabel as nib
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from hypothesis.extra import numpy as npst

from revinf.exceptions import InputFileError, SpaceError
from revinf.spaces.regions import Mask, load_mask

AFFINE = np.array([[2.0, 0, 0, -10], [0, 2, 0, -20], [0, 0, 2, 0], [0, 0, 0, 1]])


def blob() -> np.ndarray:
    """Return an invented grid with a box of 2 x 3 x 4 voxels."""
    values = np.zeros((10, 12, 8), dtype=np.uint8)
    values[3:5, 4:7, 2:6] = 1
    return values


def write(path, values, affine=AFFINE, code=4, kind=nib.Nifti1Image):
    image = kind(values, affine)
    image.set_sform(affine, code=code)
    image.set_qform(affine if code else None, code=code)
    if not code:
        image.header["sform_code"] = 0
        image.header["qform_code"] = 0
    nib.save(image, path)
    return path


class TestContains:
    @given(npst.arrays(np.int16, (20, 3), elements=st.integers(-250, 250)))
    def test_equals_the_closed_box_of_the_voxels(self, points):
        mask = Mask(ijk_inside=blob() != 0, affine=AFFINE, name="box")
        # Voxels 3-4, 4-6, 2-5 of 2 mm: their faces, in tenths of a millimetre.
        low, high = np.array([-50, -130, 30]), np.array([-10, -70, 110])
        expected = ((points >= low) & (points <= high)).all(axis=1)
        np.testing.assert_array_equal(mask.contains(points), expected)

    @given(
        npst.arrays(np.bool_, (4, 3, 3)).filter(np.any),
        npst.arrays(np.int16, (20, 3), elements=st.integers(-120, 120)),
    )
    def test_mirrored_points_hit_the_mirrored_mask(self, inside, points):
        affine = np.diag([2.0, 2, 2, 1])
        affine[0, 3] = -3.0
        here = Mask(ijk_inside=inside, affine=affine, name="here").contains(points)
        there = Mask(ijk_inside=inside[::-1], affine=affine, name="there")
        np.testing.assert_array_equal(here, there.contains(points * np.array([-1, 1, 1])))

    @given(
        npst.arrays(np.bool_, (3, 4, 2)).filter(np.any),
        npst.arrays(np.int32, (30, 3), elements=st.integers(-200, 200)),
    )
    def test_the_box_holds_every_hit_also_when_the_grid_is_turned(self, inside, points):
        cosine, sine = np.cos(0.4), np.sin(0.4)
        turned = np.eye(4)
        turned[:2, :2] = 3 * np.array([[cosine, -sine], [sine, cosine]])
        turned[2, 2] = 4.3
        mask = Mask(ijk_inside=inside, affine=turned, name="turned")
        low, high = mask.bounds_tenths()
        assert (low < high).all()
        inverse = np.linalg.inv(turned)
        ijk = np.rint(points / 10 @ inverse[:3, :3].T + inverse[:3, 3]).astype(int)
        valid = ((ijk >= 0) & (ijk < inside.shape)).all(axis=1)
        plain = np.zeros(len(points), dtype=bool)
        plain[valid] = inside[tuple(ijk[valid].T)]
        assert ((points[plain] >= low) & (points[plain] <= high)).all()
        # Nearest voxel by plain rounding: on this grid no whole tenth lies on a face.
        np.testing.assert_array_equal(mask.contains(points), plain)

    def test_centre_is_the_centre_of_gravity(self):
        mask = Mask(ijk_inside=blob() != 0, affine=AFFINE, name="box")
        assert mask.centre_mm == (-3.0, -10.0, 7.0)
        assert mask.kind == "mask"
        low, high = mask.bounds_tenths()
        assert (low.tolist(), high.tolist()) == ([-50, -130, 30], [-10, -70, 110])

    def test_a_mask_without_a_voxel_is_refused(self):
        with pytest.raises(SpaceError, match="must hold a voxel"):
            Mask(ijk_inside=np.zeros((2, 2, 2), dtype=bool), affine=AFFINE, name="none")

    def test_an_array_that_is_no_grid_of_bool_is_refused(self):
        with pytest.raises(SpaceError, match="3-D array of bool"):
            Mask(ijk_inside=blob(), affine=AFFINE, name="numbers")

    def test_a_mask_far_from_any_head_is_refused(self):
        away = AFFINE.copy()
        away[0, 3] = 1e9
        with pytest.raises(SpaceError, match="within 1000 mm of the origin"):
            Mask(ijk_inside=blob() != 0, affine=away, name="away")


class TestLoading:
    @pytest.mark.parametrize("name", ["left area.nii", "left area.nii.gz", "left area.NII.GZ"])
    @pytest.mark.parametrize("kind", [nib.Nifti1Image, nib.Nifti2Image])
    def test_a_mask_comes_back_as_it_was_written(self, tmp_path, name, kind):
        mask = load_mask(write(tmp_path / name, blob(), kind=kind))
        np.testing.assert_array_equal(mask.ijk_inside, blob() == 1)
        np.testing.assert_allclose(mask.affine, AFFINE)
        assert mask.name == "left area"

    @pytest.mark.parametrize("dtype", [np.int16, np.float32, np.float64])
    def test_every_value_but_zero_is_inside(self, tmp_path, dtype):
        values = blob().astype(dtype) * -3
        mask = load_mask(str(write(tmp_path / "m.nii.gz", values)))
        np.testing.assert_array_equal(mask.ijk_inside, blob() == 1)

    def test_one_volume_in_four_dimensions_is_a_mask(self, tmp_path):
        assert load_mask(write(tmp_path / "m.nii", blob()[..., None])).ijk_inside.ndim == 3


class TestRefusals:
    CASES: ClassVar = {
        "empty": (np.zeros((4, 4, 4), np.uint8), AFFINE, 4, "the mask is empty"),
        "full": (np.ones((4, 4, 4), np.uint8), AFFINE, 4, "every voxel is non-zero"),
        "two volumes": (np.zeros((4, 4, 4, 2), np.uint8), AFFINE, 4, "one 3-D volume"),
        "flat": (np.zeros((4, 4), np.uint8), AFFINE, 4, "one 3-D volume"),
        "not finite": (np.full((4, 4, 4), np.nan), AFFINE, 4, "must be finite"),
        "complex": (np.ones((4, 4, 4), np.complex64), AFFINE, 4, "plain numbers"),
        "no place": (blob(), AFFINE, 0, "does not say where it lies"),
        "large voxels": (blob(), np.diag([2.0, 2, 20.5, 1]), 4, "up to 20 mm, but measure 20.5"),
        "long axis": (np.zeros((513, 2, 2), np.uint8), AFFINE, 4, "1 to 512 voxels an axis"),
        "far away": (blob(), AFFINE + 1e6 * np.eye(4)[3][None] * [[1], [0], [0], [0]], 4, "1000 mm"),
    }

    @pytest.mark.parametrize(("values", "affine", "code", "message"), CASES.values(), ids=CASES)
    def test_unusable_image_is_refused_by_name(self, tmp_path, values, affine, code, message, capfd):
        path = write(tmp_path / "bad.nii.gz", values, affine, code)
        self.check(path, message, capfd)

    def test_singular_affine_is_refused(self, tmp_path, capfd):
        path = write(tmp_path / "bad.nii", blob())
        raw = bytearray(path.read_bytes())
        # Bytes 312-327 of the NIfTI-1 header are srow_z.
        raw[312:328] = bytes(16)
        path.write_bytes(bytes(raw))
        self.check(path, "affine must be invertible", capfd)

    @pytest.mark.parametrize("name", ["cut.nii", "cut.nii.gz"])
    @pytest.mark.parametrize("keep", [0, 10, 200, 351, 400, 700])
    def test_file_cut_off_anywhere_is_refused(self, tmp_path, name, keep, capfd):
        values = np.random.default_rng(0).integers(0, 2, (10, 12, 8)).astype(np.uint8)
        path = write(tmp_path / name, values)
        raw = path.read_bytes()
        path.write_bytes(raw[: min(keep, len(raw) - 1)])
        self.check(path, "cannot be read as a NIfTI image", capfd)

    def test_header_with_nonsense_in_any_byte_never_shows_a_traceback_of_the_reader(self, tmp_path, capfd):
        good = write(tmp_path / "good.nii", blob()).read_bytes()
        path = tmp_path / "bad.nii"
        messages = set()
        for position in range(348):
            for value in (0x00, 0xFF):
                path.write_bytes(good[:position] + bytes([value]) + good[position + 1 :])
                try:
                    load_mask(path)
                except InputFileError as error:
                    messages.add(str(error))
        assert messages
        assert not any("\n" in message for message in messages)
        assert capfd.readouterr() == ("", "")

    def test_zipped_file_with_one_changed_byte_is_refused(self, tmp_path, capfd):
        path = write(tmp_path / "changed.nii.gz", blob())
        raw = bytearray(path.read_bytes())
        raw[-6] ^= 1  # in the checksum: all voxels are still there
        path.write_bytes(bytes(raw))
        self.check(path, "cannot be read as a NIfTI image", capfd)

    @pytest.mark.parametrize("content", [b"", b"study,x,y,z\n", b"\x1f\x8b" + bytes(50)])
    def test_another_file_under_this_name_is_refused(self, tmp_path, content, capfd):
        path = tmp_path / "claims.nii.gz"
        path.write_bytes(content)
        self.check(path, "cannot be read as a NIfTI image", capfd)

    def test_zipped_text_is_refused(self, tmp_path, capfd):
        path = tmp_path / "claims.nii.gz"
        path.write_bytes(gzip.compress(b"study,x,y,z\n" * 100))
        self.check(path, "cannot be read as a NIfTI image", capfd)

    @pytest.mark.parametrize("name", ["mask.img", "mask.mgz", "mask", "mask.nii.zip"])
    def test_other_formats_are_refused(self, tmp_path, name, capfd):
        self.check(tmp_path / name, "must be a .nii or .nii.gz file", capfd)

    def test_absent_file_and_folder_are_refused(self, tmp_path, capfd):
        self.check(tmp_path / "none.nii", "there is no such file", capfd)
        (tmp_path / "folder.nii").mkdir()
        self.check(tmp_path / "folder.nii", "there is no such file", capfd)

    @staticmethod
    def check(path, message, capfd):
        with pytest.raises(InputFileError) as caught:
            load_mask(path)
        assert str(caught.value).startswith(f"{path}: ")
        assert message in str(caught.value)
        assert "\n" not in str(caught.value)
        assert caught.value.__cause__ is None
        assert capfd.readouterr() == ("", "")
