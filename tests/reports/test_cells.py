"""Text from strangers stands in tables as text: nothing runs, breaks a row, or becomes a link."""

from __future__ import annotations

import csv
import io

import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.reports.cells import csv_cell, markdown_cell, one_line


@pytest.mark.parametrize("text", ["=1+1", "+cmd", "@sum", "-2+3", "=HYPERLINK(1)", "--x"])
def test_a_formula_is_quoted_in_csv(text: str) -> None:
    assert csv_cell(text) == "'" + text


@pytest.mark.parametrize("text", ["-24", "+3.5", "-1e3", "7"])
def test_a_cell_that_parses_as_a_number_stays_as_it_is(text: str) -> None:
    assert csv_cell(text) == text


@pytest.mark.parametrize("value", [-24, 0.5, None, True])
def test_a_value_that_is_no_text_stays_as_it_is(value: object) -> None:
    assert csv_cell(value) is value


def test_line_breaks_and_reordering_marks_are_gone() -> None:
    assert one_line("a\nb\r\nc\u2028d\u202ee\x00f") == "a b c def"


def test_joined_emoji_stay_joined() -> None:
    assert one_line("\U0001f468\u200d\U0001f52c") == "\U0001f468\u200d\U0001f52c"


@given(st.text())
def test_any_text_is_one_cell_of_one_csv_row(text: str) -> None:
    stream = io.StringIO()
    csv.writer(stream, lineterminator="\n").writerow([csv_cell(text), "next"])
    assert list(csv.reader([stream.getvalue()])) == [[csv_cell(text), "next"]]


@given(st.text())
def test_any_text_in_markdown_has_no_bare_mark_up(text: str) -> None:
    cell = markdown_cell(text)
    assert "\n" not in cell
    assert "<" not in cell
    assert ">" not in cell
    assert "://" not in cell
    for character in "`*_[]|":
        assert cell.count(character) == cell.count("\\" + character)


def test_a_script_shows_as_text_in_markdown() -> None:
    assert markdown_cell("<script>alert(1)</script>") == "&lt;script&gt;alert(1)&lt;/script&gt;"
