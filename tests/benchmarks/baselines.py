"""What a competent user would write for the same work, with well-kept libraries."""

from __future__ import annotations

import numpy as np

__all__ = ["blocked_product", "pandas_all_terms", "sparse_counts", "tree_background", "tree_sphere"]


PANDAS_READ = """
import pandas as pd
pd.read_csv({peaks!r}), pd.read_csv({annotations!r})
"""
"""Reading the two tables, and nothing else."""

PANDAS_CHECK = """
import pandas as pd
peaks, terms = pd.read_csv({peaks!r}), pd.read_csv({annotations!r})
away = (peaks[["x", "y", "z"]] - [20, -20, 10]).pow(2).sum(axis=1)
hit = set(peaks.study[away <= 100])
has = set(terms.study[terms.term == "synthetic process 0003"])
every = set(terms.study)
print(len(has & hit), len(has), len(hit - has), len(every - has))
"""
"""One term at one place, from the CSV files."""


def pandas_all_terms(terms: object, hit: set[str]) -> object:
    """Count every term at one place."""
    frame = terms.assign(hit=terms.study.isin(hit))  # type: ignore[attr-defined]
    return frame.groupby("term").hit.agg(["sum", "size"])


def tree_sphere(tree: object, centre: np.ndarray, study: np.ndarray) -> np.ndarray:
    """Find the studies within 10 mm by a ball tree."""
    (found,) = tree.query_radius(centre[None], 10.0)  # type: ignore[attr-defined]
    return np.unique(study[found])


def tree_background(xyz: np.ndarray, study: np.ndarray, grid: np.ndarray) -> np.ndarray:
    """Count the studies at every location by a KD-tree, in a loop."""
    from scipy.spatial import cKDTree

    tree = cKDTree(xyz)
    return np.array([len(set(study[near].tolist())) for near in tree.query_ball_point(grid, 10.0, workers=1)])


def sparse_counts(hits: object, carries: object) -> object:
    """Count every term for many places: one sparse product."""
    return hits @ carries  # type: ignore[operator]


def blocked_product(labels: object, active: np.ndarray) -> None:
    """Count every term at every point, given where each study is active; nothing but the product."""
    for start in range(0, active.shape[1], 256):
        labels @ np.ascontiguousarray(active[:, start : start + 256])  # type: ignore[operator]
