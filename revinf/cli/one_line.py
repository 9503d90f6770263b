"""How every command fails: one line on stderr and exit code 2; 130 when interrupted.

Also joins `--peak X Y Z` into one argument before parsing, since the option is repeatable and its numbers
may be negative.
"""

from __future__ import annotations

import os
import signal
import sys
import threading
from collections.abc import Sequence
from typing import Any, Self

import typer.core

from revinf.exceptions import RevinfError

__all__ = ["LineGroup", "PeakCommand", "join_peaks"]


class LineGroup(typer.core.TyperGroup):
    """The commands of revinf, with every expected failure told in one line."""

    def main(self, *args: Any, **kwargs: Any) -> Any:
        """Run and exit with 0, 2, 3 or 130."""
        kwargs["standalone_mode"] = False
        with _Interrupt() as interrupt:
            try:
                code = super().main(*args, **kwargs)
                sys.stdout.flush()
            except Exception as error:
                if interrupt.seen:  # compiled code may turn it into an error of its own
                    sys.exit(_interrupted())
                sys.exit(_told(error))
            except KeyboardInterrupt:
                sys.exit(_interrupted())
            except SystemExit:
                sys.exit(_interrupted() if interrupt.seen else _reader_gone())
        if code == 130:
            sys.exit(_interrupted())
        sys.exit(code if isinstance(code, int) else 0)


class _Interrupt:
    """Notices Ctrl-C while a command runs, whatever becomes of the exception that it raises."""

    def __init__(self) -> None:
        self.seen = False
        self._before: Any = None

    def __enter__(self) -> Self:
        # Only where Python's own handler stands: a program that calls us may have one of its own.
        if signal.getsignal(signal.SIGINT) is signal.default_int_handler and _in_main_thread():
            self._before = signal.signal(signal.SIGINT, self._notice)
        return self

    def __exit__(self, *_: object) -> None:
        if self._before is not None:
            signal.signal(signal.SIGINT, self._before)

    def _notice(self, *_: object) -> None:
        self.seen = True
        raise KeyboardInterrupt


def _in_main_thread() -> bool:
    """Tell whether signals may be handled here."""
    return threading.current_thread() is threading.main_thread()


def _told(error: Exception) -> int:
    """Tell an expected failure in one line and return the exit code; any other is a fault of ours and goes on."""
    if isinstance(error, RevinfError):
        return _fail(str(error))
    if isinstance(error, BrokenPipeError):
        return _reader_gone()
    if isinstance(error, typer.Abort):
        return _interrupted()
    if isinstance(error, MemoryError):
        return _fail("there is not enough memory for this; use a smaller region or file")
    # The parser's own errors, whatever class this version of Typer gives them.
    message = getattr(error, "format_message", None)
    if message is None:
        raise error
    return _fail(f"{message().rstrip('.')}. See revinf --help.")


def _interrupted() -> int:
    """Say so."""
    return _fail("interrupted; nothing was left half-written", code=130)


def _reader_gone() -> int:
    """Return the exit code where the reader of our output has gone, as in `revinf terms | head`.

    The parser and rich make a SystemExit of it. What is still buffered must not fail again when the interpreter ends.
    """
    os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
    return 0


def _fail(message: str, code: int = 2) -> int:
    """Print one line on stderr and return the exit code."""
    print("revinf: " + " ".join(message.split()), file=sys.stderr)
    return code


class PeakCommand(typer.core.TyperCommand):
    """A command with the option `--peak X Y Z`."""

    def parse_args(self, ctx: Any, args: list[str]) -> list[str]:
        """Parse after joining the three numbers of each peak."""
        return super().parse_args(ctx, join_peaks(args))


def join_peaks(args: Sequence[str]) -> list[str]:
    """Return the arguments with the three that follow each ``--peak`` joined to it.

    Parameters
    ----------
    args : sequence of str
        As typed.

    Returns
    -------
    list of str
        ``--peak=X Y Z`` as one argument each.

    Examples
    --------
    >>> join_peaks(["--peak", "-4", "5", "6", "--term", "fear"])
    ['--peak=-4 5 6', '--term', 'fear']
    >>> join_peaks(["--peak=−4,", "5", "6"])
    ['--peak=-4 5 6']
    """
    joined: list[str] = []
    rest = list(args)
    while rest:
        head = rest.pop(0)
        name, _, first = head.partition("=")
        if name == "--peak":
            numbers = _plain(first).split()
            while rest and len(numbers) < 3 and (not rest[0].startswith("-") or _is_number(rest[0])):
                numbers += _plain(rest.pop(0)).split()
            joined.append(f"--peak={' '.join(numbers)}")
        else:
            joined.append(head)
    return joined


def _plain(text: str) -> str:
    """Return coordinates with spaces for commas and hyphens for the minus signs that papers print."""
    return text.translate({ord(","): " ", ord("\N{MINUS SIGN}"): "-", ord("\N{EN DASH}"): "-"})


def _is_number(text: str) -> bool:
    """Tell whether an argument that starts with a hyphen is a number, or several in quotes."""
    try:
        return all(float(part) == float(part) for part in _plain(text).split())
    except ValueError:
        return False
