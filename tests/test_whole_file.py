"""A file is the old one whole or the new one whole, whatever stops the writing."""

from __future__ import annotations

from pathlib import Path

import pytest

from revinf.exceptions import InputFileError
from revinf.whole_file import replacing_file


@pytest.mark.parametrize("stop", [KeyboardInterrupt, MemoryError, RuntimeError])
def test_what_stops_the_writing_leaves_the_old_file_and_no_litter(stop: type[BaseException], tmp_path: Path) -> None:
    target = tmp_path / "file"
    target.write_text("old")

    def interrupted() -> None:
        with replacing_file(target, tmp_path / ".beside", "choose another place") as beside:
            beside.write_text("half")
            raise stop

    with pytest.raises(stop):
        interrupted()
    assert target.read_text() == "old"
    assert list(tmp_path.iterdir()) == [target]


def test_a_place_that_cannot_be_written_is_one_line_with_the_remedy(tmp_path: Path) -> None:
    target = tmp_path / "absent" / "file"
    with (
        pytest.raises(InputFileError, match=r"cannot be written .*; choose another place"),
        replacing_file(target, target.with_name(".beside"), "choose another place") as beside,
    ):
        beside.write_text("never")
