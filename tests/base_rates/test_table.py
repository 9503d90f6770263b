"""Base-rate tables in memory: regions by name and by place, counts, and the mark of invented data."""

from __future__ import annotations

import pytest

from revinf.base_rates.table import BaseRateTable
from revinf.base_rates.table_rows import TableRow, write_table
from revinf.exceptions import SpaceError

ROWS = [
    TableRow("Left  IFG", "pain", 3, 10, 5, 100, (-48.0, 26.0, 12.0), 8.0, "typed"),
    TableRow("Left  IFG", "fear", 1, 4, 7, 106, (-48.0, 26.0, 12.0), 8.0, "typed"),
    TableRow("right TPJ", "pain", 2, 10, 6, 100, (54.0, -54.0, 24.0), None, "typed"),
    TableRow("nowhere", "pain", 0, 10, 0, 102),
]


@pytest.fixture
def table():
    return BaseRateTable(ROWS, name="typed")


def test_regions_keep_their_order_and_terms_are_sorted(table):
    assert table.regions == ["Left  IFG", "right TPJ", "nowhere"]
    assert table.terms == ["fear", "pain"]
    assert table.n_studies == 112


def test_counts_come_term_by_term_as_four_cells(table):
    counts = table.term_counts("Left  IFG")
    assert counts.terms == ["fear", "pain"]
    assert counts.at(0).as_tuple() == (1, 3, 7, 99)
    assert counts.at(1).as_tuple() == (3, 7, 5, 95)


@pytest.mark.parametrize("asked", ["Left  IFG", "left ifg", "  LEFT IFG "])
def test_a_region_is_found_in_any_case(table, asked):
    found = table.region(asked)
    assert (found.name, found.centre, found.radius_mm) == ("Left  IFG", (-48.0, 26.0, 12.0), 8.0)
    assert found.source == "typed"


def test_an_unknown_region_comes_with_near_misses(table):
    with pytest.raises(SpaceError, match="has no region 'right TPI'; it has 3, such as 'right TPJ'"):
        table.region("right TPI")


def test_the_nearest_region_answers_up_to_its_radius(table):
    region, distance = table.nearest_region((-48, 26, 12))
    assert (region.name, distance) == ("Left  IFG", 0.0)
    region, distance = table.nearest_region((-48, 26, 20))
    assert (region.name, distance) == ("Left  IFG", 8.0)
    with pytest.raises(SpaceError, match=r"is 8\.1 mm away \('Left  IFG'\), farther than its radius of 8 mm"):
        table.nearest_region((-48, 26, 20.1))


def test_a_region_without_a_radius_reaches_ten_millimetres(table):
    assert table.nearest_region((54, -54, 34))[1] == 10.0
    with pytest.raises(SpaceError, match="its radius of 10 mm"):
        table.nearest_region((54, -54, 34.1))


def test_of_equally_near_regions_the_first_answers():
    rows = [TableRow(name, "pain", 1, 2, 3, 4, (x, 0.0, 0.0), 8.0) for name, x in (("b", 4.0), ("a", -4.0))]
    assert BaseRateTable(rows, name="typed").nearest_region((0, 0, 0))[0].name == "b"


def test_a_table_without_places_cannot_be_asked_for_one():
    with pytest.raises(SpaceError, match="gives no coordinates; name the region with --region"):
        BaseRateTable([ROWS[-1]], name="typed").nearest_region((0, 0, 0))


@pytest.mark.parametrize(
    ("source", "invented"),
    [
        ("invented for tests", True),
        ("Invented data: story", True),
        ("typed, not invented", False),
        ("", False),
    ],
)
def test_invented_counts_are_marked_by_their_source(source, invented):
    rows = [ROWS[0], ROWS[3]._replace(source=source)]
    assert BaseRateTable(rows, name="typed").invented is invented


@pytest.mark.parametrize("name", ["rates.csv", "rates.csv.gz"])
def test_a_table_from_a_file_is_named_after_it(tmp_path, name):
    write_table(ROWS, tmp_path / name)
    table = BaseRateTable.read(tmp_path / name)
    assert table.name == "rates"
    assert len(table.fingerprint) == 16
    assert table.term_counts("right TPJ").at(0).as_tuple() == (2, 8, 6, 94)
    assert BaseRateTable.read(tmp_path / name, name="mine").name == "mine"
