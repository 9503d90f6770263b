"""What else the same activation could speak for: processes ranked, kin apart, rivals head to head (7, 8)."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from revinf.base_rates.counting import TermCounts
from revinf.base_rates.study_level import SharedCounts, StudyLevel
from revinf.evidence.kin import kin_of
from revinf.evidence.ratio_settings import RatioSettings
from revinf.evidence.vocabulary import Vocabulary
from revinf.literature.unknown_terms import unknown_term
from revinf.stats.bayes import posterior_estimate
from revinf.stats.estimates import Counts, Estimate
from revinf.stats.head_to_head import HeadToHead, heads_to_head
from revinf.stats.shrinkage import fit_beta_binomial, rank_by_shrunk_rate, shrunk_rates

__all__ = ["SHOWN_RIVALS", "Rival", "RivalRequest", "Selectivity", "select"]

SHOWN_RIVALS = 20


@dataclass(frozen=True, slots=True, kw_only=True)
class Rival:
    """Another term at the same region."""

    term: str
    kind: str
    counts: Counts
    rate: float
    shrunk_rate: float
    likelihood_ratio: Estimate | None
    posterior: Estimate | None
    head_to_head: Estimate | None
    probability_ahead: float | None
    shared_studies: int | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Selectivity:
    """The claimed term among all processes; rank is None where the claimed term is no process."""

    rank: int | None
    n_process_terms: int
    rank_informative: bool
    n_rivals_ahead: int | None
    best_rival: str | None
    probability_ahead: float | None
    shrunk_rate: float | None
    rivals: tuple[Rival, ...]
    kin: tuple[Rival, ...]
    kin_positions: tuple[int, ...] = ()
    named: tuple[str, ...] = ()

    def to_dict(self) -> dict[str, Any]:
        """Return rank and best rival as plain data; rivals and kin stand elsewhere in the assessment."""
        names = (
            "rank",
            "n_process_terms",
            "rank_informative",
            "n_rivals_ahead",
            "best_rival",
            "probability_ahead",
            "shrunk_rate",
        )
        return {name: getattr(self, name) for name in names}


@dataclass(frozen=True, slots=True, kw_only=True)
class RivalRequest:
    """Which rivals a reader wants to see.

    Parameters
    ----------
    named : tuple of str
        Always shown.
    excluded : tuple of str
        Never counted as rivals.
    shown : int or None
        How many others, best first; None shows all.
    prior : float, probability
        Of the posterior that is shown for each.
    """

    named: tuple[str, ...] = ()
    excluded: tuple[str, ...] = ()
    shown: int | None = SHOWN_RIVALS
    prior: float = 0.5


def select(
    claimed: int,
    counts: TermCounts,
    studies: StudyLevel | None,
    words: Vocabulary,
    request: RivalRequest,
    settings: RatioSettings,
) -> Selectivity:
    """Rank the processes at a region and set the claimed term against its rivals.

    Parameters
    ----------
    claimed : int
        Position of the claimed term in `counts`.
    counts : TermCounts
        Of every term at the region.
    studies : StudyLevel or None
        The studies themselves; a table cannot give them, and then nothing is set head to head.
    words : Vocabulary
        Kinds and synonyms.
    request : RivalRequest
        Which rivals to show.
    settings : RatioSettings
        How ratios are estimated.

    Returns
    -------
    Selectivity
        Rank, best rival, rivals shown and kin.

    Raises
    ------
    UnknownTermError
        If a named or excluded term labels no counted study.
    """
    term = counts.terms[claimed]
    named = {_position(name, counts, words) for name in request.named}
    excluded = {_position(name, counts, words) for name in request.excluded} - {claimed}
    shared = None if studies is None else studies.shared_with(term)
    kin = kin_of(claimed, counts, shared, words)
    is_process = np.array([words.counts_as_process(name) for name in counts.terms], dtype=bool) & (
        counts.term_total > 0
    )
    for position in excluded:
        is_process[position] = False
    ranked = np.flatnonzero(is_process & ~kin)
    fit = fit_beta_binomial(counts.term_active[ranked], counts.term_total[ranked])
    shrunk = np.full(len(counts.terms), np.nan)
    shown_terms = np.union1d(np.flatnonzero(is_process | (kin & (counts.term_total > 0))), [claimed, *named]).astype(
        np.int64
    )
    shrunk[shown_terms] = shrunk_rates(counts.term_active[shown_terms], counts.term_total[shown_terms], fit)
    order = [
        int(ranked[i])
        for i in rank_by_shrunk_rate(
            [counts.terms[i] for i in ranked],
            counts.term_active[ranked],
            counts.term_total[ranked],
            fit,
        )
    ]
    rank = order.index(claimed) + 1 if claimed in order else None
    rivals = [position for position in order if position != claimed]
    shown = [p for p in rivals if p in named] + [p for p in rivals if p not in named][: request.shown]
    make = _RivalMaker(claimed, counts, shared, words, settings, request.prior)
    rows = make.rows(sorted(shown, key=rivals.index), shrunk)
    kin_rows = make.rows(sorted(np.flatnonzero(kin & (counts.term_total > 0)).tolist()), shrunk)
    best = make.rows(rivals[:1], shrunk)[0] if rivals else None
    return Selectivity(
        rank=rank,
        n_process_terms=len(order),
        rank_informative=not fit.at_upper_limit,
        n_rivals_ahead=None if rank is None else rank - 1,
        best_rival=best.term if best else None,
        probability_ahead=best.probability_ahead if best else None,
        shrunk_rate=float(shrunk[claimed]),
        rivals=tuple(rows),
        kin=tuple(kin_rows),
        kin_positions=tuple(np.flatnonzero(kin).tolist()),
        named=request.named,
    )


def _position(name: str, counts: TermCounts, words: Vocabulary) -> int:
    """Return the position of a term that the user named."""
    if name in counts.terms:
        return counts.terms.index(name)
    raise unknown_term(name, counts.terms, "this source", words.sounding_like(name, counts.terms))


class _RivalMaker:
    """Makes the rows of rivals and kin, solving all their ratios at once."""

    def __init__(
        self,
        claimed: int,
        counts: TermCounts,
        shared: SharedCounts | None,
        words: Vocabulary,
        settings: RatioSettings,
        prior: float,
    ) -> None:
        self.claimed, self.counts, self.shared = claimed, counts, shared
        self.words, self.settings, self.prior = words, settings, prior

    def rows(self, positions: list[int], shrunk: NDArray[np.float64]) -> list[Rival]:
        """Return the rows of some terms, in the order given."""
        tables = [self.counts.at(position) for position in positions]
        ratios = self.settings.solve_all(tables)
        duels = self._duels(positions)
        return [
            Rival(
                term=self.counts.terms[position],
                kind=self.words.kind(self.counts.terms[position]),
                counts=table,
                rate=table.term_active / table.term_total,
                shrunk_rate=float(value),
                likelihood_ratio=ratio,
                posterior=posterior_estimate(self.prior, ratio),
                head_to_head=duel.ratio if duel else None,
                probability_ahead=duel.probability_ahead if duel else None,
                shared_studies=None if self.shared is None else int(self.shared.total[position]),
            )
            for position, table, ratio, duel, value in zip(
                positions, tables, ratios, duels, shrunk[positions], strict=True
            )
        ]

    def _duels(self, positions: list[int]) -> list[HeadToHead | None]:
        """Set the claimed term against each, on the studies that carry only one of the two."""
        if self.shared is None:
            return [None] * len(positions)
        own_active, own_total = self.counts.term_active[self.claimed], self.counts.term_total[self.claimed]
        pairs = []
        for position in positions:
            both, both_active = self.shared.total[position], self.shared.active[position]
            pairs.append(
                (
                    (int(own_active - both_active), int(own_total - both)),
                    (
                        int(self.counts.term_active[position] - both_active),
                        int(self.counts.term_total[position] - both),
                    ),
                )
            )
        return heads_to_head(
            pairs,
            level=self.settings.level,
            prior=self.settings.ratio_prior,
            limit=self.settings.ratio_limit,
        )
