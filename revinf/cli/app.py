"""The command `revinf`: registers the commands and nothing else."""

from __future__ import annotations

import signal
import sys
from typing import Annotated

import typer

from revinf.cli.audit import audit
from revinf.cli.build import build
from revinf.cli.calibrate import calibrate
from revinf.cli.check import check
from revinf.cli.compare import compare
from revinf.cli.demo import demo
from revinf.cli.inspect import inspect
from revinf.cli.map_term import map_term
from revinf.cli.one_line import LineGroup, PeakCommand
from revinf.cli.peaks import peaks
from revinf.cli.profile import profile
from revinf.cli.scan import scan
from revinf.cli.settle import settle
from revinf.cli.tabulate import tabulate
from revinf.cli.terms import terms

__all__ = ["app", "run"]

app = typer.Typer(
    name="revinf",
    cls=LineGroup,
    add_completion=False,
    pretty_exceptions_enable=False,
    help="How much does activity in a place say about the process that a paper claims? Checks reverse "
    "inferences against base rates of the literature. Speaks of group-level literature, never of a person.",
)


def _show_version(wanted: bool) -> None:
    """Print the version and stop."""
    if wanted:
        from revinf.knowledge import VERSION

        typer.echo(f"revinf {VERSION}")
        raise typer.Exit()


@app.callback()
def _main(
    version: Annotated[
        bool,
        typer.Option("--version", callback=_show_version, is_eager=True, help="Print the version and stop."),
    ] = False,
) -> None:
    pass


app.command(cls=PeakCommand)(check)
app.command(cls=PeakCommand)(profile)
app.command(cls=PeakCommand)(settle)
app.command()(scan)
app.command()(peaks)
app.command()(audit)
app.command("map")(map_term)
app.command()(calibrate)
app.command()(compare)
app.command()(build)
app.command()(inspect)
app.command()(terms)
app.command()(tabulate)
app.command()(demo)


def run() -> None:
    """Run the command line; the entry point of the installed script."""
    for stream in (sys.stdout, sys.stderr):
        # A terminal that cannot show a character must not end the program.
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="replace")
    try:
        app()
    finally:
        # The work is done: Ctrl-C while Python closes down would only print a traceback.
        signal.signal(signal.SIGINT, signal.SIG_IGN)
