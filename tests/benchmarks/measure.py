"""Times of functions and of whole processes: medians of several runs, and the largest memory."""

from __future__ import annotations

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
    times = []
    for number in range(repeat + warm):
        start = time.perf_counter()
        child = subprocess.Popen(command, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        if child.wait():
            raise SystemExit(f"{' '.join(command)} ended with {child.returncode}")
        if number >= warm:
            times.append(time.perf_counter() - start)
    # A child's largest memory counts what its parent had when it was made, so a small parent asks.
    asked = subprocess.run([sys.executable, "-S", "-c", _MEMORY, *command], capture_output=True, text=True, check=True)
    return Measured(statistics.median(times), int(asked.stdout) / 1024)


_MEMORY = """
import resource, subprocess, sys
subprocess.run(sys.argv[1:], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, check=True)
print(resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss)
"""


def python(code: str, *, repeat: int = 5) -> Measured:
    """Time a whole Python process that runs some code."""
    return process([sys.executable, "-c", code], repeat=repeat)
