"""Real processes: exit codes, the two streams, what gets imported, closed pipes, files that have gone."""

from __future__ import annotations

import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

PROBE = """
import json, sys
from revinf.cli.app import run
sys.argv = ["revinf", *sys.argv[1:]]
code = 0
try:
    run()
except SystemExit as stop:
    code = stop.code or 0
print(json.dumps([code, sorted({name.partition(".")[0] for name in sys.modules})]), file=sys.stderr)
"""
HEAVY = {"scipy", "pandas", "nilearn", "nibabel", "matplotlib", "sklearn", "joblib"}
TOM = ("--peak", "48", "-54", "24", "--term", "theory of mind")
FEAR = ("--peak", "-22", "-4", "-18", "--term", "fear")


def probe(*args, cwd):
    """Run a command in a fresh interpreter; return its exit code and the packages it imported."""
    kept = {name: value for name, value in os.environ.items() if name != "REVINF_LITERATURE"}
    done = subprocess.run(
        [sys.executable, "-c", PROBE, *map(str, args)],
        cwd=cwd,
        env=kept | {"PYTHONPATH": str(Path(__file__).resolve().parents[2])},
        capture_output=True,
        encoding="utf-8",
        check=True,
        timeout=120,
    )
    code, modules = json.loads(done.stderr.splitlines()[-1])
    assert len(done.stderr.splitlines()) == 1
    assert done.stdout
    return code, set(modules)


@pytest.mark.parametrize(
    "more",
    [
        (),
        ("--json",),
        ("--context", "sadness", "--rival", "pain", "--exclude", "taste", "--all", "--json"),
        ("--absent",),
        ("--peak", "36", "22", "-2"),
    ],
    ids=["screen", "json", "choices", "absent", "pattern"],
)
def test_check_on_a_built_literature_imports_no_heavy_library(literature, tmp_path, more):
    code, modules = probe("check", "--literature", literature, *FEAR, *more, cwd=tmp_path)
    assert code == 0
    assert "numpy" in modules
    assert not modules & HEAVY


@pytest.mark.parametrize("more", [("--json",), ()])
def test_profile_of_a_built_literature_imports_no_heavy_library(literature, tmp_path, more):
    code, modules = probe("profile", "--literature", literature, *FEAR[:4], *more, cwd=tmp_path)
    assert code == 0
    assert not modules & HEAVY


def test_figure_imports_the_plotting_library_and_no_other_heavy_one(literature, tmp_path):
    code, modules = probe("check", "--literature", literature, *FEAR, "--json", "--figure", "out.svg", cwd=tmp_path)
    assert code == 0
    assert modules & HEAVY == {"matplotlib"}


def test_terms_of_a_built_literature_imports_no_heavy_library(literature, tmp_path):
    code, modules = probe("terms", "--literature", literature, cwd=tmp_path)
    assert code == 0
    assert not modules & HEAVY


@pytest.mark.parametrize(
    "args",
    [("--help",), ("--version",), ("terms",), ("terms", "memory"), ("check", "--help"), ("profile", "--help")],
)
def test_help_version_and_terms_import_no_heavy_library(tmp_path, args):
    code, modules = probe(*args, cwd=tmp_path)
    assert code == 0
    assert not modules & HEAVY


def test_check_puts_its_result_on_stdout_and_exits_0(fresh, literature, tmp_path):
    done = fresh("check", "--literature", literature, *FEAR, cwd=tmp_path)
    assert (done.returncode, done.stderr) == (0, "")
    assert "12 of 15" in done.stdout
    assert "\x1b[" not in done.stdout


def test_bad_input_puts_one_line_on_stderr_and_exits_2(fresh, literature, tmp_path):
    done = fresh("check", "--literature", literature, "--peak", "1", "2", "3", "--term", "feer", cwd=tmp_path)
    assert (done.returncode, done.stdout) == (2, "")
    assert (
        done.stderr == "revinf: no study in the literature 'literature' carries the term 'feer'; did you mean 'fear'?\n"
    )


def test_json_of_a_process_is_only_json(fresh, literature, tmp_path):
    done = fresh("check", "--literature", literature, *FEAR, "--json", cwd=tmp_path)
    assert done.stderr == ""
    assert json.loads(done.stdout)["schema"] == "revinf/assessment/1"


def test_build_says_nothing_on_stderr_that_is_no_terminal(fresh, demo, tmp_path):
    done = fresh(
        "build", "--peaks", demo / "peaks.csv", "--annotations", demo / "annotations.csv", "--out", "lit",
        cwd=tmp_path,
    )  # fmt: skip
    assert (done.returncode, done.stderr) == (0, "")
    assert "640 studies" in done.stdout
    assert sorted(path.name for path in tmp_path.iterdir()) == ["lit"]


def test_environment_is_honoured_by_a_process(fresh, literature, tmp_path):
    done = fresh("check", *FEAR, "--json", cwd=tmp_path, REVINF_LITERATURE=str(literature))
    assert json.loads(done.stdout)["literature"]["n_studies"] == 300


def test_literature_answers_when_the_files_it_was_built_from_have_gone(fresh, demo, literature, tmp_path):
    files = ("peaks.csv", "annotations.csv", "studies.csv")
    for name in files:
        shutil.copy(demo / name, tmp_path)
    built = fresh(
        "build", "--peaks", files[0], "--annotations", files[1], "--studies", files[2], "--group", "group",
        "--invented", "--study-is", "papers", "--out", "lit", "--name", "literature", cwd=tmp_path,
    )  # fmt: skip
    assert built.returncode == 0
    for name in files:
        (tmp_path / name).unlink()
    (tmp_path / "lit").rename(tmp_path / "moved")
    done = fresh("check", "--literature", "moved", *FEAR, "--json", cwd=tmp_path)
    there = fresh("check", "--literature", literature, *FEAR, "--json", cwd=tmp_path)
    assert (done.returncode, done.stderr) == (0, "")
    assert json.loads(done.stdout) == json.loads(there.stdout)


@pytest.mark.parametrize("args", [("terms",), ("terms", "--json"), ("check", *TOM), ("check", *TOM, "--json")])
def test_reader_that_goes_away_is_no_error(args, tmp_path):
    """As in `revinf terms | true`: nobody reads, nothing is said, the exit code is 0."""
    reading, writing = os.pipe()
    os.close(reading)
    with os.fdopen(writing, "wb") as pipe:
        done = subprocess.run(
            [sys.executable, "-m", "revinf", *args],
            cwd=tmp_path,
            env=dict(os.environ, PYTHONPATH=str(Path(__file__).resolve().parents[2]), PYTHONUNBUFFERED=""),
            stdout=pipe,
            stderr=subprocess.PIPE,
            check=False,
            timeout=120,
        )
    assert (done.returncode, done.stderr) == (0, b"")


def test_terminal_that_cannot_show_a_character_gets_another(fresh, literature, tmp_path):
    done = fresh("check", "--literature", literature, *FEAR, cwd=tmp_path, PYTHONIOENCODING="ascii")
    assert (done.returncode, done.stderr) == (0, "")
    assert "12 of 15" in done.stdout
