"""`profile`: no claim, one place: every process with its rate and ratio, the domains, and the breadth."""

from __future__ import annotations

from dataclasses import asdict, dataclass
from typing import TYPE_CHECKING, Any

from revinf.evidence.asked_region import AskedRegion, Point
from revinf.evidence.breadth import Breadth, breadth_of
from revinf.evidence.choices import Choices
from revinf.evidence.judging import family_q_values
from revinf.evidence.parts import LiteratureFacts, Place
from revinf.evidence.sources import Answer, Source
from revinf.evidence.vocabulary import shipped_vocabulary
from revinf.knowledge import VERSION
from revinf.stats.estimates import Counts, Estimate
from revinf.stats.rates import jeffreys_rates
from revinf.stats.ratio import likelihood_ratios, observed_ratio
from revinf.stats.shrinkage import fit_beta_binomial, rank_by_shrunk_rate, shrunk_rates

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["DomainRow", "ProcessRow", "Profile", "profile"]


@dataclass(frozen=True, slots=True, kw_only=True)
class ProcessRow:
    """One process at the place."""

    term: str
    kind: str
    domain: str
    counts: Counts
    rate: Estimate
    shrunk_rate: float
    observed_ratio: float | None
    likelihood_ratio: Estimate | None
    fisher_p: float | None
    q: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class DomainRow:
    """One domain at the place; a study in two domains counts in both."""

    domain: str
    active: int
    total: int
    rate: Estimate


@dataclass(frozen=True, slots=True, kw_only=True)
class Profile:
    """Everything a source says of one place."""

    peaks: tuple[Point, ...]
    region_kind: str
    radius_mm: float | None
    place: Place
    literature: LiteratureFacts
    hits: int
    rank_informative: bool
    rows: tuple[ProcessRow, ...]
    domains: tuple[DomainRow, ...]
    breadth: Breadth
    level: float

    def to_dict(self) -> dict[str, Any]:
        """Return the profile as plain data of schema revinf/profile/1."""
        return {
            "schema": "revinf/profile/1",
            "version": VERSION,
            "region": {
                "kind": self.region_kind,
                "peaks": [list(peak) for peak in self.peaks],
                "radius_mm": self.radius_mm,
            },
            "place": self.place.to_dict(),
            "literature": self.literature.to_dict(),
            "hits": self.hits,
            "level": self.level,
            "rank_informative": self.rank_informative,
            "processes": [asdict(row) for row in self.rows],
            "domains": [asdict(row) for row in self.domains],
            "breadth": asdict(self.breadth),
        }

    def to_frame(self) -> pd.DataFrame:
        """Return one row a process, nested names joined by a dot."""
        import pandas as pd

        return pd.json_normalize([asdict(row) for row in self.rows])


def profile(region: AskedRegion, source: Source, choices: Choices | None = None) -> Profile:
    """Describe a place without a claim.

    Parameters
    ----------
    region : AskedRegion
        Where to look: peaks, a mask, or a region of a table.
    source : Source
        Where the counts come from.
    choices : Choices, optional
        Level, prior of the ratio, vocabulary.

    Returns
    -------
    Profile
        Processes ranked by shrunk rate, domains by rate, breadth.

    Raises
    ------
    InvalidClaimError, SpaceError, InputFileError
        If the region cannot be placed or read.
    """
    choices = choices or Choices()
    words = choices.vocabulary or shipped_vocabulary()
    answer = source.answer(region)
    counts = answer.counts
    keep = [
        position
        for position, term in enumerate(counts.terms)
        if counts.term_total[position] and words.counts_as_process(term)
    ]
    active, total = counts.term_active[keep], counts.term_total[keep]
    fit = fit_beta_binomial(active, total)
    shrunk = shrunk_rates(active, total, fit)
    tables = [counts.at(position) for position in keep]
    ratios = likelihood_ratios(tables, level=choices.level, prior=choices.ratio_prior, limit=choices.ratio_limit)
    rates = jeffreys_rates([(table.term_active, table.term_total) for table in tables], level=choices.level)
    p_values, q_values = family_q_values(tables)
    rows = []
    for i in rank_by_shrunk_rate([counts.terms[position] for position in keep], active, total, fit):
        rate = rates[i]
        if rate is None:  # a kept term has studies
            continue
        term = counts.terms[keep[i]]
        rows.append(
            ProcessRow(
                term=term,
                kind=words.kind(term),
                domain=words.domain(term),
                counts=tables[i],
                rate=rate,
                shrunk_rate=float(shrunk[i]),
                observed_ratio=observed_ratio(tables[i]),
                likelihood_ratio=ratios[i],
                fisher_p=p_values[i],
                q=q_values[i],
            )
        )
    return Profile(
        peaks=region.mni_peaks(),
        region_kind=answer.region_kind,
        radius_mm=answer.radius_mm,
        place=answer.place,
        literature=source.facts,
        hits=answer.hits,
        rank_informative=not fit.at_upper_limit,
        rows=tuple(rows),
        domains=_domains(answer, choices, words.domain),
        breadth=breadth_of(answer, words, level=choices.level),
        level=choices.level,
    )


def _domains(answer: Answer, choices: Choices, domain_of: Any) -> tuple[DomainRow, ...]:
    """Return the domains, highest rate first; none where the studies are not known."""
    if answer.studies is None:
        return ()
    found = answer.studies.domains(domain_of)
    pairs = list(zip(found.active.tolist(), found.total.tolist(), strict=True))
    rows = [
        DomainRow(domain=name, active=active, total=total, rate=rate)
        for name, (active, total), rate in zip(
            found.names, pairs, jeffreys_rates(pairs, level=choices.level), strict=True
        )
        if rate is not None
    ]
    return tuple(sorted(rows, key=lambda row: (-row.rate.estimate, row.domain)))
