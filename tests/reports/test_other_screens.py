"""The screens of a literature, its terms and the demonstration; JSON; the console itself."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from revinf.evidence.source_choice import choose_source
from revinf.evidence.term_list import list_terms
from revinf.reports.demo_screen import demo_screen
from revinf.reports.literature_screens import inspect_screen, tabulate_line, terms_screen
from revinf.reports.machine import print_json
from revinf.reports.progress import counting, stages
from revinf.reports.terminal import new_console, show
from revinf.reports.wording import agreement, claim_words, first_lines, grade_line


def printed(capsys, renderables, width=104):
    show(*renderables, width=width)
    return " ".join(capsys.readouterr().out.split())


@pytest.mark.parametrize("width", [60, 80, 104])
def test_screen_of_a_literature_says_what_it_holds_and_that_it_is_invented(invented_literature, capsys, width):
    show(*inspect_screen(invented_literature.summary()), width=width)
    out = capsys.readouterr().out
    assert max(map(len, out.splitlines())) <= width
    text = " ".join(out.split())
    assert "8 studies (here: studies), 10 peaks, 3 terms, 10 labels" in text
    assert "INVENTED DATA: made for demonstration, says nothing about any brain" in text
    assert "Grouping none" in text
    assert "invented for tests" in text
    assert invented_literature.fingerprint in text.replace(" ", "")
    assert "verified" not in text
    assert "Rows file read kept refused" in text


def test_screen_says_where_every_array_was_verified(invented_literature, capsys):
    text = printed(capsys, inspect_screen(invented_literature.summary(), verified=True))
    assert f"{invented_literature.fingerprint}, every array verified" in text


def test_real_literature_is_not_called_invented(invented_literature, capsys):
    summary = invented_literature.summary() | {"invented": False, "merged_by": "paper"}
    text = printed(capsys, inspect_screen(summary))
    assert "INVENTED" not in text
    assert "merged by 'paper'" in text


def test_refused_and_noticed_rows_are_shown_with_number_reason_and_line(invented_literature, capsys):
    summary = invented_literature.summary()
    summary["import"] = {
        "read": {"peaks.csv": 1200},
        "kept": {"peaks.csv": 1198},
        "refused": [{"file": "peaks.csv", "reason": "no x", "rows": 2, "first_lines": [7, 9]}],
        "notices": [{"code": "voxels", "message": "looks odd", "lines": 1, "first_lines": [3]}],
    }
    text = printed(capsys, inspect_screen(summary))
    assert "peaks.csv 1,200 1,198 2" in text
    assert "2 rows: no x (first lines 7, 9)" in text
    assert "looks odd (line 3)" in text


def test_terms_are_shown_with_studies_kind_and_domain(capsys):
    source = choose_source(None, None, {})
    text = printed(capsys, terms_screen(list_terms(source, "navigation"), source.facts.name))
    assert "Counted in open base rates" in text
    assert "navigation 13 process spatial cognition" in text


def test_query_without_a_term_gets_a_hint(capsys):
    source = choose_source(None, None, {})
    text = printed(capsys, terms_screen(list_terms(source, "navigaton"), source.facts.name))
    assert text == "open base rates has no term like 'navigaton'; did you mean 'navigation'?"
    text = printed(capsys, terms_screen(list_terms(source, "qqqq"), source.facts.name))
    assert text == "open base rates has no term like 'qqqq'"


def test_line_of_tabulate_names_rows_places_and_file(capsys):
    assert printed(capsys, [tabulate_line(1200, 1, "t.csv")]) == "1,200 rows for 1 place written to t.csv"


@pytest.mark.parametrize("width", [60, 104])
def test_demonstration_says_that_it_is_invented_and_what_to_run(capsys, width):
    show(*demo_screen(Path("somewhere")), width=width)
    out = capsys.readouterr().out
    assert max(map(len, out.splitlines())) <= width
    text = " ".join(out.split())
    assert "Wrote an INVENTED literature, manuscript and claims to somewhere. Nothing in them is real." in text
    assert "revinf build --peaks peaks.csv --annotations annotations.csv" in text
    assert text.count("revinf check --literature literature --peak") == 4


def test_json_is_printed_as_it_is_read(capsys):
    content = {"a": [1.5, None, "−é"], "b": {"c": True}}
    print_json(content)
    out = capsys.readouterr().out
    assert json.loads(out) == content
    assert "−é" in out


@pytest.mark.parametrize("value", [float("nan"), float("inf")])
def test_number_that_json_does_not_know_is_refused(value, capsys):
    with pytest.raises(ValueError, match="not JSON compliant"):
        print_json({"a": value})
    assert capsys.readouterr().out == ""


@pytest.mark.parametrize(("asked", "given"), [(None, 104), (60, 60), (300, 104), (10, 40)])
def test_screen_is_at_most_104_columns_and_at_least_40(asked, given):
    assert new_console(asked).width == given


def test_progress_says_nothing_where_stderr_is_no_terminal(capsys):
    with stages() as tell:
        tell("reading", 10)
    with counting("places") as tell:
        tell(1, 2)
    printed = capsys.readouterr()
    assert (printed.out, printed.err) == ("", "")


@pytest.mark.parametrize(
    ("direction", "headline", "estimate", "line"),
    [
        ("for", "bare", "positive", "speaks for the claim; grade at least bare, by the estimate positive"),
        (
            "against",
            "strong",
            "strong",
            "speaks against the claim; grade at least strong, by the estimate strong",
        ),
        ("undecided", None, "bare", "undecided: the interval includes 1; by the estimate alone bare"),
    ],
)
def test_grade_line_has_direction_and_both_grades(direction, headline, estimate, line):
    assert grade_line(direction, headline, estimate) == line


def test_nouns_agree_with_their_number():
    assert [agreement(n, "row") for n in (0, 1, 2, 1200)] == ["0 rows", "1 row", "2 rows", "1,200 rows"]
    assert agreement(2, "study", "studies") == "2 studies"
    assert [first_lines(lines) for lines in ([], [7], [7, 9])] == ["", " (line 7)", " (first lines 7, 9)"]
    assert claim_words("fear", "activity here") == "activity here is taken as a sign of 'fear'"
