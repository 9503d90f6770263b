"""`revinf check` in this process: coordinates as people type them, sources, JSON, and where output goes."""

from __future__ import annotations

import json
from pathlib import Path

import nibabel as nib
import numpy as np
import pytest

from revinf.evidence.assess import Choices, assess, choices_of
from revinf.evidence.claim import Claim
from revinf.literature.literature import Literature

PEAK = (-22.0, -4.0, -18.0)


def strict(text):
    """Read JSON, refusing NaN and Infinity."""
    return json.loads(text, parse_constant=lambda word: pytest.fail(f"{word} is not JSON"))


@pytest.fixture
def answer(revinf, literature):
    """Run a check on the invented literature and return its JSON."""

    def run(*args, term="fear"):
        done = revinf("check", "--literature", literature, "--term", term, "--json", *args)
        assert (done.exit_code, done.stderr) == (0, "")
        return strict(done.stdout)

    return run


@pytest.mark.parametrize(
    "typed",
    [
        ("--peak", "-22", "-4", "-18"),
        ("--peak", "-22.0", "-4.00", "-18"),
        ("--peak", "-22 -4 -18"),
        ("--peak=-22 -4 -18",),
        ("--peak", "-22,-4,-18"),
        ("--peak=-22,-4,-18",),
        ("--peak", "-22,", "-4,", "-18"),
        ("--peak=-22", "-4", "-18"),
        ("--peak", "−22", "−4", "−18"),
        ("--peak", "–22, –4, –18"),
    ],
)
@pytest.mark.parametrize("first", [True, False])
def test_negative_coordinates_are_read_as_people_type_them(revinf, literature, typed, first):
    rest = ("--literature", literature, "--term", "fear", "--json")
    done = revinf("check", *((*typed, *rest) if first else (*rest, *typed)))
    assert (done.exit_code, done.stderr) == (0, "")
    assert strict(done.stdout)["claim"]["peaks"] == [list(PEAK)]


def test_fraction_and_exponent_are_coordinates(answer):
    assert answer("--peak", "-.5", "1e1", "-1.25e1")["claim"]["peaks"] == [[-0.5, 10.0, -12.5]]


@pytest.mark.parametrize(
    ("options", "claim", "choices"),
    [
        ((), {}, {}),
        (("--prior", "0.1"), {"prior": 0.1}, {}),
        (("--prior", "prevalence"), {"prior": "prevalence"}, {}),
        (("--radius", "6"), {"radius_mm": 6}, {}),
        (("--space", "TAL"), {"space": "Talairach"}, {}),
        (("--space", "tal", "--transform", "fsl"), {"space": "Talairach", "transform": "fsl"}, {}),
        (("--level", "0.9"), {}, {"level": 0.9}),
        (("--ratio-prior", "independent"), {}, {"ratio_prior": "independent"}),
        (("--ratio-prior-limit", "5"), {}, {"ratio_limit": 5.0}),
    ],
)
def test_json_is_that_of_the_library(answer, literature, options, claim, choices):
    expected = assess(Claim(term="fear", peaks=[PEAK], **claim), Literature.open(literature), Choices(**choices))
    assert answer("--peak", *PEAK, *options) == expected.to_dict()


def test_own_kinds_reach_the_answer(answer, literature, tmp_path):
    kinds = tmp_path / "kinds.csv"
    kinds.write_text("term,kind\nfear,sensation\n")
    expected = assess(
        Claim(term="fear", peaks=[PEAK]),
        Literature.open(literature),
        choices_of(level=0.95, ratio_prior="shared", ratio_limit=20, kinds=kinds),
    ).to_dict()
    found = answer("--peak", *PEAK, "--kinds", kinds)
    assert found == expected
    assert "not-a-process" in [item["code"] for item in found["cautions"]]


def test_mask_answers_and_is_named(answer, tmp_path):
    inside = np.zeros((91, 109, 91), np.uint8)
    inside[30:40, 57:65, 23:31] = 1
    image = nib.Nifti1Image(inside, np.array([[2, 0, 0, -90], [0, 2, 0, -126], [0, 0, 2, -72], [0, 0, 0, 1.0]]))
    nib.save(image, tmp_path / "amygdala box.nii")
    found = answer("--mask", tmp_path / "amygdala box.nii")
    assert found["claim"]["region_kind"] == "mask"
    assert found["place"]["words"].startswith("mask amygdala box, 640 voxels")
    assert found["counts"]["term_active"] > 0


def test_counts_of_the_invented_story_are_those_of_its_readme(answer):
    """demo/README.md: 12 of 15 papers on fear and 17 of 285 others; 9 of 16 on disgust and 127 of 284."""
    assert list(answer("--peak", *PEAK)["counts"].values()) == [12, 3, 17, 268]
    assert list(answer("--peak", 36, 22, -2, term="disgust")["counts"].values()) == [9, 7, 127, 157]


def test_screen_goes_to_stdout_and_nothing_to_stderr(revinf, literature):
    done = revinf("check", "--literature", literature, "--peak", *PEAK, "--term", "fear")
    assert (done.exit_code, done.stderr) == (0, "")
    text = " ".join(done.stdout.split())
    for part in ("12 of 15", "17 of 285", "INVENTED DATA", "300 studies (here: papers)", "invented-data"):
        assert part in text


def test_environment_names_the_literature_and_the_option_beats_it(revinf, literature, invented_literature):
    here = ("check", "--peak", *PEAK, "--json")
    env = {"REVINF_LITERATURE": str(literature)}
    done = revinf(*here, "--term", "fear", env=env)
    assert strict(done.stdout)["literature"]["n_studies"] == 300
    own = revinf(
        "check", "--literature", invented_literature.folder, "--peak", -40, 20, 10, "--term",
        "invented naming", "--json", env=env,
    )  # fmt: skip
    assert strict(own.stdout)["literature"]["name"] == "tiny invented literature"
    terms = revinf("terms", "--json", env=env)
    assert len(strict(terms.stdout)["terms"]) == 73
    table = revinf("terms", "--literature", invented_literature.folder, "--json", env=env)
    assert len(strict(table.stdout)["terms"]) == 3


def test_environment_that_names_nothing_there_is_an_error_and_not_ignored(revinf, tmp_path):
    done = revinf("check", "--peak", *PEAK, "--term", "fear", env={"REVINF_LITERATURE": str(tmp_path / "absent")})
    assert (done.exit_code, done.stdout) == (2, "")
    assert "there is no such literature folder" in done.stderr


def test_without_a_source_the_shipped_base_rates_answer_and_say_so(revinf):
    done = revinf("check", "--peak", 54, -54, 24, "--term", "theory of mind", "--json")
    found = strict(done.stdout)
    assert found["literature"]["name"] == "open base rates"
    assert "small-default" in [item["code"] for item in found["cautions"]]
    assert not found["literature"]["invented"]


def test_report_is_a_page_of_the_same_answer(revinf, tmp_path: Path) -> None:
    page = tmp_path / "page.html"
    asked = ("check", "--peak", "48", "-54", "24", "--term", "theory of mind", "--prior", "0.3")
    done = revinf(*asked, "--report", page, "--json")
    assert done.exit_code == 0
    answer = json.loads(done.stdout)["posterior"]
    assert f"{answer['estimate']:.3f} ({answer['low']:.3f}–{answer['high']:.3f})" in page.read_text(encoding="utf-8")
    refused = revinf(*asked, "--report", tmp_path / "page.txt")
    assert refused.exit_code == 2
    assert refused.stdout == ""
    assert refused.stderr.count("\n") == 1
