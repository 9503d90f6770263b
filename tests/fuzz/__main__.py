"""Spoil every kind of input many times and print one table: ``python -m tests.fuzz --number 100000``."""

from __future__ import annotations

import argparse
import resource
import tempfile
from pathlib import Path

from revinf.in_processes import each
from tests.fuzz.running import Tally, run
from tests.fuzz.targets import targets

_MEMORY = 3 << 30


_PART = 500


def part_of(name: str, seeds: range, keep: Path | None) -> Tally:
    """Run some seeds of one target in a process with little memory."""
    resource.setrlimit(resource.RLIMIT_AS, (_MEMORY, _MEMORY))
    with tempfile.TemporaryDirectory() as made:
        scratch = Path(made)
        (scratch / "in").mkdir()
        target = next(target for target in targets(scratch) if target.name == name)
        return run(target, seeds, scratch / "in", keep)


def main() -> None:
    """Run and say what failed; exit code 1 if anything did."""
    parser = argparse.ArgumentParser(prog="python -m tests.fuzz")
    parser.add_argument("--number", type=int, default=100_000, help="spoiled files, over all targets")
    parser.add_argument("--first", type=int, default=0, help="first seed")
    parser.add_argument("--only", help="targets whose name holds this")
    parser.add_argument("--keep", type=Path, help="keep the files that a reader failed on in this folder")
    asked = parser.parse_args()
    with tempfile.TemporaryDirectory() as made:
        names = [target.name for target in targets(Path(made)) if asked.only is None or asked.only in target.name]
    # In parts, so that every core has work to the end; the seeds alone decide what is spoiled how.
    count = -(-asked.number // len(names))
    parts = [range(asked.first + at, asked.first + min(at + _PART, count)) for at in range(0, count, _PART)]
    print(f"{'input':36}{'spoiled':>9}{'read':>9}{'refused':>9}{'failed':>8}{'slowest':>10}")
    tallies: list[Tally] = []
    results = each(part_of, ((name, seeds, asked.keep) for name in names for seeds in parts))
    for name in names:
        tally = Tally(name)
        for _ in parts:
            tally.add(next(results))
        tallies.append(tally)
        counts = f"{count:9}{tally.read:9}{tally.refused:9}{len(tally.failures):8}"
        print(f"{tally.target:36}{counts}{tally.slowest:8.2f} s", flush=True)
    failures = [failure for tally in tallies for failure in tally.failures]
    total = count * len(names)
    print(f"{'all':36}{total:9}{sum(t.read for t in tallies):9}{sum(t.refused for t in tallies):9}{len(failures):8}")
    for failure in failures[:10]:
        print(failure)
    raise SystemExit(bool(failures))


if __name__ == "__main__":
    main()
