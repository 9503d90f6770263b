"""An audit as Markdown: for a repository, a message, or a reviewer's form."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from revinf.knowledge import VERSION
from revinf.reports.cells import markdown_cell
from revinf.reports.comments import author_note, own_paper_words, place_words, reviewer_comment, summary_sentence
from revinf.reports.facts import (
    breadth_facts,
    contrast_facts,
    range_words,
    rank_words,
    required_facts,
    settings_words,
    shown_rivals,
)
from revinf.reports.methods import METHODS_SOURCES, methods_paragraph, source_facts
from revinf.reports.numbers import count, interval, probability, ratio
from revinf.reports.settle_screen import settling_lines
from revinf.reports.wording import LIMITS, NO_INDIVIDUALS, active_words, agreement, grade_line

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.audit import Audit, AuditedClaim

__all__ = ["audit_markdown", "author_markdown", "reviewer_markdown"]


def audit_markdown(audit: Audit, *, command: str = "") -> str:
    """Return the whole audit as Markdown.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.
    command : str, optional
        What reproduces it.

    Returns
    -------
    str
        The same audit gives the same text.
    """
    lines = ["# Claims against base rates", "", *_source(audit), "", "## At a glance", ""]
    lines += ["| claim | term | ratio | direction | advice | stop | weigh |", "|---|---|---|---|---|---|---|"]
    lines += [_glance(item) for item in audit.by_attention()]
    for item in audit.by_attention():
        lines += ["", *_section(item)]
    lines += ["", *_left_over(audit), "## How these numbers came about", "", methods_paragraph(audit), ""]
    lines += [f"- {source}" for source in METHODS_SOURCES]
    lines += ["", *(f"- {label}: {markdown_cell(text)}" for label, text in source_facts(audit))]
    lines += ["", "## Limits", "", *(f"- {limit}" for limit in LIMITS), f"- {NO_INDIVIDUALS}"]
    if command:
        lines += ["", f"Made by revinf {VERSION} with `{command.replace('`', '')}`."]
    return "\n".join(lines).rstrip() + "\n"


def author_markdown(audit: Audit) -> str:
    """Return what the author should change, claim by claim."""
    lines = ["# For the author", "", *_source(audit)]
    for item in audit.by_attention():
        lines += ["", f"## {markdown_cell(item.claim.id)}: {markdown_cell(item.claim.term)}", ""]
        lines += _quote(item)
        lines.append(markdown_cell(author_note(item)))
        if item.assessment is not None:
            lines += ["", markdown_cell(summary_sentence(item.assessment))]
    lines += ["", *_left_over(audit)]
    return "\n".join([*lines, "", NO_INDIVIDUALS, ""])


def reviewer_markdown(audit: Audit) -> str:
    """Return a comment for each claim, to be edited and sent."""
    lines = ["# Comments for the authors", "", *_source(audit)]
    listed = [item for item in audit.by_attention() if item.assessment is not None]
    for number, item in enumerate(listed, start=1):
        lines += ["", f"{number}. {markdown_cell(reviewer_comment(item))}"]
    left = [reviewer_comment(item) for item in audit.by_attention() if item.assessment is None]
    left += [f"line {item.line}: {item.claim}, still without coordinates" for item in audit.unplaced]
    left += [f"line {item.line}: {item.claim}: {item.reason}" for item in audit.refused]
    if left:
        lines += ["", "## For the reviewer's eyes, not for sending", "", *(f"- {markdown_cell(text)}" for text in left)]
    return "\n".join([*lines, "", NO_INDIVIDUALS, ""])


def _source(audit: Audit) -> list[str]:
    """Say which literature was counted."""
    facts = audit.source
    lines = [
        f"Counted in {markdown_cell(facts.name)}: {count(facts.n_studies)} studies (here: "
        f"{markdown_cell(facts.study_is)}), fingerprint `{facts.fingerprint}`."
    ]
    n_left = len(audit.refused) + len(audit.unplaced)
    if n_left:
        lines += ["", f"{agreement(n_left, 'row')} of the table could not be assessed; see the end."]
    lines += [text for words in own_paper_words(audit) for text in ("", f"**{markdown_cell(words)}**")]
    if facts.invented:
        lines += ["", "**INVENTED DATA: these numbers say nothing about any brain.**"]
    return lines


def _glance(item: AuditedClaim) -> str:
    """Return one row of the overview."""
    name, term = markdown_cell(item.claim.id), markdown_cell(item.claim.term)
    if item.assessment is None or item.advice is None:
        return f"| {name} | {term} | | not assessed | | | |"
    severities = [caution.severity for caution in item.assessment.cautions]
    answer = item.assessment.likelihood_ratio
    return (
        f"| {name} | {term} | {interval(answer.value, ratio)} | {answer.direction} | {item.advice.change} | "
        f"{severities.count('stop')} | {severities.count('weigh')} |"
    )


def _quote(item: AuditedClaim) -> list[str]:
    """Return the sentence and where it stands."""
    if not item.claim.quote:
        return []
    place = f" ({markdown_cell(item.claim.location)})" if item.claim.location else ""
    return [f"> {_leading(markdown_cell(item.claim.quote))}{place}", ""]


def _leading(text: str) -> str:
    """Return text whose first letters make no rule, list or heading."""
    if re.match(r"[-+=>]", text):
        return "\\" + text
    return re.sub(r"^(\d{1,9})([.)])", r"\1\\\2", text)


def _section(item: AuditedClaim) -> list[str]:
    """Return the section of one claim."""
    lines = [f"## {markdown_cell(item.claim.id)}: {markdown_cell(item.claim.term)}", "", *_quote(item)]
    lines.append(f"- Where: {markdown_cell(place_words(item))}")
    if item.assessment is None or item.advice is None:
        problem = item.problem.message if item.problem else ""
        return [*lines, f"- Not assessed: {markdown_cell(problem)}"]
    assessment, answer = item.assessment, item.assessment.likelihood_ratio
    lines += [
        f"- {markdown_cell(assessment.place.words)}",
        f"- {markdown_cell(summary_sentence(assessment))}",
        f"- {markdown_cell(grade_line(answer.direction, answer.headline_grade, answer.estimate_grade))}",
        f"- In words: {markdown_cell(assessment.wording)}",
        f"- Advice: {markdown_cell(author_note(item))}",
    ]
    lines += [
        f"- {caution.severity}, `{caution.code}`: {markdown_cell(caution.message)}" for caution in assessment.cautions
    ]
    lines += ["", "What else could it mean?", "", *_rivals(assessment), ""]
    facts = [("rank", rank_words(assessment)), *breadth_facts(assessment), *required_facts(assessment)]
    lines += [f"- {label}: {markdown_cell(text)}" for label, text in [*facts, *contrast_facts(assessment)]]
    lines += ["", "Does the answer hold?", "", *_robustness(assessment)]
    if item.settlement is not None and item.settlement.places:
        first, *places = settling_lines(item.settlement)
        lines += ["", f"What would settle it? {markdown_cell(first)}", "", *(f"- {markdown_cell(p)}" for p in places)]
    return lines


def _rivals(assessment: Assessment) -> list[str]:
    """Return the processes that lead here, the claimed one first, as a table."""
    counts = assessment.counts
    rows = [
        f"| **{markdown_cell(assessment.claim.term)}** | {count(counts.term_active)} of {count(counts.term_total)} | "
        f"{interval(assessment.likelihood_ratio.value, ratio)} | |"
    ]
    for rival in shown_rivals(assessment):
        value = "" if rival.likelihood_ratio is None else interval(rival.likelihood_ratio, ratio)
        ahead = "" if rival.probability_ahead is None else probability(rival.probability_ahead)
        rows.append(
            f"| {markdown_cell(rival.term)} | {count(rival.counts.term_active)} of "
            f"{count(rival.counts.term_total)} | {value} | {ahead} |"
        )
    active = active_words(assessment.claim.absent)
    return [f"| process | {active} | likelihood ratio | P(claim leads) |", "|---|---|---|---|", *rows]


def _robustness(assessment: Assessment) -> list[str]:
    """Return over which choices the answer holds, as a table."""
    robust = assessment.robustness
    rows = []
    for choice, holds in robust.holds().items():
        members = robust.of(choice)
        kept = sum(row.holds for row in members)
        answer = "holds" if holds else f"holds at {kept} of {len(members)}"
        rows.append(f"| {choice} | {answer} | {settings_words(members)} | {range_words(members)} |")
    left = robust.left_out
    if left is not None and left.ratio is not None:
        answer = "direction changes" if robust.direction_changes_without_one else "direction holds"
        rows.append(
            f"| one left out | {answer} | most without {markdown_cell(left.name)} | {interval(left.ratio, ratio)} |"
        )
    return ["| choice | direction and grade | tried | likelihood ratio |", "|---|---|---|---|", *rows]


def _left_over(audit: Audit) -> list[str]:
    """Return the claims without a place and the refused rows."""
    lines: list[str] = []
    if audit.unplaced:
        lines += [f"## {agreement(len(audit.unplaced), 'claim')} still without coordinates", ""]
        lines += [
            f"- line {item.line}: {markdown_cell(item.claim)}, {markdown_cell(item.term)} {markdown_cell(item.quote)}"
            for item in audit.unplaced
        ]
        lines.append("")
    if audit.refused:
        lines += [f"## {agreement(len(audit.refused), 'row')} refused", ""]
        lines += [
            f"- line {item.line}: {markdown_cell(item.claim)}: {markdown_cell(item.reason)}" for item in audit.refused
        ]
        lines.append("")
    return lines
