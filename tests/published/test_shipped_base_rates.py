"""The base rates that ship with revinf: counts of the open coordinates, and what they say at known places.

Sources of the coordinates: Spreng, Mar & Kim 2009, J Cogn Neurosci 21:489-510 (autobiographical memory,
navigation, theory of mind); Mar 2011, Annu Rev Psychol 62:103-134 (theory of mind); Sevinc & Spreng 2014,
PLoS ONE 9:e87427 (moral cognition); Jackson 2021, NeuroImage 224:117444 (semantic cognition).
"""

from __future__ import annotations

import csv
import gzip
import json
import os
import subprocess
import sys
from functools import cache
from pathlib import Path

import numpy as np
import pytest
from typer.testing import CliRunner

import revinf.knowledge
from revinf.cli.app import app
from revinf.knowledge import table_path
from revinf.spaces.brain import brain_reference, tissue_at

COUNTS = ("term_active", "term_total", "other_active", "other_total")


@cache
def shipped():
    """Return the rows of the table as text."""
    text = gzip.decompress(table_path("open_base_rates").read_bytes()).decode("utf-8")
    return tuple(csv.DictReader(text.splitlines()))


@cache
def centres():
    """Return the lattice: names in order of appearance and millimetres."""
    places = {row["region"]: tuple(float(row[axis]) for axis in "xyz") for row in shipped()}
    return tuple(places), np.array(list(places.values()))


@pytest.fixture
def elsewhere(tmp_path):
    """Run a command as somebody who installed the package would: from another folder, without options."""
    root = Path(revinf.knowledge.__file__).resolve().parents[1]
    kept = {name: value for name, value in os.environ.items() if name != "REVINF_LITERATURE"}

    def run(*args):
        done = subprocess.run(
            [sys.executable, "-m", "revinf", *map(str, args)],
            cwd=tmp_path,
            env=kept | {"PYTHONPATH": str(root), "PYTHONIOENCODING": "utf-8"},
            capture_output=True,
            encoding="utf-8",
            check=False,
            timeout=120,
        )
        assert (done.returncode, done.stderr) == (0, "")
        return done.stdout

    return run


@pytest.mark.parametrize(
    ("term", "peak", "answered_by", "counts", "direction"),
    [
        # Right temporo-parietal junction; its own lattice point is no grey matter in the template.
        ("theory of mind", (54, -54, 24), ("48 -54 24", 6.0), (11, 52, 15, 373), "for"),
        # Right parahippocampal gyrus.
        ("navigation", (26, -36, -14), ("24 -36 -18", 4.5), (4, 9, 17, 421), "for"),
        ("autobiographical memory", (26, -36, -14), ("24 -36 -18", 4.5), (6, 14, 15, 416), "for"),
        # Left parahippocampal gyrus. Navigation has 3 of 13 experiments there against 49 of 438 others: it
        # leans towards the claim, and thirteen experiments do not decide it.
        ("navigation", (-24, -36, -14), ("-24 -36 -18", 4.0), (3, 10, 49, 389), "undecided"),
        ("autobiographical memory", (-24, -36, -14), ("-24 -36 -18", 4.0), (7, 13, 45, 386), "for"),
        # Left inferior frontal gyrus; the lattice point (-48, 24, 12) is no grey matter, and of three others
        # that are equally near the first in the table answers.
        ("semantic cognition", (-48, 26, 12), ("-54 24 12", 6.3), (52, 220, 14, 165), "for"),
    ],
)
def test_known_place_is_answered_by_the_nearest_lattice_place_which_is_named(
    term, peak, answered_by, counts, direction, monkeypatch
):
    place, distance_mm = answered_by
    monkeypatch.delenv("REVINF_LITERATURE", raising=False)
    done = CliRunner().invoke(app, ["check", "--peak", *map(str, peak), "--term", term, "--json"])
    assert (done.exit_code, done.stderr) == (0, "")
    found = json.loads(done.stdout)
    assert found["place"]["table_region"]["region"] == place
    assert found["place"]["table_region"]["distance_mm"] == pytest.approx(distance_mm, abs=0.05)
    assert tuple(found["counts"].values()) == counts
    assert found["likelihood_ratio"]["direction"] == direction
    assert found["likelihood_ratio"]["estimate"] > 1
    names, xyz = centres()
    away = np.linalg.norm(xyz - peak, axis=1)
    assert away[names.index(place)] == pytest.approx(away.min())
    assert found["literature"]["name"] == "open base rates"
    assert not found["literature"]["invented"]
    assert {"small-default", "ungrouped-studies"} <= {item["code"] for item in found["cautions"]}
    assert ("far-from-table" in {item["code"] for item in found["cautions"]}) == (distance_mm > 5)


def test_installed_program_names_the_lattice_place_and_its_distance(elsewhere):
    args = ("check", "--peak", 54, -54, 24, "--term", "theory of mind")
    text = " ".join(elsewhere(*args).split())
    assert "the table's place '48 -54 24' at (48, −54, 24), 6.0 mm from the peak, sphere of 10 mm" in text
    assert "speaks for the claim" in text
    assert "11 of 63" in text
    assert "15 of 388" in text


def test_lattice_places_that_would_be_nearer_are_no_grey_matter():
    names, _ = centres()
    brain = brain_reference()
    for point in ((54, -54, 24), (-48, 24, 12), (24, -36, -12), (-24, -36, -12)):
        assert f"{point[0]} {point[1]} {point[2]}" not in names
        assert tissue_at(brain, point) != "grey matter"


def test_semantic_cognition_speaks_for_itself_in_the_left_frontal_gyrus_but_narratives_hit_it_oftener():
    """Of 272 experiments of semantic cognition 19 % hit (-54, 24, 12), of 23 of narratives 26 %."""
    here = {row["term"]: row for row in shipped() if row["region"] == "-54 24 12"}
    rates = {term: int(row["term_active"]) / int(row["term_total"]) for term, row in here.items()}
    assert sorted(rates, key=rates.get, reverse=True)[:2] == ["narrative comprehension", "semantic cognition"]


def test_theory_of_mind_is_ahead_of_other_topics_but_for_one_near_the_right_temporo_parietal_junction():
    """Of 63 experiments 17 % hit (48, -54, 24), of 20 on autobiographical memory 20 %."""
    here = {row["term"]: row for row in shipped() if row["region"] == "48 -54 24"}
    rates = {term: int(row["term_active"]) / int(row["term_total"]) for term, row in here.items()}
    own = {term for term in rates if "theory of mind" in term}
    ahead = {term for term in set(rates) - own if rates[term] > rates["theory of mind"]}
    assert ahead == {"autobiographical memory"}


def test_lattice_is_grey_matter_of_six_millimetres_with_the_same_terms_everywhere():
    _, xyz = centres()
    assert (xyz % 6 == 0).all()
    assert len(xyz) == 4902
    assert len(shipped()) == 4902 * 8
    assert {row["radius_mm"] for row in shipped()} == {"10"}
    brain = brain_reference()
    assert all(tissue_at(brain, point) == "grey matter" for point in xyz[::25])


def test_every_count_is_the_one_of_the_open_coordinates_by_plain_counting(open_coordinates):
    """All 4,902 places and 8 terms, from the files with numpy alone."""
    peaks, studies = [], []
    with (open_coordinates / "peaks.csv").open(encoding="utf-8", newline="") as stream:
        for row in csv.DictReader(stream):
            assert row["space"] == "MNI"
            peaks.append([round(float(row[axis]) * 10) for axis in "xyz"])
            studies.append(row["experiment"])
    carried = {}
    with (open_coordinates / "annotations.csv").open(encoding="utf-8", newline="") as stream:
        for row in csv.DictReader(stream):
            carried.setdefault(row["term"], set()).add(row["experiment"])
    order = np.argsort(studies, kind="stable")
    names, starts = np.unique(np.array(studies)[order], return_index=True)
    assert set(names) == set().union(*carried.values())
    tenths = np.array(peaks, dtype=np.int64)[order]
    places, xyz = centres()
    hits = np.empty((len(places), len(names)), dtype=bool)
    for block in range(0, len(places), 500):
        centre = (xyz[block : block + 500] * 10).astype(np.int64)
        squares = ((centre[:, None, :] - tenths[None, :, :]) ** 2).sum(axis=-1)
        hits[block : block + 500] = np.logical_or.reduceat(squares <= 100**2, starts, axis=1)
    found = {(row["region"], row["term"]): tuple(int(row[name]) for name in COUNTS) for row in shipped()}
    terms = sorted({term for _, term in found})
    for term in terms:
        label = np.isin(names, sorted(carried[term]))
        active, others = hits[:, label].sum(axis=1), hits[:, ~label].sum(axis=1)
        expected = {
            (place, term): (int(a), int(label.sum()), int(b), int((~label).sum()))
            for place, a, b in zip(places, active, others, strict=True)
        }
        assert {key: value for key, value in found.items() if key[1] == term} == expected
    # Left out on purpose: labels that are no processes (README.md of the coordinates names them).
    assert set(carried) - set(terms) == {
        "verbal material",
        "nonverbal material",
        "visual presentation",
        "auditory presentation",
        "task-induced deactivation",
    }
