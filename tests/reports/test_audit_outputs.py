"""Markdown, CSV, JSON Lines and slides say the same, to the same bytes, and hostile cells stay text."""

from __future__ import annotations

import csv
import io
import json
from pathlib import Path

import pytest

from revinf.evidence.audit import Audit, audit
from revinf.evidence.claim import Claim
from revinf.evidence.source_choice import choose_source
from revinf.reports.audit_markdown import audit_markdown, author_markdown, reviewer_markdown
from revinf.reports.audit_screen import audit_screen
from revinf.reports.audit_tables import COLUMNS, audit_csv, audit_jsonl, audit_rows
from revinf.reports.slides import write_slides
from revinf.reports.terminal import new_console
from revinf.reports.wording import NO_INDIVIDUALS

HOSTILE = '=HYPERLINK("x")<script>alert(1)</script>|a*b*\n\u202edrow $x$ \U0001f600 ' + "w" * 300


@pytest.fixture(scope="module")
def result() -> Audit:
    claims = [
        Claim(id="c1", term="semantic cognition", peaks=[(-54, 24, 12)], quote=HOSTILE, location="page 2"),
        Claim(id="=c2", term="navigation", peaks=[(0, 54, 12)], prior=0.2),
        Claim(id="c3", term="juggling", peaks=[(0, 54, 12)], quote="They juggled."),
    ]
    return audit(claims, choose_source(None, None, {}))


def test_json_lines_are_the_assessments(result: Audit) -> None:
    lines = [json.loads(line) for line in audit_jsonl(result).splitlines()]
    assert lines[:2] == [json.loads(json.dumps(answer.to_dict())) for answer in result.assessments]
    assert [line["claim"]["id"] for line in lines] == ["c1", "=c2", "c3"]


def test_json_line_of_a_claim_without_an_answer_has_every_field_and_a_caution(result: Audit) -> None:
    lines = [json.loads(line) for line in audit_jsonl(result).splitlines()]
    assert set(lines[2]) == set(lines[0])
    assert lines[2]["posterior"] is None
    assert lines[2]["literature"] == lines[0]["literature"]
    assert [caution["code"] for caution in lines[2]["cautions"]] == ["term-unlabelled"]


def test_csv_holds_every_claim_and_runs_nothing(result: Audit) -> None:
    rows = list(csv.DictReader(io.StringIO(audit_csv(result))))
    assert tuple(rows[0]) == COLUMNS
    assert [row["claim"] for row in rows] == ["c1", "'=c2", "c3"]
    assert rows[0]["quote"].startswith("'=HYPERLINK")
    assert rows[0]["peaks"] == "(-54, 24, 12)"
    assert "juggling" in rows[2]["problem"]


def test_csv_numbers_are_those_of_the_assessment(result: Audit) -> None:
    row, answer = audit_rows(result)[0], result.assessments[0]
    assert row["likelihood_ratio"] == answer.likelihood_ratio.value.estimate
    assert row["posterior_low"] == answer.posterior.value.low
    text = next(csv.DictReader(io.StringIO(audit_csv(result))))
    assert float(text["likelihood_ratio"]) == row["likelihood_ratio"]


@pytest.mark.parametrize("make", [audit_markdown, author_markdown, reviewer_markdown])
def test_markdown_shows_hostile_cells_as_text_and_says_the_limits(make, result: Audit) -> None:
    text = make(result)
    assert "<script" not in text
    assert "\u202e" not in text
    assert NO_INDIVIDUALS in text
    assert make(result) == text


def test_report_has_a_section_for_every_claim_and_the_command(result: Audit) -> None:
    text = audit_markdown(result, command="revinf audit claims.csv --out report")
    for name in ("## c1: ", "## =c2: ", "## c3: "):
        assert name in text
    assert "`revinf audit claims.csv --out report`" in text


def test_reviewer_comment_names_counts_and_asks_for_what_would_settle_it(result: Audit) -> None:
    text = reviewer_markdown(result)
    counts = result.assessments[0].counts
    assert f"{counts.term_active} of {counts.term_total} studies of semantic cognition" in text
    assert text.count("Could the authors") == 2
    aside = text.split("not for sending")[1]
    assert "NOT FOR SENDING" in aside
    assert "juggling" in aside


def test_slides_are_one_a_claim_and_the_same_bytes_twice(result: Audit, tmp_path: Path) -> None:
    for name in ("one", "two"):
        (tmp_path / name).mkdir()
        names = [path.name for path in write_slides(result, tmp_path / name)]
    assert names == ["slides.pdf", "slide-01.png", "slide-02.png", "slide-03.png"]
    for name in names:
        assert (tmp_path / "one" / name).read_bytes() == (tmp_path / "two" / name).read_bytes()


@pytest.mark.parametrize("width", [60, 80, 104])
def test_screen_fits_and_names_every_claim(result: Audit, width: int) -> None:
    console = new_console(width)
    with console.capture() as captured:
        for part in audit_screen(result, "report", ["report.md"], width=width):
            console.print(part)
    text = captured.get()
    assert max(len(line) for line in text.splitlines()) <= width
    for name in ("c1", "=c2", "c3"):
        assert name in text
