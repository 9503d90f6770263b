"""The machine-readable faces of an audit: one JSON a line, and one CSV row a claim."""

from __future__ import annotations

import csv
import io
import json
from typing import TYPE_CHECKING, Any

from revinf.evidence.assessment import SCHEMA
from revinf.knowledge import VERSION
from revinf.reports.cells import csv_cell

if TYPE_CHECKING:
    from revinf.evidence.audit import Audit, AuditedClaim

__all__ = ["COLUMNS", "audit_csv", "audit_jsonl", "audit_rows"]

COLUMNS = (
    "claim",
    "status",
    "line",
    "term",
    "place",
    "peaks",
    "space",
    "radius_mm",
    "context",
    "rivals",
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
    """Return one assessment a line, schema revinf/assessment/1; a claim without an answer is kept with nulls."""
    return "".join(json.dumps(_line(item, audit), ensure_ascii=False, allow_nan=False) + "\n" for item in audit.audited)


def _line(item: AuditedClaim, audit: Audit) -> dict[str, Any]:
    """Return an assessment as plain data; where there is none, its fields are null and a caution says why."""
    if item.assessment is not None:
        return item.assessment.to_dict()
    claim = item.claim
    asked = {
        "id": claim.id,
        "term": claim.term,
        "region_kind": None,
        "peaks": [list(peak) for peak in claim.peaks],
        "space": claim.space,
        "radius_mm": claim.radius_mm,
        "prior": None if isinstance(claim.prior, str) else claim.prior,
        "absent": claim.absent,
        "context": list(claim.context),
        "quote": claim.quote,
        "location": claim.location,
    }
    known = {
        "schema": SCHEMA,
        "version": VERSION,
        "claim": asked,
        "literature": audit.source.to_dict(),
        "rivals": [],
        "kin": [],
        "cautions": [item.problem.to_dict()] if item.problem else [],
    }
    return {**dict.fromkeys(audit.assessments[0].to_dict()), **known}


def audit_rows(audit: Audit) -> list[dict[str, Any]]:
    """Return one flat row a claim, in the order of the table, with raw numbers.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.

    Returns
    -------
    list of dict
        Keys as in `COLUMNS`; claims that wait for a place and refused rows come last, with their lines.
    """
    rows = [_row(item) for item in audit.audited]
    rows += [
        {
            "claim": item.claim,
            "status": "without coordinates",
            "line": item.line,
            "term": item.term,
            "quote": item.quote,
            "location": item.location,
        }
        for item in audit.unplaced
    ]
    rows += [
        {"claim": item.claim, "status": "refused", "line": item.line, "problem": item.reason} for item in audit.refused
    ]
    return [{**dict.fromkeys(COLUMNS), **row} for row in rows]


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
        "status": "not assessed" if item.assessment is None else "assessed",
        "term": claim.term,
        "place": claim.label or claim.region or claim.mask,
        "peaks": "; ".join("(" + ", ".join(f"{value:g}" for value in peak) + ")" for peak in claim.peaks),
        "space": claim.space if claim.peaks else None,
        "radius_mm": claim.radius_mm if claim.peaks else None,
        "context": ";".join(claim.context),
        "rivals": ";".join(claim.rivals),
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
