"""The planted places of the invented scenario come out as its README says, through revinf itself."""

from __future__ import annotations

from pathlib import Path

import pytest

from revinf.evidence.assess import assess
from revinf.evidence.assessment import Assessment
from revinf.evidence.claims_table import read_claims
from revinf.knowledge import demo_folder
from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description


@pytest.fixture(scope="module")
def literature(tmp_path_factory: pytest.TempPathFactory) -> Literature:
    folder = demo_folder()
    options = ImportOptions(
        peaks=folder / "peaks.csv",
        annotations=folder / "annotations.csv",
        studies=folder / "studies.csv",
        group="group",
    )
    target: Path = tmp_path_factory.mktemp("demo") / "literature"
    return build_literature(options, target, Description(name="invented", study_is="papers", invented=True))[0]


@pytest.fixture(scope="module")
def answers(literature: Literature) -> dict[str, Assessment]:
    return {claim.id: assess(claim, literature) for claim in read_claims(demo_folder() / "claims.csv").claims}


def codes(answer: Assessment) -> set[str]:
    return {caution.code for caution in answer.cautions}


def test_every_answer_says_that_the_data_are_invented(answers: dict[str, Assessment]) -> None:
    assert len(answers) == 11
    assert all("invented-data" in codes(answer) for answer in answers.values())


@pytest.mark.parametrize("claim", ["c01", "c02"])
def test_a_planted_selective_place_is_not_called_broad(answers: dict[str, Assessment], claim: str) -> None:
    answer = answers[claim]
    assert "broad-region" not in codes(answer)
    assert answer.likelihood_ratio.direction == "for"
    assert answer.likelihood_ratio.headline_grade == "positive"
    assert answer.selectivity.rank == 1


@pytest.mark.parametrize("claim", ["c03", "c04"])
def test_a_planted_broad_place_is_called_broad(answers: dict[str, Assessment], claim: str) -> None:
    assert "broad-region" in codes(answers[claim])


def test_claims_come_out_in_every_direction(answers: dict[str, Assessment]) -> None:
    directions = {claim: answer.likelihood_ratio.direction for claim, answer in answers.items()}
    assert directions == {
        "c01": "for",
        "c02": "for",
        "c03": "undecided",
        "c04": "against",
        "c05": "undecided",
        "c06": "undecided",
        "c07": "undecided",
        "c08": "undecided",
        "c09": "for",
        "c10": "for",
        "c11": "for",
    }


def test_a_rare_term_that_was_lucky_does_not_lead_the_ranking(answers: dict[str, Assessment]) -> None:
    answer = answers["c05"]
    leader = answer.selectivity.rivals[0]
    assert (answer.counts.term_active, answer.counts.term_total) == (2, 3)
    assert answer.selectivity.rank is not None
    assert answer.selectivity.rank > 1
    assert leader.term == "reading"
    assert {"thin-evidence", "rival-ahead"} <= codes(answer)
    assert answer.selectivity.shrunk_rate is not None
    assert answer.selectivity.shrunk_rate < answer.counts.term_active / answer.counts.term_total / 2


def test_peaks_outside_the_brain_and_in_white_matter_are_told(answers: dict[str, Assessment]) -> None:
    severities = {c.code: c.severity for c in answers["c08"].cautions}
    assert severities["off-brain"] == "stop"
    severities = {c.code: c.severity for c in answers["c07"].cautions}
    assert severities["off-brain"] == "weigh"


def test_a_term_that_is_no_process_is_told_and_not_ranked(answers: dict[str, Assessment]) -> None:
    assert "not-a-process" in codes(answers["c09"])
    assert answers["c09"].selectivity.rank is None


def test_the_pattern_is_overstated_by_the_product(answers: dict[str, Assessment]) -> None:
    pattern = answers["c10"].pattern
    assert pattern is not None
    assert len(pattern.regions) == 2
    assert pattern.joint is not None
    assert pattern.product > pattern.joint.high
    assert "pattern-overstated" in codes(answers["c10"])


def test_kin_are_apart_from_the_rivals(answers: dict[str, Assessment]) -> None:
    chosen = answers["c01"].selectivity
    assert "threat detection" in {rival.term for rival in chosen.kin}
    assert "threat detection" not in {rival.term for rival in chosen.rivals}
