"""An audit as the plain words and numbers that the page's template puts in place."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.knowledge import VERSION
from revinf.reports.cells import one_line
from revinf.reports.comments import own_paper_words, place_words
from revinf.reports.drawings import brain_marks, brain_views, curve, ratio_marks
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
from revinf.reports.numbers import count, interval, percent, probability, ratio
from revinf.reports.settle_screen import settling_lines
from revinf.reports.wording import LIMITS, NO_INDIVIDUALS, active_words, agreement, grade_line

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.audit import Audit, AuditedClaim
    from revinf.evidence.parts import Posterior

__all__ = ["MARKS", "report_view"]

MARKS = {"stop": "■", "weigh": "▲", "note": "●"}
"""The shape alone tells the severities apart."""

_ORDER = ("not assessed", "drop", "soften", "add the rivals", "keep")


def report_view(audit: Audit, *, command: str = "", title: str = "") -> dict[str, Any]:
    """Return everything the template needs.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.
    command : str, optional
        What reproduces it.
    title : str, optional
        Heading of the page.

    Returns
    -------
    dict
        Strings, numbers, lists and dicts; nothing in it is trusted as HTML.
    """
    claims = [_claim(number, item) for number, item in enumerate(audit.by_attention(), start=1)]
    advice = [claim["change"] for claim in claims]
    terms = len({claim["term"] for claim in claims})
    priors = {claim["posterior"]["prior"] for claim in claims if claim["assessed"]}
    return {
        "title": one_line(title) or "Claims against base rates",
        "asked": f"{agreement(len(claims), 'claim')} about {agreement(terms, 'process', 'processes')}",
        "summary": [(word, advice.count(word)) for word in _ORDER if word in advice],
        "invented": audit.source.invented,
        "own_papers": [one_line(words) for words in own_paper_words(audit)],
        "source": [(label, one_line(text)) for label, text in source_facts(audit)],
        "source_name": one_line(audit.source.name),
        "claims": claims,
        "common_prior": priors.pop() if len(priors) == 1 else None,
        "unplaced": [
            {
                "line": item.line,
                "claim": one_line(item.claim),
                "term": one_line(item.term),
                "quote": one_line(item.quote),
            }
            for item in audit.unplaced
        ],
        "refused": [
            {"line": item.line, "claim": one_line(item.claim), "reason": one_line(item.reason)}
            for item in audit.refused
        ],
        "views": brain_views(),
        "methods": methods_paragraph(audit),
        "methods_sources": METHODS_SOURCES,
        "limits": LIMITS,
        "no_individuals": NO_INDIVIDUALS,
        "command": one_line(command),
        "version": VERSION,
    }


def _claim(number: int, item: AuditedClaim) -> dict[str, Any]:
    """Return one claim."""
    claim = item.claim
    view: dict[str, Any] = {
        "anchor": f"claim-{number}",
        "id": one_line(claim.id),
        "term": one_line(claim.term),
        "quote": one_line(claim.quote),
        "location": one_line(claim.location),
        "where": one_line(place_words(item)),
        "absent": claim.absent,
        "brain": brain_marks(item),
        "assessed": False,
        "change": "not assessed",
    }
    if item.assessment is None or item.advice is None:
        view["problem"] = one_line(item.problem.message) if item.problem else "no reason is known"
        return view
    assessment, answer = item.assessment, item.assessment.likelihood_ratio
    severities = [caution.severity for caution in assessment.cautions]
    return view | {
        "assessed": True,
        "change": item.advice.change,
        "sentence": one_line(item.advice.sentence),
        "reasons": ", ".join(item.advice.reasons),
        "place": one_line(assessment.place.words),
        "level": percent(assessment.level),
        "counts": _counts(assessment),
        "active_words": active_words(claim.absent),
        "ratio": interval(answer.value, ratio),
        "ratio_marks": ratio_marks(answer.value),
        "direction": answer.direction,
        "grade": grade_line(answer.direction, answer.headline_grade, answer.estimate_grade),
        "wording": one_line(assessment.wording),
        "curve": curve(answer.value),
        "posterior": _posterior(assessment.posterior, assessment),
        "prevalence": {
            "prior": probability(assessment.posterior_at_prevalence.prior),
            "text": interval(assessment.posterior_at_prevalence.value),
        },
        "required": required_facts(assessment),
        "rivals": _rivals(assessment),
        "rank": one_line(rank_words(assessment)),
        "kin": ", ".join(one_line(rival.term) for rival in assessment.selectivity.kin),
        "breadth": [(label, one_line(text)) for label, text in breadth_facts(assessment)],
        "contrasts": [(label, one_line(text)) for label, text in contrast_facts(assessment)],
        "robustness": _robustness(assessment),
        "cautions": [
            {
                "severity": caution.severity,
                "mark": MARKS[caution.severity],
                "code": caution.code,
                "message": one_line(caution.message),
            }
            for caution in assessment.cautions
        ],
        "settling": [] if item.settlement is None else settling_lines(item.settlement),
        "n_stop": severities.count("stop"),
        "n_weigh": severities.count("weigh"),
    }


def _counts(assessment: Assessment) -> str:
    """Return the four counts as the beginning of a sentence."""
    counts = assessment.counts
    seen = "without activity" if assessment.claim.absent else "active"
    return (
        f"{count(counts.term_active)} of {count(counts.term_total)} studies of {one_line(assessment.claim.term)} and "
        f"{count(counts.other_active)} of {count(counts.other_total)} other studies are {seen} here"
    )


def _posterior(posterior: Posterior, assessment: Assessment) -> dict[str, Any]:
    """Return a posterior, and the ratio's quantiles with every digit so that the page can move the prior."""
    value = assessment.likelihood_ratio.value
    return {
        "text": interval(posterior.value),
        "prior": repr(float(posterior.prior)),
        "prior_text": probability(posterior.prior),
        "middle": repr(float(value.estimate)),
        "low": repr(float(value.low)),
        "high": repr(float(value.high)),
        "at": {
            "prior": round(100 * posterior.prior, 3),
            "middle": round(100 * posterior.value.estimate, 3),
            "low": round(100 * posterior.value.low, 3),
            "high": round(100 * posterior.value.high, 3),
        },
    }


def _rivals(assessment: Assessment) -> list[dict[str, Any]]:
    """Return the processes that lead here, with the claimed one among them at its rank."""
    chosen, counts = assessment.selectivity, assessment.counts
    rows: list[dict[str, Any]] = [
        {
            "term": one_line(rival.term) if rival.kind == "process" else f"{one_line(rival.term)} (kind unknown)",
            "own": False,
            "active": f"{count(rival.counts.term_active)} of {count(rival.counts.term_total)}",
            "ratio": "" if rival.likelihood_ratio is None else interval(rival.likelihood_ratio, ratio),
            "marks": None if rival.likelihood_ratio is None else ratio_marks(rival.likelihood_ratio),
            "ahead": "" if rival.probability_ahead is None else probability(rival.probability_ahead),
        }
        for rival in shown_rivals(assessment)
    ]
    own = {
        "term": one_line(assessment.claim.term),
        "own": True,
        "active": f"{count(counts.term_active)} of {count(counts.term_total)}",
        "ratio": interval(assessment.likelihood_ratio.value, ratio),
        "marks": ratio_marks(assessment.likelihood_ratio.value),
        "ahead": "",
    }
    ours = chosen.shrunk_rate
    place = sum(ours is not None and rival.shrunk_rate > ours for rival in shown_rivals(assessment))
    return [*rows[:place], own, *rows[place:]]


def _robustness(assessment: Assessment) -> list[dict[str, Any]]:
    """Return one row a choice, with every setting's interval."""
    robust = assessment.robustness
    rows = []
    for choice, holds in robust.holds().items():
        members = robust.of(choice)
        kept = sum(row.holds for row in members)
        # At another prior the ratio is the same; what moves is the posterior, and the page has a slider for it.
        drawn = [] if choice == "prior" else [(row.ratio, row.holds) for row in members if row.ratio is not None]
        rows.append(
            {
                "choice": choice,
                "answer": "holds" if holds else f"holds at {kept} of {len(members)}",
                "holds": holds,
                "settings": settings_words(members),
                "changed": ", ".join(row.setting for row in members if not row.holds),
                "range": range_words(members),
                "lines": [ratio_marks(value) | {"holds": same} for value, same in drawn],
            }
        )
    left = robust.left_out
    if left is not None and left.ratio is not None:
        same = not robust.direction_changes_without_one
        rows.append(
            {
                "choice": "one left out",
                "answer": "direction holds" if same else "direction changes",
                "holds": same,
                "settings": f"most without {one_line(left.name)}",
                "changed": "",
                "range": interval(left.ratio, ratio),
                "lines": [ratio_marks(left.ratio) | {"holds": same}],
            }
        )
    return rows
