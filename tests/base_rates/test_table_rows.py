"""The file format of base-rate tables: every cell checked, every refusal with its place, equal bytes."""

from __future__ import annotations

import csv
import gzip

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from revinf.base_rates.table_rows import COLUMNS, TableRow, read_rows, write_table
from revinf.exceptions import InputFileError

HEADER = "region,term,term_active,term_total,other_active,other_total\n"
PLACED = "region,term,term_active,term_total,other_active,other_total,x,y,z,radius_mm,source\n"


@pytest.fixture
def file(tmp_path):
    def write(content, name="table.csv"):
        path = tmp_path / name
        path.write_bytes(content if isinstance(content, bytes) else content.encode())
        return path

    return write


def test_a_typed_table_needs_counts_and_nothing_else(file):
    rows, _ = read_rows(file(HEADER + "here,Pain_Heat,3,10,5,100\n"))
    assert rows == [TableRow("here", "pain heat", 3, 10, 5, 100)]


def test_all_columns_in_any_order_and_others_beside_them(file):
    columns = [*COLUMNS[::-1], "remark"]
    cells = ["typed", "8", "24", "-54", "54.5", "100", "5", "10", "3", "pain", "here", "anything"]
    rows, _ = read_rows(file(",".join(columns) + "\n" + ",".join(cells) + "\n"))
    assert rows == [TableRow("here", "pain", 3, 10, 5, 100, (54.5, -54.0, 24.0), 8.0, "typed")]


@pytest.mark.parametrize("dress", ["plain", "tabs", "semicolons", "marked", "crlf", "packed", "blank lines"])
def test_every_dress_of_a_table_gives_the_same_rows(file, dress):
    text = HEADER + "here,pain,3,10,5,100\nthere,fear,0,1,2,3\n"
    changed = {
        "tabs": text.replace(",", "\t"),
        "semicolons": text.replace(",", ";"),
        "marked": "\ufeff" + text,
        "crlf": text.replace("\n", "\r\n"),
        "packed": gzip.compress(text.encode()),
        "blank lines": text.replace("\n", "\n\n,,,,,\n"),
    }
    rows, _ = read_rows(file(changed.get(dress, text)))
    assert rows == [TableRow("here", "pain", 3, 10, 5, 100), TableRow("there", "fear", 0, 1, 2, 3)]


@pytest.mark.parametrize(
    ("row", "column", "problem"),
    [
        (",pain,3,10,5,100", "region", "the region is empty"),
        ("here, _ ,3,10,5,100", "term", "the term is empty"),
        ("here,pain,,10,5,100", "term_active", "'' is not a count"),
        ("here,pain,3.5,10,5,100", "term_active", "'3.5' is not a count"),
        ("here,pain,3,ten,5,100", "term_total", "'ten' is not a count"),
        ("here,pain,3,10,-5,100", "other_active", "'-5' is not a count"),
        ("here,pain,3,10,5,1e2", "other_total", "'1e2' is not a count"),
        ("here,pain,3,10,5,²", "other_total", "'²' is not a count"),
        ("here,pain,3,10,5," + "9" * 16, "other_total", "is not a count"),
        ("here,pain,11,10,5,100", "term_active", "11 active studies are more than the 10 there are"),
        ("here,pain,3,10,101,100", "other_active", "101 active studies are more than the 100 there are"),
        ("here,pain,3,10,5,100,1,,3,8,", "x", "x, y and z must be given together"),
        ("here,pain,3,10,5,100,,,3,8,", "x", "x, y and z must be given together"),
        ("here,pain,3,10,5,100,1,right,3,8,", "y", "'right' is not a number of millimetres"),
        ("here,pain,3,10,5,100,1,2,nan,8,", "z", "'nan' is not a number of millimetres"),
        ("here,pain,3,10,5,100,1001,2,3,8,", "x", "'1001' is not a number of millimetres"),
        ("here,pain,3,10,5,100,1,2,3,inf,", "radius_mm", "'inf' is not a number of millimetres"),
        ("here,pain,3,10,5,100,1,2,3,-1,", "radius_mm", "a radius cannot be negative"),
        ("good,Good_,1,1,1,1,1,2,3,8,", "term", "region 'good' and term 'good' stand here again"),
        (" Good,other,1,1,1,1,1,2,3,8,", "region", "'Good' also stands as 'good'"),
        ("good,other,1,1,1,1,1,2,4,8,", "x", "region 'good' has another place or radius above"),
        ("good,other,1,1,1,1,1,2,3,9,", "x", "region 'good' has another place or radius above"),
    ],
)
def test_a_cell_that_cannot_be_used_is_refused_with_path_line_and_column(file, row, column, problem):
    cells = next(csv.reader([row]))
    cells += [""] * (len(COLUMNS) - len(cells))
    path = file(PLACED + 'good,good,1,2,3,4,1,2,3,8,"over\ntwo lines"\n\n' + ",".join(cells) + "\n")
    with pytest.raises(InputFileError) as caught:
        read_rows(path)
    assert str(caught.value).startswith(f"{path}:5:{column}: ")
    assert problem in str(caught.value)
    assert (caught.value.row, caught.value.column) == (5, column)


@pytest.mark.parametrize(
    ("content", "line", "problem"),
    [
        ("", 1, "column 'region' is missing"),
        ("region,term\nhere,pain\n", 1, "column 'term_active' is missing"),
        (HEADER.replace("term_total", "term_active"), 1, "column 'term_total' is missing"),
        (HEADER.replace("\n", ",term\n"), 1, "a column stands twice in the header"),
        (HEADER + "here,pain,3,10,5\n", 2, "the row has 5 cells, the header 6"),
        (HEADER + "here,pain,3,10,5,100,\n", 2, "the row has 7 cells, the header 6"),
        (HEADER + 'a,b,1,1,1,1\nhere,"pain"s,3,10,5,100\n', 3, "the row cannot be split"),
        (HEADER + 'a,b,1,1,1,1\n"here,pain,3,10,5,100\n', 3, "the row cannot be split"),
        (HEADER, None, "the table has no rows"),
        (HEADER.encode() + b"caf\xe9,pain,3,10,5,100\n", None, "is not UTF-8 text"),
        (gzip.compress(HEADER.encode() * 9)[:-5], None, "cannot be read"),
        (b"\x1f\x8b" + b"x" * 40, None, "cannot be read"),
    ],
)
def test_a_file_that_is_no_table_is_refused_with_one_line(file, content, line, problem):
    path = file(content)
    with pytest.raises(InputFileError) as caught:
        read_rows(path)
    assert str(caught.value).startswith(f"{path}:{line}: " if line else f"{path}: ")
    assert problem in str(caught.value)
    assert "\n" not in str(caught.value)


def test_a_missing_file_and_a_folder_are_refused(tmp_path):
    with pytest.raises(InputFileError, match="there is no such file"):
        read_rows(tmp_path / "absent.csv")
    with pytest.raises(InputFileError, match="cannot be read"):
        read_rows(tmp_path)


TEXT = st.text(st.characters(exclude_categories=["Cs", "Cc", "Zs", "Zl", "Zp"]), min_size=1, max_size=8)
MILLIMETRES = st.integers(-1000, 1000).map(lambda tenths: tenths / 10)
COUNTS = st.integers(0, 10**9).flatmap(lambda total: st.tuples(st.integers(0, total), st.just(total)))


@st.composite
def tables(draw):
    """Draw rows that make a legal table."""
    rows = []
    for number in range(draw(st.integers(1, 4))):
        centre = draw(st.none() | st.tuples(MILLIMETRES, MILLIMETRES, MILLIMETRES))
        radius = draw(st.none() | st.decimals(0, 200, places=2).map(float))
        region, source = f"{number} {draw(TEXT)}", draw(st.just("") | TEXT)
        for label in range(draw(st.integers(1, 3))):
            (n11, n1), (n01, n0) = draw(COUNTS), draw(COUNTS)
            rows.append(TableRow(region, f"term {label}", n11, n1, n01, n0, centre, radius, source))
    return rows


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(rows=tables(), name=st.sampled_from(["table.csv", "table.csv.gz"]))
def test_what_is_written_is_read_back(tmp_path, rows, name):
    assert write_table(rows, tmp_path / name) == len(rows)
    assert read_rows(tmp_path / name)[0] == rows


def test_the_written_text_is_plain(tmp_path):
    rows = [
        TableRow("here, there", "pain", 3, 10, 5, 100, (54.0, -0.0, 24.5), 6.25, "typed"),
        TableRow("anywhere", "fear", 0, 1, 2, 3),
    ]
    write_table(rows, tmp_path / "table.csv")
    assert (tmp_path / "table.csv").read_text(encoding="utf-8") == (
        PLACED + '"here, there",pain,3,10,5,100,54,0,24.5,6.25,typed\nanywhere,fear,0,1,2,3,,,,,\n'
    )


def test_gzipped_tables_are_equal_bytes_whatever_their_name_and_time(tmp_path):
    rows = [TableRow("here", "pain", 3, 10, 5, 100)]
    write_table(rows, tmp_path / "one.csv.gz")
    write_table(rows, tmp_path / "two.csv.gz")
    raw = (tmp_path / "one.csv.gz").read_bytes()
    assert raw == (tmp_path / "two.csv.gz").read_bytes()
    assert raw[4:8] == b"\0\0\0\0"  # the clock in the header (RFC 1952, section 2.3.1)


def test_the_fingerprint_names_the_rows_not_the_packing(tmp_path):
    rows = [TableRow("here", "pain", 3, 10, 5, 100)]
    write_table(rows, tmp_path / "table.csv")
    write_table(rows, tmp_path / "table.csv.gz")
    write_table([rows[0]._replace(term_active=4)], tmp_path / "other.csv")
    one, packed, other = (read_rows(tmp_path / name)[1] for name in ("table.csv", "table.csv.gz", "other.csv"))
    assert one == packed != other
    assert len(one) == 16


def test_a_table_is_written_as_a_whole_or_not_at_all(tmp_path):
    path = tmp_path / "table.csv"
    path.write_text("old")

    def failing():
        yield TableRow("here", "pain", 3, 10, 5, 100)
        raise RuntimeError("stopped")

    with pytest.raises(RuntimeError, match="stopped"):
        write_table(failing(), path)
    assert path.read_text() == "old"
    assert list(tmp_path.iterdir()) == [path]


def test_a_place_that_cannot_be_written_is_one_line(tmp_path):
    with pytest.raises(InputFileError, match=r"cannot be written .* choose another place with --out"):
        write_table([TableRow("here", "pain", 3, 10, 5, 100)], tmp_path / "absent" / "table.csv")
    (tmp_path / "folder").mkdir()
    with pytest.raises(InputFileError, match="cannot be written"):
        write_table([TableRow("here", "pain", 3, 10, 5, 100)], tmp_path / "folder")
    assert [path.name for path in tmp_path.iterdir()] == ["folder"]
