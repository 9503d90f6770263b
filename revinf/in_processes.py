"""Runs one function many times beside itself, in other processes, so that Ctrl-C stays one line."""

from __future__ import annotations

import signal
import threading
from collections.abc import Callable, Iterable, Iterator
from contextlib import contextmanager
from typing import Any, TypeVar

__all__ = ["each"]

_Result = TypeVar("_Result")


def each(
    function: Callable[..., _Result],
    calls: Iterable[tuple[Any, ...]],
    *,
    jobs: int | None = -1,
    pre_dispatch: str = "2 * n_jobs",
) -> Iterator[_Result]:
    """Call a function with one set of arguments after another and yield the results in that order.

    Parameters
    ----------
    function : callable
        Importable by its name; it and its arguments go to other processes.
    calls : iterable of tuple
        Arguments of each call.
    jobs : int or None, default -1
        Processes; -1 takes every core, None what the user has set with `joblib.parallel_config`.
    pre_dispatch : str
        How many calls are prepared ahead, as joblib takes it; fewer need less memory.

    Yields
    ------
    object
        Results, in order.

    Examples
    --------
    >>> list(each(divmod, [(7, 2), (9, 4)], jobs=1))
    [(3, 1), (2, 1)]
    """
    from joblib import Parallel, delayed

    work = Parallel(n_jobs=jobs, return_as="generator", pre_dispatch=pre_dispatch)
    with _deaf():
        results = work(delayed(function)(*arguments) for arguments in calls)
    yield from results


@contextmanager
def _deaf() -> Iterator[None]:
    """Ignore Ctrl-C for the moment in which processes start: they inherit that, and this one does not keep it.

    A terminal sends Ctrl-C to them, too, and each would print a traceback of its own.
    """
    if threading.current_thread() is not threading.main_thread():
        yield
        return
    before = signal.signal(signal.SIGINT, signal.SIG_IGN)
    try:
        yield
    finally:
        signal.signal(signal.SIGINT, before)
