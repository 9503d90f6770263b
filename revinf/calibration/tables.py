"""All forecasts of a calibration in arrays, joined over the folds."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from revinf.calibration.predictions import Predictions
from revinf.stats.estimates import Counts
from revinf.stats.ratio import likelihood_ratios

__all__ = ["ForecastTable"]

_MOST_TABLES = 200_000
"""Distinct tables that are solved by formula 2; beyond it the ratios of half counts are used, and said."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class ForecastTable:
    """All forecasts: (P, T) of peaks, (H, T) of studies."""

    ratios: NDArray[np.float64]
    peak_prior: NDArray[np.float64]
    peak_outcome: NDArray[np.bool_]
    active: NDArray[np.int64]
    product: NDArray[np.float64]
    prior: NDArray[np.float64]
    outcome: NDArray[np.bool_]
    fold: NDArray[np.int64]
    ratio: str

    @classmethod
    def of(cls, found: Sequence[Predictions]) -> ForecastTable:
        """Join the folds."""
        parts: dict[str, list[NDArray[Any]]] = {}
        counts = []
        for fold, item in enumerate(found):
            table = item.counts
            counts.append(table)
            own = np.searchsorted(item.studies, item.study)
            prior = np.clip(item.prior, 1e-9, 1 - 1e-9)
            logs = _log_half_ratio(table)
            product = np.zeros(item.outcome.shape)
            np.add.at(product, own, logs)
            for name, value in (
                ("peak_prior", np.broadcast_to(prior, logs.shape)),
                ("peak_outcome", item.outcome[own]),
                ("active", item.active),
                ("product", product),
                ("prior", np.broadcast_to(prior, product.shape)),
                ("outcome", item.outcome),
                ("fold", np.full(len(item.studies), fold)),
            ):
                parts.setdefault(name, []).append(value)
        ratios, how = _ratios(np.concatenate(counts))
        joined = {name: np.concatenate(values) for name, values in parts.items()}
        return cls(ratios=ratios, ratio=how, **joined)


def _log_half_ratio(table: NDArray[np.int32]) -> NDArray[np.float64]:
    """Return ln of the ratio of (k + 1/2) / (n + 1) rates, (P, T)."""
    n11, n10, n01, n00 = np.moveaxis(table.astype(np.float64), -1, 0)
    return np.asarray(np.log(n11 + 0.5) - np.log(n11 + n10 + 1) - np.log(n01 + 0.5) + np.log(n01 + n00 + 1))


def _ratios(counts: NDArray[np.int32]) -> tuple[NDArray[np.float64], str]:
    """Return the likelihood ratio of every table; equal tables are solved once."""
    distinct, inverse = np.unique(counts.reshape(-1, 4), axis=0, return_inverse=True)
    if len(distinct) > _MOST_TABLES:
        return np.exp(_log_half_ratio(counts)), "half counts"
    solved = likelihood_ratios([Counts(*row) for row in distinct.tolist()])
    values = np.array([1.0 if ratio is None else ratio.estimate for ratio in solved])
    return values[inverse.reshape(-1)].reshape(counts.shape[:2]), "formula 2"
