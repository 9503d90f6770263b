"""Every row of the tables for finding things in prose finds its example and not its counterexample."""

from __future__ import annotations

from collections import Counter

import pytest

from revinf.knowledge import read_table
from revinf.manuscript.cues import compiled_cue, find_cues
from revinf.manuscript.phrases import tokens
from revinf.manuscript.places import find_places
from revinf.manuscript.processes import shipped_processes

CUES, PLACES, PROCESSES = (read_table(name) for name in ("cues", "places", "processes"))


def names(rows: tuple[dict[str, str], ...], *columns: str) -> list[str]:
    return [name for row in rows for column in columns for name in row[column].split(";") if name]


@pytest.mark.parametrize("row", CUES, ids=lambda row: row["cue"][:40])
def test_cue_matches_its_example_only(row: dict[str, str]) -> None:
    assert compiled_cue(row["cue"]).search(row["example"])
    assert not compiled_cue(row["cue"]).search(row["counterexample"])
    assert row["cue"] in [cue.cue for cue in find_cues(row["example"])]


@pytest.mark.parametrize("row", PLACES, ids=lambda row: row["place"])
def test_place_is_found_in_its_example_only(row: dict[str, str]) -> None:
    found, near = (
        [m.place for m in find_places(text, tokens(text))] for text in (row["example"], row["counterexample"])
    )
    assert row["place"] in found
    assert row["place"] not in near


@pytest.mark.parametrize("row", PROCESSES, ids=lambda row: row["term"])
def test_process_is_found_in_its_example_only(row: dict[str, str]) -> None:
    find = shipped_processes().find
    assert row["term"] in [mention.term for mention in find(tokens(row["example"]))]
    assert row["term"] not in [mention.term for mention in find(tokens(row["counterexample"]))]


@pytest.mark.parametrize("row", PROCESSES, ids=lambda row: row["term"])
def test_every_name_of_a_process_is_found_as_its_term(row: dict[str, str]) -> None:
    for name in names((row,), "term", "synonyms", "wordings"):
        assert [m.term for m in shipped_processes().find(tokens(f"It suggests {name}."))] == [row["term"]]


@pytest.mark.parametrize("row", PLACES, ids=lambda row: row["place"])
def test_every_name_of_a_place_is_found_with_its_side(row: dict[str, str]) -> None:
    for name in names((row,), "place", "names", "abbreviations"):
        text = f"The left {name} was active."
        assert [(m.place, m.side) for m in find_places(text, tokens(text))] == [(row["place"], "left")]


def test_a_name_belongs_to_one_row_only() -> None:
    for found in (
        names(PLACES, "place", "names"),
        names(PLACES, "abbreviations"),
        names(PROCESSES, "term", "synonyms", "wordings"),
        names(CUES, "cue"),
    ):
        assert [name for name, times in Counter(found).items() if times > 1] == []
