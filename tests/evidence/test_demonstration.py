"""The invented scenario is copied whole, and never over somebody's files."""

from __future__ import annotations

import pytest

from revinf.evidence.demonstration import FILES, write_demonstration
from revinf.exceptions import InputFileError
from revinf.knowledge import demo_folder


def test_every_file_is_copied_byte_for_byte(tmp_path):
    folder = write_demonstration(tmp_path / "new" / "demo")
    assert sorted(path.name for path in folder.iterdir()) == sorted(FILES)
    for name in FILES:
        assert (folder / name).read_bytes() == (demo_folder() / name).read_bytes()


def test_empty_folder_is_used(tmp_path):
    assert write_demonstration(tmp_path) == tmp_path


def test_folder_that_holds_anything_is_refused_and_left_alone(tmp_path):
    (tmp_path / "mine.txt").write_text("mine")
    with pytest.raises(InputFileError, match="something stands here already; name a new or empty folder"):
        write_demonstration(tmp_path)
    assert [path.name for path in tmp_path.iterdir()] == ["mine.txt"]


def test_file_in_the_way_is_refused(tmp_path):
    (tmp_path / "demo").write_text("a file")
    with pytest.raises(InputFileError, match="something stands here already"):
        write_demonstration(tmp_path / "demo")
    with pytest.raises(InputFileError, match="cannot be written"):
        write_demonstration(tmp_path / "demo" / "below")
