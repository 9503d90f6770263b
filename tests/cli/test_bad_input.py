"""Whatever cannot be used ends with exit code 2, one line on stderr and nothing on stdout."""

from __future__ import annotations

import shlex
import shutil
import signal
from pathlib import Path

import nibabel as nib
import numpy as np
import pytest

HERE = ("--peak", "-22", "-4", "-18", "--term", "fear")


@pytest.fixture(scope="module")
def files(demo, tmp_path_factory):
    """Paths by name: good and bad ones; nothing of the demonstration is changed."""
    folder = tmp_path_factory.mktemp("bad")
    (folder / "text.nii.gz").write_text("this is no image")
    (folder / "plain.txt").write_text("no table")
    image = nib.Nifti1Image(np.zeros((5, 5, 5), np.uint8), np.diag([2, 2, 2, 1]))
    nib.save(image, folder / "empty.nii.gz")
    (folder / "table.csv").write_text(
        "region,term,term_active,term_total,other_active,other_total\nhere,fear,9,3,1,2\n"
    )
    (folder / "kinds.csv").write_text("word,kind\nfear,process\n")
    (folder / "places.csv").write_text("region,x,y,z\nhere,1,2,three\n")
    (folder / "occupied").mkdir()
    (folder / "occupied" / "mine.txt").write_text("mine")
    return {
        "lit": demo / "literature",
        "demo": demo,
        "peaks": demo / "peaks.csv",
        "terms": demo / "annotations.csv",
        "absent": folder / "absent",
        "text": folder / "text.nii.gz",
        "empty": folder / "empty.nii.gz",
        "plain": folder / "plain.txt",
        "table": folder / "table.csv",
        "kinds": folder / "kinds.csv",
        "places": folder / "places.csv",
        "occupied": folder / "occupied",
        "out": folder / "out",
    }


# What is wrong -> the words typed, and what the line must say.
CASES = {
    "unknown term": ("{check} --peak 1 2 3 --term feer", "did you mean 'fear'?"),
    "word of no study": ("{check} --peak 1 2 3 --term juggling", "carries the term 'juggling'"),
    "empty term": ("{check} --peak 1 2 3 --term ' '", "a claim needs a term"),
    "peak of two numbers": ("{check} --peak 1 2 --term fear", "needs three numbers in mm, but got '1 2'"),
    "peak with a letter": ("{check} --peak 1 2 x --term fear", "but got '1 2 x'"),
    "peak without numbers": ("{check} --peak --term fear", "but got ''; write --peak 54 -54 24"),
    "peak of four numbers": ("{check} --peak 1 2 3 4 --term fear", "unexpected extra argument"),
    "peak that is no number": ("{check} --peak nan 2 3 --term fear", "but got nan"),
    "peak in nanometres": ("{check} --peak 1e9 2 3 --term fear", "within 1000 mm of the origin"),
    "same peak twice": ("{fear} --peak -22 -4 -18", "a peak of the pattern stands twice"),
    "no place": ("{check} --term fear", "exactly one kind of place, but got 0"),
    "peak and mask": ("{fear} --mask {text}", "exactly one kind of place, but got 2"),
    "peak and region": ("{fear} --region here", "exactly one kind of place, but got 2"),
    "missing literature": ("check --literature {absent} {here}", "there is no such literature folder"),
    "folder that is no literature": ("check --literature {occupied} {here}", "is not a literature"),
    "file for a literature": ("check --literature {peaks} {here}", "there is no such literature folder"),
    "missing table": ("check --table {absent} {here}", "there is no such file; check the path"),
    "table with a wrong count": (
        "check --table {table} --region here --term fear",
        "table.csv:2:term_active: 9 active studies are more than the 3",
    ),
    "text for a table": ("check --table {plain} {here}", "column 'region' is missing"),
    "both sources": ("{fear} --table {table}", "give --literature or --table, not both"),
    "prior of 1": ("{fear} --prior 1", "strictly between 0 and 1, but got 1.0"),
    "prior of 0": ("{fear} --prior 0", "strictly between 0 and 1, but got 0.0"),
    "prior in words": ("{fear} --prior often", "or the word prevalence, but got 'often'"),
    "negative prior": ("{fear} --prior -0.5", "strictly between 0 and 1, but got -0.5"),
    "level of 1": ("{fear} --level 1", "level must lie strictly between 0 and 1, but got 1.0"),
    "level of 95": ("{fear} --level 95", "use 0.95 for a 95 % interval"),
    "level in words": ("{fear} --level high", "'--level'"),
    "unknown space": ("{fear} --space moon", "space must be MNI152 or Talairach, but got 'moon'"),
    "unknown transform": ("{fear} --transform magic", "transform must be one of pooled, spm"),
    "negative radius": ("{fear} --radius -1", "radius_mm must lie between 0 and 200 mm"),
    "unknown ratio prior": ("{fear} --ratio-prior flat", "ratio prior must be shared or independent"),
    "ratio limit of 1": ("{fear} --ratio-prior-limit 1", "must be above 1"),
    "missing term": ("{check} --peak 1 2 3", "Missing option '--term'"),
    "option without value": ("{check} --peak 1 2 3 --term", "'--term' requires an argument"),
    "unknown option": ("{fear} --bogus", "No such option: --bogus. See revinf --help."),
    "unknown command": ("bogus", "No such command 'bogus'. See revinf --help."),
    "no command": ("", "Missing command. See revinf --help."),
    "extra word": ("{fear} more", "unexpected extra argument"),
    "region without a table": ("{check} --region Broca --term fear", "names a place of a table"),
    "region that is not shipped": ("check --region Broca --term navigation", "has no region 'Broca'"),
    "peak far from what is shipped": (
        "check --peak 0 0 120 --term navigation", "farther than its radius of 10 mm",
    ),
    "mask with a table": ("check --mask {text} --term navigation", "no peaks to put into a mask"),
    "missing mask": ("{check} --mask {absent}.nii --term fear", "no such file; give the path of the mask image"),
    "text for a mask": ("{check} --mask {text} --term fear", "cannot be read as a NIfTI image"),
    "table for a mask": ("{check} --mask {peaks} --term fear", "must be a .nii or .nii.gz file"),
    "empty mask": ("{check} --mask {empty} --term fear", "the mask is empty"),
    "missing kinds": ("{fear} --kinds {absent}", "cannot be read"),
    "kinds without terms": ("{fear} --kinds {kinds}", "column 'term' is missing"),
    "build without peaks": ("build --annotations {terms} --out {out}", "Missing option '--peaks'"),
    "build from a missing file": ("build --peaks {absent} --annotations {terms} --out {out}", "no such file"),
    "build with an unknown sign": ("{build} --out {out} --sign both", "one of all, positive, negative"),
    "build with half a column": ("{build} --out {out} --column study", "needs OURS=YOURS, but got 'study'"),
    "build over other files": ("{build} --out {occupied}", "something that is not a literature stands here"),
    "inspect nothing": ("inspect", "Missing argument 'FOLDER'"),
    "inspect a missing folder": ("inspect {absent}", "there is no such literature folder"),
    "terms of a missing table": ("terms --table {absent}", "there is no such file"),
    "terms of two sources": ("terms --table {table} --literature {lit}", "not both"),
    "tabulate nowhere": ("{tabulate}", "give --lattice MM, --regions FILE, or --atlas FILE with"),
    "tabulate twice": ("{tabulate} --lattice 40 --regions {places}", "places come from one source"),
    "tabulate a lattice of 0": ("{tabulate} --lattice 0", "spacing_mm must be 1 to 50 mm"),
    "tabulate a bad place": ("{tabulate} --regions {places}", "places.csv:2:z: 'three' is not a number"),
    "tabulate an unknown term": ("{tabulate} --lattice 40 --term feer", "did you mean 'fear'"),
    "demo over other files": ("demo --out {occupied}", "something stands here already"),
}  # fmt: skip
SHORT = {
    "here": "--peak -22 -4 -18 --term fear",
    "check": "check --literature {lit}",
    "fear": "check --literature {lit} --peak -22 -4 -18 --term fear",
    "build": "build --peaks {peaks} --annotations {terms}",
    "tabulate": "tabulate --literature {lit} --out {out}",
}


def assert_one_line(done, words, code=2):
    assert done.exit_code == code
    assert done.stdout == ""
    assert done.stderr.endswith("\n")
    assert len(done.stderr.splitlines()) == 1
    assert done.stderr.startswith("revinf: ")
    assert words in done.stderr
    assert "Traceback" not in done.stderr


@pytest.mark.parametrize("name", list(CASES))
def test_bad_input_ends_with_2_and_one_line(name, revinf, files):
    typed, words = CASES[name]
    short = {key: text.format(**files) for key, text in SHORT.items()}
    assert_one_line(revinf(*shlex.split(typed.format(**files, **short))), words)
    assert not Path(files["out"]).exists()


def test_message_keeps_to_one_line_even_where_the_input_does_not(revinf, literature):
    done = revinf("check", "--literature", literature, "--peak", "1", "2", "3", "--term", "a\nb\r\nc")
    assert_one_line(done, "'a b c'")


@pytest.fixture
def damaged(literature, tmp_path):
    """A copy of the literature, to be damaged."""
    return Path(shutil.copytree(literature, tmp_path / "literature"))


def lose_an_array(folder):
    (folder / "peak_tenths.npy").unlink()


def cut_an_array_off(folder):
    path = folder / "peak_study.npy"
    path.write_bytes(path.read_bytes()[:-40])


def empty_an_array(folder):
    (folder / "term_text.npy").write_bytes(b"")


def break_the_manifest(folder):
    (folder / "literature.json").write_text('{"format": ')


def write_another_format(folder):
    path = folder / "literature.json"
    path.write_text(path.read_text().replace("revinf/literature/2", "revinf/literature/99"))


def change_a_fingerprint(folder):
    import json

    path = folder / "literature.json"
    content = json.loads(path.read_text())
    content["fingerprint"] = "0" * 16
    path.write_text(json.dumps(content))


@pytest.mark.parametrize(
    "harm",
    [
        lose_an_array,
        cut_an_array_off,
        empty_an_array,
        break_the_manifest,
        write_another_format,
        change_a_fingerprint,
    ],
)
def test_damaged_literature_is_refused_by_every_command_that_opens_it(harm, damaged, revinf, tmp_path):
    harm(damaged)
    for args in (
        ("check", "--literature", damaged, *HERE),
        ("inspect", damaged),
        ("terms", "--literature", damaged),
        ("tabulate", "--literature", damaged, "--lattice", 40, "--out", tmp_path / "t.csv"),
    ):
        assert_one_line(revinf(*args), "build")
    assert not (tmp_path / "t.csv").exists()


def test_flipped_byte_is_found_by_every_command_that_counts(damaged, revinf):
    path = damaged / "peak_tenths.npy"
    raw = bytearray(path.read_bytes())
    raw[-1] ^= 1
    path.write_bytes(raw)
    for args in (("inspect", damaged, "--verify"), ("check", "--literature", damaged, *HERE)):
        assert_one_line(revinf(*args), "peak_tenths.npy: the content is not what was built")


@pytest.mark.parametrize(
    ("target", "args"),
    [
        ("revinf.literature.literature.Literature.open", ("check", "--literature", "x", *HERE)),
        ("revinf.literature.literature.Literature.open", ("inspect", "x")),
        ("revinf.evidence.source_choice.choose_source", ("terms",)),
        ("revinf.evidence.demonstration.write_demonstration", ("demo", "--out", "x")),
    ],
)
def test_interrupt_ends_with_130_and_one_line(target, args, revinf, monkeypatch):
    def interrupt(*_args, **_options):
        raise KeyboardInterrupt

    monkeypatch.setattr(target, interrupt)
    assert_one_line(revinf(*args), "interrupted; nothing was left half-written", code=130)


def test_interrupted_build_leaves_the_old_literature_and_no_litter(revinf, demo, damaged, monkeypatch):
    import revinf.literature.store as store

    before = {path.name: path.read_bytes() for path in damaged.iterdir()}
    saved = []

    def interrupt(*_args, **_options):
        saved.append(1)
        if len(saved) == 3:
            raise KeyboardInterrupt

    monkeypatch.setattr(store.np, "save", interrupt)
    done = revinf("build", "--peaks", demo / "peaks.csv", "--annotations", demo / "annotations.csv", "--out", damaged)
    assert_one_line(done, "interrupted", code=130)
    assert len(saved) == 3
    assert {path.name: path.read_bytes() for path in damaged.iterdir()} == before
    assert [path.name for path in damaged.parent.iterdir()] == [damaged.name]


def test_lack_of_memory_is_told_in_one_line(revinf, monkeypatch):
    def exhaust(*_args, **_options):
        raise MemoryError

    monkeypatch.setattr("revinf.evidence.source_choice.choose_source", exhaust)
    assert_one_line(revinf("terms"), "there is not enough memory for this")


def test_an_interrupt_that_compiled_code_turns_into_another_error_is_still_one(revinf, monkeypatch):
    def interrupt(*_args, **_options):
        try:
            signal.raise_signal(signal.SIGINT)
        except KeyboardInterrupt:
            raise ValueError("Invalid bounding box") from None

    monkeypatch.setattr("revinf.evidence.source_choice.choose_source", interrupt)
    assert_one_line(revinf("terms"), "interrupted; nothing was left half-written", code=130)
    assert signal.getsignal(signal.SIGINT) is signal.default_int_handler
