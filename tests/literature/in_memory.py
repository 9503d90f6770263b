"""Invented literatures made in memory, for tests that compare queries with plain loops over the same studies."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

import numpy as np
from hypothesis import strategies as st

from revinf.literature.import_peaks import HEAD_MM
from revinf.literature.importing import ImportedStudies
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description, Manifest
from revinf.literature.packing import pack_background, pack_brain, pack_studies
from revinf.spaces.brain import brain_reference

PEAK = st.tuples(*(st.integers(int(10 * low), int(10 * high)) for low, high in HEAD_MM))
NEAR = st.tuples(*(st.integers(-150, 150),) * 3)  # dense enough that small spheres hit something
STUDIES = st.lists(
    st.tuples(
        st.lists(st.one_of(PEAK, NEAR), max_size=6),
        st.lists(st.integers(0, 12), min_size=1, max_size=4),
    ),
    min_size=1,
    max_size=25,
)


def name_of(term: int | str) -> str:
    return f"term {term:02}" if isinstance(term, int) else term


def in_memory(
    studies: Sequence[tuple[list, list]],
    *,
    groups: Sequence[str] | None = None,
    brain: bool = False,
    merged: bool = False,
    negative: int = 0,
    invented: bool = True,
) -> Literature:
    """Return an invented literature of (peaks in tenths, terms by number or name) a study."""
    peaks = sorted((i, *peak) for i, (rows, _) in enumerate(studies) for peak in rows)
    pairs = sorted({(i, name_of(term)) for i, (_, terms) in enumerate(studies) for term in terms})
    used = sorted({term for _, term in pairs})
    table = np.array(peaks, dtype=np.int64).reshape(-1, 4)
    imported = ImportedStudies(
        study_ids=[f"s{i:03}" for i in range(len(studies))],
        group_ids=list(groups) if groups is not None else [""] * len(studies),
        dois=[""] * len(studies),
        peak_study=table[:, 0].astype(np.int32),
        peak_tenths=table[:, 1:].astype(np.int16),
        terms=used,
        annotation_study=np.array([study for study, _ in pairs], dtype=np.int32),
        annotation_term=np.array([used.index(term) for _, term in pairs], dtype=np.int32),
        merged=merged,
        n_negative=negative,
    )
    manifest = Manifest(
        description=Description(name="invented", invented=invented),
        counts={"negative_peaks": negative},
        merged_by="group" if merged else None,
        arrays={},
        built_with={},
        report={},
    )
    arrays = pack_studies(imported)
    if brain:
        arrays |= pack_brain(brain_reference()) | pack_background(arrays, brain_reference())
    return Literature(Path("in memory"), manifest, arrays)


def hit_by_loop(studies: Sequence[tuple[list, list]], centre, radius_mm: float) -> set[int]:
    """Return the studies with a peak within a radius, by a plain loop; the radius in tenths must be whole."""
    limit = round(10 * radius_mm) ** 2
    return {
        i
        for i, (peaks, _) in enumerate(studies)
        if any(sum((p - c) ** 2 for p, c in zip(peak, centre, strict=True)) <= limit for peak in peaks)
    }


def carriers_by_loop(studies: Sequence[tuple[list, list]], term: int | str) -> set[int]:
    return {i for i, (_, terms) in enumerate(studies) if name_of(term) in {name_of(other) for other in terms}}


def four_counts(carriers: set[int], hits: set[int], among: set[int]) -> tuple[int, int, int, int]:
    """Return (n11, n10, n01, n00) of two sets of studies within a third."""
    others = among - carriers
    return (
        len(among & carriers & hits),
        len(among & carriers - hits),
        len(others & hits),
        len(others - hits),
    )
