"""What the command-line tests share: Typer's runner, and the invented demonstration built once a session."""

from __future__ import annotations

import os
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from typer.testing import CliRunner

from revinf.cli.app import app


@pytest.fixture(autouse=True)
def _no_literature_in_the_environment(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("REVINF_LITERATURE", raising=False)


@pytest.fixture(scope="session")
def revinf() -> Callable[..., Any]:
    """Run a command in this process: `revinf("check", "--peak", ...)` gives exit_code, stdout, stderr."""

    def run(*args: object, **more: Any) -> Any:
        return CliRunner().invoke(app, [str(arg) for arg in args], prog_name="revinf", **more)

    return run


@pytest.fixture(scope="session")
def fresh() -> Callable[..., subprocess.CompletedProcess[str]]:
    """Run a command in a process of its own: `fresh("check", ..., cwd=...)`."""

    def run(*args: object, cwd: Path, **environment: str) -> subprocess.CompletedProcess[str]:
        kept = {name: value for name, value in os.environ.items() if name != "REVINF_LITERATURE"}
        return subprocess.run(
            [sys.executable, "-m", "revinf", *map(str, args)],
            cwd=cwd,
            env=kept | {"PYTHONIOENCODING": "utf-8", "PYTHONPATH": _import_path()} | environment,
            capture_output=True,
            encoding="utf-8",
            check=False,
            timeout=120,
        )

    return run


def _import_path() -> str:
    """Return where this process found the package, for one that starts in another folder."""
    import revinf.knowledge

    return str(Path(revinf.knowledge.__file__).resolve().parents[1])


@pytest.fixture(scope="session")
def demo(tmp_path_factory: pytest.TempPathFactory, revinf: Callable[..., Any]) -> Path:
    """Give a folder with the invented scenario and, built from it, `literature`; do not write to it."""
    folder = tmp_path_factory.mktemp("scenario") / "demo"
    assert revinf("demo", "--out", folder).exit_code == 0
    built = revinf(
        "build", "--peaks", folder / "peaks.csv", "--annotations", folder / "annotations.csv", "--studies",
        folder / "studies.csv", "--group", "group", "--invented", "--study-is", "papers", "--out",
        folder / "literature",
    )  # fmt: skip
    assert built.exit_code == 0, built.stderr
    return folder


@pytest.fixture(scope="session")
def literature(demo: Path) -> Path:
    """Give the folder of the built invented literature; do not write to it."""
    return demo / "literature"


@pytest.fixture
def refused(revinf: Callable[..., Any], tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Callable[..., str]:
    """Run a command in an empty folder that must end with 2, one line on stderr and no file; give the line."""
    here = tmp_path / "empty folder"
    here.mkdir()
    monkeypatch.chdir(here)

    def run(*args: object) -> str:
        done = revinf(*args)
        assert (done.exit_code, done.stdout) == (2, "")
        assert done.stderr.startswith("revinf: ")
        assert done.stderr.endswith("\n")
        assert len(done.stderr.splitlines()) == 1
        assert list(here.iterdir()) == []
        return str(done.stderr)

    return run
