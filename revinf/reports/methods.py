"""How the numbers of a report came about, and where they come from: for the page and the Markdown."""

from __future__ import annotations

from typing import TYPE_CHECKING

from revinf.reports.numbers import count, percent
from revinf.reports.wording import agreement

if TYPE_CHECKING:
    from revinf.evidence.audit import Audit

__all__ = ["METHODS_SOURCES", "methods_paragraph", "source_facts"]

METHODS_SOURCES = (
    "Bayes factor of an activation: Poldrack 2006, Trends Cogn Sci 10:59-63.",
    "Prior of the likelihood ratio: Greenland 2006, Int J Epidemiol 35:765-775.",
    "Grades: Kass & Raftery 1995, J Am Stat Assoc 90:773-795.",
    "False-discovery q: Benjamini & Hochberg 1995, J R Stat Soc B 57:289-300.",
    "Counts within a context: Hutzler 2014, NeuroImage 84:1061-1069.",
    "Breadth of a place: Anderson, Kinnison & Pessoa 2013, NeuroImage 73:50-58; Jost 2006, Oikos 113:363-375.",
    "Reporting volume: Greenland & Robins 1985, Biometrics 41:55-68.",
    "Talairach to MNI152: Lancaster et al. 2007, Hum Brain Mapp 28:1194-1205.",
)
"""The published methods that a report may rest on."""


def methods_paragraph(audit: Audit) -> str:
    """Say in one paragraph how the numbers were computed, fit for a methods section.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.

    Returns
    -------
    str
        Plain sentences.
    """
    first = audit.assessments[0]
    held = percent(first.level)
    if first.ratio_prior == "shared":
        prior = (
            "a Beta(1/2, 1/2) prior on the pooled rate and, independently, a normal prior on the logarithm of the "
            f"ratio that puts 95% of it between 1/{first.ratio_limit:g} and {first.ratio_limit:g}"
        )
    else:
        prior = "an independent Beta(1/2, 1/2) prior on each rate"
    return (
        "For each claim the studies of the literature were divided by whether they carry the claimed term and by "
        "whether they report at least one peak inside the region. The likelihood ratio is P(active given the term) "
        f"over P(active given any other study); it is shown as posterior median with the equal-tailed {held} "
        f"interval under {prior}. The posterior follows by Bayes' rule at the stated prior, and its interval is the "
        "image of the ratio's. The direction is 'for' or 'against' where the interval lies on one side of 1, else "
        "'undecided'; the grade is that of the end of the interval nearest 1. Processes are ranked by their rate of "
        "activity here, shrunk by a beta-binomial model; two processes are held against each other on the studies "
        "that carry only one of them."
    )


def source_facts(audit: Audit) -> list[tuple[str, str]]:
    """Return label and text pairs that say which literature was counted.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.

    Returns
    -------
    list of (str, str)
        What is not known is left out, but a missing licence is said.
    """
    facts = audit.source
    size = [agreement(facts.n_studies, "study", "studies")]
    if facts.study_is != "studies":
        size[0] += f" (here: {facts.study_is})"
    if facts.n_peaks is not None:
        size.append(agreement(facts.n_peaks, "peak"))
    size.append(agreement(facts.n_terms, "term"))
    rows = [("literature", facts.name), ("holds", ", ".join(size))]
    if facts.provenance:
        rows.append(("comes from", facts.provenance))
    if facts.citation:
        rows.append(("to be cited as", facts.citation))
    rows.append(("licence", facts.licence or "not stated by who built it"))
    rows.append(("fingerprint", facts.fingerprint))
    if facts.left_out:
        rows.append(("left out", f"{agreement(facts.left_out, 'study', 'studies')}, as asked, with their groups"))
    if facts.negative_peaks:
        rows.append(("decreases", f"{count(facts.negative_peaks)} peaks are decreases and are counted as activity"))
    return rows
