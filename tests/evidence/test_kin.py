"""Kin share most of the smaller term's studies, and more of them than chance would, or are synonyms."""

from __future__ import annotations

import numpy as np
import pytest

from revinf.base_rates.counting import TermCounts
from revinf.base_rates.study_level import SharedCounts
from revinf.evidence.kin import kin_of
from revinf.evidence.vocabulary import Vocabulary
from tests.evidence.worlds import mixed_studies
from tests.literature.in_memory import carriers_by_loop

NO_WORDS = Vocabulary()


def counts_of(totals: dict[str, int], n_studies: int) -> TermCounts:
    total = np.array(list(totals.values()), dtype=np.int64)
    none = np.zeros(len(total), dtype=np.int64)
    return TermCounts(
        terms=list(totals), term_active=none, term_total=total, other_active=none, other_total=n_studies - total
    )


def is_kin(own, other, shared, n_studies, words=NO_WORDS):
    both = np.array([own, shared], dtype=np.int64)
    found = kin_of(
        0,
        counts_of({"claimed": own, "other": other}, n_studies),
        SharedCounts(total=both, active=np.zeros(2, dtype=np.int64)),
        words,
    )
    assert not found[0]
    return bool(found[1])


@pytest.mark.parametrize(
    ("own", "other", "shared", "n_studies", "kin"),
    [
        (10, 10, 5, 30, True),  # half of the smaller, and 5 * 30 / 100 = 1.5: both exactly at their bounds
        (10, 10, 5, 29, False),  # 1.45 times what chance would share
        (10, 10, 4, 100, False),  # 40 % of the smaller
        (100, 10, 5, 300, True),  # the smaller one counts, whichever it is
        (10, 100, 5, 300, True),
        (100, 10, 5, 299, False),
        (100, 10, 4, 1000, False),
        (100, 10, 10, 149, False),  # all of the smaller, but 1.49 times chance
        (100, 10, 10, 150, True),
        (10, 0, 0, 30, False),
    ],
)
def test_kin_needs_both_conditions_and_each_begins_at_its_bound(own, other, shared, n_studies, kin):
    assert is_kin(own, other, shared, n_studies) is kin


def test_synonym_is_kin_whatever_it_shares():
    words = Vocabulary.of([("claimed", "d", "other; third")], {})
    assert is_kin(10, 10, 0, 1000, words)
    without_studies = kin_of(0, counts_of({"claimed": 5, "other": 3, "fourth": 5}, 50), None, words)
    assert without_studies.tolist() == [False, True, False]


def test_without_the_studies_only_synonyms_are_known():
    assert not kin_of(0, counts_of({"a": 10, "b": 10}, 30), None, NO_WORDS).any()


@pytest.mark.parametrize("term", ["fear", "invented kin of fear", "pain", "amygdala"])
def test_kin_of_the_mixed_literature_are_those_of_the_sets(mixed, term):
    from revinf.evidence.assess import assess
    from revinf.evidence.claim import Claim

    studies = mixed_studies()
    own = carriers_by_loop(studies, term)
    expected = []
    for other in sorted({name for _, terms in studies for name in terms} - {term}):
        carriers = carriers_by_loop(studies, other)
        both = len(own & carriers)
        if 2 * both >= min(len(own), len(carriers)) and 2 * both * len(studies) >= 3 * len(own) * len(carriers):
            expected.append(other)
    chosen = assess(Claim(term=term, peaks=[(-40, 20, 10)]), mixed).selectivity
    assert [row.term for row in chosen.kin] == expected
    assert [mixed.terms[position] for position in chosen.kin_positions] == expected
    assert not set(expected) & {row.term for row in chosen.rivals}
    assert ("invented kin of fear" in expected) == (term == "fear")
