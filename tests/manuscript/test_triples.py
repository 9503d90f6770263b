"""Every way to write coordinates is read, and no statistic, size, date or citation is taken for them."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.manuscript.triples import find_triples

with Path(__file__).with_name("triple_forms.csv").open(encoding="utf-8", newline="") as stream:
    FORMS = list(csv.DictReader(stream))


@pytest.mark.parametrize("row", FORMS, ids=lambda row: row["text"][:50])
def test_form_is_read(row: dict[str, str]) -> None:
    wanted = [tuple(float(number) for number in triple.split()) for triple in row["triples"].split(";") if triple]
    assert [triple.xyz for triple in find_triples(row["text"])] == wanted


@given(
    xyz=st.tuples(st.integers(-70, 70), st.integers(-100, 70), st.integers(-50, 80)),
    form=st.sampled_from(
        [
            "({}, {}, {})",
            "[{} {} {}]",
            "(x = {}, y = {}, z = {})",
            "at MNI {}, {}, {}",
            "(MNI: {}/{}/{})",
            "(x {}; y {}; z {})",
        ]
    ),
    minus=st.sampled_from(["-", "\u2212", "\u2013"]),
)
def test_any_signed_triple_is_read_in_any_common_form(xyz: tuple[int, int, int], form: str, minus: str) -> None:
    x, y, z = (-abs(xyz[0]) - 10, xyz[1], xyz[2])
    text = "The left amygdala " + form.format(*(str(value).replace("-", minus) for value in (x, y, z))) + " was active."
    assert [triple.xyz for triple in find_triples(text)] == [(x, y, z)]


@given(text=st.text(alphabet="0123456789 .,;:()[]xyz=-\u2212MNIpt", max_size=80))
def test_no_text_is_too_odd(text: str) -> None:
    for triple in find_triples(text):
        assert text[triple.start : triple.end]
        assert all(abs(value) <= 140 for value in triple.xyz)
