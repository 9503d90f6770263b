"""Annotations: long and wide, weights, spelling of terms."""

from __future__ import annotations

import unicodedata

import pytest

from revinf.exceptions import InputFileError

PEAKS = "study,x,y,z\na,1,-2,3\nb,4,-5,6\nc,7,-8,9\n"


def pairs(studies):
    """Return the (study, term) pairs by name."""
    return [
        (studies.study_ids[study], studies.terms[term])
        for study, term in zip(studies.annotation_study, studies.annotation_term, strict=True)
    ]


def test_long_rows_label_studies_each_pair_once_and_sorted(importing):
    studies, _ = importing(PEAKS, "term,study\npain,b\nfear,a\npain,a\npain,b\n")
    assert pairs(studies) == [("a", "fear"), ("a", "pain"), ("b", "pain")]


def test_wide_columns_label_studies_where_the_cell_is_above_nothing(importing):
    studies, report = importing(PEAKS, "study,Fear,pain_heat,rest\na,1,0,\nb,,0.01,0\nc, , 2 ,-1\n")
    assert pairs(studies) == [("a", "fear"), ("b", "pain heat"), ("c", "pain heat")]
    assert studies.terms == ["fear", "pain heat"]
    assert not report.refused


def test_long_and_wide_say_the_same(importing):
    long = importing(PEAKS, "study,term,weight\na,fear,1\na,pain,0\nb,pain,0.5\n")[0]
    wide = importing(PEAKS, "study,fear,pain\na,1,0\nb,,0.5\n")[0]
    assert pairs(long) == pairs(wide) == [("a", "fear"), ("b", "pain")]


WEIGHTS = [("a", "-0.1"), ("a", "0"), ("b", "0.001"), ("b", "0.05"), ("c", "0.2")]


@pytest.mark.parametrize(
    ("least", "labelled"),
    [(None, ["b", "c"]), (0.05, ["b", "c"]), (0.051, ["c"]), (0.0, ["a", "b", "c"])],
)
@pytest.mark.parametrize("form", ["long", "wide"])
def test_a_weight_counts_from_the_least_weight_on(importing, least, labelled, form):
    if form == "long":
        text = "study,term,weight\n" + "".join(f"{study},fear,{weight}\n" for study, weight in WEIGHTS)
    else:
        text = "study,fear,pain\n" + "".join(f"{study},{weight},\n" for study, weight in WEIGHTS)
    studies, _ = importing(PEAKS, text, min_weight=least)
    assert pairs(studies) == [(study, "fear") for study in labelled]


def test_an_empty_wide_cell_is_no_label_even_where_zero_counts(importing):
    studies, _ = importing(PEAKS, "study,fear,pain\na,0,\nb,,0\n", min_weight=0)
    assert pairs(studies) == [("a", "fear"), ("b", "pain")]


def test_light_labels_are_left_out_and_counted_not_refused(importing, notices):
    _, report = importing(PEAKS, "study,term,weight\na,fear,1\nb,fear,0\nc,fear,-2\n")
    assert "2 labels are too light" in notices(report)["weights"][0]
    assert not report.refused


def test_a_least_weight_without_weights_is_an_error(importing):
    with pytest.raises(InputFileError, match="column 'weight' is missing"):
        importing(PEAKS, "study,term\na,fear\n", min_weight=0.1)


@pytest.mark.parametrize(
    ("header", "row", "reason"),
    [
        ("study,term", ",fear", "empty study id"),
        ("study,term", "b,", "empty term"),
        ("study,term", "b, _ ", "empty term"),
        ("study,term,weight", "b,fear,", "weight is not a number"),
        ("study,term,weight", 'b,fear,"0,5"', "weight is not a number"),
        ("study,term,weight", "b,fear,inf", "weight is not a number"),
        ("study,fear,pain", ",1,1", "empty study id"),
        ("study,fear,pain", "b,1,yes", "column 'pain' is not a number"),
        ("study,fear,pain", "b,nan,1", "column 'fear' is not a number"),
        ("study,fear,pain", "b,1,inf", "column 'pain' is not a number"),
    ],
)
def test_a_row_that_cannot_be_used_is_refused_with_its_line(importing, refusals, header, row, reason):
    good = {"study,term": "a,fear", "study,term,weight": "a,fear,1", "study,fear,pain": "a,1,0"}[header]
    studies, report = importing(PEAKS, f"{header}\n{good}\n{row}\n{good}\n")
    assert refusals(report) == [(3, reason)]
    assert pairs(studies) == [("a", "fear")]  # nothing of the refused row is used
    assert (report.read["terms.csv"], report.kept["terms.csv"]) == (3, 2)


def test_terms_are_compared_after_normalisation(importing, notices):
    spellings = ["Theory of Mind", "theory_of_mind", "  THEORY   of\tmind ", "théorie", "THE\u0301ORIE"]
    assert unicodedata.normalize("NFC", "the\u0301orie") == "théorie"
    text = "study,term\n" + "".join(f"a,{spelling}\n" for spelling in spellings)
    studies, report = importing(PEAKS, text)
    assert studies.terms == ["theory of mind", "théorie"]
    assert "3 spellings were merged" in notices(report)["spellings"][0]
    assert "3 labels are given more than once" in notices(report)["duplicate-rows"][0]


def test_two_wide_columns_of_one_term_are_one_term(importing):
    studies, _ = importing(PEAKS, "study,Fear,fear_\na,1,0\nb,0,1\n")
    assert pairs(studies) == [("a", "fear"), ("b", "fear")]


def test_a_byte_order_mark_is_noticed_and_skipped(importing, notices):
    studies, report = importing(PEAKS, "\ufeffstudy,term\na,fear\n")
    assert studies.terms == ["fear"]
    assert "terms.csv starts with a byte-order mark" in notices(report)["byte-order-mark"][0]


@pytest.mark.parametrize("text", ["study\na\n", "study,group\na,g\n"])
def test_a_table_without_terms_is_an_error(importing, text):
    with pytest.raises(InputFileError, match="neither a column 'term'"):
        importing(PEAKS, text)


@pytest.mark.parametrize("header", [",study,fear", "study,fear,_"])
def test_a_wide_column_without_a_name_is_an_error(importing, header):
    with pytest.raises(InputFileError, match=r"terms\.csv:1: a column has no name"):
        importing(PEAKS, header + "\n1,a,1\n")


def test_a_group_column_of_a_wide_table_is_no_term(importing):
    studies, _ = importing(PEAKS, "study,group,fear\na,7,1\nb,8,1\n")
    assert studies.terms == ["fear"]
    assert studies.group_ids == ["7", "8"]


def test_terms_that_label_no_counted_study_are_not_kept(importing):
    assert importing(PEAKS, "study,term\na,fear\nz,zeal\n")[0].terms == ["fear"]
