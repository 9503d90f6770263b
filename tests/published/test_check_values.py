"""Published counts through the whole program: files in, JSON out.

Poldrack 2006, Trends Cogn Sci 10:59-63: Broca's area and language, 166 of 869 against 199 of 2353.
Open coordinates: Spreng, Mar & Kim 2009; Mar 2011; Sevinc & Spreng 2014; Jackson 2021 (their README.md).
Intervals: formula 2 by an independent quadrature.
"""

from __future__ import annotations

import json

import pytest
from typer.testing import CliRunner

from revinf.cli.app import app
from revinf.knowledge import table_path


@pytest.fixture(scope="module")
def answer():
    """Run a command and return its JSON."""

    def run(*args):
        done = CliRunner().invoke(app, [*map(str, args), "--json"], env={"REVINF_LITERATURE": None})
        assert (done.exit_code, done.stderr) == (0, "")
        return json.loads(done.stdout)

    return run


def rounded(part, digits):
    return tuple(round(part[name], digits) for name in ("estimate", "low", "high"))


def test_brocas_area_and_language_are_those_of_poldrack_2006(answer):
    found = answer(
        "check",
        "--table",
        table_path("published_frequencies"),
        "--region",
        "Broca's area",
        "--term",
        "language",
    )
    assert tuple(found["counts"].values()) == (166, 703, 199, 2154)
    # Printed there: P(activation | language) 0.19, Bayes factor 2.3, posterior 0.69 at even odds.
    assert round(166 / 869, 2) == 0.19
    assert round(found["rates"]["active_given_term"]["estimate"], 2) == 0.19
    ratio = found["likelihood_ratio"]
    assert round(ratio["observed"], 2) == 2.26
    assert round(ratio["observed"], 1) == 2.3
    assert found["posterior"]["prior"] == 0.5
    assert round(found["posterior"]["observed"], 2) == 0.69
    assert rounded(ratio, 3) == (2.249, 1.857, 2.720)
    assert rounded(found["posterior"], 3) == (0.692, 0.650, 0.731)
    assert (ratio["direction"], ratio["headline_grade"]) == ("for", "bare")
    assert found["posterior_at_prevalence"]["observed"] == 166 / 365
    assert not found["literature"]["invented"]


@pytest.fixture(scope="module")
def built(answer, open_coordinates, tmp_path_factory):
    """The open coordinates, built by the command line, and the summary that it printed."""
    folder = tmp_path_factory.mktemp("published") / "open"
    summary = answer(
        "build", "--peaks", open_coordinates / "peaks.csv", "--annotations",
        open_coordinates / "annotations.csv", "--studies", open_coordinates / "experiments.csv", "--column",
        "study=experiment", "--study-is", "experiments", "--licence", "MIT", "--out", folder,
    )  # fmt: skip
    return folder, summary


def test_theory_of_mind_at_the_right_temporo_parietal_junction_has_its_published_counts(answer, built):
    folder, summary = built
    # README.md of the open coordinates: 451 experiments, 5,451 peaks.
    assert (summary["n_studies"], summary["n_peaks"]) == (451, 5451)
    found = answer("check", "--literature", folder, "--peak", 54, -54, 24, "--term", "theory of mind")
    assert tuple(found["counts"].values()) == (15, 48, 17, 371)
    assert rounded(found["likelihood_ratio"], 2) == (4.98, 2.60, 9.37)
    assert rounded(found["posterior"], 3) == (0.833, 0.722, 0.904)
    assert found["posterior_at_prevalence"]["observed"] == 15 / 32
    at_prevalence = answer(
        "check",
        "--literature",
        folder,
        "--peak",
        54,
        -54,
        24,
        "--term",
        "theory of mind",
        "--prior",
        "prevalence",
    )
    assert at_prevalence["posterior"]["observed"] == 15 / 32
    assert at_prevalence["posterior"] == found["posterior_at_prevalence"]


@pytest.mark.parametrize(
    ("term", "peak", "counts", "direction"),
    [
        ("navigation", (26, -36, -14), (5, 8, 17, 421), "for"),
        # Three experiments of thirteen: more often than the others (rate 0.23 against 0.10), and undecided.
        ("navigation", (-24, -36, -14), (3, 10, 43, 395), "undecided"),
        ("autobiographical memory", (26, -36, -14), (5, 15, 17, 414), "for"),
        ("autobiographical memory", (-24, -36, -14), (6, 14, 40, 391), "for"),
        ("semantic cognition", (-48, 26, 12), (54, 218, 14, 165), "for"),
    ],
)
def test_places_of_the_published_meta_analyses_speak_for_their_process(answer, built, term, peak, counts, direction):
    """Navigation and autobiographical memory: Spreng, Mar & Kim 2009; semantic cognition: Jackson 2021."""
    found = answer("check", "--literature", built[0], "--peak", *peak, "--term", term)
    assert tuple(found["counts"].values()) == counts
    assert found["likelihood_ratio"]["direction"] == direction
    assert found["likelihood_ratio"]["observed"] > 1
