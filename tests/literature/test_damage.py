"""A damaged or foreign folder is refused with one line that names the file; nothing is ever unpickled."""

from __future__ import annotations

import json
import os
import pickle
import shutil

import numpy as np
import pytest

from revinf.exceptions import LiteratureError
from revinf.literature.literature import Literature
from revinf.literature.manifest import FORMAT, MANIFEST
from revinf.literature.packing import ARRAY_TYPES

OFFSETS = [name for name in ARRAY_TYPES if name.endswith(("_starts", "_ends"))]
EMPTY = ["study_group_text", "study_doi_text"]  # the tiny literature has neither
INDICES = ["peak_study", "study_terms", "term_studies"]


@pytest.fixture
def copy(invented_literature, tmp_path):
    """Give a copy of the tiny invented literature that a test may spoil."""
    return shutil.copytree(invented_literature.folder, tmp_path / "literature")


def refusal(folder, **options):
    """Return the one line with which a folder is refused."""
    with pytest.raises(LiteratureError) as caught:
        Literature.open(folder, **options)
    message = str(caught.value)
    assert "\n" not in message
    return message


def rewrite(folder, name, change):
    """Change an array on disk, type and shape kept unless `change` changes them."""
    path = folder / f"{name}.npy"
    array = np.load(path)
    path.unlink()
    np.save(path, change(array))


def test_a_missing_folder_a_file_and_an_empty_folder_are_refused(tmp_path):
    assert "there is no such literature folder" in refusal(tmp_path / "absent")
    (tmp_path / "file").write_text("x")
    assert "there is no such literature folder" in refusal(tmp_path / "file")
    (tmp_path / "empty").mkdir()
    assert f"holds no {MANIFEST}" in refusal(tmp_path / "empty")


@pytest.mark.parametrize("name", ARRAY_TYPES)
def test_every_missing_array_is_named(copy, name):
    (copy / f"{name}.npy").unlink()
    assert refusal(copy) == f"{copy / name}.npy: this array is missing; build the literature again"


@pytest.mark.parametrize("name", ARRAY_TYPES)
@pytest.mark.parametrize("keep", [0, 1, 7, 60, -1])
def test_every_truncated_array_is_named(copy, name, keep):
    path = copy / f"{name}.npy"
    raw = path.read_bytes()
    if keep == -1 and np.load(path).size == 0:
        keep = -2
    path.write_bytes(raw[:keep])
    assert refusal(copy).startswith(f"{path}: this array cannot be read")


@pytest.mark.parametrize("name", ARRAY_TYPES)
def test_every_array_of_another_type_or_shape_is_named(copy, name):
    original = (copy / f"{name}.npy").read_bytes()
    changes = [
        lambda array: array.astype(">f4"),
        lambda array: array.astype(array.dtype.newbyteorder()) if array.itemsize > 1 else array.view(bool),
        lambda array: array.reshape(*array.shape, 1),
        lambda array: np.concatenate(
            [array, array[:1] if len(array) else np.zeros((1, *array.shape[1:]), array.dtype)]
        ),
    ]
    for change in changes:
        rewrite(copy, name, change)
        assert refusal(copy).startswith(f"{copy / name}.npy: this array's type or shape is not what")
        (copy / f"{name}.npy").write_bytes(original)
    Literature.open(copy)


class Trap:
    """Leaves a file behind if anything unpickles it."""

    def __init__(self, path):
        self.path = path

    def __reduce__(self):
        return os.mkdir, (str(self.path),)


@pytest.mark.parametrize("form", ["object array", "plain pickle", "npz"])
def test_a_pickle_is_refused_and_never_run(copy, tmp_path, form):
    path, sprung = copy / "study_terms.npy", tmp_path / "sprung"
    trap = np.array([Trap(sprung)] * 2, dtype=object)
    if form == "object array":
        np.save(path, trap, allow_pickle=True)
    elif form == "plain pickle":
        path.write_bytes(pickle.dumps(Trap(sprung)))
    else:
        with path.open("wb") as stream:
            np.savez(stream, trap)
    assert refusal(copy).startswith(f"{path}: this array")
    assert not sprung.exists()
    if form == "plain pickle":  # the trap itself works
        pickle.loads(path.read_bytes())
        assert sprung.exists()


def test_a_symbolic_link_is_refused(copy, tmp_path):
    path = copy / "peak_tenths.npy"
    path.rename(tmp_path / "elsewhere.npy")
    path.symlink_to(tmp_path / "elsewhere.npy")
    assert refusal(copy) == (f"{path}: this array cannot be read (a symbolic link); build the literature again")


@pytest.mark.parametrize("name", OFFSETS)
@pytest.mark.parametrize("change", ["backwards", "beyond", "short", "negative"])
def test_offsets_that_do_not_fit_are_refused(copy, name, change):
    def spoil(array):
        if change == "backwards":
            array[0] = array[-1] + 1
        elif change == "beyond":
            array[-1] += 1
        elif change == "short":
            array[-1] -= 1
        else:
            array[0] = -1
        return array

    rewrite(copy, name, spoil)
    assert refusal(copy) == (
        f"{copy / name}.npy: the offsets in this array do not fit what they point into; build the literature again"
    )


@pytest.mark.parametrize("name", INDICES)
@pytest.mark.parametrize("value", [-1, 10_000])
def test_indices_that_point_nowhere_are_refused(copy, name, value):
    rewrite(copy, name, lambda array: np.where(np.arange(len(array)) == 1, value, array).astype(array.dtype))
    assert refusal(copy) == (f"{copy / name}.npy: this array points outside the literature; build the literature again")


def test_text_that_is_not_utf_8_is_refused_when_it_is_read(copy):
    rewrite(copy, "term_text", lambda array: np.full_like(array, 0xFF))
    with pytest.raises(LiteratureError, match=r"term_text\.npy: this array is not UTF-8 text"):
        _ = Literature.open(copy, verify=False).terms


@pytest.mark.parametrize("name", [name for name in ARRAY_TYPES if name not in EMPTY])
def test_opening_finds_one_flipped_bit_in_any_array(copy, name):
    path = copy / f"{name}.npy"
    raw = bytearray(path.read_bytes())
    raw[-(np.load(path).nbytes // 2) or -1] ^= 1
    path.write_bytes(raw)
    assert refusal(copy).startswith(f"{path}: ")


def test_verify_passes_what_was_built(copy):
    assert Literature.open(copy, verify=True).n_studies == 8


def test_no_changed_byte_of_a_header_escapes_as_another_error(copy):
    path = copy / "study_n_peaks.npy"
    raw = path.read_bytes()
    tried, refused = 0, []
    for position in range(len(raw) - 8 * 4):
        for value in {raw[position] ^ 1, 0, ord("("), ord("'")} - {raw[position]}:
            path.write_bytes(raw[:position] + bytes([value]) + raw[position + 1 :])
            tried += 1
            try:
                Literature.open(copy)
            except LiteratureError as error:
                refused.append(str(error))
    assert all(line.startswith(f"{path}: this array") and "\n" not in line for line in refused)
    assert len(raw) < len(refused) < tried  # a changed byte of the padding may pass


def changed(folder, change):
    """Change literature.json."""
    path = folder / MANIFEST
    stated = json.loads(path.read_text(encoding="utf-8"))
    result = change(stated)
    path.write_text(json.dumps(stated if result is None else result), encoding="utf-8")


@pytest.mark.parametrize(
    "text",
    ["", "{", "[]", "null", "7", '"text"', "{}", "[" * 100_000, '{"format": ', "\x00", "{'format': 1}"],
)
def test_a_manifest_that_is_not_ours_is_refused(copy, text):
    (copy / MANIFEST).write_text(text)
    assert refusal(copy) == (f"{copy / MANIFEST}: this is not a literature manifest; build the literature again")


def test_a_manifest_that_is_not_text_is_refused(copy):
    (copy / MANIFEST).write_bytes(b"\xff\xfe\x00\x01")
    assert "not a literature manifest" in refusal(copy)


@pytest.mark.parametrize("stated", ["revinf/literature/1", "other/1", None, 1, ["revinf/literature/2"], {}])
def test_another_format_is_refused_with_both_versions(copy, stated):
    changed(copy, lambda content: content.update(format=stated))
    assert f"this revinf reads {FORMAT!r}; build it again" in refusal(copy)


KEYS = ["description", "fingerprint", "counts", "merged_by", "arrays", "built_with", "import"]


@pytest.mark.parametrize("key", KEYS)
def test_a_manifest_without_one_of_its_keys_is_refused(copy, key):
    changed(copy, lambda content: content.pop(key) and None)
    assert refusal(copy).startswith(f"{copy / MANIFEST}: the manifest is damaged")


@pytest.mark.parametrize("key", KEYS)
@pytest.mark.parametrize("value", [7, True, "text", [1], [], 1e999])
def test_a_manifest_key_of_the_wrong_type_is_refused(copy, key, value):
    if key == "merged_by" and isinstance(value, str):
        value = {"not": "a column"}
    changed(copy, lambda content: content.update({key: value}))
    assert refusal(copy).startswith(f"{copy / MANIFEST}: the manifest")


@pytest.mark.parametrize(
    ("part", "key", "value"),
    [
        ("counts", "studies", 9),
        ("counts", "studies", -8),
        ("counts", "studies", 8.0),
        ("counts", "studies", 1e999),
        ("counts", "studies", "8"),
        ("counts", "studies", True),
        ("counts", "studies", None),
        ("counts", "terms", 0),
        ("counts", "points", 10**30),
        ("description", "name", 7),
        ("description", "name", None),
        ("description", "invented", "yes"),
        ("description", "licence", ["MIT"]),
        ("description", "surprise", "text"),
        ("arrays", "peak_study", None),
        ("arrays", "peak_study", {"dtype": "int32", "shape": [10]}),
        ("arrays", "peak_study", {"dtype": "int32", "shape": 10, "sha256": ""}),
        ("arrays", "peak_study", {"dtype": "int32", "shape": [1e999], "sha256": ""}),
        ("arrays", "peak_study", {"dtype": "int64", "shape": [10], "sha256": ""}),
    ],
)
def test_a_manifest_value_that_cannot_be_is_refused(copy, part, key, value):
    changed(copy, lambda content: content[part].update({key: value}))
    assert refusal(copy).startswith(f"{copy / MANIFEST}: the manifest")


def test_a_manifest_without_a_name_or_an_array_is_refused(copy):
    changed(copy, lambda content: content["description"].pop("name") and None)
    assert "the manifest is damaged" in refusal(copy)


def test_a_changed_hash_does_not_fit_the_fingerprint(copy):
    changed(copy, lambda content: content["arrays"]["peak_study"].update(sha256="0" * 64))
    assert "the fingerprint is not that of the hashes" in refusal(copy)
