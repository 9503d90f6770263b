"""Label and text pairs that the terminal, the page and the Markdown share: breadth, other counts, robustness."""

from __future__ import annotations

from typing import TYPE_CHECKING

from revinf.reports.numbers import coordinates, count, interval, place_share, probability, ratio
from revinf.reports.wording import active_words

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.robustness import RobustnessRow
    from revinf.evidence.selectivity import Rival

__all__ = [
    "breadth_facts",
    "contrast_facts",
    "range_words",
    "rank_words",
    "required_facts",
    "settings_words",
    "shown_rivals",
]

_RIVALS = 6


def required_facts(assessment: Assessment) -> list[tuple[str, str]]:
    """Return the priors that one must have held."""
    return [
        (
            f"for {item.target:.2f}",
            f"the prior must have been {probability(item.estimate)}, or {probability(item.at_low)} at the "
            "lower end of the ratio",
        )
        for item in assessment.required_prior
    ]


def shown_rivals(assessment: Assessment) -> list[Rival]:
    """Return the rivals of a report: the six that lead, and those that were asked for."""
    chosen = assessment.selectivity
    return [rival for at, rival in enumerate(chosen.rivals) if at < _RIVALS or rival.term in chosen.named]


def rank_words(assessment: Assessment) -> str:
    """Say the rank of the claimed term."""
    chosen = assessment.selectivity
    if chosen.rank is None:
        return "the claimed term is no process and is not ranked"
    kin = "kin left out" if assessment.literature.kind == "literature" else "kin cannot be told from a table"
    words = f"{chosen.rank} of {chosen.n_process_terms} processes, {kin}"
    if not chosen.rank_informative:
        words += "; the processes cannot be told apart here, so the rank says nothing"
    return words


def breadth_facts(assessment: Assessment) -> list[tuple[str, str]]:
    """Return how busy and how many-sided the place is."""
    breadth, total = assessment.breadth, assessment.counts
    absent = assessment.claim.absent
    words = f"{count(total.active_total)} of {count(total.total)} studies are {active_words(absent)}"
    if breadth.activation_percentile is not None:
        words += f", more than at {place_share(breadth.activation_percentile)} of the places compared"
    if absent:  # how many processes share a silence says nothing about the place
        return [("silent", words)]
    rows = [("busy", words)]
    mixed = []
    if breadth.effective_processes is not None:
        mixed.append(f"{interval(breadth.effective_processes, ratio)} of {breadth.n_processes} processes")
    if breadth.effective_domains is not None:
        mixed.append(f"{interval(breadth.effective_domains, ratio)} of {breadth.n_domains} domains")
    if mixed:
        rows.append(("mixed", "as if used equally by " + " and by ".join(mixed)))
    elif total.active_total:
        rows.append(("mixed", "too few hits to tell how many processes share the place"))
    if breadth.n_processes_above_own_rate is not None:
        rows.append(
            (
                "above",
                f"{breadth.n_processes_above_own_rate} of {breadth.n_processes} processes are credibly above "
                "their own brain-wide rate",
            )
        )
    return rows


def contrast_facts(assessment: Assessment) -> list[tuple[str, str]]:
    """Return the claim counted in other ways."""
    rows = []
    volume, context = assessment.reporting_volume, assessment.context
    if volume is not None and volume.adjusted_ratio is not None:
        rows.append(
            ("volume", f"{interval(volume.adjusted_ratio, ratio)} among studies alike in their number of peaks")
        )
    if context is not None:
        counts = context.counts
        value = "no ratio" if context.ratio is None else interval(context.ratio, ratio)
        rows.append(
            (
                "context",
                f"{value} within {', '.join(assessment.claim.context)}: {count(counts.term_active)} of "
                f"{count(counts.term_total)} against {count(counts.other_active)} of {count(counts.other_total)}",
            )
        )
    if assessment.balanced_ratio is not None:
        rows.append(("balanced", f"{interval(assessment.balanced_ratio, ratio)} where every other process counts once"))
    mirror, pattern = assessment.mirror, assessment.pattern
    if mirror is not None and mirror.ratio is not None:
        rows.append(("mirror", f"{interval(mirror.ratio, ratio)} at the same place of the other hemisphere"))
    if pattern is not None:
        rows += [
            (
                "alone",
                f"{'no ratio' if place.ratio is None else interval(place.ratio, ratio)} at {coordinates(place.peak)}",
            )
            for place in pattern.regions
        ]
        overstated = "" if pattern.overstatement is None else f", {pattern.overstatement:.1f} times the joint one"
        rows.append(("multiplied", f"{ratio(pattern.product)} if the places were independent{overstated}"))
        if pattern.discounted is not None and pattern.discount is not None:
            words = (
                f"{ratio(pattern.discounted)}, the product to the power {pattern.discount:.2f} of the calibration "
                "(fitted on all peaks of a study)"
            )
            rows.append(("discounted", words))
    return rows


def settings_words(rows: list[RobustnessRow]) -> str:
    """Say what was tried."""
    if len(rows) == 1:
        return rows[0].setting
    if rows[0].choice == "peak":
        return f"{len(rows)} shifts of 2 and 4 mm"
    if rows[0].choice == "prior of the ratio":
        return f"{len(rows)} priors"
    return f"{rows[0].setting} to {rows[-1].setting}"


def range_words(rows: list[RobustnessRow]) -> str:
    """Return the lowest and highest estimate."""
    if rows[0].choice == "prior":
        posteriors = [row.posterior.estimate for row in rows if row.posterior is not None]
        return f"posterior {probability(min(posteriors))} to {probability(max(posteriors))}" if posteriors else ""
    values = [row.ratio.estimate for row in rows if row.ratio is not None]
    if not values:
        return ""
    low, high = ratio(min(values)), ratio(max(values))
    return low if low == high else f"{low} to {high}"
