"""Kill `revinf build` and `revinf audit` at random moments: ``python -m tests.fuzz.crashes --number 100``."""

from __future__ import annotations

import argparse
import json
import random
import signal
import subprocess
import sys
import tempfile
import time
from collections import Counter
from pathlib import Path

from revinf.exceptions import RevinfError
from revinf.knowledge import demo_folder
from revinf.literature.literature import Literature

__all__ = ["audits", "builds"]


def revinf(*words: object) -> list[str]:
    return [sys.executable, "-m", "revinf", *map(str, words)]


def build(out: Path, name: str) -> list[str]:
    demo = demo_folder()
    return revinf(
        "build", "--peaks", demo / "peaks.csv", "--annotations", demo / "annotations.csv", "--studies",
        demo / "studies.csv", "--group", "group", "--name", name, "--invented", "--out", out,
    )  # fmt: skip


def audit(literature: Path, out: Path) -> list[str]:
    return revinf("audit", demo_folder() / "claims.csv", "--literature", literature, "--out", out, "--for", "author")


def whole(command: list[str]) -> float:
    """Run a command to its end and return the seconds it took."""
    start = time.perf_counter()
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL)
    return time.perf_counter() - start


def killed(command: list[str], after: float) -> None:
    """Start a command and kill it."""
    child = subprocess.Popen(command, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    time.sleep(after)
    child.send_signal(signal.SIGKILL)
    child.wait()


def state_of_build(target: Path) -> str:
    """Say what stands at the target of a build."""
    if not target.exists():
        return "absent"
    try:
        return f"whole, {Literature.open(target, verify=True).manifest.description.name}"
    except RevinfError as error:
        return f"DAMAGED: {error}"


def state_of_audit(target: Path, files: set[str]) -> str:
    """Say what stands at the target of an audit."""
    if not target.exists():
        return "absent"
    there = {path.name for path in target.iterdir()}
    if there != files:
        return f"DAMAGED: {sorted(files ^ there)}"
    try:
        for line in (target / "assessments.jsonl").read_text(encoding="utf-8").splitlines():
            json.loads(line)
    except ValueError as error:
        return f"DAMAGED: {error}"
    ended = (target / "report.html").read_text(encoding="utf-8").rstrip().endswith("</html>")
    return "whole" if ended else "DAMAGED: report.html ends early"


def litter(folder: Path) -> list[str]:
    """Return what a run left beside its target."""
    return sorted(path.name for path in folder.iterdir() if path.name.startswith("."))


def builds(folder: Path, number: int, chance: random.Random) -> Counter[str]:
    """Kill builds, an older literature in place or not, and say what stood there afterwards."""
    found: Counter[str] = Counter()
    target = folder / "literature"
    seconds = whole(build(target, "old"))
    for round_ in range(number):
        if round_ % 10 == 0:
            whole(build(target, "old"))
            found["left behind"] += len(litter(folder))
        killed(build(target, "new"), chance.uniform(0, 1.1 * seconds))
        found[state_of_build(target)] += 1
    whole(build(target, "last"))
    found["left behind"] += len(litter(folder))
    return found


def audits(folder: Path, number: int, chance: random.Random) -> Counter[str]:
    """Kill audits and say what stood there afterwards."""
    found: Counter[str] = Counter()
    whole(build(folder / "literature", "demo"))
    target = folder / "report"
    seconds = whole(audit(folder / "literature", target))
    files = {path.name for path in target.iterdir()}
    for _ in range(number):
        killed(audit(folder / "literature", target), chance.uniform(0, 1.1 * seconds))
        found[state_of_audit(target, files)] += 1
    whole(audit(folder / "literature", target))
    found["left behind"] += len(litter(folder))
    return found


def main() -> None:
    """Print what stood at the target after each kill; exit code 1 if anything was damaged or left behind."""
    parser = argparse.ArgumentParser(prog="python -m tests.fuzz.crashes")
    parser.add_argument("--number", type=int, default=100)
    parser.add_argument("--seed", type=int, default=1)
    asked = parser.parse_args()
    bad = 0
    for name, test in (("build", builds), ("audit", audits)):
        with tempfile.TemporaryDirectory() as made:
            found = test(Path(made), asked.number, random.Random(asked.seed))
        print(
            f"{name}, {asked.number} kills:", ", ".join(f"{state}: {count}" for state, count in sorted(found.items()))
        )
        bad += sum(count for state, count in found.items() if state.startswith(("DAMAGED", "left")))
    raise SystemExit(bool(bad))


if __name__ == "__main__":
    main()
