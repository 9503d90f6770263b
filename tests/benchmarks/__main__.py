"""Make the synthetic literature, measure, and print one table; nothing is kept but the folder you name."""

from __future__ import annotations

import argparse
import platform
import sys
import tempfile
from functools import partial
from pathlib import Path

import numpy as np
import pandas as pd

from revinf.base_rates.counting import count_hits
from revinf.base_rates.point_counts import count_points
from revinf.evidence.audit import audit
from revinf.evidence.claim import Claim
from revinf.literature.active_points import active_points
from revinf.literature.background import compute_background
from revinf.literature.literature import Literature
from revinf.spaces.brain import grey_lattice
from revinf.spaces.spheres import sphere
from tests.benchmarks import baselines
from tests.benchmarks.measure import Measured, function, process, python
from tests.benchmarks.synthetic import write_synthetic

TERM = "synthetic process 0003"
PLACE = (20, -20, 10)


def main() -> None:
    """Measure everything at one scale, and the whole processes at ten times that."""
    parser = argparse.ArgumentParser(prog="python -m tests.benchmarks")
    parser.add_argument("--folder", type=Path, help="keep the synthetic literature here")
    parser.add_argument("--studies", type=int, default=15_000)
    parser.add_argument("--terms", type=int, default=3_000)
    parser.add_argument("--tenfold", action="store_true", help="also measure build and check on ten times the studies")
    asked = parser.parse_args()
    with tempfile.TemporaryDirectory() as scratch:
        folder = asked.folder or Path(scratch)
        rows = scale(folder / "one", asked.studies, asked.terms)
        if asked.tenfold:
            rows += tenfold(folder / "ten", 10 * asked.studies, asked.terms)
    print(f"{platform.processor() or platform.machine()}, Python {platform.python_version()}, numpy {np.__version__}")
    print(f"{'step':44}{'plain':>12}{'ours':>12}{'ours/plain':>12}{'memory':>10}  plain is")
    for name, plain, ours, what in rows:
        memory = "" if ours.memory_mb is None else f"{ours.memory_mb:.0f} MB"
        ratio = ours.seconds / plain.seconds
        print(f"{name:44}{1000 * plain.seconds:9.1f} ms{1000 * ours.seconds:9.1f} ms{ratio:12.2f}{memory:>10}  {what}")


Row = tuple[str, Measured, Measured, str]


def revinf(*words: object) -> list[str]:
    return [sys.executable, "-m", "revinf", *map(str, words)]


def build(folder: Path, peaks: Path, annotations: Path) -> list[str]:
    return revinf(
        "build", "--peaks", peaks, "--annotations", annotations, "--invented", "--name", "synthetic", "--out",
        folder / "literature",
    )  # fmt: skip


def scale(folder: Path, n_studies: int, n_terms: int) -> list[Row]:
    """Measure every step at one scale."""
    peaks, annotations = write_synthetic(folder, n_studies=n_studies, n_terms=n_terms)
    read = python(baselines.PANDAS_READ.format(peaks=str(peaks), annotations=str(annotations)), repeat=3)
    rows: list[Row] = [
        (
            "build",
            read,
            process(build(folder, peaks, annotations), repeat=2, warm=False),
            "a script that only reads them",
        )
    ]
    where = folder / "literature"
    base = python("import numpy, typer, rich.table")
    at = ("--peak", *PLACE)
    for name, words in (
        ("check, whole process", ("check", "--literature", where, *at, "--term", TERM)),
        ("profile, whole process", ("profile", "--literature", where, *at)),
        ("terms, whole process", ("terms", "0003", "--literature", where)),
    ):
        rows.append((name, base, process(revinf(*words)), "import numpy, typer, rich.table"))
    script = baselines.PANDAS_CHECK.format(peaks=str(peaks), annotations=str(annotations))
    rows.append(("check against a pandas script", python(script, repeat=3), rows[1][2], "one term from the CSV files"))
    return rows + inside(where, peaks, annotations)


def inside(where: Path, peaks: Path, annotations: Path) -> list[Row]:
    """Measure single steps in this process."""
    from scipy.sparse import csr_matrix
    from sklearn.neighbors import BallTree

    literature = Literature.open(where)
    arrays = literature.arrays()
    xyz, study = np.asarray(arrays["peak_tenths"]) / 10, np.asarray(arrays["peak_study"])
    region, tree = sphere(PLACE, 10), BallTree(xyz)
    plain = function(lambda: baselines.tree_sphere(tree, np.array(PLACE, dtype=float), study))
    rows: list[Row] = [("hits of one sphere", plain, function(lambda: literature.studies_hitting(region)), "ball tree")]

    terms = pd.read_csv(annotations)
    hits = literature.studies_hitting(region)
    named = {literature.study_ids[at] for at in hits.tolist()}
    plain = function(lambda: baselines.pandas_all_terms(terms, named), repeat=3)
    rows.append(
        ("counts of all terms, one claim", plain, function(lambda: count_hits(literature, hits)), "pandas groupby")
    )

    random = np.random.default_rng(2)
    places = [sphere(xyz[at].tolist(), 10) for at in random.integers(0, len(xyz), 1_000).tolist()]
    each = [literature.studies_hitting(place) for place in places]
    starts = np.asarray(arrays["study_term_starts"])
    shape = (literature.n_studies, literature.n_terms)
    carries = csr_matrix((np.ones(int(starts[-1]), dtype=np.int32), np.asarray(arrays["study_terms"]), starts), shape)
    ends = np.concatenate([[0], np.cumsum([len(one) for one in each])])
    matrix = csr_matrix((np.ones(int(ends[-1]), dtype=np.int32), np.concatenate(each), ends), (1_000, shape[0]))
    plain = function(lambda: baselines.sparse_counts(matrix, carries), repeat=3)
    ours = function(lambda: [count_hits(literature, one) for one in each], repeat=2)
    rows.append(("counts of all terms, 1,000 claims", plain, ours, "scipy sparse product"))

    grid = np.asarray(arrays["grid_tenths"])
    plain = function(lambda: baselines.tree_background(xyz, study, grid / 10), repeat=1)
    ours = function(
        lambda: compute_background(arrays["peak_tenths"], arrays["peak_study"], literature.n_studies, grid, 10.0),
        repeat=3,
    )
    rows.append(("background of the 4 mm grid", plain, ours, "KD-tree in a loop"))

    points = grey_lattice(literature.brain, 4.0)
    spheres = active_points(
        arrays["peak_tenths"], arrays["peak_study"], literature.n_studies, points, 10.0, spacing_tenths=40
    )
    active = np.unpackbits(spheres, axis=1, count=len(points)).astype(np.int16)
    labels = carries.T.tocsr().astype(np.int16)
    plain = function(partial(baselines.blocked_product, labels, active), repeat=3)
    ours = function(lambda: count_points(literature, points, 10.0, spacing_tenths=40), repeat=3)
    rows.append(("counts of all terms on the 4 mm grid", plain, ours, "scipy sparse product, 256 columns a block"))
    del active
    for spacing in (4, 2):
        words = ("map", "--all-terms", "--hits-only", "--spacing", spacing, "--literature", where)
        ours = process(revinf(*words, "--out", where.parent / f"hits{spacing}"), repeat=1, warm=False)
        rows.append((f"map --all-terms --hits-only, {spacing} mm", plain, ours, "that product at 4 mm"))
    words = ("calibrate", "--jobs", -1, "--no-keep", "--literature", where, "--out", where.parent / "calibration")
    ours = process(revinf(*words), repeat=1, warm=False)
    rows.append(("calibrate, whole process", plain, ours, "(that product, for scale)"))

    claims = [
        Claim(id=str(at), term=TERM, peaks=[xyz[at].tolist()]) for at in random.integers(0, len(xyz), 20).tolist()
    ]
    ours = function(lambda: audit(claims, literature), repeat=1)
    rows.append(("audit, 20 claims, everything but files", plain, ours, "(KD-tree background, for scale)"))
    return rows


def tenfold(folder: Path, n_studies: int, n_terms: int) -> list[Row]:
    """Measure build and check on ten times the studies."""
    peaks, annotations = write_synthetic(folder, n_studies=n_studies, n_terms=n_terms)
    read = python(baselines.PANDAS_READ.format(peaks=str(peaks), annotations=str(annotations)), repeat=1)
    built = process(build(folder, peaks, annotations), repeat=1, warm=False)
    base = python("import numpy, typer, rich.table")
    check = process(revinf("check", "--literature", folder / "literature", "--peak", *PLACE, "--term", TERM), repeat=3)
    return [
        ("build, tenfold", read, built, "a script that only reads them"),
        ("check, tenfold", base, check, "import numpy, typer, rich.table"),
    ]


if __name__ == "__main__":
    main()
