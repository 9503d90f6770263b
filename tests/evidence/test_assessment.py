"""The answer as frozen data, as one row, and as strict JSON with exactly the published keys."""

from __future__ import annotations

import json
from dataclasses import FrozenInstanceError

import pandas as pd
import pytest

from revinf.evidence.assess import Choices, assess
from revinf.evidence.claim import Claim
from revinf.evidence.source_choice import choose_source
from revinf.knowledge import VERSION

E = {"estimate": 0, "low": 0, "high": 0}
COUNTS = {"term_active": 0, "term_inactive": 0, "other_active": 0, "other_inactive": 0}
# Schema revinf/assessment/1, key by key and in its order.
SCHEMA = {
    "schema": 0,
    "version": 0,
    "claim": {
        "id": 0, "term": 0, "region_kind": 0, "peaks": 0, "space": 0, "radius_mm": 0, "prior": 0,
        "absent": 0, "context": 0, "quote": 0, "location": 0,
    },
    "place": {
        "hemisphere": 0,
        "tissue": 0,
        "nearest": {"label": 0, "distance_mm": 0, "source": 0},
        "words": 0,
    },
    "literature": {
        "name": 0, "n_studies": 0, "n_peaks": 0, "n_terms": 0, "study_is": 0, "invented": 0, "fingerprint": 0,
    },
    "counts": COUNTS,
    "rates": {"active_given_term": E, "active_given_other": E, "activation": E, "prevalence": E},
    "likelihood_ratio": {**E, "observed": 0, "direction": 0, "headline_grade": 0, "estimate_grade": 0},
    "posterior": {**E, "observed": 0, "prior": 0},
    "posterior_at_prevalence": {**E, "observed": 0, "prior": 0},
    "required_prior": {"0.80": {"estimate": 0, "at_low": 0}, "0.95": {"estimate": 0, "at_low": 0}},
    "association": {"fisher_p": 0, "q": 0},
    "selectivity": {
        "rank": 0, "n_process_terms": 0, "rank_informative": 0, "n_rivals_ahead": 0, "best_rival": 0,
        "probability_ahead": 0, "shrunk_rate": 0,
    },
    "breadth": {
        "activation_percentile": 0, "functional_diversity": E, "category_diversity": E,
        "category_diversity_minimum": 0, "effective_domains": E, "n_domains": 0, "effective_processes": E,
        "n_processes": 0, "n_processes_above_own_rate": 0,
    },
    "reporting_volume": {"crude_ratio": 0, "adjusted_ratio": E},
    "context": {"n_studies": 0, "counts": COUNTS, "ratio": E},
    "mirror": {"counts": COUNTS, "ratio": E, "this_side_only": 0, "other_side_only": 0},
    "pattern": {"regions": 0, "joint": E, "joint_hits": 0, "product": 0, "overstatement": 0},
    "balanced_ratio": E,
    "rivals": 0,
    "kin": 0,
    "robustness": {"holds": 0, "rows": 0, "largest_influence": 0, "direction_changes_without_one": 0},
    "cautions": 0,
    "wording": 0,
}  # fmt: skip
# What a source cannot give is null, as a whole or in part; the rest is always there.
MAY_BE_NULL = (
    ".place.nearest", ".selectivity", ".breadth", ".reporting_volume", ".context", ".mirror", ".pattern",
    ".balanced_ratio",
)  # fmt: skip


@pytest.fixture
def answer(invented_literature):
    """An answer with every part that a literature gives; its place has a labelled point within 6 mm."""
    claim = Claim(
        term="invented naming", peaks=[(-40, 20, 10)], prior=0.2, id="c1", quote="A quote.", location="page 3"
    )
    return assess(claim, invented_literature)


def assert_keys(value, schema, where=""):
    """Compare nested keys; a leaf of the schema takes anything."""
    if isinstance(schema, dict) and not (value is None and where.startswith(MAY_BE_NULL)):
        assert list(value) == list(schema), where
        for key, part in schema.items():
            assert_keys(value[key], part, f"{where}.{key}")


def test_dictionary_has_exactly_the_keys_of_the_schema_in_order(answer):
    content = answer.to_dict()
    assert_keys(content, SCHEMA)
    assert content["schema"] == "revinf/assessment/1"
    assert content["version"] == VERSION


def test_labelled_place_has_the_three_keys_of_the_nearest_point(invented_literature):
    from revinf.spaces.brain import brain_reference

    brain = brain_reference()
    at = next(i for i, label in enumerate(brain.point_labels) if label == "amygdala")
    peak = [float(value) / 10 for value in brain.point_xyz_tenths[at]]
    content = assess(Claim(term="invented naming", peaks=[peak]), invented_literature).to_dict()
    assert content["place"]["nearest"]["label"] == "amygdala"
    assert content["place"]["nearest"]["distance_mm"] == 0
    assert_keys(content, SCHEMA)


def test_table_and_peak_add_the_region_that_answered_and_nothing_else(table_of):
    content = assess(Claim(term="pain", peaks=[(-42, -22, 50)]), table_of((15, 48, 17, 371))).to_dict()
    region = content["place"].pop("table_region")
    assert region == {"region": "here", "centre": [-42.0, -22.0, 52.0], "distance_mm": 2.0}
    assert_keys(content, SCHEMA)


def test_named_region_of_a_table_has_no_peak_and_no_tissue(table_of):
    content = assess(Claim(term="pain", region="here"), table_of((15, 48, 17, 371))).to_dict()
    assert_keys(content, SCHEMA)
    assert content["claim"]["peaks"] == []
    assert content["claim"]["region_kind"] == "table"
    assert content["place"] == {"hemisphere": None, "tissue": None, "nearest": None, "words": "here"}
    assert content["literature"]["n_peaks"] is None


def test_claim_is_given_back_as_it_was_asked(answer):
    assert answer.to_dict()["claim"] == {
        "id": "c1",
        "term": "invented naming",
        "region_kind": "sphere",
        "peaks": [[-40.0, 20.0, 10.0]],
        "space": "MNI152",
        "radius_mm": 10.0,
        "prior": 0.2,
        "absent": False,
        "context": [],
        "quote": "A quote.",
        "location": "page 3",
    }


def test_literature_is_named_with_its_size_and_fingerprint(answer, invented_literature):
    assert answer.to_dict()["literature"] == {
        "name": "tiny invented literature",
        "n_studies": 8,
        "n_peaks": 10,
        "n_terms": 3,
        "study_is": "studies",
        "invented": True,
        "fingerprint": invented_literature.fingerprint,
    }


@pytest.mark.parametrize("counts", [(3, 1, 0, 4), (0, 63, 0, 388), (63, 0, 388, 0), (0, 1, 0, 1), (10**6, 0, 0, 10**6)])
@pytest.mark.parametrize("prior", [1e-12, 0.5, 1 - 1e-12, "prevalence"])
def test_json_is_strict_and_survives_the_round_trip(table_of, counts, prior):
    content = assess(Claim(term="pain", region="here", prior=prior), table_of(counts)).to_dict()
    text = json.dumps(content, allow_nan=False)
    assert json.loads(text, parse_constant=lambda word: pytest.fail(word)) == content


def test_json_of_a_literature_survives_the_round_trip(answer):
    content = answer.to_dict()
    assert json.loads(json.dumps(content, allow_nan=False)) == content


def test_peak_far_from_any_brain_still_gives_strict_json(table_of):
    answer = assess(Claim(term="pain", peaks=[(0, 0, 999)]), table_of((1, 2, 3, 4), at=(0.0, 0.0, 999.0)))
    content = answer.to_dict()
    assert json.loads(json.dumps(content, allow_nan=False)) == content


def test_answer_and_its_parts_cannot_be_changed(answer):
    for part, name in (
        (answer, "level"),
        (answer.claim, "term"),
        (answer.place, "words"),
        (answer.literature, "invented"),
        (answer.counts, "term_active"),
        (answer.rates, "activation"),
        (answer.likelihood_ratio, "direction"),
        (answer.likelihood_ratio.value, "estimate"),
        (answer.posterior, "prior"),
        (answer.required_prior[0], "target"),
        (answer.association, "q"),
        (answer.cautions[0], "severity"),
    ):
        with pytest.raises(FrozenInstanceError):
            setattr(part, name, None)


def test_changing_the_dictionary_does_not_change_the_answer(answer):
    content = answer.to_dict()
    content["claim"]["peaks"].append([0, 0, 0])
    content["cautions"][0]["evidence"]["invented"] = False
    content["counts"]["term_active"] = 99
    assert answer.to_dict() != content
    assert answer.to_dict()["claim"]["peaks"] == [[-40.0, 20.0, 10.0]]
    assert answer.cautions[0].evidence == {"invented": True}


def test_same_question_gives_the_same_answer(answer, invented_literature):
    claim = Claim(
        term="invented naming", peaks=[(-40, 20, 10)], prior=0.2, id="c1", quote="A quote.", location="page 3"
    )
    assert assess(claim, invented_literature).to_dict() == answer.to_dict()


def test_repr_tells_a_reader_what_was_found(answer):
    text = repr(answer)
    assert text.startswith("<Assessment 'invented naming': 3 of 4 against 0 of 4 studies, likelihood ratio ")
    assert f"({answer.likelihood_ratio.value.low:.3g}-" in text
    assert "at prior 0.2" in text
    assert text.endswith(" cautions>")
    assert "\n" not in text
    assert len(text) < 220


def test_frame_is_one_row_with_the_nested_names_joined_by_a_dot(answer):
    frame = answer.to_frame()
    assert isinstance(frame, pd.DataFrame)
    assert len(frame) == 1
    row = frame.iloc[0]
    assert row["claim.term"] == "invented naming"
    assert row["claim.peaks"] == "-40 20 10"
    assert row["counts.term_active"] == 3
    assert row["likelihood_ratio.estimate"] == answer.likelihood_ratio.value.estimate
    assert row["required_prior.0.80.at_low"] == answer.required_prior[0].at_low
    assert row["cautions"] == ";".join(caution.code for caution in answer.cautions)
    assert not any(isinstance(value, (dict, list)) for value in row)


def test_rows_of_several_answers_share_their_columns(answer, table_of):
    other = assess(Claim(term="pain", region="here"), table_of((15, 48, 17, 371)))
    assert {"claim.term", "posterior.low"} <= set(answer.to_frame()) & set(other.to_frame())


def test_level_changes_intervals_and_not_estimates(table_of):
    claim, table = Claim(term="pain", region="here"), table_of((15, 48, 17, 371))
    wide, narrow = (assess(claim, table, Choices(level=level)) for level in (0.99, 0.5))
    assert wide.likelihood_ratio.value.estimate == pytest.approx(narrow.likelihood_ratio.value.estimate)
    assert wide.posterior.value.low < narrow.posterior.value.low
    assert wide.posterior.value.high > narrow.posterior.value.high


def test_shipped_base_rates_name_what_a_study_is():
    facts = assess(Claim(term="navigation", peaks=[(24, -36, -18)]), choose_source(None, None, {})).literature
    assert (facts.name, facts.study_is, facts.n_studies, facts.invented) == (
        "open base rates",
        "experiments",
        451,
        False,
    )
