"""Progress on stderr for work that takes longer than a moment; silent where stderr is not a terminal."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager

__all__ = ["counting", "stages"]


@contextmanager
def stages() -> Iterator[Callable[[str, int], None]]:
    """Give a function that is told the current stage and how many rows are through.

    Yields
    ------
    callable
        Takes the stage and the number of rows.
    """
    from rich.progress import Progress, SpinnerColumn, TextColumn, TimeElapsedColumn

    from revinf.reports.terminal import new_console

    columns = (
        SpinnerColumn(),
        TextColumn("{task.description}"),
        TextColumn("{task.fields[rows]}"),
        TimeElapsedColumn(),
    )
    console = new_console(to_stderr=True)
    with Progress(*columns, console=console, transient=True, disable=not console.is_terminal) as bar:
        task = bar.add_task("starting", rows="")

        def tell(stage: str, rows: int) -> None:
            bar.update(task, description=stage, rows=f"{rows:,} rows" if rows else "")

        yield tell


@contextmanager
def counting(what: str) -> Iterator[Callable[[int, int], None]]:
    """Give a function that is told how many of how many are done.

    Parameters
    ----------
    what : str
        What is being done.

    Yields
    ------
    callable
        Takes done and total.
    """
    from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeRemainingColumn

    from revinf.reports.terminal import new_console

    columns = (
        TextColumn("{task.description}"),
        BarColumn(),
        MofNCompleteColumn(),
        TimeRemainingColumn(),
    )
    console = new_console(to_stderr=True)
    with Progress(*columns, console=console, transient=True, disable=not console.is_terminal) as bar:
        task = bar.add_task(what, total=None)

        def tell(done: int, total: int) -> None:
            bar.update(task, completed=done, total=total)

        yield tell
