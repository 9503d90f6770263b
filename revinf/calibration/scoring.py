"""Scores of a calibration: of all forecasts, by process, by number of studies, by how busy the place is."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from revinf.calibration.summaries import GroupScore, Scores, TermScore
from revinf.calibration.tables import ForecastTable
from revinf.stats.scores import area_under_curve, brier_parts, brier_score, log_score, reliability_curve, skill

__all__ = ["by_breadth", "by_studies", "by_term", "scores_of"]

_SIZES = ((10, 19), (20, 49), (50, 199), (200, 10**9))


def scores_of(forecast: NDArray[np.float64], outcome: NDArray[np.bool_], prior: NDArray[np.float64]) -> Scores:
    """Score forecasts against what came true and against the base rate alone."""
    f, y, base = forecast.ravel(), outcome.ravel().astype(np.float64), prior.ravel()
    areas = [area_under_curve(forecast[:, t], outcome[:, t].astype(np.float64)) for t in range(forecast.shape[1])]
    known = [area for area in areas if area is not None]
    brier, log = brier_score(f, y), log_score(f, y)
    return Scores(
        n=len(f),
        brier=brier,
        log=log,
        brier_skill=skill(brier, brier_score(base, y)),
        log_skill=skill(log, log_score(base, y)),
        area=float(np.mean(known)) if known else None,
        parts=brier_parts(f, y),
        curve=tuple(reliability_curve(f, y)),
    )


def by_term(
    names: list[str],
    carries: NDArray[np.bool_],
    table: ForecastTable,
    forecasts: tuple[NDArray[np.float64], NDArray[np.float64], NDArray[np.float64]],
    supported: NDArray[np.bool_],
) -> tuple[TermScore, ...]:
    """Score every process."""
    single, naive, repaired = forecasts
    rows = []
    for t, name in enumerate(names):
        peak_y, y = table.peak_outcome[:, t].astype(np.float64), table.outcome[:, t].astype(np.float64)
        base = brier_score(table.prior[:, t], y)
        rows.append(
            TermScore(
                term=name,
                n_studies=int(carries[:, t].sum()),
                area_single=area_under_curve(single[:, t], peak_y),
                area_all=area_under_curve(naive[:, t], y),
                skill_single=skill(brier_score(single[:, t], peak_y), brier_score(table.peak_prior[:, t], peak_y)),
                skill_all=skill(brier_score(naive[:, t], y), base),
                skill_discounted=skill(brier_score(repaired[:, t], y), base),
                supported=bool(supported[t]),
            )
        )
    return tuple(rows)


def _group(name: str, f: NDArray[np.float64], y: NDArray[np.bool_], base: NDArray[np.float64]) -> GroupScore:
    """Score a part of the single-peak forecasts."""
    areas = [area_under_curve(f[:, t], y[:, t].astype(np.float64)) for t in range(f.shape[1])]
    known = [area for area in areas if area is not None]
    truth = y.ravel().astype(np.float64)
    return GroupScore(
        name=name,
        n=f.size,
        area=float(np.mean(known)) if known else None,
        brier_skill=skill(brier_score(f.ravel(), truth), brier_score(base.ravel(), truth)),
    )


def by_studies(totals: NDArray[np.int64], single: NDArray[np.float64], table: ForecastTable) -> tuple[GroupScore, ...]:
    """Score processes by how many studies they have."""
    rows = []
    for low, high in _SIZES:
        chosen = (totals >= low) & (totals <= high)
        if chosen.any():
            name = f"{low} or more studies" if high >= 10**9 else f"{low} to {high} studies"
            rows.append(_group(name, single[:, chosen], table.peak_outcome[:, chosen], table.peak_prior[:, chosen]))
    return tuple(rows)


def by_breadth(single: NDArray[np.float64], table: ForecastTable) -> tuple[GroupScore, ...]:
    """Score peaks by how many studies are active at their place, in thirds."""
    cuts = np.quantile(table.active, [1 / 3, 2 / 3])
    third = np.searchsorted(cuts, table.active, side="left")
    names = ("quietest third of the peaks' places", "middle third", "busiest third")
    return tuple(
        _group(name, single[third == at], table.peak_outcome[third == at], table.peak_prior[third == at])
        for at, name in enumerate(names)
        if (third == at).any()
    )
