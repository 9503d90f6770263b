"""Finds the blocks of README.md that the tests run or compare; `python tests/readme_blocks.py` rewrites them."""

from __future__ import annotations

import re
import shlex
import subprocess
import sys
from pathlib import Path

README = Path(__file__).resolve().parents[1] / "README.md"
_OUTPUT = re.compile(r"(<!-- output: (?P<command>[^\n]+) -->\n```text\n)(?P<output>.*?)(```\n)", re.DOTALL)
_COMMAND = re.compile(r"<!-- command: (?P<name>[^\n]+) -->\n```sh\n(?P<lines>.*?)```\n", re.DOTALL)


def commands() -> dict[str, str]:
    """Return the two commands by name."""
    text = README.read_text(encoding="utf-8")
    return {match["name"]: match["lines"] for match in _COMMAND.finditer(text)}


def outputs() -> dict[str, str]:
    """Return the shown output of each command that has one."""
    text = README.read_text(encoding="utf-8")
    return {match["command"]: match["output"] for match in _OUTPUT.finditer(text)}


def run(command: str) -> str:
    """Run a revinf command of the README and return its output without trailing spaces."""
    words = shlex.split(command)
    done = subprocess.run([sys.executable, "-m", *words], capture_output=True, text=True, check=True, timeout=120)
    return "".join(line.rstrip() + "\n" for line in done.stdout.splitlines())


if __name__ == "__main__":
    README.write_text(
        _OUTPUT.sub(lambda match: match[1] + run(match["command"]) + match[4], README.read_text(encoding="utf-8")),
        encoding="utf-8",
    )
