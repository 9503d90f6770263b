"""Writing a folder as a whole or not at all, and what may be replaced."""

from __future__ import annotations

import json
import shutil

import numpy as np
import pytest

from revinf.exceptions import InputFileError
from revinf.literature.literature import Literature
from revinf.literature.manifest import MANIFEST
from revinf.literature.packing import ARRAY_TYPES
from revinf.literature.store import array_entries, open_arrays, write_folder


def content(folder):
    """Return the bytes of every file under a folder."""
    return {str(path.relative_to(folder)): path.read_bytes() for path in sorted(folder.rglob("*")) if path.is_file()}


@pytest.fixture
def copy(invented_literature, tmp_path):
    """Give a copy of the tiny invented literature that a test may spoil."""
    return shutil.copytree(invented_literature.folder, tmp_path / "literature")


def test_what_is_written_is_what_is_opened(invented_literature, tmp_path):
    manifest, arrays = open_arrays(invented_literature.folder)
    write_folder(tmp_path / "again", arrays, manifest)
    assert content(tmp_path / "again") == content(invented_literature.folder)
    assert set(content(tmp_path / "again")) == {MANIFEST, *(f"{name}.npy" for name in ARRAY_TYPES)}
    assert array_entries(arrays) == manifest.arrays


def test_opened_arrays_are_read_only_memory_maps(invented_literature):
    _, arrays = open_arrays(invented_literature.folder)
    for array in arrays.values():
        assert isinstance(array, np.memmap)
        assert array.mode == "r"
        with pytest.raises(ValueError, match="read-only"):
            array[...] = 0


def test_a_failure_in_the_middle_of_writing_leaves_the_old_literature_and_no_litter(copy, tmp_path):
    before = content(tmp_path)
    manifest, arrays = open_arrays(copy)
    spoiled = {**arrays, "point_label_ends": np.array([None, "an object cannot be written"])}
    assert list(spoiled).index("point_label_ends") > 10  # many arrays are written before it fails
    with pytest.raises(ValueError, match="allow_pickle"):
        write_folder(copy, spoiled, manifest)
    assert content(tmp_path) == before
    with pytest.raises(ValueError, match="allow_pickle"):
        write_folder(tmp_path / "new", spoiled, manifest)
    assert content(tmp_path) == before
    assert [path.name for path in tmp_path.iterdir()] == ["literature"]


def test_an_older_literature_is_replaced_as_a_whole(building, tmp_path):
    building("study,x,y,z\na,1,-2,3\nb,1,2,3\n")
    first = content(tmp_path / "literature")
    literature, _ = building("study,x,y,z\nb,4,-5,6\n")
    assert literature.study_ids == ["b"]
    assert content(tmp_path / "literature").keys() == first.keys()


def test_an_open_literature_goes_on_answering_while_it_is_replaced(building):
    from revinf.spaces.spheres import sphere

    old, _ = building("study,x,y,z\na,1,-2,3\nb,50,2,3\n")
    new, _ = building("study,x,y,z\nb,1,-2,3\n")
    assert [old.study_ids[i] for i in old.studies_hitting(sphere((1, -2, 3), 5))] == ["a"]
    assert [new.study_ids[i] for i in new.studies_hitting(sphere((1, -2, 3), 5))] == ["b"]


def test_missing_parents_are_made_and_an_empty_folder_is_used(building, tmp_path):
    building("study,x,y,z\na,1,-2,3\n", out="one/two/literature")
    (tmp_path / "empty").mkdir()
    building("study,x,y,z\na,1,-2,3\n", out="empty")
    assert Literature.open(tmp_path / "empty").study_ids == ["a"]


def file_in_the_way(target):
    target.write_text("mine")


def folder_in_the_way(target):
    target.mkdir()
    (target / "notes.txt").write_text("mine")


def literature_json_of_another_program(target):
    target.mkdir()
    (target / MANIFEST).write_text(json.dumps([{"type": "article", "title": "mine"}]))


def another_format(target):
    target.mkdir()
    (target / MANIFEST).write_text(json.dumps({"format": "bibliography/2"}))


@pytest.mark.parametrize(
    "put", [file_in_the_way, folder_in_the_way, literature_json_of_another_program, another_format]
)
def test_something_foreign_at_the_target_is_refused_and_kept(building, tmp_path, put):
    put(tmp_path / "literature")
    before = content(tmp_path)
    with pytest.raises(InputFileError, match="something that is not a literature stands here"):
        building("study,x,y,z\na,1,-2,3\n")
    after = content(tmp_path)
    assert {name: after[name] for name in before} == before
    assert not [path for path in tmp_path.iterdir() if path.name.startswith(".")]


def test_a_literature_in_which_somebody_keeps_notes_is_not_replaced(building, copy):
    (copy / "notes.txt").write_text("mine")
    with pytest.raises(InputFileError, match="something that is not a literature stands here"):
        building("study,x,y,z\na,1,-2,3\n")
    assert (copy / "notes.txt").read_text() == "mine"


@pytest.mark.parametrize("spoil", ["no manifest", "manifest cut", "array gone", "only the manifest"])
def test_a_damaged_literature_can_be_built_again(building, copy, spoil):
    if spoil == "no manifest":
        (copy / MANIFEST).unlink()
    elif spoil == "manifest cut":
        (copy / MANIFEST).write_text("{")
    elif spoil == "array gone":
        (copy / "term_text.npy").unlink()
    else:
        for path in copy.glob("*.npy"):
            path.unlink()
    building("study,x,y,z\na,1,-2,3\n")
    assert Literature.open(copy, verify=True).study_ids == ["a"]


def test_a_place_that_cannot_be_written_is_one_line(building, tmp_path):
    (tmp_path / "file").write_text("mine")
    with pytest.raises(InputFileError, match=r"cannot be written \(.*\); choose another place with --out"):
        building("study,x,y,z\na,1,-2,3\n", out="file/literature")


def test_the_folder_can_be_read_by_those_whom_the_mask_admits(building, tmp_path):
    (tmp_path / "plain").mkdir()
    building("study,x,y,z\na,1,-2,3\n")
    assert (tmp_path / "literature").stat().st_mode == (tmp_path / "plain").stat().st_mode
