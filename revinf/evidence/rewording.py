"""What an author may write instead: a grade of change and a sentence that the evidence carries.

Holds no numbers. No sentence is stronger than direction and headline grade allow, and none speaks of a
person: it speaks of studies.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from revinf.evidence.assessment import Assessment

__all__ = ["Advice", "Change", "advise"]

Change = Literal["keep", "add the rivals", "soften", "drop"]
"""From the least to the most that the author has to change."""

_DEMANDED = ("positive", "strong", "very strong")
_PLACE_STOPS = ("off-brain", "term-unlabelled")
_NOT_OF_THE_CLAIM = ("invented-data",)
"""Stops that concern the whole literature; every view says them, no sentence can mend them."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Advice:
    """How to change a claim.

    Parameters
    ----------
    change : {"keep", "add the rivals", "soften", "drop"}
        The grade.
    sentence : str
        A wording that the evidence carries.
    reasons : tuple of str
        Codes of the cautions, or words, that led there.
    """

    change: Change
    sentence: str
    reasons: tuple[str, ...]


def advise(assessment: Assessment) -> Advice:
    """Return what the author should do with a claim.

    Parameters
    ----------
    assessment : Assessment
        From `revinf.assess`.

    Returns
    -------
    Advice
        Grade, sentence and reasons.
    """
    ratio, term = assessment.likelihood_ratio, assessment.claim.term
    codes = {caution.code: caution.severity for caution in assessment.cautions if caution.code not in _NOT_OF_THE_CLAIM}
    where = "the absence of activity here" if assessment.claim.absent else "activity here"
    stopped = [code for code in _PLACE_STOPS if codes.get(code) == "stop"]
    if stopped or "not-a-process" in codes:
        reasons = (*stopped, *(["not-a-process"] if "not-a-process" in codes else []))
        return Advice(
            change="drop",
            sentence=(f"We report {where} without interpreting it as {term}; the base rates cannot support that step."),
            reasons=reasons,
        )
    if ratio.direction == "against":
        return Advice(
            change="drop",
            sentence=(
                f"{where.capitalize()} is reported less often in studies of {term} than in others, so it is no "
                f"evidence for {term}."
            ),
            reasons=("direction against",),
        )
    if ratio.direction == "undecided":
        if not assessment.counts.term_active:
            return Advice(
                change="soften",
                sentence=(
                    f"No study of {term} that was counted reports {where}; whether {term} was engaged remains open "
                    "and needs evidence of another kind."
                ),
                reasons=("direction undecided", "no study of the term"),
            )
        return Advice(
            change="soften",
            sentence=(
                f"{where.capitalize()} has been reported in studies of {term}, but not demonstrably more often "
                f"than in others; whether {term} was engaged remains open and needs evidence of another kind."
            ),
            reasons=("direction undecided", *(code for code in ("thin-evidence",) if code in codes)),
        )
    others = _others(assessment)
    if others:
        weak = ratio.headline_grade not in _DEMANDED
        return Advice(
            change="add the rivals",
            sentence=(
                f"{where.capitalize()} is reported {'somewhat ' if weak else ''}more often in studies of {term} than "
                f"in others{', which is weak evidence' if weak else ''}, and not demonstrably less often in studies "
                f"of {others}; the present data do not tell them apart."
            ),
            reasons=tuple(code for code in ("rival-ahead", "rivals-tied") if code in codes) or ("rank",),
        )
    if ratio.headline_grade not in _DEMANDED or "stop" in codes.values():
        return Advice(
            change="soften",
            sentence=(
                f"{where.capitalize()} is reported somewhat more often in studies of {term} than in others, which "
                f"is weak evidence that {term} was engaged."
            ),
            reasons=(f"headline grade {ratio.headline_grade}",),
        )
    return Advice(
        change="keep",
        sentence=(
            f"{where.capitalize()} is reported more often in studies of {term} than in others, consistent with an "
            f"engagement of {term}."
        ),
        reasons=(f"headline grade {ratio.headline_grade}",),
    )


def _others(assessment: Assessment) -> str:
    """Return the rivals that are ahead of the claim or tied with it, as words."""
    codes = {caution.code for caution in assessment.cautions}
    chosen = assessment.selectivity
    if not codes & {"rival-ahead", "rivals-tied"}:
        # A table cannot set two processes against each other; that another one ranks higher is still said.
        untold = chosen.probability_ahead is None and chosen.rank_informative and (chosen.rank or 1) > 1
        return str(chosen.best_rival) if untold and chosen.best_rival is not None else ""
    names = [
        rival.term
        for rival in assessment.selectivity.rivals
        if rival.probability_ahead is not None and rival.probability_ahead < 0.8
    ][:3]
    return " and ".join(names) if names else str(assessment.selectivity.best_rival)
