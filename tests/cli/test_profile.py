"""`revinf profile`: from a literature, a table and a mask, as screen, JSON and figure."""

from __future__ import annotations

import json

import nibabel as nib
import numpy as np
import pytest

PEAK = (-22, -4, -18)


@pytest.fixture
def found(revinf, literature):
    """Run a profile and return its JSON."""

    def run(*args, source=None):
        source = ("--literature", literature) if source is None else source
        done = revinf("profile", *source, "--json", *args)
        assert (done.exit_code, done.stderr) == (0, "")
        return json.loads(done.stdout, parse_constant=lambda word: pytest.fail(f"{word} is not JSON"))

    return run


def test_every_process_has_the_counts_and_ratio_that_check_gives_it(found, revinf, literature):
    profile = found("--peak", *PEAK)
    assert profile["schema"] == "revinf/profile/1"
    assert profile["region"] == {"kind": "sphere", "peaks": [[-22.0, -4.0, -18.0]], "radius_mm": 10.0}
    rows = {row["term"]: row for row in profile["processes"]}
    assert len(rows) == len(profile["processes"]) == 54
    for term in ("fear", "disgust", "trust"):
        done = revinf("check", "--literature", literature, "--peak", *PEAK, "--term", term, "--json")
        check = json.loads(done.stdout)
        assert rows[term]["counts"] == check["counts"]
        assert rows[term]["rate"] == check["rates"]["active_given_term"]
        assert rows[term]["fisher_p"] == check["association"]["fisher_p"]
        assert rows[term]["q"] == check["association"]["q"]
        assert rows[term]["observed_ratio"] == check["likelihood_ratio"]["observed"]
        for end in ("low", "estimate", "high"):
            assert rows[term]["likelihood_ratio"][end] == pytest.approx(check["likelihood_ratio"][end], rel=1e-9)
    assert check["breadth"] == profile["breadth"]
    assert check["place"] == profile["place"]


def test_processes_are_in_the_order_of_their_shrunk_rates_and_no_material_is_among_them(found):
    rows = found("--peak", *PEAK)["processes"]
    rates = [row["shrunk_rate"] for row in rows]
    assert rates == sorted(rates, reverse=True)
    assert rows[0]["term"] == "fear"
    assert not {"faces", "healthy adults", "emotional faces"} & {row["term"] for row in rows}


def test_domains_are_in_the_order_of_their_rates(found):
    domains = found("--peak", *PEAK)["domains"]
    assert domains[0]["domain"] == "emotion"
    estimates = [row["rate"]["estimate"] for row in domains]
    assert estimates == sorted(estimates, reverse=True)
    assert all(0 <= row["active"] <= row["total"] for row in domains)


def test_table_answers_without_domains(found):
    profile = found("--peak", 54, -54, 24, source=())
    assert profile["literature"]["name"] == "open base rates"
    assert (profile["domains"], profile["region"]["kind"]) == ([], "table")
    assert profile["place"]["table_region"]["region"] == "48 -54 24"
    assert len(profile["processes"]) == 8


def test_region_of_a_table_answers_by_its_name(found, tmp_path):
    table = tmp_path / "table.csv"
    table.write_text("region,term,term_active,term_total,other_active,other_total\nhere,pain,9,30,10,200\n")
    profile = found("--region", "here", source=("--table", table))
    assert profile["place"]["words"] == "here"
    assert [row["term"] for row in profile["processes"]] == ["pain"]
    assert profile["hits"] == 19


def test_mask_and_pattern_answer(found, tmp_path):
    inside = np.zeros((91, 109, 91), np.uint8)
    inside[30:40, 57:65, 23:31] = 1
    affine = np.array([[2, 0, 0, -90], [0, 2, 0, -126], [0, 0, 2, -72], [0, 0, 0, 1.0]])
    nib.save(nib.Nifti1Image(inside, affine), tmp_path / "box.nii")
    masked = found("--mask", tmp_path / "box.nii")
    assert (masked["region"]["kind"], masked["region"]["radius_mm"]) == ("mask", None)
    pattern = found("--peak", *PEAK, "--peak", 36, 22, -2)
    assert len(pattern["region"]["peaks"]) == 2
    assert 0 < pattern["hits"] < found("--peak", *PEAK)["hits"]


def test_choices_reach_the_profile(found, tmp_path):
    plain = found("--peak", *PEAK)
    narrow = found("--peak", *PEAK, "--level", 0.5)
    assert narrow["level"] == 0.5
    assert narrow["processes"][0]["rate"]["low"] > plain["processes"][0]["rate"]["low"]
    assert found("--peak", *PEAK, "--radius", 6)["hits"] < plain["hits"]
    assert found("--peak", *PEAK, "--space", "tal")["region"]["peaks"] != plain["region"]["peaks"]
    limited = found("--peak", *PEAK, "--ratio-prior-limit", 2)
    assert limited["processes"][0]["likelihood_ratio"] != plain["processes"][0]["likelihood_ratio"]
    kinds = tmp_path / "kinds.csv"
    kinds.write_text("term,kind\nfear,material\n")
    assert "fear" not in [row["term"] for row in found("--peak", *PEAK, "--kinds", kinds)["processes"]]


def test_screen_and_figure_go_where_they_belong(revinf, literature, tmp_path):
    args = ("profile", "--literature", literature, "--peak", *PEAK)
    done = revinf(*args, "--figure", tmp_path / "place.svg")
    assert (done.exit_code, done.stderr) == (0, "")
    assert done.stdout == revinf(*args).stdout
    for part in ("29 studies are active here", "fear", "12 of 15", "INVENTED DATA", "34 more with --json"):
        assert part in done.stdout
    assert [path.name for path in tmp_path.iterdir()] == ["place.svg"]


def test_environment_names_the_literature_of_a_profile(revinf, literature):
    done = revinf("profile", "--peak", *PEAK, "--json", env={"REVINF_LITERATURE": str(literature)})
    assert json.loads(done.stdout)["literature"]["n_studies"] == 300
