"""A folder is the old one whole, the new one whole, or absent; what a killed run left is put right by the next."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

from revinf.exceptions import InputFileError
from revinf.whole_folder import replacing

DEAD = 4_194_305
"""A process number above the largest that Linux gives."""


def free(_folder: Path) -> None:
    return None


def write(target: Path, text: str) -> None:
    with replacing(target, free) as folder:
        (folder / "file").write_text(text)


def litter(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir() if path.name.startswith("."))


def test_a_folder_is_made_and_replaced_as_a_whole(tmp_path: Path) -> None:
    write(tmp_path / "made", "one")
    (tmp_path / "made" / "more").write_text("gone after the next")
    write(tmp_path / "made", "two")
    assert [path.name for path in (tmp_path / "made").iterdir()] == ["file"]
    assert (tmp_path / "made" / "file").read_text() == "two"
    assert litter(tmp_path) == []


def test_a_refused_target_is_left_alone_and_the_reason_is_the_message(tmp_path: Path) -> None:
    (tmp_path / "mine").mkdir()
    with (
        pytest.raises(InputFileError, match="not yours"),
        replacing(tmp_path / "mine", lambda _: "not yours") as folder,
    ):
        (folder / "file").write_text("never")
    assert list((tmp_path / "mine").iterdir()) == []
    assert litter(tmp_path) == []


@pytest.mark.parametrize("stop", [KeyboardInterrupt, MemoryError, RuntimeError])
def test_what_stops_the_work_leaves_the_old_folder_and_no_litter(stop: type[BaseException], tmp_path: Path) -> None:
    write(tmp_path / "made", "old")

    def interrupted() -> None:
        with replacing(tmp_path / "made", free) as folder:
            (folder / "half").write_text("half")
            raise stop

    with pytest.raises(stop):
        interrupted()
    assert [path.name for path in (tmp_path / "made").iterdir()] == ["file"]
    assert litter(tmp_path) == []


def test_a_name_with_wildcards_tidies_only_its_own(tmp_path: Path) -> None:
    for name in ("m[ab]", "ma"):
        (tmp_path / f".{name}.revinf-{DEAD}-x1y2").mkdir()
    write(tmp_path / "m[ab]", "new")
    assert litter(tmp_path) == [f".ma.revinf-{DEAD}-x1y2"]


def test_what_a_living_process_writes_is_left_to_it(tmp_path: Path) -> None:
    theirs = tmp_path / f".made.revinf-{os.getppid()}-x1y2"
    theirs.mkdir()
    write(tmp_path / "made", "new")
    assert theirs.is_dir()


def test_a_run_killed_between_the_renamings_gives_the_old_folder_back(tmp_path: Path) -> None:
    aside = tmp_path / f".made.revinf-{DEAD}-x1y2"
    (aside / "old").mkdir(parents=True)
    (aside / "old" / "file").write_text("old")
    with pytest.raises(InputFileError, match="kept"), replacing(tmp_path / "made", lambda _: "kept"):
        pass
    assert (tmp_path / "made" / "file").read_text() == "old"
    assert litter(tmp_path) == []


def test_a_link_is_followed(tmp_path: Path) -> None:
    (tmp_path / "real").mkdir()
    (tmp_path / "link").symlink_to(tmp_path / "real", target_is_directory=True)
    write(tmp_path / "link", "new")
    assert (tmp_path / "link").is_symlink()
    assert (tmp_path / "real" / "file").read_text() == "new"


def test_a_place_that_cannot_be_written_is_one_line(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("x")
    with pytest.raises(InputFileError, match="cannot be written"):
        write(tmp_path / "file" / "made", "new")


KILLED = """
import sys
from pathlib import Path
from revinf.whole_folder import replacing
number = 0
while True:
    number += 1
    with replacing(sys.argv[1], lambda _: None) as folder:
        for part in range(20):
            (folder / str(part)).write_text(str(number))
"""


def test_a_kill_at_any_moment_leaves_one_whole_folder_or_none(tmp_path: Path) -> None:
    for delay in range(12):
        child = subprocess.Popen([sys.executable, "-c", KILLED, str(tmp_path / "made")])
        time.sleep(0.12 + 0.007 * delay)
        child.send_signal(signal.SIGKILL)
        child.wait()
        if (tmp_path / "made").exists():
            texts = {path.read_text() for path in (tmp_path / "made").iterdir()}
            assert len(list((tmp_path / "made").iterdir())) == 20
            assert len(texts) == 1
    write(tmp_path / "made", "at last")
    assert litter(tmp_path) == []
    assert (tmp_path / "made" / "file").read_text() == "at last"
