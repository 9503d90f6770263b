"""What `revinf scan` says in the terminal: the claims with their words marked, and what still needs a look."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.cells import one_line
from revinf.reports.numbers import coordinates
from revinf.reports.terminal import hanging, heading
from revinf.reports.wording import agreement

if TYPE_CHECKING:
    from revinf.manuscript.found import FoundClaim, LinkedPlace, Scan

__all__ = ["scan_screen"]

_STYLES = {"place": "cyan", "cue": "bold yellow", "process": "bold magenta"}
_SHAPES = {"place": ("[", "]"), "cue": ("→", ""), "process": ("«", "»")}
"""Shapes beside the colours: they tell the parts apart without them."""

_SHOWN = 40


def scan_screen(found: Scan, written: list[str]) -> list[Any]:
    """Return the screen of a scan.

    Parameters
    ----------
    found : Scan
        From `revinf.scan`.
    written : list of str
        The files that were written.

    Returns
    -------
    list
        Renderables.
    """
    kinds = found.kinds()
    waiting = [claim for claim in found.claims if not all(place.link.xyz for place in claim.places)]
    counted = ", ".join(
        f"{kinds[kind]} {kind}" for kind in ("forward", "background", "negated", "reported") if kinds[kind]
    )
    rows = [
        ("Read", f"{one_line(found.name)}: {agreement(len(found.sentences), 'sentence')}"),
        (
            "Found",
            f"{agreement(len(found.claims), 'claim')}, {len(waiting)} of them still without "
            f"coordinates; {agreement(len(found.triples), 'coordinate triple')}",
        ),
    ]
    if counted:
        rows.append(("Left out", f"sentences that infer nothing: {counted}"))
    rows += [("Written", ", ".join(written))]
    parts: list[Any] = [hanging(rows)]
    if found.claims:
        parts.append(heading("Claims, to be confirmed: [place] →cue «process»"))
        parts += [_claim(claim) for claim in found.claims[:_SHOWN]]
        if len(found.claims) > _SHOWN:
            parts.append(hanging([("", f"{len(found.claims) - _SHOWN} more in the table")]))
    return [*parts, hanging([("", "")]), hanging([("Next", _next(written, bool(waiting)))])]


def _next(written: list[str], waiting: bool) -> str:
    """Say what to do with the table."""
    words = f"strike out what is no claim, then: revinf audit {written[0]} --literature FOLDER --out report"
    return f"fill in the coordinates that are missing, {words}" if waiting else words


def _claim(claim: FoundClaim) -> Any:
    """Return a claim with its words marked."""
    from rich.table import Table
    from rich.text import Text

    table = Table.grid(padding=(0, 2, 0, 0))
    table.add_column(min_width=4, no_wrap=True, style="bold")
    table.add_column(overflow="fold")
    hedged = ", hedged" if claim.hedged else ""
    table.add_row(Text(claim.id), Text(f"{one_line(claim.term)}{hedged}  ({one_line(claim.location)})"))
    table.add_row("", _marked(claim))
    for place in claim.places:
        table.add_row("", Text(_linked(place), style="dim"))
    return table


def _marked(claim: FoundClaim) -> Any:
    """Return the quote with place, cue and process marked."""
    from rich.text import Text

    text, position = Text(), 0
    for start, end, kind in claim.marks:
        if start < position:  # a mark within another
            continue
        before, after = _SHAPES[kind]
        text.append(one_line_kept(claim.quote[position:start]))
        text.append(f"{before}{one_line_kept(claim.quote[start:end])}{after}", style=_STYLES[kind])
        position = end
    text.append(one_line_kept(claim.quote[position:]))
    return text


def one_line_kept(text: str) -> str:
    """Return text without control characters, its outer spaces kept."""
    lead = text[: len(text) - len(text.lstrip())]
    tail = text[len(text.rstrip()) :] if text.strip() else ""
    return (" " if lead else "") + one_line(text) + (" " if tail else "")


def _linked(place: LinkedPlace) -> str:
    """Say which coordinates a place has, and how sure that is."""
    link = place.link
    if link.xyz is None:
        return f"{place.label}: no coordinates" + (f" ({link.how})" if link.how else "")
    space = f" {link.space}" if link.space else ", space not said"
    return f"{place.label}: {coordinates(link.xyz)}{space}; {link.confidence}, {link.how}"
