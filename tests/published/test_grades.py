"""Grades of evidence: Kass & Raftery 1995, J Am Stat Assoc 90:773-795, the table of section 3.2.

B10 1 to 3 "not worth more than a bare mention", 3 to 20 "positive", 20 to 150 "strong", above 150 "very
strong" (the words and bounds of the table from memory; the section number too).
"""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.evidence.grading import direction_of, grade_of, grade_words, headline_grade
from revinf.stats.estimates import Estimate
from tests.strategies import ratios

SCALE = [(1, "bare"), (3, "positive"), (20, "strong"), (150, "very strong")]


@pytest.mark.parametrize(("bound", "grade"), SCALE)
def test_a_grade_begins_at_its_published_bound(bound, grade):
    assert grade_of(bound) == grade
    if bound > 1:
        weaker = [name for lower, name in SCALE if lower < bound][-1]
        assert grade_of(bound * (1 - 1e-6)) == weaker


@pytest.mark.parametrize(("twice_log", "below", "above"), [(2, "bare", "positive"), (6, "positive", "strong")])
def test_the_bounds_are_the_published_ones_on_the_scale_of_twice_the_log(twice_log, below, above):
    # The paper's other column, 2 ln B10: 0 to 2, 2 to 6, 6 to 10; its two columns agree only roughly.
    assert grade_of(math.exp((twice_log - 0.25) / 2)) == below
    assert grade_of(math.exp((twice_log + 0.25) / 2)) == above


def test_the_words_are_the_published_ones():
    words = {name: grade_words(name) for _, name in SCALE}
    assert words["bare"] == "not worth more than a bare mention"
    for name in ("positive", "strong", "very strong"):
        assert words[name] == f"{name} evidence"


@given(ratios())
def test_evidence_against_has_the_grade_of_the_inverse(ratio):
    assert grade_of(1 / ratio) == grade_of(ratio)


@given(st.tuples(ratios(), ratios(), ratios()))
def test_the_headline_is_the_weakest_grade_inside_the_interval(values):
    low, estimate, high = sorted(values)
    ratio = Estimate(estimate, low, high)
    order = [name for _, name in SCALE]
    if direction_of(ratio) == "undecided":
        assert low <= 1 <= high
        assert headline_grade(ratio) is None
    else:
        inside = [order.index(grade_of(value)) for value in (low, estimate, high)]
        assert order.index(headline_grade(ratio)) == min(inside)
        assert direction_of(ratio) == ("for" if low > 1 else "against")
