"""The machine-readable faces of an audit: one JSON a line, and one CSV row a claim."""

from __future__ import annotations

import csv
import io
import json
from typing import TYPE_CHECKING, Any

from revinf.reports.cells import csv_cell

if TYPE_CHECKING:
    from revinf.evidence.audit import Audit, AuditedClaim

__all__ = ["COLUMNS", "audit_csv", "audit_jsonl", "audit_rows"]

COLUMNS = (
    "claim",
    "term",
    "peaks",
    "space",
    "radius_mm",
    "quote",
    "location",
    "term_active",
    "term_total",
    "other_active",
    "other_total",
    "likelihood_ratio",
    "ratio_low",
    "ratio_high",
    "direction",
    "headline_grade",
    "prior",
    "posterior",
    "posterior_low",
    "posterior_high",
    "posterior_at_prevalence",
    "rank",
    "best_rival",
    "probability_ahead",
    "cautions",
    "advice",
    "suggested_wording",
    "problem",
    "invented",
)


def audit_jsonl(audit: Audit) -> str:
    """Return one assessment a line, schema revinf/assessment/1; claims without an answer are left out."""
    lines = [json.dumps(assessment.to_dict(), ensure_ascii=False, allow_nan=False) for assessment in audit.assessments]
    return "".join(line + "\n" for line in lines)


def audit_rows(audit: Audit) -> list[dict[str, Any]]:
    """Return one flat row a claim, in the order of the table, with raw numbers.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.

    Returns
    -------
    list of dict
        Keys as in `COLUMNS`.
    """
    return [{**dict.fromkeys(COLUMNS), **_row(item)} for item in audit.audited]


def audit_csv(audit: Audit) -> str:
    """Return the rows as CSV in which no cell runs as a formula."""
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(COLUMNS)
    for row in audit_rows(audit):
        writer.writerow(["" if row[name] is None else csv_cell(row[name]) for name in COLUMNS])
    return text.getvalue()


def _row(item: AuditedClaim) -> dict[str, Any]:
    """Return what a claim's row holds; what has no answer is missing."""
    claim = item.claim
    row: dict[str, Any] = {
        "claim": claim.id,
        "term": claim.term,
        "peaks": "; ".join("(" + ", ".join(f"{value:g}" for value in peak) + ")" for peak in claim.peaks),
        "space": claim.space,
        "radius_mm": claim.radius_mm,
        "quote": claim.quote,
        "location": claim.location,
    }
    if item.assessment is None or item.advice is None:
        return {**row, "problem": item.problem.message if item.problem else "not assessed"}
    assessment, counts = item.assessment, item.assessment.counts
    answer, posterior = assessment.likelihood_ratio, assessment.posterior
    return {
        **row,
        "term_active": counts.term_active,
        "term_total": counts.term_total,
        "other_active": counts.other_active,
        "other_total": counts.other_total,
        "likelihood_ratio": answer.value.estimate,
        "ratio_low": answer.value.low,
        "ratio_high": answer.value.high,
        "direction": answer.direction,
        "headline_grade": answer.headline_grade,
        "prior": posterior.prior,
        "posterior": posterior.value.estimate,
        "posterior_low": posterior.value.low,
        "posterior_high": posterior.value.high,
        "posterior_at_prevalence": assessment.posterior_at_prevalence.value.estimate,
        "rank": assessment.selectivity.rank,
        "best_rival": assessment.selectivity.best_rival,
        "probability_ahead": assessment.selectivity.probability_ahead,
        "cautions": ";".join(caution.code for caution in assessment.cautions),
        "advice": item.advice.change,
        "suggested_wording": item.advice.sentence,
        "invented": assessment.literature.invented,
    }
