"""The terms of a source with their kinds and domains, searched the way a person types."""

from __future__ import annotations

from dataclasses import asdict, dataclass
from difflib import get_close_matches
from typing import Any

from revinf.evidence.sources import LiteratureSource, Source, TableSource
from revinf.evidence.vocabulary import Kind, Vocabulary, shipped_vocabulary
from revinf.knowledge import normalise_term

__all__ = ["TermList", "TermRow", "list_terms"]


@dataclass(frozen=True, slots=True, kw_only=True)
class TermRow:
    """One term: how many counted studies carry it, and what kind of word it is."""

    term: str
    n_studies: int
    kind: Kind
    what: str
    domain: str


@dataclass(frozen=True, slots=True, kw_only=True)
class TermList:
    """The terms found; where none match, `near` holds the ones that look like the query."""

    query: str
    rows: tuple[TermRow, ...]
    near: tuple[str, ...]

    def to_dict(self) -> dict[str, Any]:
        """Return the list as plain data."""
        return {
            "query": self.query,
            "terms": [asdict(row) for row in self.rows],
            "near": list(self.near),
        }


def list_terms(source: Source, query: str = "", vocabulary: Vocabulary | None = None) -> TermList:
    """Return the terms of a source that contain the query, or are a synonym of it.

    Parameters
    ----------
    source : Source
        A literature or a table.
    query : str, optional
        Part of a term, a synonym, or a domain; everything where left out.
    vocabulary : Vocabulary, optional
        Kinds, domains, synonyms; the shipped ones where left out.

    Returns
    -------
    TermList
        Most studies first, then by name.

    Examples
    --------
    >>> from revinf.evidence.source_choice import choose_source
    >>> [row.term for row in list_terms(choose_source(None, None, {}), "mentalising").rows]
    ['theory of mind']
    """
    words = vocabulary or shipped_vocabulary()
    totals = _totals(source)
    asked = normalise_term(query)
    same = words.names_of(asked)
    rows = [
        TermRow(
            term=term,
            n_studies=total,
            kind=words.kind(term),
            what=words.what(term),
            domain=words.domain(term),
        )
        for term, total in totals.items()
        if asked in term or term in same or (asked and asked == words.domain(term))
    ]
    near = () if rows else tuple(get_close_matches(asked, list(totals), n=5, cutoff=0.5))
    return TermList(query=asked, rows=tuple(sorted(rows, key=lambda row: (-row.n_studies, row.term))), near=near)


def _totals(source: Source) -> dict[str, int]:
    """Return the number of studies of each term."""
    if isinstance(source, LiteratureSource):
        literature = source.literature
        return dict(zip(literature.terms, literature.term_totals.tolist(), strict=True))
    if isinstance(source, TableSource):
        return source.table.term_totals()
    return {}
