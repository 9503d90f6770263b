"""Every row of the robustness is what a fresh question with that one choice answers; nothing is shortened."""

from __future__ import annotations

from dataclasses import replace
from math import log

import pytest

from revinf.evidence.assess import Choices, assess
from revinf.evidence.claim import Claim
from revinf.evidence.grading import direction_of, headline_grade
from revinf.stats.estimates import Counts
from revinf.stats.ratio import likelihood_ratio
from tests.evidence.worlds import A_MM, B_MM, ELSEWHERE, A, B, made, mixed_studies
from tests.literature.in_memory import carriers_by_loop, four_counts, hit_by_loop, in_memory

RATIO_PRIORS = {
    "shared, 1/5 to 5": {"ratio_prior": "shared", "ratio_limit": 5.0},
    "shared, 1/20 to 20": {"ratio_prior": "shared", "ratio_limit": 20.0},
    "shared, 1/100 to 100": {"ratio_prior": "shared", "ratio_limit": 100.0},
    "independent rates": {"ratio_prior": "independent", "ratio_limit": 20.0},
}
CLAIMS = {
    "one peak": Claim(term="fear", peaks=[A_MM], prior=0.3),
    "stated Talairach": Claim(term="pain", peaks=[(-37.5, 18.3, 9.9)], space="Talairach", transform="spm"),
    "pattern": Claim(term="fear", peaks=[A_MM, B_MM], prior=0.3),
    "absent": Claim(term="fear", peaks=[A_MM], absent=True),
    "other radius": Claim(term="naming", peaks=[(-46.0, 20.0, 10.0)], radius_mm=6.0),
}


def same(answer, row):
    """Compare a row with a fresh answer; last digits may depend on what is solved together."""
    ratio, posterior = answer.likelihood_ratio.value, answer.posterior.value
    assert row.counts == answer.counts
    for ours, fresh in ((row.ratio, ratio), (row.posterior, posterior)):
        assert (ours.estimate, ours.low, ours.high) == pytest.approx((fresh.estimate, fresh.low, fresh.high), rel=1e-12)
    assert (row.direction, row.headline_grade) == (direction_of(ratio), headline_grade(ratio))


@pytest.mark.parametrize("name", CLAIMS)
def test_rows_of_radius_and_space_are_fresh_answers(mixed, name):
    claim = CLAIMS[name]
    answer = assess(claim, mixed)
    rows = answer.robustness.of("radius")
    assert [row.setting for row in rows] == [f"{radius} mm" for radius in (4, 6, 8, 10, 12, 15, 20)]
    for row in rows:
        same(assess(replace(claim, radius_mm=float(row.setting.split()[0])), mixed), row)
    (row,) = answer.robustness.of("space")
    other = "Talairach" if claim.space == "MNI152" else "MNI152"
    assert row.setting == f"read as {other}"
    same(assess(replace(claim, space=other), mixed), row)


@pytest.mark.parametrize("name", CLAIMS)
def test_rows_of_the_peak_are_fresh_answers_at_all_peaks_moved(mixed, name):
    claim = CLAIMS[name]
    rows = assess(claim, mixed).robustness.of("peak")
    assert len({row.setting for row in rows}) == 12
    for row in rows:
        axis, distance, unit = row.setting.split()
        assert unit == "mm"
        moved = [list(peak) for peak in claim.mni_peaks()]
        for peak in moved:
            peak["xyz".index(axis)] += float(distance)
        same(assess(replace(claim, peaks=moved, space="MNI152"), mixed), row)
    assert {float(row.setting.split()[1]) for row in rows} == {-4.0, -2.0, 2.0, 4.0}


@pytest.mark.parametrize("name", ["one peak", "pattern", "absent"])
def test_rows_of_the_priors_are_fresh_answers(mixed, name):
    claim = CLAIMS[name]
    answer = assess(claim, mixed)
    rows = answer.robustness.of("prior")
    assert [float(row.setting) for row in rows] == [0.05, 0.1, 0.25, 0.5, 0.75, 0.9, 0.95]
    for row in rows:
        same(assess(replace(claim, prior=float(row.setting)), mixed), row)
        assert row.holds
    rows = answer.robustness.of("prior of the ratio")
    assert [row.setting for row in rows] == list(RATIO_PRIORS)
    for row in rows:
        same(assess(claim, mixed, Choices(**RATIO_PRIORS[row.setting])), row)


def test_rows_keep_level_and_prior_of_the_ratio_of_the_question(mixed):
    choices = Choices(level=0.8, ratio_prior="independent")
    answer = assess(CLAIMS["one peak"], mixed, choices)
    for row in answer.robustness.of("radius"):
        same(assess(replace(CLAIMS["one peak"], radius_mm=float(row.setting.split()[0])), mixed, choices), row)


@pytest.mark.parametrize("name", CLAIMS)
def test_row_holds_where_direction_and_headline_grade_stay_and_a_choice_where_all_its_rows_do(mixed, name):
    answer = assess(CLAIMS[name], mixed)
    here = (answer.likelihood_ratio.direction, answer.likelihood_ratio.headline_grade)
    for row in answer.robustness.rows:
        assert row.holds == ((row.direction, row.headline_grade) == here)
    choices = {row.choice for row in answer.robustness.rows}
    for choice, holds in answer.robustness.holds().items():
        assert holds == all(row.holds for row in answer.robustness.rows if row.choice == choice)
        choices.remove(choice)
    assert not choices
    assert answer.to_dict()["robustness"]["holds"] == answer.robustness.holds()


def test_mixed_literature_has_choices_that_hold_and_choices_that_do_not(mixed):
    found = assess(CLAIMS["one peak"], mixed).robustness.holds()
    assert set(found.values()) == {True, False}


def leaving_out(studies, term, hits):
    """Return the four counts without these studies... of those that stay."""
    return Counts(*four_counts(carriers_by_loop(studies, term), hits, set(range(len(studies)))))


SMALL = [*mixed_studies(16, seed=2), ([A], ["fear"]), ([ELSEWHERE], ["pain"])]
GROUPS = ["", "p1", "p1", "", "p2", "p2", "p2", "", "p3", "", "p3", "", "", "p1", "", "p4", "p4", "p5"]


@pytest.mark.parametrize("groups", [None, GROUPS], ids=["studies", "groups"])
@pytest.mark.parametrize("absent", [False, True])
def test_leaving_one_out_equals_building_the_literature_without_it(groups, absent):
    claim = Claim(term="fear", peaks=[A_MM], absent=absent)
    answer = assess(claim, in_memory(SMALL, groups=groups, brain=True))
    names = [f"s{i:03}" for i in range(len(SMALL))]
    if groups is not None:
        names = [group or name for group, name in zip(groups, names, strict=True)]
    base = answer.likelihood_ratio.value
    moves, tables, directions = {}, {}, {}
    for name in dict.fromkeys(names):
        kept = [study for study, owner in zip(SMALL, names, strict=True) if owner != name]
        fresh = assess(claim, in_memory(kept, brain=True))
        moves[name] = abs(log(fresh.likelihood_ratio.value.estimate / base.estimate))
        tables[name], directions[name] = fresh.counts, fresh.likelihood_ratio.direction
    found = answer.robustness.left_out
    largest = max(moves.values())
    winners = [name for name, move in moves.items() if move == pytest.approx(largest, rel=1e-9)]
    assert found.name in winners
    assert found.counts == tables[found.name]
    assert found.alike == sum(tables[name] == found.counts for name in names_once(names))
    assert found.direction == directions[found.name]
    assert found.ratio.estimate == pytest.approx(likelihood_ratio(found.counts).estimate, rel=1e-12)
    changes = any(direction != answer.likelihood_ratio.direction for direction in directions.values())
    assert answer.robustness.direction_changes_without_one == changes


def names_once(names):
    return list(dict.fromkeys(names))


@pytest.mark.parametrize(("hits", "changes"), [(4, False), (5, True), (9, False)])
def test_direction_changes_without_one_only_where_the_answer_is_barely_decided(hits, changes):
    literature = made((hits, [A], ["fear"]), (20 - hits, [B], ["fear"]), (3, [A], ["pain"]), (57, [B], ["pain"]))
    answer = assess(Claim(term="fear", peaks=[A_MM]), literature)
    without = likelihood_ratio(Counts(hits - 1, 20 - hits, 3, 57))
    decided = answer.likelihood_ratio.direction
    assert (direction_of(without) != decided) == changes
    assert answer.robustness.direction_changes_without_one == changes


def test_kin_row_leaves_the_studies_of_kin_out_of_the_others(mixed):
    studies = mixed_studies()
    answer = assess(CLAIMS["one peak"], mixed)
    (row,) = answer.robustness.of("kin")
    own, hits = carriers_by_loop(studies, "fear"), hit_by_loop(studies, A, 10)
    kin = set().union(*(carriers_by_loop(studies, name.term) for name in answer.selectivity.kin))
    kept = set(range(len(studies))) - (kin - own)
    expected = Counts(*four_counts(own, hits, kept))
    assert row.counts == expected
    assert row.ratio.estimate == pytest.approx(likelihood_ratio(expected).estimate, rel=1e-12)


def test_kin_row_changes_the_counts_where_kin_have_studies_of_their_own():
    literature = made(
        (10, [A], ["fear", "invented dread"]), (6, [A], ["invented dread"]), (30, [B], ["pain"]), (4, [A], ["pain"])
    )
    answer = assess(Claim(term="fear", peaks=[A_MM]), literature)
    (row,) = answer.robustness.of("kin")
    assert answer.counts == Counts(10, 0, 10, 30)
    assert row.counts == Counts(10, 0, 4, 30)


def test_without_kin_there_is_no_such_row(invented_literature):
    answer = assess(Claim(term="invented naming", peaks=[A_MM]), invented_literature)
    assert answer.selectivity.kin == ()
    assert answer.robustness.of("kin") == []


def test_table_has_rows_of_the_priors_only_and_no_study_to_leave_out(table_of):
    found = assess(Claim(term="pain", region="here"), table_of((15, 48, 17, 371))).robustness
    assert set(found.holds()) == {"prior", "prior of the ratio"}
    assert found.left_out is None
    assert not found.direction_changes_without_one


@pytest.mark.parametrize("peak", [(0.0, 0.0, 999.0), (-998.0, 0.0, 0.0)])
def test_place_at_the_end_of_space_is_answered_without_the_rows_that_would_leave_it(mixed, peak):
    found = assess(Claim(term="fear", peaks=[peak]), mixed)
    assert found.counts.active_total == 0
    assert len(found.robustness.of("radius")) == 7
    assert found.robustness.of("space") == []
    assert 0 < len(found.robustness.of("peak")) < 12
