"""Is there enough evidence at all, or does the answer only repeat what was put in?"""

from __future__ import annotations

from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.stats.estimates import Counts, Estimate

__all__ = ["prior_driven", "thin_evidence"]


def thin_evidence(counts: Counts, ratio: Estimate, limits: Thresholds, *, absent: bool = False) -> Caution | None:
    """Warn where the counts are so few that the likelihood ratio could be almost anything."""
    width = ratio.high / ratio.low
    evidence = {"high_over_low": width, "hits": counts.active_total}
    if not counts.active_total:
        return Caution(
            code="thin-evidence",
            severity="stop",
            message=(
                f"{'Every' if absent else 'No'} counted study has a peak here: the answer is the prior of the "
                "ratio, not evidence."
            ),
            evidence=evidence,
        )
    if width <= limits.thin_weigh:
        return None
    return Caution(
        code="thin-evidence",
        severity="stop" if width > limits.thin_stop else "weigh",
        message=(
            f"The counts are few ({counts.term_active} of {counts.term_total} studies with the term): the "
            f"upper end of the likelihood ratio is {width:.0f} times its lower end."
        ),
        evidence=evidence,
    )


def prior_driven(ratio: Estimate, prior: float, limits: Thresholds) -> Caution | None:
    """Warn where an undecided ratio leaves the posterior close to a prior that was far from 1/2."""
    if not ratio.covers(1.0) or abs(prior - 0.5) < limits.prior_distance - 1e-12:
        return None
    return Caution(
        code="prior-driven",
        severity="weigh",
        message=(
            f"The likelihood ratio's interval includes 1, so the posterior mostly repeats the prior of {prior:.2g}."
        ),
        evidence={"prior": prior, "ratio_low": ratio.low, "ratio_high": ratio.high},
    )
