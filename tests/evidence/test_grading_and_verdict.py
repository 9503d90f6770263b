"""Direction and grade follow the interval; the sentence is never stronger than they are.

Bounds: Kass & Raftery 1995, J Am Stat Assoc 90:773-795 (3, 20, 150).
"""

from __future__ import annotations

from itertools import product

import pytest

from revinf.evidence.grading import direction_of, grade_of, grade_words, headline_grade
from revinf.evidence.verdict import verdict
from revinf.stats.estimates import Estimate

GRADES = ("bare", "positive", "strong", "very strong")
WORDS = {
    "bare": "not worth more than a bare mention",
    "positive": "positive evidence",
    "strong": "strong evidence",
    "very strong": "very strong evidence",
}
SEVERITIES = ((), ("note",), ("weigh", "note"), ("stop",), ("stop", "weigh", "note"))


@pytest.mark.parametrize(
    ("ratio", "grade"),
    [
        (1.0, "bare"),
        (2.999999, "bare"),
        (3.0, "positive"),
        (19.99999, "positive"),
        (20.0, "strong"),
        (149.9999, "strong"),
        (150.0, "very strong"),
        (1e30, "very strong"),
    ],
)
def test_grade_begins_at_the_published_bound_and_is_the_same_for_the_inverse(ratio, grade):
    assert grade_of(ratio) == grade
    assert grade_of(1 / ratio) == grade


@pytest.mark.parametrize("grade", GRADES)
def test_grade_is_said_in_the_words_of_the_published_scale(grade):
    assert grade_words(grade) == WORDS[grade]


@pytest.mark.parametrize(
    ("low", "high", "direction", "grade"),
    [
        (1.0000001, 500, "for", "bare"),
        (3.0, 500, "for", "positive"),
        (20.0, 500, "for", "strong"),
        (150.0, 500, "for", "very strong"),
        (0.001, 0.9999999, "against", "bare"),
        (0.001, 1 / 3, "against", "positive"),
        (0.001, 1 / 20, "against", "strong"),
        (0.001, 1 / 150, "against", "very strong"),
        (1.0, 500, "undecided", None),
        (0.002, 1.0, "undecided", None),
        (0.5, 2, "undecided", None),
    ],
)
def test_headline_is_the_grade_of_the_end_nearest_1(low, high, direction, grade):
    ratio = Estimate((low * high) ** 0.5, low, high)
    assert direction_of(ratio) == direction
    assert headline_grade(ratio) == grade


@pytest.mark.parametrize(("grade", "severities"), [*product(GRADES, SEVERITIES)])
def test_verdict_for_names_its_grade_and_no_stronger_one(grade, severities):
    sentence = verdict("fear", "for", grade, severities)
    assert "commoner in studies of 'fear'" in sentence
    assert "against" not in sentence
    assert_no_stronger_than(grade, sentence)


@pytest.mark.parametrize(("grade", "severities"), [*product(GRADES, SEVERITIES)])
def test_verdict_against_never_reads_as_support(grade, severities):
    sentence = verdict("fear", "against", grade, severities)
    assert "rarer in studies of 'fear'" in sentence
    assert "speaks against the claim" in sentence
    for word in ("commoner", "support", "consistent", "speaks for", "sign of", "suggest"):
        assert word not in sentence
    assert_no_stronger_than(grade, sentence)


@pytest.mark.parametrize(("grade", "severities"), [*product((None, *GRADES), SEVERITIES)])
def test_verdict_undecided_claims_nothing(grade, severities):
    sentence = verdict("fear", "undecided", grade, severities)
    assert "does not tell studies of 'fear' from the others" in sentence
    for word in ("commoner", "rarer", "support", "evidence", "speaks", "mention"):
        assert word not in sentence


@pytest.mark.parametrize(("direction", "severities"), [*product(("for", "against", "undecided"), SEVERITIES)])
def test_verdict_holds_back_where_and_only_where_a_caution_says_stop(direction, severities):
    sentence = verdict("fear", direction, None if direction == "undecided" else "positive", severities)
    assert ("do not rest a conclusion on it" in sentence) == ("stop" in severities)
    assert sentence.startswith("In this literature, ")
    assert sentence.endswith(".")
    assert "\n" not in sentence


@pytest.mark.parametrize("direction", ["for", "against", "undecided"])
def test_verdict_speaks_of_studies_never_of_a_person(direction):
    sentence = verdict("fear", direction, None if direction == "undecided" else "strong")
    assert "studies" in sentence
    for word in ("person", "patient", "participant", "subject", " he ", "proves", "shows that"):
        assert word not in sentence


def assert_no_stronger_than(grade: str, sentence: str) -> None:
    assert WORDS[grade] in sentence
    for stronger in GRADES[GRADES.index(grade) + 1 :]:
        assert WORDS[stronger] not in sentence
