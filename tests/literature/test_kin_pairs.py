"""Kin found at build are those that the counts of shared studies give, pair by pair."""

from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest

from revinf.literature.kin_pairs import KIN_LIFT, KIN_SHARE, find_kin_pairs
from revinf.literature.literature import Literature


@pytest.mark.parametrize("seed", range(5))
def test_kin_pairs_equal_a_plain_loop(seed: int) -> None:
    random = np.random.default_rng(seed)
    has = random.random((60, 12)) < random.random(12)
    has[:, 1] = has[:, 0] & (random.random(60) < 0.9)  # two that go together
    has[:, 7] = False  # a term that no study carries
    study_terms = [np.flatnonzero(row) for row in has]
    term_studies = [np.flatnonzero(column) for column in has.T]
    found = find_kin_pairs(
        np.concatenate([[0], np.cumsum([len(terms) for terms in study_terms])]),
        np.concatenate(study_terms).astype(np.int32),
        np.concatenate([[0], np.cumsum([len(studies) for studies in term_studies])]),
        np.concatenate(term_studies).astype(np.int32),
    )
    expected = []
    for a, b in combinations(range(12), 2):
        n1, n2, both = has[:, a].sum(), has[:, b].sum(), (has[:, a] & has[:, b]).sum()
        if n1 and n2 and both / min(n1, n2) >= KIN_SHARE and both * 60 / (n1 * n2) >= KIN_LIFT:
            expected.append([a, b])
    assert found.tolist() == expected


def test_kinds_of_theory_of_mind_are_kin_of_it(open_literature: Literature) -> None:
    terms = open_literature.terms
    pairs = {(terms[a], terms[b]) for a, b in open_literature.kin_pairs().tolist()}
    assert ("non-story theory of mind", "theory of mind") in pairs
    assert ("story-based theory of mind", "theory of mind") in pairs
