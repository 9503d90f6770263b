"""Counts of many regions and terms, place by place."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence

from revinf.base_rates.counting import count_terms
from revinf.base_rates.places import NamedPlace
from revinf.base_rates.table_rows import TableRow
from revinf.literature.literature import Literature
from revinf.spaces.spheres import Sphere

__all__ = ["tabulate"]


def tabulate(
    literature: Literature,
    places: Sequence[NamedPlace],
    *,
    terms: Sequence[str] = (),
    progress: Callable[[int, int], None] | None = None,
) -> Iterator[TableRow]:
    """Count every place and term.

    Parameters
    ----------
    literature : Literature
        Where to count.
    places : sequence of NamedPlace
        The regions.
    terms : sequence of str, optional
        Which terms; all of the literature's where left out.
    progress : callable, optional
        Told how many places are done, of how many.

    Yields
    ------
    TableRow
        Place by place, terms sorted.

    Raises
    ------
    UnknownTermError
        If a wanted term labels no counted study.
    """
    wanted = sorted({literature.term_index(term) for term in terms}) or range(literature.n_terms)
    source = _source(literature)
    for done, place in enumerate(places, start=1):
        counts = count_terms(literature, place.region)
        # A parcel has no centre that could answer for a peak: it is asked for by its name.
        ball = place.region if isinstance(place.region, Sphere) else None
        for term in wanted:
            yield TableRow(
                place.name,
                counts.terms[term],
                int(counts.term_active[term]),
                int(counts.term_total[term]),
                int(counts.other_active[term]),
                int(counts.other_total[term]),
                ball.centre_mm if ball else None,
                ball.radius_mm if ball else None,
                source,
            )
        if progress is not None:
            progress(done, len(places))


def _source(literature: Literature) -> str:
    """Return what the source column says: short, and marked where the data are invented."""
    mark = "invented data: " if literature.description.invented else ""
    return f"{mark}{literature.description.name}, fingerprint {literature.fingerprint}"
