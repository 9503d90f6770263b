"""README.md is the truth: its two commands are there, and the output it shows is the output there is."""

from __future__ import annotations

import importlib.util
import os
from pathlib import Path

import pytest

_SPEC = importlib.util.spec_from_file_location("readme_blocks", Path(__file__).with_name("readme_blocks.py"))
assert _SPEC is not None
assert _SPEC.loader is not None
readme_blocks = importlib.util.module_from_spec(_SPEC)
_SPEC.loader.exec_module(readme_blocks)


def test_readme_has_the_main_job_and_the_tests_as_commands() -> None:
    commands = readme_blocks.commands()
    assert set(commands) == {"main job", "tests"}
    assert "revinf check" in commands["main job"]
    assert "pytest" in commands["tests"]


@pytest.mark.parametrize("command", sorted(readme_blocks.outputs()))
def test_readme_shows_what_the_command_prints(command: str, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("REVINF_LITERATURE", raising=False)
    monkeypatch.setitem(os.environ, "PYTHONIOENCODING", "utf-8")
    assert readme_blocks.outputs()[command] == readme_blocks.run(command)


def test_readme_shows_at_least_one_worked_check() -> None:
    assert any(command.startswith("revinf check") for command in readme_blocks.outputs())


def test_links_of_the_readme_lead_to_files() -> None:
    text = readme_blocks.README.read_text(encoding="utf-8")
    import re

    targets = re.findall(r"\]\(([^)#]+)\)", text)
    assert targets
    for target in targets:
        assert target.startswith("http") or (readme_blocks.README.parent / target).is_file(), target
