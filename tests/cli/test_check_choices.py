"""The choices of `revinf check`: context, rivals, absence, patterns, thresholds, figure; one call, same answer."""

from __future__ import annotations

import json

import pytest

from revinf.evidence.assess import assess, choices_of
from revinf.evidence.claim import Claim
from revinf.literature.literature import Literature

PEAK = (-22.0, -4.0, -18.0)
PAIR = ((54.0, -54.0, 22.0), (4.0, 54.0, 18.0))
PLAIN = {"level": 0.95, "ratio_prior": "shared", "ratio_limit": 20.0}


@pytest.fixture
def answer(revinf, literature):
    """Run a check of fear on the invented literature and return its JSON."""

    def run(*args, term="fear", peak=PEAK):
        done = revinf("check", "--literature", literature, "--term", term, "--json", "--peak", *peak, *args)
        assert (done.exit_code, done.stderr) == (0, "")
        return json.loads(done.stdout, parse_constant=lambda word: pytest.fail(f"{word} is not JSON"))

    return run


@pytest.fixture(scope="module")
def opened(literature):
    return Literature.open(literature)


@pytest.mark.parametrize(
    ("options", "claim", "choices"),
    [
        (("--context", "sadness", "--context", "Pain"), {"context": ["sadness", "pain"]}, {}),
        (("--rival", "trust"), {"rivals": ["trust"]}, {}),
        (("--exclude", "sadness", "--exclude", "touch"), {"excluded": ["sadness", "touch"]}, {}),
        (("--absent",), {"absent": True}, {}),
        (("--all",), {}, {"every_rival": True}),
        (("--peak", "36", "22", "-2"), {"peaks": [PEAK, (36, 22, -2)]}, {}),
        (("--space", "tal", "--peak", "36", "22", "-2"), {"peaks": [PEAK, (36, 22, -2)], "space": "tal"}, {}),
    ],
    ids=lambda item: " ".join(item[:1]) if isinstance(item, tuple) else "",
)
def test_json_of_each_choice_is_that_of_the_library(answer, opened, options, claim, choices):
    expected = assess(Claim(term="fear", **{"peaks": [PEAK]} | claim), opened, choices_of(**PLAIN, **choices))
    found = answer(*options)
    assert found == expected.to_dict()
    assert found != answer()


def test_twenty_rivals_are_listed_by_default_and_all_of_them_with_all(answer):
    short, full = answer(), answer("--all")
    assert len(short["rivals"]) == 20
    assert len(full["rivals"]) == full["selectivity"]["n_process_terms"] - 1 > 40
    assert full["rivals"][:20] == short["rivals"]
    assert short | {"rivals": 0} == full | {"rivals": 0}


def test_rivals_and_kin_are_apart_and_the_claimed_term_is_in_neither(answer):
    found = answer("--all")
    rivals, kin = ([row["term"] for row in found[name]] for name in ("rivals", "kin"))
    assert len(set(rivals)) == len(rivals)
    assert set(kin) == {"threat detection", "emotional faces"}
    assert not {"fear", *kin} & set(rivals)
    assert [row["shrunk_rate"] for row in found["rivals"]] == sorted(
        (row["shrunk_rate"] for row in found["rivals"]), reverse=True
    )


def test_named_rival_is_shown_where_it_would_not_be(answer):
    assert "trust" not in [row["term"] for row in answer()["rivals"]]
    found = answer("--rival", "Trust")
    assert len(found["rivals"]) == 20 + 1
    assert found["rivals"][-1]["term"] == "trust"
    assert found["selectivity"] == answer()["selectivity"]


def test_excluded_term_is_no_rival_and_is_not_ranked(answer):
    plain = answer()
    best = plain["selectivity"]["best_rival"]
    found = answer("--exclude", best, "--all")
    assert best not in [row["term"] for row in found["rivals"]]
    assert found["selectivity"]["best_rival"] != best
    assert found["selectivity"]["n_process_terms"] == plain["selectivity"]["n_process_terms"] - 1
    assert found["likelihood_ratio"] == plain["likelihood_ratio"]


def test_context_counts_again_and_leaves_the_headline_alone(answer):
    plain, found = answer(), answer("--context", "pain", "--context", "fear")
    assert plain["context"] is None
    assert found["claim"]["context"] == ["pain", "fear"]
    counts = found["context"]["counts"]
    assert sum(counts.values()) == found["context"]["n_studies"] < 300
    assert (counts["term_active"], counts["term_inactive"]) == (12, 3)
    assert found["counts"] == plain["counts"]
    assert "context-small" in [item["code"] for item in found["cautions"]]


def test_absence_turns_every_count_round_and_says_what_it_cannot_know(answer):
    plain, found = answer(), answer("--absent")
    assert found["claim"]["absent"] is True
    for side in ("term", "other"):
        assert found["counts"][f"{side}_active"] == plain["counts"][f"{side}_inactive"]
        assert found["counts"][f"{side}_inactive"] == plain["counts"][f"{side}_active"]
    assert (plain["likelihood_ratio"]["direction"], found["likelihood_ratio"]["direction"]) == ("for", "against")
    assert found["breadth"]["activation_percentile"] is None
    assert "absence-unsearched" in [item["code"] for item in found["cautions"]]


def test_absence_is_answered_by_a_table_too(revinf):
    args = ("check", "--peak", 54, -54, 24, "--term", "theory of mind", "--json")
    plain, found = (json.loads(revinf(*args, *more).stdout) for more in ((), ("--absent",)))
    assert found["counts"]["term_inactive"] == plain["counts"]["term_active"]
    assert found["literature"] == plain["literature"]


def test_pattern_has_joint_counts_single_places_and_their_product(answer):
    found = answer("--peak", *PAIR[1], term="theory of mind", peak=PAIR[0])
    singles = [answer(term="theory of mind", peak=peak) for peak in PAIR]
    pattern = found["pattern"]
    assert found["claim"]["peaks"] == [list(peak) for peak in PAIR]
    assert pattern["joint_hits"] == found["counts"]["term_active"] + found["counts"]["other_active"]
    for region, single in zip(pattern["regions"], singles, strict=True):
        assert region["counts"] == single["counts"]
        assert region["ratio"]["estimate"] == pytest.approx(single["likelihood_ratio"]["estimate"], rel=1e-9)
        assert found["counts"]["term_active"] <= single["counts"]["term_active"]
        assert single["pattern"] is None
    # (k + 1/2) / (n + 1) rates, by hand
    product = 1.0
    for single in singles:
        n11, n10, n01, n00 = single["counts"].values()
        product *= ((n11 + 0.5) / (n11 + n10 + 1)) / ((n01 + 0.5) / (n01 + n00 + 1))
    assert pattern["product"] == pytest.approx(product, rel=1e-9)
    assert pattern["overstatement"] == pytest.approx(product / found["likelihood_ratio"]["estimate"], rel=1e-9)
    assert found["mirror"] is None


def test_order_of_the_peaks_of_a_pattern_does_not_matter(answer):
    one = answer("--peak", *PAIR[1], term="theory of mind", peak=PAIR[0])
    other = answer("--peak", *PAIR[0], term="theory of mind", peak=PAIR[1])
    assert one["likelihood_ratio"] == other["likelihood_ratio"]
    assert one["pattern"]["product"] == pytest.approx(other["pattern"]["product"], rel=1e-12)


def test_own_thresholds_move_where_cautions_begin(answer, tmp_path):
    path = tmp_path / "mine.toml"
    path.write_text("# comment\nthin_weigh = 1.5\nthin_stop = 2\nradii_estimate = []\nradii_interval = []\n")
    plain, found = ([(item["code"], item["severity"]) for item in answer(*more)["cautions"]] for more in (
        (), ("--thresholds", path)))  # fmt: skip
    assert ("thin-evidence", "stop") in found
    assert "thin-evidence" not in dict(plain)
    assert "radius-sensitive" in dict(plain)
    assert "radius-sensitive" not in dict(found)


@pytest.mark.parametrize("ending", [".png", ".svg", ".pdf", ".PNG"])
def test_figure_is_written_beside_the_same_answer(revinf, literature, tmp_path, ending):
    args = ("check", "--literature", literature, "--peak", *PEAK, "--term", "fear")
    done = revinf(*args, "--figure", tmp_path / f"out{ending}")
    assert (done.exit_code, done.stderr) == (0, "")
    assert done.stdout == revinf(*args).stdout
    assert [path.name for path in tmp_path.iterdir()] == [f"out{ending}"]
    assert (tmp_path / f"out{ending}").stat().st_size > 5000


def test_parts_that_only_studies_can_give_are_null_for_a_table(revinf):
    done = revinf("check", "--peak", 54, -54, 24, "--term", "theory of mind", "--json")
    found = json.loads(done.stdout)
    assert [name for name in ("reporting_volume", "context", "mirror", "pattern") if found[name]] == []
    assert found["kin"] == []
    assert {row["shared_studies"] for row in found["rivals"]} == {None}
    assert found["selectivity"]["probability_ahead"] is None
    assert found["breadth"]["effective_domains"] is None
    assert found["robustness"]["largest_influence"] is None
    assert set(found["robustness"]["holds"]) == {"prior", "prior of the ratio"}
