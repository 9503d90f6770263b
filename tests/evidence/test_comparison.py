"""Two literatures asked about the same claims."""

from __future__ import annotations

import pytest

from revinf.evidence.claim import Claim
from revinf.evidence.comparison import compare
from revinf.evidence.source_choice import choose_source
from revinf.exceptions import InvalidClaimError
from revinf.literature.literature import Literature
from revinf.reports.comparison_views import comparison_markdown

CLAIMS = [
    Claim(id="a", term="theory of mind", peaks=[(54, -54, 24)]),
    Claim(id="b", term="navigation", peaks=[(26, -36, -14)]),
    Claim(id="<b>", term="juggling", peaks=[(0, 0, 0)]),
]


def test_a_literature_agrees_with_itself_and_says_that_this_is_built_in(open_literature: Literature) -> None:
    found = compare(CLAIMS, open_literature, open_literature)
    assert found.counts() == {"agree": 2}
    assert found.shared_studies == open_literature.n_studies
    assert "built in" in found.verdict()
    assert [item.probability_larger for item in found.claims] == [0.5, 0.5, None]
    assert len(found.claims[2].problems) == 2
    text = comparison_markdown(found)
    assert "<b>" not in text
    assert comparison_markdown(compare(CLAIMS, open_literature, open_literature)) == text


def test_a_table_and_a_literature_can_be_compared(open_literature: Literature) -> None:
    found = compare(CLAIMS[:2], open_literature, choose_source(None, None, {}))
    assert sum(found.counts().values()) == 2
    assert found.shared_studies == 0
    assert found.to_dict()["schema"] == "revinf/comparison/1"


def test_a_synonym_is_asked_where_only_that_is_known(open_literature: Literature) -> None:
    (item,) = compare([Claim(term="mentalizing", peaks=[(54, -54, 24)])], open_literature, open_literature).claims
    assert item.terms == ("theory of mind", "theory of mind")
    assert item.agreement == "agree"


def test_no_claim_is_refused_and_none_assessed_is_said(open_literature: Literature) -> None:
    with pytest.raises(InvalidClaimError):
        compare([], open_literature, open_literature)
    assert "nothing can be said" in compare(CLAIMS[2:], open_literature, open_literature).verdict()
