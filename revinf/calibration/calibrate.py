"""`calibrate`: grouped cross-validation of single peaks, all peaks, and their discount."""

from __future__ import annotations

from collections.abc import Callable, Iterable

import numpy as np
from numpy.typing import NDArray

from revinf.base_rates.study_level import StudyLevel
from revinf.calibration.folds import grouped_folds
from revinf.calibration.predictions import Predictions, predict_fold
from revinf.calibration.scoring import by_breadth, by_studies, by_term, scores_of
from revinf.calibration.summaries import Calibration, Discount
from revinf.calibration.support import supported_terms
from revinf.calibration.tables import ForecastTable
from revinf.calibration.verdict import verdict
from revinf.evidence.sources import LiteratureSource
from revinf.evidence.vocabulary import Vocabulary, shipped_vocabulary
from revinf.exceptions import InvalidClaimError
from revinf.in_processes import each
from revinf.literature.literature import Literature
from revinf.stats.discount import discounted, fit_discount

__all__ = ["FEWEST_STUDIES", "calibrate"]

FEWEST_STUDIES = 10
"""Processes with fewer studies are left out: a fold would leave too few to count, or none to test."""

_MOST_CELLS = 12_000_000
"""Peaks times processes that are held at a time; beyond it only a sample of the studies is held out."""


def calibrate(
    literature: Literature,
    *,
    folds: int = 10,
    radius_mm: float = 10.0,
    jobs: int | None = 1,
    words: Vocabulary | None = None,
    progress: Callable[[int, int], None] | None = None,
) -> Calibration:
    """Measure how far a literature can be trusted, on studies that were not counted.

    Parameters
    ----------
    literature : Literature
        Its studies are held out fold by fold, those of a group together.
    folds : int, default 10
        Number of folds.
    radius_mm : float, mm, default 10
        Of the sphere around each peak.
    jobs : int or None, default 1
        Folds at a time; with None joblib's own setting holds, so that a back end of the user's can take them.
    words : Vocabulary, optional
        Kinds of terms; the shipped one where left out.
    progress : callable, optional
        Told how many steps are done, of how many: the folds, then the processes.

    Returns
    -------
    Calibration
        The same for any number of jobs.

    Raises
    ------
    InvalidClaimError
        If fewer than two processes have enough studies, or the folds do not fit.
    SpaceError
        If the radius is out of range.
    """
    words = words or shipped_vocabulary()
    names, carries = _processes(literature, words)
    everyone = StudyLevel(literature, np.zeros(0, dtype=np.int64))
    _, groups = everyone.groups()
    fold_of = grouped_folds(groups, min(folds, len(np.unique(groups))))
    sampled = _sample(literature, len(names))
    n_folds = int(fold_of.max()) + 1
    tell = progress or (lambda _done, _of: None)
    steps = n_folds + len(names)
    tasks = [(literature, carries, fold_of == fold, sampled, radius_mm) for fold in range(n_folds)]
    found = list(_predicted(tasks, jobs, lambda done: tell(done, steps)))
    table = ForecastTable.of(found)
    single = _single(table)
    exponent = fit_discount(table.prior.ravel(), table.product.ravel(), table.outcome.ravel())
    each = _without_each_fold(table)
    naive = discounted(table.prior, table.product)
    # Every study's discount comes from the other folds, so that the repaired scores are honest.
    own = np.array([each[fold] for fold in table.fold])[:, None]
    repaired = discounted(table.prior, own * table.product)
    supported = supported_terms(literature, carries, radius_mm, lambda done: tell(n_folds + done, steps))
    terms = by_term(names, carries, table, (single, naive, repaired), supported)
    scores = (
        scores_of(single, table.peak_outcome, table.peak_prior),
        scores_of(naive, table.outcome, table.prior),
        scores_of(repaired, table.outcome, table.prior),
    )
    discount = _interval(exponent, each)
    return Calibration(
        literature=LiteratureSource(literature).facts,
        radius_mm=radius_mm,
        n_folds=len(found),
        n_held_out=len(table.outcome),
        n_peaks=len(table.active),
        n_groups=len(np.unique(groups)),
        ratio=table.ratio,
        single=scores[0],
        combined=scores[1],
        discounted=scores[2],
        discount=discount,
        terms=terms,
        by_studies=by_studies(carries.sum(axis=0), single, table),
        by_breadth=by_breadth(single, table),
        verdict=verdict(*scores, discount, terms),
    )


def _processes(literature: Literature, words: Vocabulary) -> tuple[list[str], NDArray[np.bool_]]:
    """Return the processes with enough studies, most first, and who carries them."""
    totals = literature.term_totals
    chosen = [
        at for at, term in enumerate(literature.terms) if totals[at] >= FEWEST_STUDIES and words.counts_as_process(term)
    ]
    chosen.sort(key=lambda at: (-int(totals[at]), literature.terms[at]))
    names = [literature.terms[at] for at in chosen]
    if len(names) < 2:
        raise InvalidClaimError(
            f"calibration needs at least two processes with {FEWEST_STUDIES} studies, but this literature has "
            f"{len(names)}; bring a wider one"
        )
    carries = np.zeros((literature.n_studies, len(names)), dtype=bool)
    for column, name in enumerate(names):
        carries[literature.studies_with(name), column] = True
    return names, carries


def _sample(literature: Literature, n_terms: int) -> NDArray[np.bool_]:
    """Return which studies are held out at all: every one, or every k-th of a large literature."""
    step = -(-literature.n_peaks * n_terms // _MOST_CELLS)
    flags = np.zeros(literature.n_studies, dtype=bool)
    flags[:: max(1, step)] = True
    return flags & (literature.study_n_peaks > 0)


def _predicted(
    tasks: list[tuple[Literature, NDArray[np.bool_], NDArray[np.bool_], NDArray[np.bool_], float]],
    jobs: int | None,
    tell: Callable[[int], None],
) -> Iterable[Predictions]:
    """Yield the predictions of each fold, in order."""
    if jobs == 1:
        done: Iterable[Predictions] = (predict_fold(*task) for task in tasks)
    else:
        done = each(predict_fold, tasks, jobs=jobs)
    for fold, predictions in enumerate(done):
        tell(fold + 1)
        yield predictions


def _single(table: ForecastTable) -> NDArray[np.float64]:
    """Return the posterior of every peak and process at the base rate."""
    return discounted(table.peak_prior, np.log(table.ratios))


def _without_each_fold(table: ForecastTable) -> list[float]:
    """Return the discount that the other folds give, for each fold."""
    found = []
    for fold in range(int(table.fold.max()) + 1):
        kept = table.fold != fold
        found.append(fit_discount(table.prior[kept].ravel(), table.product[kept].ravel(), table.outcome[kept].ravel()))
    return found


def _interval(exponent: float, of_each: list[float]) -> Discount:
    """Return the discount with its jackknife interval over the folds."""
    k = len(of_each)
    spread = float(np.sqrt((k - 1) / k * ((np.array(of_each) - np.mean(of_each)) ** 2).sum()))
    return Discount(exponent=exponent, low=max(0.0, exponent - 1.959964 * spread), high=exponent + 1.959964 * spread)
