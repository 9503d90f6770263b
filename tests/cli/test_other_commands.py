"""`demo`, `build`, `inspect`, `terms` and `tabulate` on the invented scenario."""

from __future__ import annotations

import csv
import gzip
import json
import shutil

import pytest

from revinf.evidence.demonstration import FILES


def test_demo_writes_its_files_and_refuses_a_folder_that_holds_any(revinf, tmp_path):
    done = revinf("demo", "--out", tmp_path / "demo")
    assert (done.exit_code, done.stderr) == (0, "")
    assert sorted(path.name for path in (tmp_path / "demo").iterdir()) == sorted(FILES)
    assert "INVENTED" in done.stdout
    (tmp_path / "demo" / "README.md").write_text("changed by its owner")
    again = revinf("demo", "--out", tmp_path / "demo")
    assert (again.exit_code, again.stdout) == (2, "")
    assert (tmp_path / "demo" / "README.md").read_text() == "changed by its owner"


def test_demo_writes_to_a_folder_of_its_own_by_default(revinf, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    assert revinf("demo").exit_code == 0
    assert [path.name for path in tmp_path.iterdir()] == ["revinf-demo"]


def test_what_the_demo_says_to_run_runs(revinf, tmp_path, monkeypatch):
    import re
    import shlex

    said = " ".join(revinf("demo", "--out", tmp_path / "demo").stdout.split())
    commands = re.findall(r"revinf (?:build|check) .*?(?= revinf | a [a-z ]+ revinf| outside the head| README)", said)
    assert len(commands) == 5
    monkeypatch.chdir(tmp_path / "demo")
    for command in commands:
        words = shlex.split(re.sub(r" a (selective|busy) place$| a lucky rare term$", "", command))
        done = revinf(*words[1:])
        assert done.exit_code == 0, (command, done.stderr)


def test_build_prints_what_it_read_kept_and_noticed(revinf, demo, tmp_path):
    done = revinf(
        "build", "--peaks", demo / "peaks.csv", "--annotations", demo / "annotations.csv", "--studies",
        demo / "studies.csv", "--group", "group", "--invented", "--name", "A name", "--source", "a source",
        "--licence", "a licence", "--citation", "a citation", "--out", tmp_path / "lit",
    )  # fmt: skip
    assert (done.exit_code, done.stderr) == (0, "")
    text = " ".join(done.stdout.split())
    for part in (
        "Literature A name", "INVENTED DATA", "300 studies", "merged by 'group'", "Source a source",
        "Licence a licence", "Cite a citation", "peaks.csv 5,915 5,915 0",
        "10 studies have peaks but no term",
    ):  # fmt: skip
        assert part in text


def test_build_without_options_counts_experiments_and_calls_nothing_invented(revinf, demo, tmp_path):
    done = revinf(
        "build", "--peaks", demo / "peaks.csv", "--annotations", demo / "annotations.csv", "--out",
        tmp_path / "lit", "--json",
    )  # fmt: skip
    summary = json.loads(done.stdout)
    assert (summary["n_studies"], summary["merged_by"], summary["invented"]) == (640, None, False)
    assert summary["name"] == "lit"


def test_build_twice_gives_the_same_bytes(revinf, demo, tmp_path, literature):
    done = revinf(
        "build", "--peaks", demo / "peaks.csv", "--annotations", demo / "annotations.csv", "--studies",
        demo / "studies.csv", "--group", "group", "--invented", "--study-is", "papers", "--out",
        tmp_path / "literature",
    )  # fmt: skip
    assert done.exit_code == 0
    for path in literature.iterdir():
        assert (tmp_path / "literature" / path.name).read_bytes() == path.read_bytes(), path.name


def test_build_replaces_an_older_literature(revinf, demo, invented_literature, tmp_path):
    target = shutil.copytree(invented_literature.folder, tmp_path / "lit")
    args = (
        "build",
        "--peaks",
        demo / "peaks.csv",
        "--annotations",
        demo / "annotations.csv",
        "--out",
        target,
    )
    assert revinf(*args).exit_code == 0
    assert json.loads(revinf("inspect", target, "--json").stdout)["n_studies"] == 640


def test_build_maps_columns_by_name(revinf, invented_files, invented_literature, tmp_path):
    for path in (invented_files.peaks, invented_files.annotations):
        text = path.read_text().replace("study,", "experiment,", 1)
        (tmp_path / path.name).write_text(text)
    done = revinf(
        "build", "--peaks", tmp_path / "peaks.csv", "--annotations", tmp_path / "terms.csv", "--column",
        "study=experiment", "--out", tmp_path / "lit", "--json",
    )  # fmt: skip
    assert json.loads(done.stdout)["fingerprint"] == invented_literature.fingerprint


def test_inspect_shows_the_literature_and_verifies_every_array(revinf, literature):
    plain, verified = revinf("inspect", literature), revinf("inspect", literature, "--verify")
    assert plain.exit_code == verified.exit_code == 0
    assert plain.stderr == verified.stderr == ""
    assert "every array verified" not in plain.stdout
    assert "every array verified" in verified.stdout
    assert "300 studies (here: papers), 5,726 peaks, 73 terms" in " ".join(verified.stdout.split())


def test_inspect_gives_the_summary_as_json(revinf, literature):
    summary = json.loads(revinf("inspect", literature, "--json").stdout)
    assert summary["invented"] is True
    assert summary["merged_by"] == "group"
    assert (summary["n_studies"], summary["n_peaks"], summary["n_terms"]) == (300, 5726, 73)


def test_terms_lists_all_and_finds_by_part_synonym_and_domain(revinf, literature):
    everything = json.loads(revinf("terms", "--literature", literature, "--json").stdout)
    assert len(everything["terms"]) == 73
    sizes = [row["n_studies"] for row in everything["terms"]]
    assert sizes == sorted(sizes, reverse=True)
    part = json.loads(revinf("terms", "memory", "--literature", literature, "--json").stdout)
    assert {"autobiographical memory"} <= {row["term"] for row in part["terms"]}
    synonym = json.loads(revinf("terms", "mentalising", "--literature", literature, "--json").stdout)
    assert [row["term"] for row in synonym["terms"]] == ["theory of mind"]


def test_terms_screen_shows_studies_kind_and_domain(revinf, literature):
    done = revinf("terms", "fear", "--literature", literature)
    assert (done.exit_code, done.stderr) == (0, "")
    assert "fear 15 process" in " ".join(done.stdout.split())


@pytest.fixture(scope="module")
def places(tmp_path_factory):
    path = tmp_path_factory.mktemp("places") / "places.csv"
    path.write_text("region,x,y,z\nleft amygdala,-22,-4,-18\nright insula,36,22,-2\n")
    return path


@pytest.mark.parametrize("name", ["table.csv", "table.csv.gz"])
def test_table_of_tabulate_answers_check_in_the_same_digits(revinf, literature, places, tmp_path, name):
    table = tmp_path / name
    done = revinf("tabulate", "--literature", literature, "--regions", places, "--out", table)
    assert (done.exit_code, done.stderr) == (0, "")
    assert "".join(done.stdout.split()) == f"146rowsfor2placeswrittento{table}"
    direct = json.loads(
        revinf("check", "--literature", literature, "--peak", -22, -4, -18, "--term", "fear", "--json").stdout
    )
    for where in (("--region", "left amygdala"), ("--peak", -22, -4, -18)):
        tabled = json.loads(revinf("check", "--table", table, *where, "--term", "fear", "--json").stdout)
        for part in ("counts", "rates", "likelihood_ratio", "posterior", "posterior_at_prevalence",
                     "required_prior", "association"):  # fmt: skip
            assert tabled[part] == direct[part]
        assert tabled["literature"]["invented"] is True


def test_tabulate_keeps_to_the_terms_asked_for_and_to_the_radius(revinf, literature, places, tmp_path):
    table = tmp_path / "table.csv"
    done = revinf(
        "tabulate", "--literature", literature, "--regions", places, "--out", table, "--term", "fear",
        "--term", "Disgust", "--radius", 6,
    )  # fmt: skip
    assert done.exit_code == 0
    with table.open(encoding="utf-8", newline="") as stream:
        rows = list(csv.DictReader(stream))
    assert {row["term"] for row in rows} == {"fear", "disgust"}
    assert {row["radius_mm"] for row in rows} == {"6"}
    assert all(row["source"].startswith("invented data: ") for row in rows)


def test_tabulate_a_lattice_names_places_by_their_coordinates(revinf, invented_literature, tmp_path):
    table = tmp_path / "table.csv.gz"
    done = revinf("tabulate", "--literature", invented_literature.folder, "--lattice", 20, "--out", table)
    assert done.exit_code == 0
    rows = list(csv.DictReader(gzip.decompress(table.read_bytes()).decode().splitlines()))
    assert f"{len(rows):,} rows" in done.stdout
    assert all(row["region"] == f"{row['x']} {row['y']} {row['z']}" for row in rows)
    assert all(float(row[axis]) % 20 == 0 for row in rows for axis in "xyz")
