"""Every caution has an input that triggers it and one that does not, and no code has two meanings."""

from __future__ import annotations

import ast
import inspect
from pathlib import Path

import pytest

from revinf.evidence import cautions
from revinf.evidence.assess import Choices, assess
from revinf.evidence.cautions import registry
from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.evidence.claim import Claim
from revinf.evidence.source_choice import choose_source
from revinf.evidence.sources import LiteratureSource, TableSource
from revinf.spaces.brain import brain_reference, distance_outside_mm, tissue_at

SOLID = (15, 48, 17, 371)  # decided, and its interval spans less than a factor of four
GREY, WHITE, ABOVE = (-42.0, -22.0, 52.0), (26.0, -16.0, 34.0), (0.0, 0.0, 110.0)
CLAIM = Claim(term="pain", region="here")


def caution(code, answer):
    return next((item for item in answer.cautions if item.code == code), None)


def severity(code, answer):
    found = caution(code, answer)
    return found.severity if found else None


def at(peak, table_of, counts=SOLID, **more):
    """Assess a peak with a table whose one place is that peak."""
    return assess(Claim(term="pain", peaks=[peak]), table_of(counts, at=peak, **more))


@pytest.mark.parametrize(
    ("counts", "expected"),
    [
        (SOLID, None),
        ((166, 703, 199, 2154), None),
        ((3, 10, 4, 200), "weigh"),
        ((0, 3, 17, 371), "stop"),
        ((0, 63, 0, 388), "stop"),
        ((0, 10, 0, 10), "stop"),
    ],
)
def test_thin_evidence_weighs_above_ten_and_stops_above_fifty_or_without_a_hit(table_of, counts, expected):
    answer = assess(CLAIM, table_of(counts))
    value = answer.likelihood_ratio.value
    width = value.high / value.low
    assert severity("thin-evidence", answer) == expected
    if expected:
        found = caution("thin-evidence", answer)
        assert found.evidence == {"high_over_low": width, "hits": counts[0] + counts[2]}
        assert (width > 10, width > 50) == (True, expected == "stop")
    else:
        assert width <= 10


def test_thin_evidence_without_a_hit_says_that_the_prior_answered(table_of):
    message = caution("thin-evidence", assess(CLAIM, table_of((0, 63, 0, 388)))).message
    assert message == "No counted study has a peak here: the answer is the prior of the ratio, not evidence."


def test_thin_evidence_with_hits_gives_the_counts_and_the_width(table_of):
    message = caution("thin-evidence", assess(CLAIM, table_of((3, 10, 4, 200)))).message
    assert "3 of 13 studies with the term" in message
    assert "times its lower end" in message


@pytest.mark.parametrize("prior", [0.05, 0.3, 0.7, 0.95])
def test_prior_driven_holds_where_an_undecided_ratio_meets_a_prior_far_from_a_half(table_of, prior):
    answer = assess(Claim(term="pain", region="here", prior=prior), table_of((5, 20, 80, 320)))
    assert answer.likelihood_ratio.direction == "undecided"
    found = caution("prior-driven", answer)
    assert found.severity == "weigh"
    assert found.evidence["prior"] == prior
    assert f"repeats the prior of {prior:.2g}." in found.message


@pytest.mark.parametrize(
    ("prior", "counts"), [(0.31, (5, 20, 80, 320)), (0.69, (5, 20, 80, 320)), (0.05, SOLID), (0.95, SOLID)]
)
def test_prior_driven_does_not_hold_near_a_half_or_for_a_decided_ratio(table_of, prior, counts):
    answer = assess(Claim(term="pain", region="here", prior=prior), table_of(counts))
    assert caution("prior-driven", answer) is None


def test_prior_driven_looks_at_the_prevalence_where_that_was_the_prior(table_of):
    counts = (5, 20, 80, 320)
    answer = assess(Claim(term="pain", region="here", prior="prevalence"), table_of(counts))
    assert caution("prior-driven", answer).evidence["prior"] == 25 / 425


@pytest.fixture(scope="module")
def just_outside():
    """A place outside the brain mask by at most 4 mm, right of the brain."""
    brain = brain_reference()
    return next(
        (x, -20.0, 10.0)
        for x in range(50, 100)
        if tissue_at(brain, (x, -20, 10)) == "outside" and 1 < distance_outside_mm(brain, (x, -20, 10)) <= 4
    )


def test_off_brain_stops_more_than_four_millimetres_outside(table_of):
    found = caution("off-brain", at(ABOVE, table_of))
    assert found.severity == "stop"
    assert "more than 4 mm outside the brain mask; check its signs, its space and its units" in found.message
    assert found.evidence["outside_mm"] > 4


def test_off_brain_stops_where_no_brain_is_anywhere_near(table_of):
    found = caution("off-brain", at((0.0, 0.0, 900.0), table_of))
    assert found.severity == "stop"
    assert found.evidence["tissue"] == "outside"


def test_off_brain_weighs_white_matter_and_just_outside(table_of, just_outside):
    inside = caution("off-brain", at(WHITE, table_of))
    assert (inside.severity, inside.evidence["tissue"]) == ("weigh", "white matter")
    assert "in white matter of the standard brain, not in grey matter" in inside.message
    outside = caution("off-brain", at(just_outside, table_of))
    assert (outside.severity, outside.evidence["tissue"]) == ("weigh", "outside")
    assert "just outside the brain mask" in outside.message


def test_off_brain_does_not_hold_in_grey_matter_or_for_a_region_without_a_peak(table_of):
    assert caution("off-brain", at(GREY, table_of)) is None
    assert caution("off-brain", assess(CLAIM, table_of(SOLID, at=ABOVE))) is None


@pytest.mark.parametrize(
    ("away", "radius", "expected"),
    [(5.0, 10.0, None), (5.1, 10.0, "weigh"), (10.0, 10.0, "weigh"), (3.0, 6.0, None), (3.1, 6.0, "weigh")],
)
def test_far_from_table_begins_beyond_half_the_radius(table_of, away, radius, expected):
    table = table_of(SOLID, radius=radius)
    answer = assess(Claim(term="pain", peaks=[(GREY[0], GREY[1], GREY[2] + away)]), table)
    assert severity("far-from-table", answer) == expected
    if expected:
        found = caution("far-from-table", answer)
        assert found.evidence == {"distance_mm": pytest.approx(away), "radius_mm": radius}
        assert f"{away:.1f} mm from the peak" in found.message


def test_far_from_table_does_not_hold_for_a_named_region(table_of):
    assert caution("far-from-table", assess(CLAIM, table_of(SOLID))) is None


def test_invented_data_stops_for_an_invented_literature_and_an_invented_table(invented_literature, table_of):
    claim = Claim(term="invented naming", peaks=[(-40, 20, 10)])
    for answer in (
        assess(claim, invented_literature),
        assess(CLAIM, table_of(SOLID, source="Invented for a test")),
    ):
        assert severity("invented-data", answer) == "stop"
        assert "INVENTED" in caution("invented-data", answer).message


def test_invented_data_does_not_hold_for_a_typed_table(table_of):
    assert caution("invented-data", assess(CLAIM, table_of(SOLID))) is None


def test_ungrouped_studies_is_noted_without_and_not_with_a_group(invented_literature, grouped_literature, table_of):
    claim = Claim(term="invented naming", peaks=[(-40, 20, 10)])
    noted = caution("ungrouped-studies", assess(claim, invented_literature))
    assert noted.severity == "note"
    assert "The studies are counted as independent" in noted.message
    grouped = assess(claim, grouped_literature)
    assert grouped.counts.total == 7
    assert caution("ungrouped-studies", grouped) is None
    assert caution("ungrouped-studies", assess(CLAIM, table_of(SOLID))) is None


def test_small_default_weighs_the_shipped_base_rates_and_no_other_table():
    shipped = choose_source(None, None, {})
    claim = Claim(term="theory of mind", peaks=[(48, -54, 24)])
    found = caution("small-default", assess(claim, shipped))
    assert found.severity == "weigh"
    # 272 of 451 experiments are about semantic cognition: README.md of the open coordinates.
    assert found.evidence == {"n_studies": 451, "largest_share": 272 / 451}
    assert "451 experiments" in found.message
    assert "60%" in found.message
    assert caution("small-default", assess(claim, TableSource(shipped.table))) is None


@pytest.mark.parametrize(
    ("term", "kind"),
    [("amygdala", "anatomy"), ("verbal material", "material"), ("visual presentation", "presentation")],
)
def test_not_a_process_weighs_a_claim_about_another_kind_of_word(table_of, term, kind):
    found = caution("not-a-process", assess(Claim(term=term, region="here"), table_of(SOLID, term=term)))
    assert (found.severity, found.evidence) == ("weigh", {"term": term, "kind": kind})
    assert f"'{term}' labels studies by {kind}, it is not a mental process" in found.message


@pytest.mark.parametrize("term", ["pain", "theory of mind", "a word that no table knows"])
def test_not_a_process_does_not_hold_for_a_process_or_an_unknown_word(table_of, term):
    answer = assess(Claim(term=term, region="here"), table_of(SOLID, term=term))
    assert caution("not-a-process", answer) is None


@pytest.fixture
def troubled(invented_literature):
    """An answer with cautions of all severities."""
    claim = Claim(term="invented reading", peaks=[ABOVE], prior=0.1)
    return assess(claim, LiteratureSource(invented_literature))


def test_cautions_come_most_severe_first_and_each_once(troubled):
    codes = [item.code for item in troubled.cautions]
    assert len(set(codes)) == len(codes)
    expected = ["invented-data", "off-brain", "thin-evidence", "prior-driven", "ungrouped-studies"]
    assert [code for code in codes if code in expected] == expected
    order = ["stop", "weigh", "note"]
    places = [order.index(item.severity) for item in troubled.cautions]
    assert places == sorted(places)
    assert set(places) == {0, 1, 2}


def test_graver_caution_comes_first_whatever_family_it_is_of(table_of):
    answer = at(WHITE, table_of, (0, 63, 0, 388))
    found = [(item.severity, item.code) for item in answer.cautions]
    assert found.index(("stop", "thin-evidence")) < found.index(("weigh", "off-brain"))


def test_sound_claim_has_no_caution(table_of):
    assert assess(CLAIM, table_of(SOLID)).cautions == ()


def test_thresholds_move_where_cautions_begin(table_of):
    strict = Choices(thresholds=Thresholds(thin_weigh=2.0, thin_stop=3.0))
    assert severity("thin-evidence", assess(CLAIM, table_of(SOLID), strict)) == "stop"
    lax = Choices(thresholds=Thresholds(thin_weigh=1e9, thin_stop=1e9))
    assert severity("thin-evidence", assess(CLAIM, table_of((3, 10, 4, 200)), lax)) is None


def codes_in_the_source() -> dict[str, set[str]]:
    """Return for each caution code the functions that give it."""
    owners: dict[str, set[str]] = {}
    for path in Path(inspect.getfile(cautions)).parent.glob("*.py"):
        for function in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(function, ast.FunctionDef):
                for call in ast.walk(function):
                    if isinstance(call, ast.Call) and getattr(call.func, "id", "") == "Caution":
                        code = next(word.value for word in call.keywords if word.arg == "code")
                        owners.setdefault(ast.literal_eval(code), set()).add(function.name)
    return owners


def test_each_code_belongs_to_one_function_and_is_named_after_it():
    for code, functions in codes_in_the_source().items():
        assert functions == {code.replace("-", "_")}


def test_every_caution_that_can_be_shown_has_a_test_for_holding_and_for_not_holding():
    """Looks for tests named after the caution, in any file of this folder."""
    tests = [
        node
        for path in Path(__file__).parent.glob("test_*.py")
        for node in ast.parse(path.read_text(encoding="utf-8")).body
        if isinstance(node, ast.FunctionDef)
    ]
    shown = {name for name, item in vars(registry).items() if inspect.isfunction(item)}
    for code, (function,) in codes_in_the_source().items():
        if function in shown:
            text = "\n".join(ast.unparse(node) for node in tests if node.name.startswith(f"test_{function}"))
            assert f"'{code}'" in text, code
            assert "is None" in text or "None)" in text, code


def test_caution_is_plain_data_with_four_parts():
    item = Caution(code="x", severity="note", message="m", evidence={"n": 1})
    assert item.to_dict() == {"code": "x", "severity": "note", "message": "m", "evidence": {"n": 1}}
