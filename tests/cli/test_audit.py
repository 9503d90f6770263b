"""`revinf audit`: one folder, whole or not at all; faulty rows are told, and the gate speaks by its exit code."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from revinf.reports import audit_folder

BARE = {"report.html", "report.md", "claims.csv", "assessments.jsonl"}


@pytest.fixture
def claims(tmp_path: Path) -> Path:
    path = tmp_path / "claims.csv"
    path.write_text(
        "claim,term,x,y,z,quote\n"
        "a,semantic cognition,-54,24,12,\n"
        "b,navigation,0,54,12,They found their way.\n"
        "c,navigation,oops,54,12,\n"
        "d,fear,,,,\n",
        encoding="utf-8",
    )
    return path


def files(folder: Path) -> set[str]:
    return {path.name for path in folder.iterdir() if not path.name.startswith(".")}


def test_audit_writes_one_folder_and_tells_refused_and_waiting_rows(revinf, claims: Path, tmp_path: Path) -> None:
    done = revinf("audit", claims, "--out", tmp_path / "report")
    assert (done.exit_code, done.stderr) == (0, "")
    assert files(tmp_path / "report") == BARE
    assert "1 row refused" in done.stdout
    assert "line 4" in done.stdout
    assert "1 claim still without coordinates" in done.stdout
    lines = (tmp_path / "report" / "assessments.jsonl").read_text(encoding="utf-8").splitlines()
    assert [json.loads(line)["claim"]["id"] for line in lines] == ["a", "b"]


def test_each_reader_gets_a_file(revinf, claims: Path, tmp_path: Path) -> None:
    out = tmp_path / "report"
    done = revinf("audit", claims, "--out", out, "--for", "author", "--for", "reviewer", "--for", "presenter")
    assert done.exit_code == 0
    more = {"for-author.md", "for-reviewer.md", "slides.pdf", "slide-01.png", "slide-02.png"}
    assert files(out) == BARE | more


def test_the_same_audit_writes_the_same_bytes(revinf, claims: Path, tmp_path: Path) -> None:
    for name in ("one", "two"):
        assert revinf("audit", claims, "--out", tmp_path / name, "--for", "author").exit_code == 0
    for name in (BARE - {"report.md", "report.html"}) | {"for-author.md"}:  # the reports name their own command
        assert (tmp_path / "one" / name).read_bytes() == (tmp_path / "two" / name).read_bytes()


def test_an_older_audit_is_replaced_as_a_whole(revinf, claims: Path, tmp_path: Path) -> None:
    out = tmp_path / "report"
    assert revinf("audit", claims, "--out", out, "--for", "author").exit_code == 0
    assert revinf("audit", claims, "--out", out).exit_code == 0
    assert files(out) == BARE
    assert [path.name for path in tmp_path.iterdir() if path.name.startswith(".")] == []


@pytest.mark.parametrize(("gate", "code"), [("bare", 3), ("very-strong", 3)])
def test_gate_that_is_not_met_exits_with_3_and_names_the_claims(
    revinf, claims: Path, tmp_path: Path, gate: str, code: int
) -> None:
    done = revinf("audit", claims, "--out", tmp_path / "report", "--gate", gate)
    assert done.exit_code == code
    assert done.stderr.count("\n") == 1
    assert "b" in done.stderr
    assert files(tmp_path / "report") == BARE


def test_gate_that_is_met_exits_with_0(revinf, tmp_path: Path) -> None:
    path = tmp_path / "claims.csv"
    path.write_text("claim,term,x,y,z\na,semantic cognition,-54,24,12\n", encoding="utf-8")
    assert revinf("audit", path, "--out", tmp_path / "report", "--gate", "bare").exit_code == 0


@pytest.mark.parametrize(
    ("text", "more", "said"),
    [
        ("claim,term,x,y,z\na,juggling,0,54,12\n", (), "no claim could be assessed"),
        ("claim,term,x,y,z\na,navigation,oops,1,2\n", (), "no claim could be assessed"),
        ("claim,x,y,z\na,0,54,12\n", (), "column 'term' is missing"),
        ("claim,term,x,y,z\n", (), "no rows"),
        ("claim,term,x,y,z\na,navigation,0,54,12\n", ("--gate", "excellent"), "a gate is one of"),
        ("claim,term,x,y,z\na,navigation,0,54,12\n", ("--for", "editor"), "a report is for one of"),
    ],
    ids=["unknown term", "no row left", "no term column", "empty", "gate", "reader"],
)
def test_bad_input_ends_with_2_one_line_and_no_folder(revinf, tmp_path: Path, text, more, said) -> None:
    path = tmp_path / "claims.csv"
    path.write_text(text, encoding="utf-8")
    done = revinf("audit", path, "--out", tmp_path / "report", *more)
    assert (done.exit_code, done.stdout) == (2, "")
    assert done.stderr.count("\n") == 1
    assert said in done.stderr
    assert [item.name for item in tmp_path.iterdir()] == ["claims.csv"]


def test_a_folder_of_something_else_is_refused_untouched(revinf, claims: Path, tmp_path: Path) -> None:
    out = tmp_path / "mine"
    out.mkdir()
    (out / "notes.txt").write_text("keep me", encoding="utf-8")
    done = revinf("audit", claims, "--out", out)
    assert done.exit_code == 2
    assert "not an audit" in done.stderr
    assert files(out) == {"notes.txt"}


@pytest.mark.parametrize("fault", [OSError(28, "No space left on device"), KeyboardInterrupt()], ids=["full", "ctrl-c"])
def test_a_fault_while_writing_leaves_the_older_audit_whole(
    revinf, claims: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, fault: BaseException
) -> None:
    out = tmp_path / "report"
    assert revinf("audit", claims, "--out", out).exit_code == 0
    before = {path.name: path.read_bytes() for path in out.iterdir()}

    def fail(*_args: object, **_more: object) -> str:
        raise fault

    monkeypatch.setattr(audit_folder, "audit_csv", fail)
    done = revinf("audit", claims, "--out", out)
    assert done.exit_code == (130 if isinstance(fault, KeyboardInterrupt) else 2)
    assert done.stderr.count("\n") == 1
    assert {path.name: path.read_bytes() for path in out.iterdir()} == before
    assert sorted(path.name for path in tmp_path.iterdir()) == ["claims.csv", "report"]


def test_a_claim_that_cannot_be_assessed_is_told_with_the_reason(revinf, tmp_path: Path) -> None:
    table = tmp_path / "claims.csv"
    table.write_text("claim,term,x,y,z\na,navigation,0,54,12\nb,navigaton,0,54,12\n", encoding="utf-8")
    done = revinf("audit", table, "--out", tmp_path / "report")
    assert done.exit_code == 0
    assert "1 claim not assessed" in done.stdout
    assert "it has 'navigation'" in done.stdout


def test_gate_is_not_passed_by_claims_that_were_never_assessed(revinf, claims: Path, tmp_path: Path) -> None:
    done = revinf("audit", claims, "--out", tmp_path / "report", "--gate", "bare")
    assert done.exit_code == 3
    failing = done.stderr.split(": ")[-1].strip().split(", ")
    assert {"c", "d"} <= set(failing)


def test_a_row_with_a_stray_cell_is_refused_alone(revinf, tmp_path: Path) -> None:
    table = tmp_path / "claims.csv"
    table.write_text(
        "claim,term,x,y,z,quote\na,navigation,0,54,12,They went, and came.\nb,navigation,0,54,12,fine\n",
        encoding="utf-8",
    )
    done = revinf("audit", table, "--out", tmp_path / "report")
    assert done.exit_code == 0
    assert "the row has 7 cells, the header 6" in " ".join(done.stdout.split())


def test_empty_names_behind_the_header_are_no_fault(revinf, tmp_path: Path) -> None:
    table = tmp_path / "claims.csv"
    table.write_text("claim,term,x,y,z,,\na,navigation,0,54,12,,\n , , ,,,,\n", encoding="utf-8")
    done = revinf("audit", table, "--out", tmp_path / "report")
    assert done.exit_code == 0
    assert "refused" not in done.stdout


def test_a_file_of_the_users_in_an_older_audit_is_never_lost(revinf, claims: Path, tmp_path: Path) -> None:
    out = tmp_path / "report"
    assert revinf("audit", claims, "--out", out).exit_code == 0
    (out / "my notes.txt").write_text("mine", encoding="utf-8")
    done = revinf("audit", claims, "--out", out)
    assert done.exit_code == 2
    assert "my notes.txt" in done.stderr
    assert (out / "my notes.txt").read_text(encoding="utf-8") == "mine"


def test_the_folder_can_be_opened_by_whom_the_users_mask_allows(revinf, claims: Path, tmp_path: Path) -> None:
    import os

    mask = os.umask(0o027)
    try:
        assert revinf("audit", claims, "--out", tmp_path / "report").exit_code == 0
    finally:
        os.umask(mask)
    assert (tmp_path / "report").stat().st_mode & 0o777 == 0o750


def test_table_tells_refused_and_waiting_rows(revinf, claims: Path, tmp_path: Path) -> None:
    import csv

    assert revinf("audit", claims, "--out", tmp_path / "report").exit_code == 0
    with (tmp_path / "report" / "claims.csv").open(encoding="utf-8", newline="") as stream:
        rows = list(csv.DictReader(stream))
    assert [(row["claim"], row["status"], row["line"]) for row in rows] == [
        ("a", "assessed", ""),
        ("b", "assessed", ""),
        ("d", "without coordinates", "5"),
        ("c", "refused", "4"),
    ]


def test_peaks_with_names_fill_in_the_coordinates(revinf, tmp_path: Path) -> None:
    (tmp_path / "claims.csv").write_text(
        "claim,term,x,y,z,place\na,navigation,,,,Left thing\nb,navigation,,,,other\nc,navigation,,,,twice\n",
        encoding="utf-8",
    )
    (tmp_path / "peaks.csv").write_text(
        "place,x,y,z\nleft thing,24,-36,-14\ntwice,0,0,0\ntwice,2,2,2\n", encoding="utf-8"
    )
    done = revinf("audit", tmp_path / "claims.csv", "--peaks", tmp_path / "peaks.csv", "--out", tmp_path / "report")
    assert done.exit_code == 0
    lines = (tmp_path / "report" / "assessments.jsonl").read_text(encoding="utf-8").splitlines()
    assert [json.loads(line)["claim"]["peaks"] for line in lines] == [[[24, -36, -14]]]
    assert "2 claims still without coordinates" in done.stdout
