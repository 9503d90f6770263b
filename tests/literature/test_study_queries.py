"""What the arrays say of single studies, against plain loops over the same invented studies."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.literature.in_memory import NEAR, STUDIES, carriers_by_loop, in_memory


@settings(max_examples=100, deadline=None)
@given(STUDIES, st.data())
def test_studies_carrying_any_are_those_of_a_plain_loop(studies, data):
    literature = in_memory(studies)
    flags = data.draw(st.lists(st.booleans(), min_size=literature.n_terms, max_size=literature.n_terms))
    wanted = {term for term, flag in zip(literature.terms, flags, strict=True) if flag}
    expected = [any(f"term {number:02}" in wanted for number in terms) for _, terms in studies]
    found = literature.studies_carrying_any(np.array(flags, dtype=bool))
    assert found.dtype == bool
    assert found.tolist() == expected


@settings(max_examples=100, deadline=None)
@given(STUDIES, st.data())
def test_term_means_are_those_of_a_plain_loop(studies, data):
    literature = in_memory(studies)
    values = data.draw(st.lists(st.floats(0, 1), min_size=len(studies), max_size=len(studies)))
    expected = [
        sum(values[i] for i in carriers_by_loop(studies, term)) / len(carriers_by_loop(studies, term))
        for term in literature.terms
    ]
    assert literature.term_means(np.array(values)).tolist() == pytest.approx(expected, abs=1e-12)


# Few coordinates, so that studies share points.
SHARED = st.tuples(*(st.sampled_from([-1, 0, 1]),) * 3)
SHARING = st.lists(
    st.tuples(st.lists(SHARED, max_size=8), st.lists(st.integers(0, 3), min_size=1, max_size=2)),
    min_size=1,
    max_size=15,
)


@settings(max_examples=150, deadline=None)
@given(SHARING, st.lists(SHARED, min_size=1, max_size=3))
def test_studies_reporting_are_those_with_every_point_to_the_tenth(studies, points):
    found = in_memory(studies).studies_reporting(np.array(points, dtype=np.int32))
    assert found.tolist() == [i for i, (peaks, _) in enumerate(studies) if set(points) <= set(peaks)]


def test_no_points_are_reported_by_no_study():
    literature = in_memory([([(0, 0, 0)], [0])])
    assert literature.studies_reporting(np.zeros((0, 3), dtype=np.int32)).tolist() == []


@settings(max_examples=50, deadline=None)
@given(st.lists(st.lists(NEAR, max_size=5), min_size=1, max_size=10))
def test_number_of_peaks_is_that_of_the_list(peaks):
    assert in_memory([(rows, [0]) for rows in peaks]).study_n_peaks.tolist() == [len(rows) for rows in peaks]


def test_groups_are_given_back_study_by_study():
    literature = in_memory([([], [0])] * 3, groups=["é", "", "paper 2"])
    assert literature.study_groups == ["é", "", "paper 2"]
