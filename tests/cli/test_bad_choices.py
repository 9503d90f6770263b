"""The choices of check, profile and tabulate that cannot be used: exit code 2, one line, no file left."""

from __future__ import annotations

import shlex

import nibabel as nib
import numpy as np
import pytest

AFFINE = np.diag([10.0, 10.0, 10.0, 1.0])
AFFINE[:3, 3] = (-90, -120, -60)


def atlas(path, values):
    nib.save(nib.Nifti1Image(values, AFFINE), path)
    return path


@pytest.fixture(scope="module")
def files(demo, tmp_path_factory):
    """Paths by name: images, lists of names and thresholds, each wrong in one way but for `good`."""
    folder = tmp_path_factory.mktemp("choices")
    parcels = np.zeros((19, 22, 20), np.int16)
    parcels[4:8, 10:14, 5:9] = 1
    parcels[10:14, 10:14, 5:9] = 2
    texts = {
        "labels": "value,region\n1,left box\n2,right box\n",
        "others": "value,region\n71,left box\n72,right box\n",
        "twins": "value,region\n1,box\n2,Box\n",
        "wordy": "value,region\none,left box\n",
        "nameless": "value,name\n1,left box\n",
        "places": "region,x,y,z\nhere,-22,-4,-18\n",
    }
    for name, text in texts.items():
        (folder / f"{name}.csv").write_text(text)
    return {name: folder / f"{name}.csv" for name in texts} | {
        "demo": demo,
        "lit": demo / "literature",
        "good": atlas(folder / "good.nii.gz", parcels),
        "map": atlas(folder / "map.nii.gz", parcels * np.float32(0.5)),
        "void": atlas(folder / "void.nii.gz", parcels * 0),
        "below": atlas(folder / "below.nii.gz", -parcels),
        "volumes": atlas(folder / "volumes.nii.gz", np.stack([parcels, parcels], axis=-1)),
    }


SHORT = {
    "fear": "check --literature {lit} --peak -22 -4 -18 --term fear",
    "shipped": "check --peak 54 -54 24 --term navigation",
    "place": "profile --literature {lit} --peak -22 -4 -18",
    "tabulate": "tabulate --literature {lit} --out out.csv",
}
CASES = {
    "unknown context": ("{fear} --context pain --context feer", "'feer'; did you mean 'fear'?"),
    "empty context": ("{fear} --context ' '", "a term of context is empty"),
    "unknown rival": ("{fear} --rival feer", "'feer'; did you mean 'fear'?"),
    "unknown excluded term": ("{fear} --exclude feer", "'feer'; did you mean 'fear'?"),
    "empty excluded term": ("{fear} --exclude ' '", "a term of excluded is empty"),
    "excluded claimed term": ("{fear} --exclude pain --exclude Fear", "the claimed term 'fear' cannot be excluded"),
    "context with a table": ("{shipped} --context 'moral cognition'", "a context needs the studies themselves"),
    "pattern with a table": ("{shipped} --peak 0 52 10", "cannot tell which studies hit several places"),
    "radius with a table": ("{shipped} --radius 8", "has a radius of 10 mm, not 8 mm"),
    "unknown rival of a table": ("{shipped} --rival feer", "carries the term 'feer'"),
    "figure of another ending": ("{fear} --figure out.jpg", "ends in .png, .svg, .pdf, but got '.jpg'"),
    "figure without ending": ("{fear} --figure out", "ends in .png, .svg, .pdf, but got ''"),
    "figure in a missing folder": ("{fear} --figure absent/out.png", "absent/out.png: cannot be written"),
    "figure of a profile": ("{place} --figure out.gif", "ends in .png, .svg, .pdf, but got '.gif'"),
    "profile figure in a missing folder": ("{place} --figure absent/out.svg", "cannot be written"),
    "missing thresholds": ("{fear} --thresholds absent.toml", "absent.toml: cannot be read as TOML"),
    "profile of nowhere": ("profile", "exactly one kind of place, but got 0"),
    "profile of two kinds of place": ("{place} --mask {good}", "exactly one kind of place, but got 2"),
    "profile of half a peak": ("profile --peak 1 2", "needs three numbers in mm, but got '1 2'"),
    "profile far from the table": ("profile --peak 0 0 120", "farther than its radius of 10 mm"),
    "profile of a pattern of a table": ("profile --peak 54 -54 24 --peak 0 52 10", "several places"),
    "profile of a region of a literature": ("profile --literature {lit} --region x", "names a place of a table"),
    "profile of a mask of a table": ("profile --mask {good}", "no peaks to put into a mask"),
    "profile of both sources": ("{place} --table {places}", "give --literature or --table, not both"),
    "profile of level 2": ("{place} --level 2", "level must lie strictly between 0 and 1"),
    "profile with a claim": ("{place} --term fear", "No such option: --term"),
    "column of no file": (
        "build --peaks {demo}/peaks.csv --annotations {demo}/annotations.csv --out out --column study=experiment",
        "experiment",
    ),
    "column of no list": ("{tabulate} --regions {places} --column region=place", "place"),
    "lattice and atlas": ("{tabulate} --lattice 40 --atlas {good}", "places come from one source"),
    "list and atlas": ("{tabulate} --regions {places} --atlas {good}", "places come from one source"),
    "labels alone": ("{tabulate} --labels {labels}", "places come from one source"),
    "labels with a lattice": ("{tabulate} --lattice 40 --labels {labels}", "places come from one source"),
    "missing atlas": ("{tabulate} --atlas absent.nii", "absent.nii: there is no such file"),
    "atlas that is a map": ("{tabulate} --atlas {map}", "looks like a map of values"),
    "atlas without parcels": ("{tabulate} --atlas {void}", "this image has 0"),
    "atlas below 0": ("{tabulate} --atlas {below}", "must be whole numbers from 0"),
    "atlas of several volumes": ("{tabulate} --atlas {volumes}", "3-D volume"),
    "table for an atlas": ("{tabulate} --atlas {places}", "must be a .nii or .nii.gz file"),
    "labels of another atlas": (
        "{tabulate} --atlas {good} --labels {others}", "no value of this table is a parcel of good.nii.gz",
    ),
    "labels that name two alike": ("{tabulate} --atlas {good} --labels {twins}", "two parcels have the same name"),
    "labels in words": ("{tabulate} --atlas {good} --labels {wordy}", "wordy.csv:2:value: value 'one'"),
    "labels without a column": ("{tabulate} --atlas {good} --labels {nameless}", "column 'region' is missing"),
    "missing labels": ("{tabulate} --atlas {good} --labels absent.csv", "absent.csv"),
}  # fmt: skip


@pytest.mark.parametrize("name", list(CASES))
def test_choice_that_cannot_be_used_is_told_in_one_line(name, refused, files):
    typed, words = CASES[name]
    short = {key: text.format(**files) for key, text in SHORT.items()}
    assert words in refused(*shlex.split(typed.format(**files, **short)))


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (b"thin_weigh = 'wide'", "threshold 'thin_weigh' must be a number, such as 10.0, but got 'wide'"),
        (b"thin_weigh = true", "must be a number, such as 10.0, but got True"),
        (b"thin_weigh = nan", "but got nan"),
        (b"thin_weigh = inf", "but got inf"),
        (b"thin_weigh = -1", "but got -1"),
        (b"thin_weigh = [1]", "must be a number"),
        (b"broad_hits = 2.5", "must be a number, such as 20, but got 2.5"),
        (b"radii_interval = 8", "must be a list of numbers, but got 8"),
        (b"radii_interval = ['8']", "must be a list of numbers"),
        (b"thin = 10", "there is no threshold 'thin'; use one of thin_weigh, thin_stop"),
        (b"[thin_weigh]\nvalue = 1", "must be a number"),
        (b"thin_weigh 10", "cannot be read as TOML"),
        (b"thin_weigh = 1\nthin_weigh = 2", "cannot be read as TOML"),
        (b"\xff\xfe\x00", "cannot be read as TOML"),
        (b"thin_weigh = " + b"9" * 5000, "thresholds.toml: "),
    ],
    ids=lambda item: repr(item)[2:22] if isinstance(item, bytes) else "",
)
def test_thresholds_file_of_each_kind_of_wrong_is_refused(content, words, refused, literature, tmp_path):
    path = tmp_path / "thresholds.toml"
    path.write_bytes(content)
    line = refused(
        "check", "--literature", literature, "--peak", -22, -4, -18, "--term", "fear", "--thresholds", path,
        "--figure", "out.png",
    )  # fmt: skip
    assert "thresholds.toml: " in line
    assert words in line


def test_figure_that_cannot_replace_a_folder_leaves_it_and_nothing_else(revinf, literature, tmp_path):
    (tmp_path / "out.png").mkdir()
    done = revinf(
        "check", "--literature", literature, "--peak", -22, -4, -18, "--term", "fear", "--figure",
        tmp_path / "out.png",
    )  # fmt: skip
    assert (done.exit_code, done.stdout, len(done.stderr.splitlines())) == (2, "", 1)
    assert [path.name for path in tmp_path.iterdir()] == ["out.png"]
