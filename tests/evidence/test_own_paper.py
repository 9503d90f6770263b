"""The paper under review is noticed where it is one of the counted studies."""

from __future__ import annotations

import pytest

from revinf.evidence.audit import audit
from revinf.evidence.claim import Claim
from revinf.evidence.own_paper import own_papers
from revinf.evidence.source_choice import choose_source
from revinf.evidence.sources import LiteratureSource
from revinf.literature.leaving_out import leave_out
from revinf.literature.literature import Literature
from revinf.reports.audit_markdown import audit_markdown
from revinf.reports.html_report import html_text


@pytest.fixture(scope="module")
def own_claims(open_literature: Literature) -> tuple[str, list[Claim]]:
    arrays = open_literature.arrays()
    study = int((arrays["study_n_peaks"] >= 5).nonzero()[0][0])
    peaks = arrays["peak_tenths"][arrays["peak_study"] == study][:4] / 10
    claims = [Claim(id=f"c{at}", term="theory of mind", peaks=[peak.tolist()]) for at, peak in enumerate(peaks)]
    return open_literature.study_ids[study], claims


def test_a_study_with_most_of_the_coordinates_is_named(open_literature: Literature, own_claims) -> None:
    study, claims = own_claims
    (found,) = own_papers(claims, LiteratureSource(open_literature))
    assert (found.study, found.n_shared, found.n_asked) == (study, 4, 4)
    result = audit(claims, open_literature)
    for text in (audit_markdown(result), html_text(result)):
        assert "4 of the 4 coordinates" in text
        assert "--without" in text


def test_left_out_it_is_named_no_more(open_literature: Literature, own_claims) -> None:
    study, claims = own_claims
    assert own_papers(claims, LiteratureSource(leave_out(open_literature, [study]))) == ()


def test_few_coordinates_and_tables_tell_nothing(open_literature: Literature, own_claims) -> None:
    _, claims = own_claims
    assert own_papers(claims[:2], LiteratureSource(open_literature)) == ()
    assert own_papers(claims, choose_source(None, None, {})) == ()
