"""Is the paper under review itself in the literature? Its coordinates, taken together, give it away."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass

from revinf.evidence.claim import Claim
from revinf.evidence.sources import LiteratureSource, Source
from revinf.spaces.coordinates import to_tenths

__all__ = ["OwnPaper", "own_papers"]

_FEWEST, _SHARE = 3, 0.5
"""So many distinct coordinates, and so large a share of them, must be one study's own."""


@dataclass(frozen=True, slots=True, kw_only=True)
class OwnPaper:
    """A counted study that reports many of the coordinates of an audit.

    Parameters
    ----------
    study : str
        Its id; with its group, where it has one.
    n_shared, n_asked : int
        Distinct coordinates of the audit that it reports, and all of them.
    """

    study: str
    n_shared: int
    n_asked: int


def own_papers(claims: Sequence[Claim], source: Source) -> tuple[OwnPaper, ...]:
    """Return the counted studies, or groups, that report most of the coordinates of some claims.

    Parameters
    ----------
    claims : sequence of Claim
        Of one paper.
    source : Source
        Only a literature can tell.

    Returns
    -------
    tuple of OwnPaper
        Most shared coordinates first; empty where there are fewer than three coordinates.
    """
    if not isinstance(source, LiteratureSource):
        return ()
    literature = source.literature
    points = sorted({peak for claim in claims for peak in claim.mni_peaks()})
    if len(points) < _FEWEST:
        return ()
    shared: Counter[str] = Counter()
    for point in points:
        found = literature.studies_reporting(to_tenths([point])).tolist()
        shared.update({literature.study_groups[study] or literature.study_ids[study] for study in found})
    return tuple(
        OwnPaper(study=study, n_shared=number, n_asked=len(points))
        for study, number in sorted(shared.items(), key=lambda item: (-item[1], item[0]))
        if number >= max(_FEWEST, _SHARE * len(points))
    )
