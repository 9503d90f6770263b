"""`revinf tabulate --atlas`: the parcels of an atlas image become regions of a table."""

from __future__ import annotations

import csv
import json

import nibabel as nib
import numpy as np
import pytest

AFFINE = np.array([[2, 0, 0, -90], [0, 2, 0, -126], [0, 0, 2, -72], [0, 0, 0, 1.0]])
# Two invented boxes in MNI152, as voxels of the usual 2 mm grid.
BOXES = {3: np.s_[30:40, 57:65, 23:31], 41: np.s_[58:68, 69:79, 30:40]}


@pytest.fixture(scope="module")
def files(tmp_path_factory):
    """The folder of an atlas, its labels, and one mask a parcel."""
    folder = tmp_path_factory.mktemp("atlas")
    values = np.zeros((91, 109, 91), np.int16)
    for number, box in BOXES.items():
        values[box] = number
        nib.save(nib.Nifti1Image((values == number).astype(np.uint8), AFFINE), folder / f"mask{number}.nii.gz")
    nib.save(nib.Nifti1Image(values, AFFINE), folder / "atlas.nii.gz")
    (folder / "labels.csv").write_text("value,region\n3,Left box\n41,Right box\n99,Not in the image\n")
    return folder


def table_of(revinf, literature, out, *args):
    done = revinf("tabulate", "--literature", literature, "--out", out, *args)
    assert (done.exit_code, done.stderr) == (0, "")
    with out.open(encoding="utf-8", newline="") as stream:
        return list(csv.DictReader(stream))


def test_parcels_are_named_by_the_labels_and_else_by_their_number(revinf, literature, files, tmp_path):
    atlas = ("--atlas", files / "atlas.nii.gz", "--term", "fear")
    rows = table_of(revinf, literature, tmp_path / "a.csv", *atlas, "--labels", files / "labels.csv")
    assert [row["region"] for row in rows] == ["Left box", "Right box"]
    rows = table_of(revinf, literature, tmp_path / "b.csv", *atlas)
    assert [row["region"] for row in rows] == ["parcel 3", "parcel 41"]


@pytest.mark.parametrize("number", list(BOXES))
def test_parcel_answers_as_the_mask_of_its_voxels_does(revinf, literature, files, tmp_path, number):
    table = tmp_path / "table.csv"
    table_of(revinf, literature, table, "--atlas", files / "atlas.nii.gz")
    masked, tabled = (
        json.loads(revinf("check", *where, "--term", "fear", "--json").stdout)
        for where in (
            ("--literature", literature, "--mask", files / f"mask{number}.nii.gz"),
            ("--table", table, "--region", f"parcel {number}"),
        )
    )
    for part in ("counts", "rates", "likelihood_ratio", "posterior", "association"):
        assert tabled[part] == masked[part]
    assert masked["counts"]["term_active"] + masked["counts"]["other_active"] > 0
    assert tabled["literature"]["invented"] is True


def test_parcels_have_no_centre_and_no_radius(revinf, literature, files, tmp_path):
    rows = table_of(revinf, literature, tmp_path / "t.csv", "--atlas", files / "atlas.nii.gz")
    assert {(row.get("x", ""), row.get("radius_mm", "")) for row in rows} == {("", "")}


def test_columns_of_the_labels_can_have_other_names(revinf, literature, files, tmp_path):
    labels = tmp_path / "labels.tsv"
    labels.write_text("index\tname\n3\tA\n41\tB\n")
    rows = table_of(
        revinf, literature, tmp_path / "t.csv", "--atlas", files / "atlas.nii.gz", "--labels", labels, "--column",
        "value=index", "--column", "region=name", "--term", "fear",
    )  # fmt: skip
    assert [row["region"] for row in rows] == ["A", "B"]


def test_atlas_of_whole_numbers_stored_as_floats_is_an_atlas(revinf, literature, files, tmp_path):
    image = nib.load(files / "atlas.nii.gz")
    nib.save(nib.Nifti1Image(np.asarray(image.dataobj, np.float32), AFFINE), tmp_path / "floats.nii.gz")
    one, other = (
        table_of(revinf, literature, tmp_path / f"{i}.csv", "--atlas", path)
        for i, path in enumerate((files / "atlas.nii.gz", tmp_path / "floats.nii.gz"))
    )
    assert one == other
