"""A few spoiled files of every kind are read or refused with one line; `python -m tests.fuzz` spoils 100,000."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.fuzz.running import run
from tests.fuzz.targets import Target, targets

NAMES = [
    "peaks",
    "peaks, packed",
    "annotations",
    "annotations, wide",
    "studies",
    "claims",
    "named peaks",
    "base rates",
    "thresholds",
    "kinds",
    "kept calibration",
    "map",
    "atlas",
    "manuscript.md",
    "manuscript.txt",
    "manuscript.tex",
    "manuscript.html",
    "manuscript.docx",
    "manuscript.pdf",
    "literature, literature.json",
    "literature, peak_tenths.npy",
    "literature, peak_study.npy",
    "literature, study_terms.npy",
    "literature, term_text.npy",
    "literature, term_ends.npy",
]


@pytest.fixture(scope="module")
def known(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Target]:
    return {target.name: target for target in targets(tmp_path_factory.mktemp("fuzz"))}


def test_every_target_is_named_here(known: dict[str, Target]) -> None:
    assert sorted(known) == sorted(NAMES)


@pytest.mark.parametrize("name", NAMES)
def test_a_good_file_is_read_and_spoiled_ones_are_read_or_refused(
    name: str, known: dict[str, Target], tmp_path: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    target = known[name]
    (tmp_path / target.file).write_bytes(target.content)
    target.read(tmp_path / target.file)
    tally = run(target, range(40), tmp_path)
    assert tally.failures == []
    assert tally.read + tally.refused == 40
    assert capfd.readouterr() == ("", "")  # no library speaks up on its own
