"""What `revinf audit` says in the terminal: the claims at a glance, and where the report is."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.cells import one_line
from revinf.reports.comments import own_paper_words
from revinf.reports.numbers import interval, probability, ratio
from revinf.reports.terminal import fitting, hanging, heading, plain_table
from revinf.reports.wording import NO_INDIVIDUALS, agreement

if TYPE_CHECKING:
    from revinf.evidence.audit import Audit, AuditedClaim

__all__ = ["audit_screen"]


def audit_screen(audit: Audit, where: str, names: list[str], *, width: int = 104) -> list[Any]:
    """Return the screen of an audit.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.
    where : str
        The folder that was written.
    names : list of str
        The files in it.
    width : int, columns, default 104
        Of the terminal; a narrow one leaves columns to the report.

    Returns
    -------
    list
        Renderables.
    """
    from rich.text import Text

    facts = audit.source
    counted = f"{facts.name}: {facts.n_studies:,} studies (here: {facts.study_is})"
    rows = [("Counted in", counted)]
    if facts.invented:
        rows.append(("", "INVENTED DATA: these numbers say nothing about any brain"))
    rows += [("■ stop", one_line(words)) for words in own_paper_words(audit)]
    rows += [("Written", f"{where}: {', '.join(names)}")]
    header = ["claim", "likelihood ratio", "direction", "posterior", "advice", "cautions"]
    listed = [_row(item) for item in audit.by_attention()]
    table = plain_table(*fitting(header, listed, width, drop=(1, 3, 5)))
    parts: list[Any] = [hanging(rows), heading("Claims, those first that need most attention"), table]
    without = [item for item in audit.by_attention() if item.assessment is None]
    if without:
        lines = [(one_line(item.claim.id), one_line(item.problem.message if item.problem else "")) for item in without]
        parts += [heading(f"{agreement(len(without), 'claim')} not assessed"), hanging(lines)]
    if audit.unplaced:
        lines = [(f"line {item.line}", one_line(f"{item.claim}: {item.term}")) for item in audit.unplaced]
        parts += [heading(f"{agreement(len(audit.unplaced), 'claim')} still without coordinates"), hanging(lines)]
    if audit.refused:
        lines = [(f"line {item.line}", one_line(f"{item.claim}: {item.reason}")) for item in audit.refused]
        parts += [heading(f"{agreement(len(audit.refused), 'row')} refused"), hanging(lines)]
    return [*parts, Text("\n" + NO_INDIVIDUALS, style="dim")]


def _row(item: AuditedClaim) -> list[str]:
    """Return one claim's row."""
    name = one_line(f"{item.claim.id}: {item.claim.term}")
    if item.assessment is None or item.advice is None:
        return [name, "", "not assessed", "", "", ""]
    answer, posterior = item.assessment.likelihood_ratio, item.assessment.posterior
    severities = [caution.severity for caution in item.assessment.cautions]
    return [
        name,
        interval(answer.value, ratio),
        answer.direction,
        probability(posterior.value.estimate),
        item.advice.change,
        f"■ {severities.count('stop')}  ▲ {severities.count('weigh')}",
    ]
