"""What only the studies can tell, against sets in plain Python."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from revinf.base_rates.study_level import StudyLevel
from revinf.exceptions import UnknownTermError
from tests.literature.in_memory import carriers_by_loop, four_counts, in_memory

LABELLED = st.lists(
    st.lists(st.integers(0, 5), min_size=1, max_size=3).map(lambda terms: ([], terms)), min_size=1, max_size=25
)


@st.composite
def worlds(draw):
    """Draw studies with terms, those that hit, and those that are counted."""
    studies = draw(LABELLED)
    everyone = list(range(len(studies)))
    hits = draw(st.sets(st.sampled_from(everyone)))
    among = draw(st.one_of(st.none(), st.sets(st.sampled_from(everyone))))
    literature = in_memory(studies)
    level = StudyLevel(literature, indices(hits), None if among is None else indices(among))
    return studies, hits, set(everyone) if among is None else among, literature, level


def indices(numbers) -> np.ndarray:
    return np.array(sorted(numbers), dtype=np.int64)


@settings(max_examples=150, deadline=None)
@given(worlds())
def test_counts_are_those_of_the_sets(world):
    studies, hits, among, literature, level = world
    assert level.n_studies == len(among)
    for term in literature.terms:
        carriers = carriers_by_loop(studies, term)
        assert level.counts(term).as_tuple() == four_counts(carriers, hits, among)
        assert set(np.flatnonzero(level.carries(term)).tolist()) == carriers & among


@settings(max_examples=150, deadline=None)
@given(worlds(), st.data())
def test_restriction_keeps_the_studies_with_any_of_the_terms(world, data):
    studies, hits, among, literature, level = world
    wanted = data.draw(st.lists(st.sampled_from(literature.terms), min_size=1, max_size=3))
    inner = level.restricted_to(wanted)
    within = among & set().union(*(carriers_by_loop(studies, term) for term in wanted))
    assert inner.n_studies == len(within)
    for term in literature.terms:
        expected = four_counts(carriers_by_loop(studies, term), hits, within)
        assert inner.counts(term).as_tuple() == expected


@settings(max_examples=100, deadline=None)
@given(worlds())
def test_shared_studies_are_the_intersections(world):
    studies, hits, among, literature, level = world
    for term in literature.terms:
        shared, own = level.shared_with(term), carriers_by_loop(studies, term) & among
        for position, other in enumerate(literature.terms):
            both = own & carriers_by_loop(studies, other)
            assert (shared.total[position], shared.active[position]) == (len(both), len(both & hits))


@settings(max_examples=100, deadline=None)
@given(worlds(), st.dictionaries(st.integers(0, 5), st.sampled_from(["", "one", "two"])))
def test_domains_are_the_unions_of_their_terms(world, domain_of):
    studies, hits, among, literature, level = world
    names = {f"term {number:02}": domain for number, domain in domain_of.items()}
    found = level.domains(lambda term: names.get(term, ""))
    assert found.names == sorted({names.get(term, "") for term in literature.terms} - {""})
    for name, active, total in zip(found.names, found.active.tolist(), found.total.tolist(), strict=True):
        members = among & set().union(
            *(carriers_by_loop(studies, term) for term in literature.terms if names.get(term) == name)
        )
        assert (active, total) == (len(members & hits), len(members))


@settings(max_examples=100, deadline=None)
@given(worlds(), st.data())
def test_without_kin_leaves_studies_of_kin_only_out_of_the_others(world, data):
    studies, hits, among, literature, level = world
    term = data.draw(st.sampled_from(literature.terms))
    kin = data.draw(st.sets(st.sampled_from(literature.terms)))
    carriers = carriers_by_loop(studies, term)
    kept = among - (set().union(*(carriers_by_loop(studies, other) for other in kin)) - carriers)
    flags = np.array([other in kin for other in literature.terms], dtype=bool)
    assert level.without_kin(term, flags).as_tuple() == four_counts(carriers, hits, kept)


@settings(max_examples=100, deadline=None)
@given(st.lists(st.sampled_from(["", "paper a", "paper b", "s001"]), min_size=1, max_size=12))
def test_groups_gather_the_studies_with_one_name_and_others_stand_alone(groups):
    names, numbers = StudyLevel(in_memory([([], [0])] * len(groups), groups=groups), indices(())).groups()
    own = [group or f"s{i:03}" for i, group in enumerate(groups)]
    assert [names[number] for number in numbers.tolist()] == own
    assert sorted(names) == sorted(set(own))


def test_unknown_term_of_a_context_is_refused():
    level = StudyLevel(in_memory([([], ["fear"])]), indices((0,)))
    with pytest.raises(UnknownTermError, match="did you mean 'fear'"):
        level.restricted_to(["fear", "feer"])
