"""A seeded synthetic literature of the size of the published one, as CSV files; nothing in it is real."""

from __future__ import annotations

from pathlib import Path

import numpy as np

__all__ = ["write_synthetic"]


def write_synthetic(folder: Path, *, n_studies: int = 15_000, n_terms: int = 3_000, seed: int = 1) -> tuple[Path, Path]:
    """Write peaks.csv and annotations.csv: about 35 peaks and 30 terms a study, terms by a power law.

    Returns
    -------
    pathlib.Path, pathlib.Path
        Peaks and annotations.
    """
    folder.mkdir(parents=True, exist_ok=True)
    random = np.random.default_rng(seed)
    peaks_of = np.clip(random.lognormal(3.3, 0.7, n_studies).astype(int), 3, 400)
    homes = random.normal(0, 1, (400, 3)) * [32, 38, 28] + [0, -18, 12]
    study = np.repeat(np.arange(n_studies), peaks_of)
    chosen = random.integers(0, len(homes), len(study))
    xyz = np.clip(homes[chosen] + random.normal(0, 5, (len(study), 3)), [-72, -106, -52], [72, 74, 80]).round()
    peaks = folder / "peaks.csv"
    with peaks.open("w", encoding="utf-8") as stream:
        stream.write("study,x,y,z\n")
        for start in range(0, len(study), 200_000):
            part = slice(start, start + 200_000)
            rows = zip(study[part].tolist(), *xyz[part].astype(int).T.tolist(), strict=True)
            stream.write("".join(f"syn{s:06d},{x},{y},{z}\n" for s, x, y, z in rows))
    weights = 1 / np.arange(1, n_terms + 1) ** 0.8
    weights /= weights.sum()
    annotations = folder / "annotations.csv"
    with annotations.open("w", encoding="utf-8") as stream:
        stream.write("study,term\n")
        for start in range(0, n_studies, 1_000):
            lines = []
            for number in range(start, min(start + 1_000, n_studies)):
                terms = np.unique(random.choice(n_terms, size=30, p=weights))
                lines += [f"syn{number:06d},synthetic process {term:04d}\n" for term in terms.tolist()]
            stream.write("".join(lines))
    return peaks, annotations
