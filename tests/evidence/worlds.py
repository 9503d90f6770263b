"""Invented literatures whose every study is known: a mixed one, and ones made to order for single facts."""

from __future__ import annotations

import numpy as np

from revinf.literature.literature import Literature
from tests.literature.in_memory import in_memory

A, B = (-400, 200, 100), (300, -600, 400)
"""Two invented places, in tenths of a millimetre."""

A_MM, B_MM = (-40.0, 20.0, 10.0), (30.0, -60.0, 40.0)
MIRRORED_A = (400, 200, 100)
ELSEWHERE = (0, 500, 0)
TERMS = ("fear", "naming", "navigation", "pain", "reading", "amygdala", "invented waiting")

Studies = list[tuple[list, list]]


def mixed_studies(n: int = 90, seed: int = 5) -> Studies:
    """Return invented studies that hit the two places, the mirrored first, or neither, with one to three terms."""
    generator = np.random.default_rng(seed)
    studies: Studies = []
    for i in range(n):
        terms = [TERMS[t] for t in sorted(generator.choice(len(TERMS), size=1 + i % 3, replace=False))]
        if "fear" in terms and i % 4:
            terms.append("invented kin of fear")
        weights = [0.45, 0.15, 0.15, 0.25] if "fear" in terms else [0.2, 0.25, 0.15, 0.4]
        peaks = []
        for _ in range(int(generator.integers(1, 7))):
            around = (A, B, MIRRORED_A, ELSEWHERE)[int(generator.choice(4, p=weights))]
            peaks.append(tuple((np.array(around) + np.rint(generator.normal(0, 50, 3)).astype(int)).tolist()))
        studies.append((peaks, terms))
    return studies


def mixed_groups(n: int = 90) -> list[str]:
    """Return the groups of the mixed studies: some stand alone, others come in threes."""
    return ["" if i % 2 else f"paper {i // 6}" for i in range(n)]


def made(*blocks: tuple[int, list, list], **options) -> Literature:
    """Return an invented literature of (number of studies, peaks in tenths, terms) blocks."""
    studies = [(peaks, terms) for number, peaks, terms in blocks for _ in range(number)]
    return in_memory(studies, brain=True, **options)
