"""Two literatures side by side, for the terminal and as Markdown."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.cells import markdown_cell, one_line
from revinf.reports.numbers import count, interval, probability, ratio
from revinf.reports.terminal import fitting, hanging, heading, plain_table
from revinf.reports.wording import NO_INDIVIDUALS

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.comparison import ComparedClaim, Comparison
    from revinf.evidence.parts import LiteratureFacts

__all__ = ["comparison_markdown", "comparison_screen"]

_HEADER = ["claim", "first ratio", "second ratio", "they", "first / second", "P(first larger)"]


def comparison_screen(found: Comparison, written: str = "", *, width: int = 104) -> list[Any]:
    """Return the screen of a comparison.

    Parameters
    ----------
    found : Comparison
        From `revinf.compare`.
    written : str, optional
        The file that was written.
    width : int, columns
        Of the terminal.

    Returns
    -------
    list
        Renderables.
    """
    rows = [("First", _source(found.first)), ("Second", _source(found.second))]
    if written:
        rows.append(("Written", written))
    table = [_row(item) for item in found.claims if item.agreement is not None]
    parts: list[Any] = [hanging(rows), heading("In words"), hanging([("", found.verdict())], label_width=0)]
    if table:
        parts += [heading("Claim by claim"), plain_table(*fitting(_HEADER, table, width, drop=(5, 4)))]
    problems = [(one_line(item.claim.id), one_line(text)) for item in found.claims for text in item.problems]
    if problems:
        parts += [heading("Not assessed in both"), hanging(problems)]
    return [*parts, hanging([("", "")]), hanging([("", NO_INDIVIDUALS)], label_width=0)]


def comparison_markdown(found: Comparison, *, command: str = "") -> str:
    """Return a comparison as Markdown; the same one gives the same text.

    Parameters
    ----------
    found : Comparison
        From `revinf.compare`.
    command : str, optional
        What reproduces it.

    Returns
    -------
    str
        Verdict first, then a row a claim.
    """
    lines = [
        "# Do two literatures agree?",
        "",
        f"- first: {markdown_cell(_source(found.first))}",
        f"- second: {markdown_cell(_source(found.second))}",
        "",
        markdown_cell(found.verdict()),
        "",
        f"| {' | '.join(_HEADER)} |",
        "|" + "---|" * len(_HEADER),
    ]
    lines += [
        f"| {' | '.join(markdown_cell(cell) for cell in _row(item))} |"
        for item in found.claims
        if item.agreement is not None
    ]
    lines += [""] + [
        f"- {markdown_cell(item.claim.id)}: {markdown_cell(text)}" for item in found.claims for text in item.problems
    ]
    lines += ["", NO_INDIVIDUALS]
    if command:
        lines += ["", f"Made with `{command.replace('`', '')}`."]
    return "\n".join(lines) + "\n"


def _source(facts: LiteratureFacts) -> str:
    """Say which literature."""
    invented = "; INVENTED DATA" if facts.invented else ""
    return (
        f"{one_line(facts.name)}: {count(facts.n_studies)} studies (here: {one_line(facts.study_is)}), "
        f"fingerprint {facts.fingerprint}{invented}"
    )


def _row(item: ComparedClaim) -> list[str]:
    """Return one claim's row."""
    first, second = item.terms
    term = first if first == second else f"{first} / {second}"
    return [
        one_line(f"{item.claim.id}: {term}" if item.claim.id else term),
        _ratio(item.first),
        _ratio(item.second),
        str(item.agreement),
        "" if item.quotient is None else interval(item.quotient, ratio),
        "" if item.probability_larger is None else probability(min(max(item.probability_larger, 1e-4), 1 - 1e-4)),
    ]


def _ratio(answer: Assessment | None) -> str:
    """Return a ratio with its interval."""
    return "" if answer is None else interval(answer.likelihood_ratio.value, ratio)
