"""A suggested sentence is never stronger than direction and grade allow."""

from __future__ import annotations

from collections.abc import Callable

import pytest

from revinf.base_rates.table import BaseRateTable
from revinf.evidence.assess import assess
from revinf.evidence.claim import Claim
from revinf.evidence.rewording import Advice, advise

STRONG_WORDS = ("shows", "proves", "demonstrates", "reveals", "must", "indicates that", "certain")


def advice_for(table_of: Callable[..., BaseRateTable], counts: tuple[int, ...], **more: object) -> Advice:
    term = str(more.pop("term", "pain"))
    return advise(assess(Claim(term=term, region="here"), table_of(counts, term=term, **more)))


@pytest.mark.parametrize(
    ("counts", "change"),
    [
        ((60, 40, 100, 900), "keep"),  # ratio 6, clearly above 3
        ((20, 80, 100, 900), "soften"),  # above 1, the lower end bare
        ((10, 90, 100, 900), "soften"),  # undecided
        ((0, 30, 10, 300), "soften"),  # no study of the term
        ((5, 195, 500, 500), "drop"),  # against
    ],
    ids=["for, positive", "for, bare", "undecided", "no hit", "against"],
)
def test_change_follows_direction_and_grade(table_of, counts: tuple[int, ...], change: str) -> None:
    assert advice_for(table_of, counts).change == change


def test_a_term_that_is_no_process_is_dropped(table_of) -> None:
    found = advice_for(table_of, (60, 40, 100, 900), term="amygdala")
    assert found.change == "drop"
    assert "not-a-process" in found.reasons


@pytest.mark.parametrize(
    "counts", [(60, 40, 100, 900), (20, 80, 100, 900), (10, 90, 100, 900), (0, 30, 10, 300), (5, 195, 500, 500)]
)
def test_no_sentence_is_strong_or_speaks_of_persons(table_of, counts: tuple[int, ...]) -> None:
    sentence = advice_for(table_of, counts).sentence.lower()
    assert not [word for word in STRONG_WORDS if word in sentence and f"not {word}" not in sentence]
    assert "participants" not in sentence
    assert "patient" not in sentence


def test_an_undecided_claim_is_not_said_to_be_commoner(table_of) -> None:
    sentence = advice_for(table_of, (10, 90, 100, 900)).sentence
    assert "not demonstrably more often" in sentence


def test_no_hit_is_not_called_reported(table_of) -> None:
    assert advice_for(table_of, (0, 30, 10, 300)).sentence.startswith("No study of pain that was counted")
