"""`revinf calibrate`: report, JSON and picture, and the discount in a later pattern."""

from __future__ import annotations

import json
import shutil
from pathlib import Path

import pytest


@pytest.fixture
def own(literature: Path, tmp_path: Path) -> Path:
    return Path(shutil.copytree(literature, tmp_path / "own"))


def test_calibrate_writes_its_files_and_keeps_the_discount(revinf, own: Path, tmp_path: Path) -> None:
    out = tmp_path / "calibration"
    done = revinf("calibrate", "--literature", own, "--out", out, "--folds", "3")
    assert (done.exit_code, done.stderr) == (0, "")
    assert {path.name for path in out.iterdir()} == {"calibration.md", "calibration.json", "calibration.png"}
    assert "INVENTED" in (out / "calibration.md").read_text(encoding="utf-8")
    exponent = json.loads((out / "calibration.json").read_text(encoding="utf-8"))["discount"]["exponent"]
    pattern = ("check", "--literature", own, "--term", "theory of mind", "--peak", "54", "-54", "22", "--peak", "4")
    answer = json.loads(revinf(*pattern, "54", "18", "--json").stdout)["pattern"]
    assert answer["discount"] == exponent
    assert answer["discounted"] == pytest.approx(answer["product"] ** exponent)
    assert "of the calibration" in revinf(*pattern, "54", "18").stdout
    other = json.loads(revinf(*pattern, "54", "18", "--radius", "8", "--json").stdout)["pattern"]
    assert other["discount"] is None


def test_calibrate_can_leave_the_literature_as_it_is(revinf, own: Path) -> None:
    done = revinf("calibrate", "--literature", own, "--folds", "3", "--no-keep", "--json")
    assert done.exit_code == 0
    assert json.loads(done.stdout)["schema"] == "revinf/calibration/1"
    assert not (own / "calibration.json").exists()


def test_calibrate_needs_a_literature(refused) -> None:
    assert "name a literature folder" in refused("calibrate")
