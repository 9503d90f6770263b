"""Delimited files: separators, encodings, compression, and the line of every row."""

from __future__ import annotations

import gzip

import pandas as pd
import pytest

from revinf.exceptions import InputFileError
from revinf.literature.rows import BLOCK_ROWS, LINE, open_delimited

PLAIN = "study,x,y,z\na,1,-2,3\nb,4,5,-6\n"


def read(path, rename=None):
    table = open_delimited(path, rename)
    rows = [row for block in table.blocks() for row in block.to_dict("records")]
    lines = [row.pop(LINE) for row in rows]
    return table, [tuple(row.values()) for row in rows], lines


@pytest.fixture
def file(tmp_path):
    def write(content, name="peaks.csv"):
        path = tmp_path / name
        path.write_bytes(content if isinstance(content, bytes) else content.encode())
        return path

    return write


@pytest.mark.parametrize(
    ("content", "name"),
    [
        (PLAIN, "plain.csv"),
        (PLAIN.replace("\n", "\r\n"), "crlf.csv"),
        (PLAIN.replace("\n", "\r"), "cr.csv"),
        (PLAIN.rstrip("\n"), "unfinished.csv"),
        (PLAIN.replace(",", ";"), "semicolons.csv"),
        (PLAIN.replace(",", "\t"), "tabs.csv"),
        (PLAIN.replace(",", "\t"), "tabs.tsv"),
        ("\ufeff" + PLAIN, "marked.csv"),
        (gzip.compress(PLAIN.encode()), "packed.csv.gz"),
        (gzip.compress(PLAIN.replace(",", "\t").encode()), "packed.tsv.gz"),
        (gzip.compress(("\ufeff" + PLAIN).encode()), "packed without saying so.csv"),
        ('"study","x", y ,z\n"a",1,"-2",3\nb,4,5,-6\n', "quoted.csv"),
    ],
    ids=lambda value: value if isinstance(value, str) and value.endswith(("v", "z")) else "",
)
def test_every_dress_of_a_table_gives_the_same_rows(file, content, name):
    table, rows, lines = read(file(content, name))
    assert table.columns == ("study", "x", "y", "z")
    assert rows == [("a", "1", "-2", "3"), ("b", "4", "5", "-6")]
    assert lines == [2, 3]
    assert table.has_bom == ("marked" in name or "without" in name)


def test_a_separator_inside_quotes_does_not_split(file):
    assert read(file('study,note\na,"x, y"\n'))[1] == [("a", "x, y")]


def test_blank_lines_are_left_out_and_still_counted(file):
    _, rows, lines = read(file("study,x\n\na,1\n\n,\nb,2\n"))
    assert rows == [("a", "1"), ("b", "2")]
    assert lines == [3, 6]


@pytest.mark.parametrize("newline", ["\n", "\r\n"])
def test_a_cell_over_several_lines_keeps_the_line_numbers_right(file, newline):
    text = 'study,note,x\na,"one\ntwo\nthree",1\nb,,2\nc,"four\nfive",3\nd,,4\n'
    assert read(file(text.replace("\n", newline)))[2] == [2, 5, 6, 8]


def test_line_numbers_go_on_over_blocks(file):
    many = BLOCK_ROWS + 2
    path = file("study,note\n" + 'a,"two\nlines"\n' + "a,\n" * many + "last,\n")
    _, rows, lines = read(path)
    assert len(rows) == many + 2
    assert rows[-1][0] == "last"
    assert lines[-1] == many + 4


@pytest.mark.parametrize("text", ["NA", "nan", "null", "None", "", "01", "1e3", "#N/A", "TRUE"])
def test_cells_stay_the_text_that_was_written(file, text):
    assert read(file(f"study,x\na,{text}\n"))[1] == [("a", text)]


def test_columns_are_renamed_and_the_others_keep_their_names(file):
    path = file("experiment,MNI x,y,z\na,1,2,3\n")
    assert open_delimited(path, {"study": "experiment", "x": "MNI x"}).columns == ("study", "x", "y", "z")


def test_the_whole_file_is_read_with_no_filter_left_on(file):
    import warnings

    before = list(warnings.filters)
    for _ in open_delimited(file(PLAIN)).blocks():
        assert warnings.filters == before  # a consumer must not inherit the reader's filter


@pytest.mark.parametrize(
    ("content", "message"),
    [
        ("", "the file has no header line"),
        ("\n\n", "the file has no header line"),
        (b"\x00\x01\x02\x03", "this is not a text table"),
        ("study,x,x\na,1,2\n", "column 'x' stands twice in the header"),
        ('study,"x\ny"\na,1\n', "a quote in the header never closes"),
        ("study,x\na,1,2\n", "the rows do not fit the header"),
        ("study,x\na,1\nb,1,\n", "the rows do not fit the header (Expected 2 fields in line 3, saw 3)"),
        pytest.param(
            "study,x\na,1,\nb,1,\n",
            "the rows do not fit the header",
            marks=pytest.mark.skipif(pd.__version__ < "3", reason="pandas before 3 drops an empty last cell, no more"),
        ),
        ('study,x\na,1\n"b,2\n', "check for stray separators or an open quote"),
        (gzip.compress(PLAIN.encode() * 50)[:-9], "the gzip file is damaged or cut short"),
        (gzip.compress(PLAIN.encode())[:12], "the gzip file is damaged or cut short"),
    ],
)
def test_a_file_that_is_no_table_is_refused_with_one_line(file, content, message):
    path = file(content)
    with pytest.raises(InputFileError) as caught:
        read(path)
    assert message in str(caught.value)
    assert str(caught.value).startswith(str(path))
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize("rows_before", [0, 3000])
def test_text_of_another_encoding_is_refused_with_its_line(file, rows_before):
    path = file(PLAIN[:12].encode() + b"a,1,-2,3\n" * rows_before + b"caf\xe9,1,2,3\n")
    with pytest.raises(InputFileError, match="not UTF-8 text") as caught:
        read(path)
    assert caught.value.row == rows_before + 2


def test_utf_16_is_refused(file):
    with pytest.raises(InputFileError, match=":1: this is not UTF-8 text"):
        read(file(PLAIN.encode("utf-16")))


def test_a_missing_file_and_a_folder_are_refused(tmp_path):
    with pytest.raises(InputFileError, match="there is no such file"):
        open_delimited(tmp_path / "absent.csv")
    with pytest.raises(InputFileError, match="this is a folder"):
        open_delimited(tmp_path)


def test_a_missing_column_is_named_with_those_that_are_there(file):
    with pytest.raises(InputFileError, match="column 'study' is missing") as caught:
        open_delimited(file("experiment,x\na,1\n")).require("x", "study")
    assert "'experiment', 'x'" in str(caught.value)
    assert "--column study=NAME" in str(caught.value)
