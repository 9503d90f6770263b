"""Counting many places: a lattice of grey matter or a list, and the same counts as one by one."""

from __future__ import annotations

import itertools

import numpy as np
import pytest

from revinf.base_rates.counting import count_terms
from revinf.base_rates.places import PlaceRequest, chosen_places, lattice_places, listed_places
from revinf.base_rates.table import BaseRateTable
from revinf.base_rates.table_rows import write_table
from revinf.base_rates.tabulate import tabulate
from revinf.exceptions import InputFileError, InvalidClaimError, SpaceError, UnknownTermError
from revinf.spaces.brain import tissue_at
from revinf.spaces.spheres import sphere
from revinf.spaces.transforms import TRANSFORMS, talairach_to_mni


@pytest.fixture
def listed(tmp_path):
    """Write a list of places and read it."""

    def run(text, **options):
        path = tmp_path / "places.csv"
        path.write_text(text, encoding="utf-8")
        return listed_places(path, options.pop("radius_mm", 10.0), **options)

    return run


def test_lattice_places_are_grey_multiples_of_the_spacing_named_by_their_coordinates(invented_literature):
    places = lattice_places(invented_literature, 20.0, 8.0)
    assert len(places) == len({place.name for place in places}) > 50
    for place in places:
        assert [float(word) for word in place.name.split()] == list(place.region.centre_mm)
        assert all(value % 20 == 0 for value in place.region.centre_mm)
        assert place.region.radius_mm == 8.0
        assert tissue_at(invented_literature.brain, place.region.centre_mm) == "grey matter"
    every = itertools.product(range(-120, 121, 20), repeat=3)
    grey = {xyz for xyz in every if tissue_at(invented_literature.brain, xyz) == "grey matter"}
    assert {place.region.centre_mm for place in places} == grey


def test_a_spacing_or_radius_out_of_range_is_refused(invented_literature):
    with pytest.raises(SpaceError, match="spacing_mm must be 1 to 50 mm"):
        lattice_places(invented_literature, 0.5, 8.0)
    with pytest.raises(SpaceError, match="radius_mm must lie between 0 and 200 mm"):
        lattice_places(invented_literature, 50.0, 201.0)


def test_listed_places_keep_order_name_and_their_own_radius(listed):
    text = "region,x,y,z,radius_mm\n Zone B ,1,-2.25,3,\n\nzone a,4,5,6, 12.5 \n"
    places = listed(text, radius_mm=8.0)
    assert [(place.name, place.region.centre_mm, place.region.radius_mm) for place in places] == [
        ("Zone B", (1.0, -2.3, 3.0), 8.0),
        ("zone a", (4.0, 5.0, 6.0), 12.5),
    ]


def test_listed_columns_are_renamed(listed):
    (place,) = listed("label,mni x,y,z\nhere,1,2,3\n", rename={"region": "label", "x": "mni x"})
    assert (place.name, place.region.centre_mm) == ("here", (1.0, 2.0, 3.0))


@pytest.mark.parametrize("transform", TRANSFORMS)
def test_listed_places_in_talairach_space_are_transformed(listed, transform):
    text = "region,x,y,z,space\none,-40,22,-8,TAL\ntwo,-40,22,-8,MNI\nthree,-40,22,-8,\n"
    one, two, three = listed(text, transform=transform)
    assert one.region == sphere(talairach_to_mni((-40, 22, -8), transform), 10)
    assert two.region == three.region == sphere((-40, 22, -8), 10)


@pytest.mark.parametrize(
    ("row", "column", "problem"),
    [
        (",1,2,3,MNI,", "region", "region '' is empty or stands twice"),
        ("Good,1,2,3,MNI,", "region", "region 'Good' is empty or stands twice"),
        ("b,,2,3,MNI,", "x", "'' is not a number"),
        ("b,1,two,3,MNI,", "y", "'two' is not a number"),
        ("b,1,2", "z", "'' is not a number"),
        ("b,1,2,3,MNI,wide", "radius_mm", "'wide' is not a number"),
        ("b,nan,2,3,MNI,", "x", "finite and within 1000 mm"),
        ("b,1,2,3000,TAL,", "x", "finite and within 1000 mm"),
        ("b,1,2,3,MNI,-1", "radius_mm", "radius_mm must lie between 0 and 200 mm"),
        ("b,1,2,3,MNI,nan", "radius_mm", "radius_mm must lie between 0 and 200 mm"),
        ("b,1,2,3,voxels,", "space", "space must be MNI152 or Talairach"),
    ],
)
def test_a_listed_cell_that_cannot_be_used_is_refused_with_path_line_and_column(listed, tmp_path, row, column, problem):
    with pytest.raises(InputFileError) as caught:
        listed(f"region,x,y,z,space,radius_mm\ngood,1,2,3,MNI,\n\n{row}\n")
    assert str(caught.value).startswith(f"{tmp_path / 'places.csv'}:4:{column}: ")
    assert problem in str(caught.value)
    assert "\n" not in str(caught.value)


def test_a_list_without_places_or_columns_is_refused(listed):
    with pytest.raises(InputFileError, match="the list has no places"):
        listed("region,x,y,z\n")
    with pytest.raises(InputFileError, match="column 'region' is missing"):
        listed("x,y,z\n1,2,3\n")
    with pytest.raises(SpaceError, match="transform must be one of"):
        listed("region,x,y,z\nhere,1,2,3\n", transform="newest")


def test_places_come_from_exactly_one_source(invented_literature, tmp_path):
    (tmp_path / "places.csv").write_text("region,x,y,z\nhere,1,2,3\n")
    assert [
        place.name
        for place in chosen_places(invented_literature, PlaceRequest(radius_mm=5.0, listed=tmp_path / "places.csv"))
    ] == ["here"]
    assert chosen_places(invented_literature, PlaceRequest(radius_mm=5.0, spacing_mm=50.0)) == lattice_places(
        invented_literature, 50.0, 5.0
    )
    for spacing, path in ((None, None), (50.0, tmp_path / "places.csv")):
        with pytest.raises(InvalidClaimError, match="give --lattice MM, --regions FILE, or --atlas FILE"):
            chosen_places(invented_literature, PlaceRequest(radius_mm=5.0, spacing_mm=spacing, listed=path))


def test_counts_of_the_tiny_literature_are_those_one_counts_by_hand(invented_literature, listed):
    places = listed("region,x,y,z\nA,-40,20,10\nB,30,-60,40\n")
    rows = {(row.region, row.term): row[2:6] for row in tabulate(invented_literature, places)}
    assert rows == {  # term and hit, term, other and hit, other
        ("A", "invented naming"): (3, 4, 0, 4),
        ("A", "invented reading"): (1, 2, 2, 6),
        ("A", "invented waiting"): (1, 4, 2, 4),
        ("B", "invented naming"): (1, 4, 3, 4),
        ("B", "invented reading"): (1, 2, 3, 6),
        ("B", "invented waiting"): (3, 4, 1, 4),
    }


def test_tabulated_rows_equal_counting_one_by_one(invented_literature):
    places = lattice_places(invented_literature, 20.0, 25.0)
    told = []
    rows = list(tabulate(invented_literature, places, progress=lambda done, of: told.append((done, of))))
    assert told == [(done, len(places)) for done in range(1, len(places) + 1)]
    assert len(rows) == len(places) * invented_literature.n_terms
    assert any(row.term_active for row in rows)
    by_name = {place.name: place for place in places}
    for row in rows:
        counts = count_terms(invented_literature, by_name[row.region].region)
        n11, n10, n01, n00 = counts.at(counts.terms.index(row.term)).as_tuple()
        assert row[2:6] == (n11, n11 + n10, n01, n01 + n00)
        assert sum((n11, n10, n01, n00)) == invented_literature.n_studies
        assert (row.centre, row.radius_mm) == (by_name[row.region].region.centre_mm, 25.0)


def test_only_the_wanted_terms_are_tabulated_each_once(invented_literature, listed):
    places = listed("region,x,y,z\nA,-40,20,10\n")
    wanted = ["Invented_Waiting", "invented naming", "invented waiting"]
    rows = list(tabulate(invented_literature, places, terms=wanted))
    assert [row.term for row in rows] == ["invented naming", "invented waiting"]
    with pytest.raises(UnknownTermError, match="did you mean 'invented naming'"):
        list(tabulate(invented_literature, places, terms=["invented namin"]))


def test_a_table_of_an_invented_literature_says_so_and_answers_like_it(invented_literature, tmp_path):
    places = lattice_places(invented_literature, 20.0, 25.0)
    write_table(tabulate(invented_literature, places), tmp_path / "rates.csv.gz")
    table = BaseRateTable.read(tmp_path / "rates.csv.gz")
    assert table.invented
    assert table.regions == [place.name for place in places]
    assert table.terms == invented_literature.terms
    assert table.n_studies == invented_literature.n_studies
    source = table.region(places[0].name).source
    assert source == (f"invented data: tiny invented literature, fingerprint {invented_literature.fingerprint}")
    for place in places[::10]:
        region, distance = table.nearest_region(place.region.centre_mm)
        assert (region.name, distance) == (place.name, 0.0)
        ours, theirs = count_terms(invented_literature, place.region), table.term_counts(region.name)
        for name in ("term_active", "term_total", "other_active", "other_total"):
            assert np.array_equal(getattr(ours, name), getattr(theirs, name))
