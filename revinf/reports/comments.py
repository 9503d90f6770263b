"""What each reader takes away: the author a rewording, the reviewer a comment with what would settle it."""

from __future__ import annotations

from typing import TYPE_CHECKING

from revinf.reports.numbers import coordinates, count, interval, probability, ratio

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.audit import Audit, AuditedClaim

__all__ = ["author_note", "own_paper_words", "place_words", "reviewer_comment", "summary_sentence"]


def place_words(item: AuditedClaim) -> str:
    """Return where a claim looks, in one phrase."""
    claim = item.claim
    if claim.peaks:
        points = " and ".join(coordinates(peak) for peak in claim.peaks)
        label = f"{claim.label}, " if claim.label else ""
        return f"{label}{points} {claim.space}, within {claim.radius_mm:g} mm"
    return str(claim.region) if claim.region is not None else f"mask {claim.mask}"


def own_paper_words(audit: Audit) -> list[str]:
    """Say which counted studies report the coordinates of an audit, and what to do about it."""
    return [
        f"{own.n_shared} of the {own.n_asked} coordinates are those of the counted study {own.study!r}: is it the "
        f"paper itself? Then ask again with --without {own.study}; a study must not be evidence for its own claims."
        for own in audit.own_papers
    ]


def summary_sentence(assessment: Assessment) -> str:
    """Return the counts, the ratio and the posterior in one sentence."""
    counts, value, posterior = assessment.counts, assessment.likelihood_ratio.value, assessment.posterior
    seen = "without activity" if assessment.claim.absent else "active"
    return (
        f"{count(counts.term_active)} of {count(counts.term_total)} studies of {assessment.claim.term} and "
        f"{count(counts.other_active)} of {count(counts.other_total)} other studies are {seen} here: likelihood "
        f"ratio {interval(value, ratio)}, posterior {interval(posterior.value)} at a prior of "
        f"{probability(posterior.prior)}."
    )


_WORTH_BITS = 0.02
"""Lower end of the expected gain below which a further look is not worth asking for."""


def author_note(item: AuditedClaim) -> str:
    """Return what the author should change, and why."""
    if item.assessment is None or item.advice is None:
        return f"Not assessed. {item.problem.message if item.problem else ''}".strip()
    reasons = ", ".join(item.advice.reasons)
    return f"{item.advice.change.capitalize()} ({reasons}). Suggested wording: {item.advice.sentence}"


def reviewer_comment(item: AuditedClaim) -> str:
    """Return a courteous, specific comment with the counts and what would settle the matter."""
    where = f" ({item.claim.location})" if item.claim.location else ""
    opening = f"The manuscript{where} takes activity at {place_words(item)} as a sign of {item.claim.term}."
    if item.claim.absent:
        opening = opening.replace("takes activity", "takes the absence of activity")
    assessment = item.assessment
    if assessment is None:
        # What the tool says of its input is for its user, never for the authors.
        reason = item.problem.message if item.problem else "no reason is known"
        return f"NOT FOR SENDING, not assessed: {item.claim.id}, {item.claim.term}. {reason.rstrip('.')}."
    facts = assessment.literature
    source = f"In {facts.name} ({count(facts.n_studies)} {facts.study_is}), {summary_sentence(assessment)}"
    invented = " (These base rates are INVENTED for demonstration.)" if facts.invented else ""
    return f"{opening} {source}{invented} {_verdict(assessment)} {_request(assessment)}{_look(item)}"


def _look(item: AuditedClaim) -> str:
    """Say where else in the same map the authors could look."""
    found = item.settlement
    if found is None or not found.places or found.places[0].gain.low < _WORTH_BITS:
        return ""
    place = found.places[0]
    terms = [candidate.term for candidate in found.candidates]
    active = terms[max(range(len(terms)), key=lambda at: place.if_active[at])]
    silent = terms[max(range(len(terms)), key=lambda at: place.if_silent[at])]
    if item.claim.term not in (active, silent) or active == silent:
        return ""  # it would decide between others
    return (
        f" It would also help to know whether {coordinates(place.peak)} is active in the same map: in this literature "
        f"activity there would favour {active}, its absence {silent}."
    )


def _verdict(assessment: Assessment) -> str:
    """Say what the numbers mean for the claim."""
    answer, term = assessment.likelihood_ratio, assessment.claim.term
    if any(caution.code == "not-a-process" for caution in assessment.cautions):
        return f"But {term} names what was shown, done or measured, not a mental process that activity could reveal."
    if answer.direction == "against":
        return f"On these base rates the finding speaks against {term} rather than for it."
    if answer.direction == "undecided":
        return f"On these base rates the finding does not tell {term} from other processes."
    chosen = assessment.selectivity
    best, ahead = chosen.best_rival, chosen.probability_ahead
    if best is not None and ahead is None and chosen.rank_informative and (chosen.rank or 1) > 1:
        return f"This speaks for {term}, but {best} is active here more often."
    if best is not None and ahead is not None and ahead < 0.8:
        return f"This speaks for {term}, but {best} would explain the finding about as well or better."
    if answer.headline_grade == "bare":
        return f"This speaks for {term}, but weakly."
    return f"This speaks for {term}, and I have no objection to a cautiously worded claim."


def _request(assessment: Assessment) -> str:
    """Say what would settle the matter, or ease the reader's mind."""
    needed = assessment.required_prior[0]
    codes = {caution.code for caution in assessment.cautions}
    chosen = assessment.selectivity
    asks = []
    if "not-a-process" in codes:
        asks.append("name the process that they mean")
    elif assessment.likelihood_ratio.direction == "for":
        asks.append(
            f"say why a prior of {probability(needed.estimate)} or more, needed for a posterior of "
            f"{needed.target:g}, was reasonable for this task"
        )
    else:
        asks.append(
            "rest the claim on behaviour or on a contrast that isolates the process, or word it as a hypothesis"
        )
    above = chosen.probability_ahead is None and chosen.rank_informative and (chosen.rank or 1) > 1
    if (codes & {"rival-ahead", "rivals-tied"} or above) and assessment.counts.active_total and chosen.best_rival:
        asks.append(f"discuss {assessment.selectivity.best_rival} as another reading")
    if "off-brain" in codes:
        asks.append("check the coordinates and the space they are given in")
    if "space-doubt" in codes:
        asks.append("state the space of the coordinates")
    said = ", ".join(asks[:-1]) + (", and " if len(asks) > 1 else "") + asks[-1]
    return f"Could the authors {said}?"
