"""The invented demonstration, built once for the tests of the reports, and drawing a screen."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description
from revinf.reports.terminal import show

DEMO = Path(__file__).resolve().parents[2] / "demo"


@pytest.fixture(scope="session")
def demo_literature(tmp_path_factory: pytest.TempPathFactory) -> Literature:
    """Give the invented demonstration, its studies merged into papers; do not write to its folder."""
    files = ImportOptions(
        peaks=DEMO / "peaks.csv",
        annotations=DEMO / "annotations.csv",
        studies=DEMO / "studies.csv",
        group="group",
    )
    description = Description(name="invented demonstration", study_is="papers", invented=True)
    return build_literature(files, tmp_path_factory.mktemp("demo-built") / "literature", description)[0]


@pytest.fixture
def lines_of(capsys: pytest.CaptureFixture[str]) -> Callable[[list[Any], int], list[str]]:
    """Print renderables at a width and give the lines."""

    def draw(renderables: list[Any], width: int) -> list[str]:
        show(*renderables, width=width)
        printed = capsys.readouterr()
        assert printed.err == ""
        return printed.out.splitlines()

    return draw
