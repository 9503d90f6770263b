"""A literature without some studies: the paper under review must not be evidence for its own claims."""

from __future__ import annotations

import hashlib
from collections.abc import Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import LiteratureError
from revinf.literature.background import BACKGROUND_RADIUS_MM, compute_background
from revinf.literature.kin_pairs import find_kin_pairs
from revinf.literature.literature import Literature
from revinf.literature.manifest import Manifest
from revinf.literature.packing import Arrays, pack_text, unpack_text

__all__ = ["leave_out", "named_studies"]


def leave_out(literature: Literature, names: Sequence[str]) -> Literature:
    """Return a literature without the named studies and all others of their groups.

    Parameters
    ----------
    literature : Literature
        Stays as it is; nothing is written.
    names : sequence of str
        Ids of studies, names of groups, or DOIs.

    Returns
    -------
    Literature
        In memory; its fingerprint tells it from the whole one, and `left_out` names the studies.

    Raises
    ------
    LiteratureError
        If a name is none of its studies, groups and DOIs, or no study would be left.
    """
    if not names:
        return literature
    gone = named_studies(literature, names)
    if gone.all():
        raise LiteratureError("no study would be left to count; leave fewer out", path=literature.folder)
    arrays = _without(literature.arrays(), gone)
    ids = [study for study, out in zip(literature.study_ids, gone.tolist(), strict=True) if out]
    smaller = Literature(literature.folder, _manifest(literature, arrays), arrays)
    smaller.left_out = tuple(ids)
    mark = "\n".join([literature.fingerprint, *ids])
    smaller.own_fingerprint = hashlib.sha256(mark.encode("utf-8")).hexdigest()[:16]
    return smaller


def named_studies(literature: Literature, names: Sequence[str]) -> NDArray[np.bool_]:
    """Return which studies are named, or share a group with one that is.

    Parameters
    ----------
    literature : Literature
        Whose studies.
    names : sequence of str
        Ids, groups or DOIs (with or without https://doi.org/, any case).

    Returns
    -------
    (S,) bool array
        Flags.

    Raises
    ------
    LiteratureError
        If a name fits nothing.
    """
    studies, groups = literature.study_ids, literature.study_groups
    dois = [_plain_doi(doi) for doi in literature.study_dois]
    gone = np.zeros(len(studies), dtype=bool)
    for name in names:
        wanted, doi = name.strip(), _plain_doi(name)
        hit = [
            bool(wanted) and (study == wanted or group == wanted or (bool(doi) and own == doi))
            for study, group, own in zip(studies, groups, dois, strict=True)
        ]
        if not any(hit):
            raise LiteratureError(
                f"holds no study, group or DOI {wanted[:80]!r}; see its ids in the studies table it was built from",
                path=literature.folder,
            )
        gone |= np.array(hit)
    together = {groups[at] for at in np.flatnonzero(gone) if groups[at]}
    return np.asarray(gone | np.array([group in together for group in groups], dtype=bool))


def _plain_doi(text: str) -> str:
    """Return a DOI in lower case without what stands before it."""
    plain = text.strip().lower()
    for head in ("https://", "http://", "dx.doi.org/", "doi.org/", "doi:"):
        plain = plain.removeprefix(head)
    return plain.strip() if plain.strip().startswith("10.") else ""


def _without(arrays: Arrays, gone: NDArray[np.bool_]) -> Arrays:
    """Return the arrays of the other studies; terms keep their positions, also those that no study carries now."""
    kept = ~gone
    number = np.cumsum(kept) - 1
    peak_kept = kept[arrays["peak_study"]]
    before = np.concatenate([[0], np.cumsum(peak_kept)])
    carried = kept[arrays["term_studies"]]
    term_before = np.concatenate([[0], np.cumsum(carried)])
    lengths = np.diff(arrays["study_term_starts"])
    smaller: Arrays = dict(arrays)
    smaller |= {
        "peak_tenths": arrays["peak_tenths"][peak_kept],
        "peak_study": number[arrays["peak_study"][peak_kept]].astype(np.int32),
        "cell_starts": before[arrays["cell_starts"]].astype(np.int64),
        "study_n_peaks": arrays["study_n_peaks"][kept],
        "study_term_starts": np.concatenate([[0], np.cumsum(lengths[kept])]).astype(np.int64),
        "study_terms": arrays["study_terms"][np.repeat(kept, lengths)],
        "term_study_starts": term_before[arrays["term_study_starts"]].astype(np.int64),
        "term_studies": number[arrays["term_studies"][carried]].astype(np.int32),
        "grid_study_hits": arrays["grid_study_hits"][kept],
    }
    # The background without them is the whole one less theirs, which is quick for a few.
    theirs = ~peak_kept
    lost = compute_background(
        arrays["peak_tenths"][theirs],
        arrays["peak_study"][theirs],
        len(gone),
        arrays["grid_tenths"],
        BACKGROUND_RADIUS_MM,
    )
    smaller["grid_hits"] = np.asarray(arrays["grid_hits"] - lost.location_hits)
    smaller["kin_pairs"] = find_kin_pairs(
        smaller["study_term_starts"], smaller["study_terms"], smaller["term_study_starts"], smaller["term_studies"]
    )
    for name in ("study_id", "study_group", "study_doi"):
        items = unpack_text(np.asarray(arrays[f"{name}_text"]), np.asarray(arrays[f"{name}_ends"]))
        left = [item for item, keep in zip(items, kept.tolist(), strict=True) if keep]
        smaller[f"{name}_text"], smaller[f"{name}_ends"] = pack_text(left)
    return smaller


def _manifest(literature: Literature, arrays: Arrays) -> Manifest:
    """Return what the manifest says of the smaller literature."""
    counts = dict(literature.manifest.counts)
    counts |= {"studies": len(arrays["study_n_peaks"]), "peaks": len(arrays["peak_tenths"])}
    return replace(literature.manifest, counts=counts)
