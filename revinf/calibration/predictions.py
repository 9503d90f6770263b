"""What the other studies say of a study's peaks: one table a peak and process, counted without the fold."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from revinf.literature.literature import Literature
from revinf.spaces.spheres import Sphere

__all__ = ["Predictions", "predict_fold"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Predictions:
    """The predictions for the held-out studies of a fold.

    Parameters
    ----------
    study : (P,) int64 array
        Whose peak it is.
    counts : (P, T, 4) int32 array
        n11, n10, n01, n00 at the peak for each process, in the other studies.
    active : (P,) int64 array
        Other studies that are active at the peak.
    studies : (H,) int64 array
        The held-out studies.
    outcome : (H, T) bool array
        Which processes they carry.
    prior : (T,) array
        Share of the other studies that carry each.
    """

    study: NDArray[np.int64]
    counts: NDArray[np.int32]
    active: NDArray[np.int64]
    studies: NDArray[np.int64]
    outcome: NDArray[np.bool_]
    prior: NDArray[np.float64]


def predict_fold(
    literature: Literature,
    carries: NDArray[np.bool_],
    held: NDArray[np.bool_],
    scored: NDArray[np.bool_],
    radius_mm: float,
) -> Predictions:
    """Count for every peak of the held-out studies in all the others.

    Parameters
    ----------
    literature : Literature
        All studies.
    carries : (S, T) bool array
        Which study carries which process.
    held : (S,) bool array
        Which studies are held out.
    scored : (S,) bool array
        Which of them are asked; every one, or a sample of a large literature.
    radius_mm : float, mm
        Of the sphere around each peak.

    Returns
    -------
    Predictions
        Of this fold.
    """
    arrays = literature.arrays()
    asked = held & scored
    studies = np.flatnonzero(asked)
    peaks = np.flatnonzero(asked[arrays["peak_study"]])
    total = carries[~held].sum(axis=0).astype(np.int64)
    n_train = int((~held).sum())
    counts = np.zeros((len(peaks), carries.shape[1], 4), dtype=np.int32)
    active = np.zeros(len(peaks), dtype=np.int64)
    for row, peak in enumerate(peaks.tolist()):
        x, y, z = (int(value) for value in arrays["peak_tenths"][peak])
        hits = literature.studies_hitting(Sphere(centre_tenths=(x, y, z), radius_mm=radius_mm))
        hits = hits[~held[hits]]
        n11 = carries[hits].sum(axis=0)
        n01 = len(hits) - n11
        counts[row] = np.stack([n11, total - n11, n01, n_train - total - n01], axis=1)
        active[row] = len(hits)
    return Predictions(
        study=np.asarray(arrays["peak_study"][peaks], dtype=np.int64),
        counts=counts,
        active=active,
        studies=studies,
        outcome=carries[studies],
        prior=total / n_train,
    )
