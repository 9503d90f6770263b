"""A faulty row is refused with its line and the other claims go on."""

from __future__ import annotations

from pathlib import Path

import pandas as pd
import pytest

from revinf.evidence.claims_table import claims_from_frame, read_claims
from revinf.exceptions import InputFileError, InvalidClaimError


def table(tmp_path: Path, *rows: str, header: str = "claim,term,x,y,z") -> Path:
    path = tmp_path / "claims.csv"
    path.write_text("\n".join([header, *rows]) + "\n", encoding="utf-8")
    return path


def test_rows_with_one_id_form_a_pattern(tmp_path: Path) -> None:
    read = read_claims(table(tmp_path, "a,fear,1,2,3", "b,pain,4,5,6", "a,fear,-7,8,9"))
    assert [claim.id for claim in read.claims] == ["a", "b"]
    assert read.claims[0].peaks == ((1, 2, 3), (-7, 8, 9))
    assert not read.refused


def test_every_optional_column_reaches_the_claim(tmp_path: Path) -> None:
    header = "claim,term,x,y,z,space,radius_mm,prior,context,rivals,quote,location"
    path = table(tmp_path, 'a,fear,1,2,3,TAL,8,prevalence,pain; memory ,disgust,"a, quote",page 3', header=header)
    (claim,) = read_claims(path).claims
    assert (claim.space, claim.radius_mm, claim.prior) == ("Talairach", 8.0, "prevalence")
    assert (claim.context, claim.rivals) == (("pain", "memory"), ("disgust",))
    assert (claim.quote, claim.location) == ("a, quote", "page 3")


@pytest.mark.parametrize(
    ("row", "reason"),
    [
        ("b,pain,x,5,6", "x is 'x', not a number"),
        ("b,pain,1,,6", "y is '', not a number"),
        ("b,,1,2,3", "a claim needs a term"),
        ("b,pain,1,2,5000", "within"),
        (",pain,1,2,3", "the claim has no id"),
    ],
    ids=["word", "missing", "no term", "far", "no id"],
)
def test_a_faulty_row_is_refused_with_its_line_and_the_others_stay(tmp_path: Path, row: str, reason: str) -> None:
    read = read_claims(table(tmp_path, "a,fear,1,2,3", row, "c,memory,4,5,6"))
    assert [claim.id for claim in read.claims] == ["a", "c"]
    (refusal,) = read.refused
    assert refusal.line == 3
    assert reason in refusal.reason


def test_a_faulty_row_refuses_the_whole_pattern(tmp_path: Path) -> None:
    read = read_claims(table(tmp_path, "a,fear,1,2,3", "a,fear,oops,2,3", "b,pain,1,2,3"))
    assert [claim.id for claim in read.claims] == ["b"]
    assert [refusal.line for refusal in read.refused] == [2, 3]
    assert "a different claim" in read.refused[0].reason


def test_rows_of_a_pattern_must_agree(tmp_path: Path) -> None:
    read = read_claims(table(tmp_path, "a,fear,1,2,3", "a,pain,4,5,6"))
    assert not read.claims
    assert "rows of one pattern must agree" in read.refused[1].reason


def test_a_pattern_with_a_place_without_coordinates_waits_as_a_whole(tmp_path: Path) -> None:
    read = read_claims(table(tmp_path, "a,fear,1,2,3", "a,fear,,,"))
    assert not read.claims
    assert [(item.claim, item.line) for item in read.unplaced] == [("a", 2)]


def test_a_claim_without_a_place_is_listed_not_refused(tmp_path: Path) -> None:
    read = read_claims(table(tmp_path, "a,fear,,,", "b,pain,1,2,3"))
    assert not read.refused
    (waiting,) = read.unplaced
    assert (waiting.claim, waiting.line, waiting.term) == ("a", 2, "fear")


def test_a_region_alone_asks_a_table(tmp_path: Path) -> None:
    read = read_claims(table(tmp_path, "a,language,Broca's area", header="claim,term,region"))
    assert read.claims[0].region == "Broca's area"


def test_a_region_beside_coordinates_is_only_a_name(tmp_path: Path) -> None:
    read = read_claims(table(tmp_path, "a,fear,1,2,3,left amygdala", header="claim,term,x,y,z,region"))
    assert read.claims[0].region is None


def test_an_empty_table_is_refused_in_one_line(tmp_path: Path) -> None:
    with pytest.raises(InputFileError, match="no rows"):
        read_claims(table(tmp_path))


def test_a_data_frame_gives_the_same_claims(tmp_path: Path) -> None:
    rows = ["a,fear,1,2,3", "b,pain,,,", "c,,1,2,3"]
    path = table(tmp_path, *rows)
    from_file, from_frame = read_claims(path), claims_from_frame(pd.read_csv(path))
    assert from_file.claims == from_frame.claims
    assert [item.claim for item in from_frame.unplaced] == ["b"]
    assert [item.claim for item in from_frame.refused] == ["c"]


def test_a_data_frame_without_a_term_is_refused() -> None:
    with pytest.raises(InvalidClaimError, match="no column 'term'"):
        claims_from_frame(pd.DataFrame({"claim": ["a"]}))
