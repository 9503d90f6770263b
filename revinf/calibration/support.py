"""Which processes a literature can support anywhere: is there a place whose interval lies above 1?"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from revinf.literature.background import SPACING_TENTHS, compute_background
from revinf.literature.literature import Literature
from revinf.stats.estimates import Counts
from revinf.stats.ratio import likelihood_ratios

__all__ = ["supported_terms"]

_TRIED = 25
"""Places that are looked at for each process: those with the largest plain excess of hits."""


def supported_terms(
    literature: Literature,
    carries: NDArray[np.bool_],
    radius_mm: float,
    tell: Callable[[int], None] = lambda _done: None,
) -> NDArray[np.bool_]:
    """Return which processes have a grey-matter place that speaks credibly for them.

    Parameters
    ----------
    literature : Literature
        All studies.
    carries : (S, T) bool array
        Which study carries which process.
    radius_mm : float, mm
        Of the sphere.
    tell : callable, optional
        Told how many processes are done.

    Returns
    -------
    (T,) bool array
        True where the interval of the ratio lies above 1 at one of the most promising places.

    Notes
    -----
    The best of many places look good by chance, so the interval holds with 1 - 0.05 / m, m being how many spheres
    fill the grey matter.
    """
    arrays = literature.arrays()
    everyone = literature.background(radius_mm).location_hits.astype(np.int64)
    total, n = carries.sum(axis=0).astype(np.int64), len(carries)
    spheres = len(everyone) * (SPACING_TENTHS / 10) ** 3 / (4 / 3 * np.pi * max(radius_mm, 1.0) ** 3)
    level = 1 - 0.05 / max(1.0, float(spheres))
    supported = np.zeros(carries.shape[1], dtype=bool)
    for term in range(carries.shape[1]):
        mine = carries[arrays["peak_study"], term]
        _, number = np.unique(arrays["peak_study"][mine], return_inverse=True)
        own = compute_background(
            arrays["peak_tenths"][mine],
            number.reshape(-1).astype(np.int32),
            int(total[term]),
            arrays["grid_tenths"],
            radius_mm,
        ).location_hits.astype(np.int64)
        others = everyone - own
        p1, p0 = (own + 0.5) / (total[term] + 1), (others + 0.5) / (n - total[term] + 1)
        # Standardised difference of the logarithms: promising are large and certain ones.
        z = (np.log(p1) - np.log(p0)) / np.sqrt(1 / (own + 0.5) + 1 / (others + 0.5))
        best = np.argsort(-z, kind="stable")[:_TRIED]
        tables = [
            Counts(int(own[at]), int(total[term] - own[at]), int(others[at]), int(n - total[term] - others[at]))
            for at in best
        ]
        supported[term] = any(ratio is not None and ratio.low > 1 for ratio in likelihood_ratios(tables, level=level))
        tell(term + 1)
    return supported
