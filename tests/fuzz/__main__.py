"""Spoil every kind of input many times and print one table: ``python -m tests.fuzz --number 100000``."""

from __future__ import annotations

import argparse
import resource
import tempfile
from pathlib import Path

from tests.fuzz.running import Tally, run
from tests.fuzz.targets import targets

_MEMORY = 3 << 30


def main() -> None:
    """Run and say what failed; exit code 1 if anything did."""
    parser = argparse.ArgumentParser(prog="python -m tests.fuzz")
    parser.add_argument("--number", type=int, default=100_000, help="spoiled files, over all targets")
    parser.add_argument("--first", type=int, default=0, help="first seed")
    parser.add_argument("--only", help="targets whose name holds this")
    parser.add_argument("--keep", type=Path, help="keep the files that a reader failed on in this folder")
    asked = parser.parse_args()
    resource.setrlimit(resource.RLIMIT_AS, (_MEMORY, _MEMORY))
    tallies: list[Tally] = []
    with tempfile.TemporaryDirectory() as made:
        scratch = Path(made)
        (scratch / "in").mkdir()
        chosen = [target for target in targets(scratch) if asked.only is None or asked.only in target.name]
        each = -(-asked.number // len(chosen))
        print(f"{'input':36}{'spoiled':>9}{'read':>9}{'refused':>9}{'failed':>8}{'slowest':>10}")
        for target in chosen:
            tally = run(target, range(asked.first, asked.first + each), scratch / "in", asked.keep)
            tallies.append(tally)
            counts = f"{each:9}{tally.read:9}{tally.refused:9}{len(tally.failures):8}"
            print(f"{tally.target:36}{counts}{tally.slowest:8.2f} s", flush=True)
    failures = [failure for tally in tallies for failure in tally.failures]
    total = each * len(chosen)
    print(f"{'all':36}{total:9}{sum(t.read for t in tallies):9}{sum(t.refused for t in tallies):9}{len(failures):8}")
    for failure in failures[:10]:
        print(failure)
    raise SystemExit(bool(failures))


if __name__ == "__main__":
    main()
