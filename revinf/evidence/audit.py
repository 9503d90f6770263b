"""`audit`: every claim of a table assessed, ordered by how much attention each needs."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from revinf.base_rates.table import BaseRateTable
from revinf.evidence.assess import assess
from revinf.evidence.assessment import Assessment
from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.term import term_unlabelled
from revinf.evidence.choices import Choices
from revinf.evidence.claim import Claim
from revinf.evidence.claims_table import ClaimsTable, Refusal, Unplaced
from revinf.evidence.own_paper import OwnPaper, own_papers
from revinf.evidence.parts import LiteratureFacts
from revinf.evidence.rewording import Advice, advise
from revinf.evidence.settle import RIVALS, settle
from revinf.evidence.settlement import Settlement
from revinf.evidence.sources import LiteratureSource, Source, as_source
from revinf.exceptions import InvalidClaimError, RevinfError, UnknownTermError
from revinf.in_processes import each
from revinf.literature.literature import Literature

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["GATES", "READERS", "Audit", "AuditedClaim", "audit", "audit_of", "checked_readers", "fails_gate"]

_MANY = 40
"""From so many claims on, other processes help."""

GATES = ("bare", "positive", "strong", "very strong")
READERS = ("author", "reviewer", "presenter")


@dataclass(frozen=True, slots=True, kw_only=True)
class AuditedClaim:
    """One claim and its answer, or why there is none.

    Parameters
    ----------
    claim : Claim
        As the table has it.
    assessment : Assessment or None
        The answer.
    advice : Advice or None
        What its author should do.
    problem : Caution or None
        Why it could not be assessed.
    settlement : Settlement or None
        Where else to look; None for a table, and where too few studies could tell.
    """

    claim: Claim
    assessment: Assessment | None
    advice: Advice | None
    problem: Caution | None
    settlement: Settlement | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Audit:
    """All claims of a table; `audited` is in the order of the table."""

    source: LiteratureFacts
    audited: tuple[AuditedClaim, ...]
    unplaced: tuple[Unplaced, ...] = ()
    refused: tuple[Refusal, ...] = ()
    own_papers: tuple[OwnPaper, ...] = ()

    @property
    def assessments(self) -> list[Assessment]:
        """The answers, in the order of the table."""
        return [item.assessment for item in self.audited if item.assessment is not None]

    def to_frame(self) -> pd.DataFrame:
        """Return one row an assessed claim, nested names joined by a dot; see `Assessment.to_frame`."""
        import pandas as pd

        return pd.concat([assessment.to_frame() for assessment in self.assessments], ignore_index=True)

    def by_attention(self) -> list[AuditedClaim]:
        """Return the claims, those first that need most attention; equal ones in the order of the table."""
        return sorted(self.audited, key=_attention)


_CHANGES = ("drop", "soften", "add the rivals", "keep")


def _attention(item: AuditedClaim) -> tuple[int, int, int]:
    """Return a key that puts the claims first that need most attention."""
    if item.assessment is None or item.advice is None:
        return (-1, 0, 0)
    severities = [caution.severity for caution in item.assessment.cautions]
    return (
        _CHANGES.index(item.advice.change),
        -severities.count("stop"),
        -severities.count("weigh"),
    )


def audit(
    claims: Sequence[Claim] | ClaimsTable,
    source: Literature | BaseRateTable | Source,
    choices: Choices | None = None,
    *,
    progress: Callable[[int, int], None] | None = None,
) -> Audit:
    """Assess every claim.

    Parameters
    ----------
    claims : sequence of Claim, or ClaimsTable
        What to assess.
    source : Literature, BaseRateTable or Source
        Where the counts come from.
    choices : Choices, optional
        As for `revinf.assess`.
    progress : callable, optional
        Told how many claims are done, of how many.

    Returns
    -------
    Audit
        A claim that cannot be assessed is kept, with the reason.

    Raises
    ------
    InvalidClaimError
        If no claim could be assessed.
    """
    asked = as_source(source)
    table = claims if isinstance(claims, ClaimsTable) else None
    listed = list(claims.claims) if isinstance(claims, ClaimsTable) else list(claims)
    calls = [(claim, asked, choices) for claim in listed]
    # Other processes take a second or two to start.
    results = each(_audited, calls) if len(listed) >= _MANY else (_audited(*call) for call in calls)
    audited = []
    for done, item in enumerate(results, start=1):
        audited.append(item)
        if progress is not None:
            progress(done, len(listed))
    if not any(item.assessment for item in audited):
        reasons = [f"{item.claim.id}: {item.problem.message}" for item in audited if item.problem]
        if table is not None:
            reasons += [f"line {item.line}: {item.reason}" for item in table.refused]
        more = f" (and {len(reasons) - 3} more)" if len(reasons) > 3 else ""
        raise InvalidClaimError(f"no claim could be assessed: {'; '.join(reasons[:3]) or 'none names a place'}{more}")
    return Audit(
        source=asked.facts,
        audited=tuple(audited),
        unplaced=table.unplaced if table is not None else (),
        refused=table.refused if table is not None else (),
        own_papers=own_papers(listed, asked),
    )


def _audited(claim: Claim, source: Source, choices: Choices | None) -> AuditedClaim:
    """Assess one claim, or say why it cannot be."""
    try:
        assessment = assess(claim, source, choices)
    except UnknownTermError as error:
        problem = term_unlabelled(error.term or claim.term, 0, error.near)
        return AuditedClaim(claim=claim, assessment=None, advice=None, problem=problem)
    except RevinfError as error:
        problem = Caution(code="not-assessed", severity="stop", message=str(error))
        return AuditedClaim(claim=claim, assessment=None, advice=None, problem=problem)
    return AuditedClaim(
        claim=claim,
        assessment=assessment,
        advice=advise(assessment),
        problem=None,
        settlement=_settlement(claim, source, choices, assessment),
    )


def _settlement(claim: Claim, source: Source, choices: Choices | None, assessment: Assessment) -> Settlement | None:
    """Return where else to look, if the source can tell."""
    if not isinstance(source, LiteratureSource) or not claim.peaks or claim.absent:
        return None
    try:
        rivals = [rival.term for rival in assessment.selectivity.rivals[:RIVALS]]
        return settle(claim, source, rivals, choices, places=2) if rivals else None
    except RevinfError:
        return None


def fails_gate(result: Audit, gate: str) -> list[str]:
    """Return the ids of the claims that do not reach a grade.

    Parameters
    ----------
    result : Audit
        From `audit`.
    gate : str
        "bare", "positive", "strong" or "very strong" ("very-strong" is the same).

    Returns
    -------
    list of str
        Claims whose direction is not for, whose headline grade is lower, or that could not be assessed;
        those without a place, and refused rows, do not pass either.

    Raises
    ------
    InvalidClaimError
        If the gate is none of the four.
    """
    wanted = gate.replace("-", " ").strip().lower()
    if wanted not in GATES:
        raise InvalidClaimError(f"a gate is one of {', '.join(GATES)}, but got {gate!r}")
    failing = []
    for item in result.audited:
        ratio = item.assessment.likelihood_ratio if item.assessment else None
        grade = ratio.headline_grade if ratio is not None and ratio.direction == "for" else None
        if grade is None or GATES.index(grade) < GATES.index(wanted):
            failing.append(item.claim.id)
    waiting = [item.claim for item in result.unplaced] + [item.claim for item in result.refused if item.claim]
    nameless = [f"line {item.line}" for item in result.refused if not item.claim]
    return list(dict.fromkeys([*failing, *waiting, *nameless]))


def checked_readers(readers: Sequence[str], gate: str | None = None) -> tuple[str, ...]:
    """Return the readers as somebody typed them, checked before any work is done; the gate too.

    Parameters
    ----------
    readers : sequence of str
        Of "author", "reviewer", "presenter".
    gate : str, optional
        As for `fails_gate`.

    Returns
    -------
    tuple of str
        Each once.

    Raises
    ------
    InvalidClaimError
        If a word is none of those allowed.

    Examples
    --------
    >>> checked_readers(["Author", "author"])
    ('author',)
    """
    words = tuple(dict.fromkeys(reader.strip().lower() for reader in readers))
    for word in words:
        if word not in READERS:
            raise InvalidClaimError(f"a report is for one of {', '.join(READERS)}, but got {word!r}")
    if gate is not None and gate.replace("-", " ").strip().lower() not in GATES:
        raise InvalidClaimError(f"a gate is one of {', '.join(GATES)}, but got {gate!r}")
    return words


def audit_of(claim: Claim, assessment: Assessment) -> Audit:
    """Return the audit of one claim that has been assessed already.

    Parameters
    ----------
    claim : Claim
        As it was asked.
    assessment : Assessment
        Its answer.

    Returns
    -------
    Audit
        Of this claim alone.
    """
    item = AuditedClaim(claim=claim, assessment=assessment, advice=advise(assessment), problem=None)
    return Audit(source=assessment.literature, audited=(item,))
