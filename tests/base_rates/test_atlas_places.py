"""An atlas as a table: one region a parcel, and the counts that a mask of that parcel has."""

from __future__ import annotations

import nibabel as nib
import numpy as np
import pytest

from revinf.base_rates.places import PlaceRequest, atlas_places, chosen_places
from revinf.base_rates.table import BaseRateTable
from revinf.base_rates.table_rows import write_table
from revinf.base_rates.tabulate import tabulate
from revinf.evidence.assess import assess
from revinf.evidence.claim import Claim
from revinf.exceptions import InputFileError, InvalidClaimError, SpaceError

AFFINE = np.array([[4.0, 0, 0, -90], [0, 4, 0, -126], [0, 0, 4, -72], [0, 0, 0, 1]])
TERMS = ("invented naming", "invented reading", "invented waiting")


def write(path, values):
    image = nib.Nifti1Image(values, AFFINE)
    image.set_sform(AFFINE, code=4)
    nib.save(image, path)
    return path


def blocks() -> np.ndarray:
    """Return an invented atlas: blocks around two places of the tiny literature, and one with no peak."""
    values = np.zeros((46, 55, 46), dtype=np.uint8)
    for number, centre, half in ((12, (-40, 20, 10), 2), (3, (30, -60, 40), 3), (200, (60, 0, -20), 1)):
        i, j, k = np.rint((np.array(centre) - AFFINE[:3, 3]) / 4).astype(int)
        values[i - half : i + half + 1, j - half : j + half + 1, k - half : k + half + 1] = number
    return values


@pytest.fixture
def atlas(tmp_path):
    return write(tmp_path / "atlas.nii.gz", blocks())


@pytest.fixture
def labels(tmp_path):
    def write_labels(text, name="labels.csv"):
        (tmp_path / name).write_text(text, encoding="utf-8")
        return tmp_path / name

    return write_labels


def test_parcels_without_labels_are_called_by_their_number_in_its_order(atlas):
    assert [place.name for place in atlas_places(atlas)] == ["parcel 3", "parcel 12", "parcel 200"]


def test_labels_name_their_parcels_and_the_rest_keep_their_number(atlas, labels):
    table = labels("value,region\n12, Zone B \n0,background\n3,zone a\n999,not there\n")
    assert [place.name for place in atlas_places(atlas, table)] == ["zone a", "Zone B", "parcel 200"]


def test_columns_of_the_labels_are_renamed(atlas, labels):
    table = labels("index\tname\n12\tzone\n", "labels.tsv")
    places = atlas_places(atlas, table, rename={"value": "index", "region": "name"})
    assert [place.name for place in places] == ["parcel 3", "zone", "parcel 200"]


@pytest.mark.parametrize(
    ("row", "value"),
    [
        ("1.5,x", "'1.5'"),
        ("-3,x", "'-3'"),
        ("three,x", "'three'"),
        (",x", "''"),
        ("12,", "'12'"),
        ("3,again", "'3'"),
        ("03,again", "'03'"),
        ("²,x", "'²'"),
        ("1" * 5000 + ",x", "'" + "1" * 40 + "'"),
    ],
)
def test_label_row_that_cannot_be_used_is_refused_with_path_line_and_column(atlas, labels, row, value):
    table = labels(f"value,region\n3,zone\n\n{row}\n")
    with pytest.raises(InputFileError) as caught:
        atlas_places(atlas, table)
    assert str(caught.value) == (
        f"{table}:4:value: value {value} is no whole number, stands twice, or has no name; keep one row a parcel"
    )


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("value,region\n1,x\n2,y\n", "no value of this table is a parcel of atlas.nii.gz"),
        ("value,region\n3,Zone\n12,  zone\n", "two parcels have the same name"),
        ("value,region\n3,parcel  12\n", "two parcels have the same name"),
        ("number,region\n3,x\n", "column 'value' is missing"),
    ],
)
def test_labels_that_do_not_fit_the_atlas_are_refused_in_one_line(atlas, labels, text, words):
    table = labels(text)
    with pytest.raises(InputFileError) as caught:
        atlas_places(atlas, table)
    assert str(caught.value).startswith(str(table))
    assert words in str(caught.value)
    assert "\n" not in str(caught.value)


def test_atlas_is_one_of_three_ways_to_name_places(invented_literature, atlas, labels):
    table = labels("value,region\n3,zone\n")
    asked = PlaceRequest(radius_mm=10.0, atlas=atlas, labels=table)
    assert [place.name for place in chosen_places(invented_literature, asked)][:1] == ["zone"]
    for wrong in (
        PlaceRequest(radius_mm=10.0, atlas=atlas, spacing_mm=20.0),
        PlaceRequest(radius_mm=10.0, atlas=atlas, listed=table),
        PlaceRequest(radius_mm=10.0, labels=table),
        PlaceRequest(radius_mm=10.0, labels=table, spacing_mm=20.0),
    ):
        with pytest.raises(InvalidClaimError, match="places come from one source"):
            chosen_places(invented_literature, wrong)


@pytest.mark.parametrize("term", TERMS)
def test_region_of_a_tabulated_atlas_answers_as_the_mask_does(invented_literature, atlas, labels, tmp_path, term):
    names = {3: "zone a", 12: "Zone B", 200: "zone c"}
    table = labels("value,region\n" + "".join(f"{number},{name}\n" for number, name in names.items()))
    path = tmp_path / "counts.csv"
    write_table(tabulate(invented_literature, atlas_places(atlas, table)), path)
    tabled = BaseRateTable.read(path)
    hit = 0
    for number, name in names.items():
        mask = write(tmp_path / f"mask{number}.nii.gz", (blocks() == number).astype(np.uint8))
        by_mask = assess(Claim(term=term, mask=mask, prior=0.3), invented_literature)
        by_name = assess(Claim(term=term, region=name.upper(), prior=0.3), tabled)
        for part in ("counts", "rates", "likelihood_ratio", "posterior", "required_prior", "association"):
            assert getattr(by_name, part) == getattr(by_mask, part)
        assert (by_name.claim.region_kind, by_name.claim.radius_mm) == ("table", None)
        hit += by_name.counts.active_total
    assert hit


def test_tabulated_parcel_has_no_centre_and_answers_for_no_peak(invented_literature, atlas, tmp_path):
    path = tmp_path / "counts.csv"
    write_table(tabulate(invented_literature, atlas_places(atlas)), path)
    assert {line.split(",", 6)[6][:4] for line in path.read_text().splitlines()[1:]} == {",,,,"}
    table = BaseRateTable.read(path)
    assert table.region("parcel 12").centre is None
    with pytest.raises(SpaceError, match="gives no coordinates; name the region with --region"):
        table.nearest_region((-40, 20, 10))
