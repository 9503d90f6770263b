"""Times of functions and of whole processes: medians of several runs, and the largest memory."""

from __future__ import annotations

import os
import statistics
import subprocess
import sys
import time
from collections.abc import Callable, Sequence
from dataclasses import dataclass

__all__ = ["Measured", "function", "process", "python"]


@dataclass(frozen=True, slots=True)
class Measured:
    """Median seconds, and for processes the largest memory in MB."""

    seconds: float
    memory_mb: float | None = None


def function(run: Callable[[], object], *, repeat: int = 5) -> Measured:
    """Time a function; the first run is not counted."""
    run()
    times = []
    for _ in range(repeat):
        start = time.perf_counter()
        run()
        times.append(time.perf_counter() - start)
    return Measured(statistics.median(times))


def process(command: Sequence[str], *, repeat: int = 5, warm: bool = True) -> Measured:
    """Time a whole process with everything it loads; one run before it fills the caches of the system."""
    times, memory = [], 0.0
    for number in range(repeat + warm):
        start = time.perf_counter()
        child = subprocess.Popen(command, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        _, status, usage = os.wait4(child.pid, 0)
        child.returncode = os.waitstatus_to_exitcode(status)
        if child.returncode:
            raise SystemExit(f"{' '.join(command)} ended with {child.returncode}")
        if number >= warm:
            times.append(time.perf_counter() - start)
            memory = max(memory, usage.ru_maxrss / 1024)
    return Measured(statistics.median(times), memory)


def python(code: str, *, repeat: int = 5) -> Measured:
    """Time a whole Python process that runs some code."""
    return process([sys.executable, "-c", code], repeat=repeat)
