"""Feeds spoiled files to a reader and tells what became of each."""

from __future__ import annotations

import random
import signal
import time
import traceback
import warnings
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from pathlib import Path

from revinf.exceptions import RevinfError
from tests.fuzz.mutations import spoiled
from tests.fuzz.targets import Target

__all__ = ["Tally", "run"]

LIMIT_SECONDS = 20


@dataclass
class Tally:
    """What became of the inputs of one target."""

    target: str
    read: int = 0
    refused: int = 0
    slowest: float = 0.0
    failures: list[str] = field(default_factory=list)

    def add(self, part: Tally) -> None:
        """Add the inputs of a part."""
        self.read += part.read
        self.refused += part.refused
        self.slowest = max(self.slowest, part.slowest)
        self.failures += part.failures


class TookTooLong(BaseException):
    """Not an Exception, so that no reader swallows it."""


@contextmanager
def _limited() -> Iterator[None]:
    """Raise `TookTooLong` after the limit."""

    def ring(*_: object) -> None:
        raise TookTooLong

    old = signal.signal(signal.SIGALRM, ring)
    signal.alarm(LIMIT_SECONDS)
    try:
        yield
    finally:
        signal.alarm(0)
        signal.signal(signal.SIGALRM, old)


def run(target: Target, seeds: range, scratch: Path, keep: Path | None = None) -> Tally:
    """Spoil a file once a seed and read it.

    Parameters
    ----------
    target : Target
        The good file and its reader.
    seeds : range
        One for each spoiled copy.
    scratch : pathlib.Path
        Where the copies are written, each over the last.
    keep : pathlib.Path, optional
        Where the copies that a reader failed on are kept.

    Returns
    -------
    Tally
        A failure is anything but an answer or a refusal of one line: another exception, a warning, a hang.
    """
    tally = Tally(target.name)
    path = scratch / target.file
    for seed in seeds:
        path.write_bytes(spoiled(target.content, random.Random(f"{target.name} {seed}")))
        start = time.perf_counter()
        problem = ""
        with warnings.catch_warnings():
            warnings.simplefilter("error")
            try:
                with _limited():
                    target.read(path)
                tally.read += 1
            except RevinfError as error:
                tally.refused += 1
                if "\n" in str(error) or not str(error).strip():
                    problem = f"not one line: {error!r}"
            except TookTooLong:
                problem = f"took more than {LIMIT_SECONDS} s"
            except Exception:
                problem = traceback.format_exc()
        tally.slowest = max(tally.slowest, time.perf_counter() - start)
        if problem:
            tally.failures.append(f"{target.name}, seed {seed}: {problem}")
            if keep is not None:
                keep.mkdir(parents=True, exist_ok=True)
                (keep / f"{seed}-{target.file}").write_bytes(path.read_bytes())
    return tally
