"""Every claim is answered or its problem told; those that need most attention come first."""

from __future__ import annotations

import pytest

from revinf.evidence.assess import assess
from revinf.evidence.audit import Audit, audit, audit_of, checked_readers, fails_gate
from revinf.evidence.cautions.caution import Caution
from revinf.evidence.claim import Claim
from revinf.evidence.rewording import advise
from revinf.evidence.source_choice import choose_source
from revinf.evidence.sources import Source
from revinf.exceptions import InvalidClaimError

FOR = Claim(id="for", term="semantic cognition", peaks=[(-54, 24, 12)])
UNDECIDED = Claim(id="undecided", term="navigation", peaks=[(0, 54, 12)])
AGAINST = Claim(id="against", term="semantic cognition", peaks=[(48, -54, 24)])
UNKNOWN = Claim(id="unknown", term="juggling", peaks=[(48, -54, 24)])
FAR = Claim(id="far", term="navigation", peaks=[(90, 90, 90)])


@pytest.fixture(scope="module")
def source() -> Source:
    return choose_source(None, None, {})


@pytest.fixture(scope="module")
def result(source: Source) -> Audit:
    return audit([FOR, UNDECIDED, UNKNOWN, AGAINST, FAR], source)


def test_every_claim_is_kept_in_the_order_given(result: Audit) -> None:
    assert [item.claim.id for item in result.audited] == ["for", "undecided", "unknown", "against", "far"]


def test_an_answer_is_that_of_assess(result: Audit, source: Source) -> None:
    assert result.audited[0].assessment is not None
    assert result.audited[0].assessment.to_dict() == assess(FOR, source).to_dict()


def test_a_term_that_no_study_carries_is_kept_with_a_stop(result: Audit) -> None:
    item = result.audited[2]
    assert item.assessment is None
    assert isinstance(item.problem, Caution)
    assert (item.problem.code, item.problem.severity) == ("term-unlabelled", "stop")
    assert "juggling" in item.problem.message


def test_a_claim_that_cannot_be_placed_is_kept_with_the_reason(result: Audit) -> None:
    assert result.audited[4].assessment is None
    assert result.audited[4].problem is not None
    assert "farther than its radius" in result.audited[4].problem.message


def test_attention_goes_first_to_what_has_no_answer_then_to_what_must_go(result: Audit) -> None:
    order = [item.claim.id for item in result.by_attention()]
    assert set(order[:2]) == {"unknown", "far"}
    assert order.index("against") < order.index("undecided") < order.index("for")


def test_progress_is_told_claim_by_claim(source: Source) -> None:
    seen: list[tuple[int, int]] = []
    audit([FOR, UNDECIDED], source, progress=lambda done, total: seen.append((done, total)))
    assert seen == [(1, 2), (2, 2)]


def test_an_audit_in_which_nothing_could_be_assessed_is_refused(source: Source) -> None:
    with pytest.raises(InvalidClaimError, match=r"no claim could be assessed: .*juggling"):
        audit([UNKNOWN], source)


def test_frame_has_a_row_for_each_answer(result: Audit) -> None:
    frame = result.to_frame()
    assert list(frame["claim.id"]) == ["for", "undecided", "against"]
    assert list(frame["likelihood_ratio.direction"]) == ["for", "undecided", "against"]


@pytest.mark.parametrize(
    ("gate", "failing"),
    [
        ("bare", ["undecided", "unknown", "against", "far"]),
        ("positive", ["for", "undecided", "unknown", "against", "far"]),
        ("very-strong", ["for", "undecided", "unknown", "against", "far"]),
    ],
)
def test_gate_names_the_claims_that_do_not_reach_it(result: Audit, gate: str, failing: list[str]) -> None:
    assert fails_gate(result, gate) == failing


def test_unknown_gate_and_reader_are_refused_before_any_work() -> None:
    with pytest.raises(InvalidClaimError, match="a gate is one of"):
        checked_readers([], "excellent")
    with pytest.raises(InvalidClaimError, match="a report is for one of"):
        checked_readers(["editor"])


def test_audit_of_one_answer_holds_that_answer(source: Source) -> None:
    answer = assess(FOR, source)
    (item,) = audit_of(FOR, answer).audited
    assert item.assessment is answer
    assert item.advice == advise(answer)


def test_many_claims_in_other_processes_have_the_answers_of_one(
    source: Source, monkeypatch: pytest.MonkeyPatch
) -> None:
    claims = [FOR, UNDECIDED, UNKNOWN, AGAINST, FAR]
    plain = audit(claims, source)
    told: list[tuple[int, int]] = []
    monkeypatch.setattr("revinf.evidence.audit._MANY", 2)
    beside = audit(claims, source, progress=lambda done, total: told.append((done, total)))
    assert told == [(number, 5) for number in range(1, 6)]
    assert beside.audited == plain.audited
