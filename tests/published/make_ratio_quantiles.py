"""Make ratio_quantiles_mpmath.csv: reference quantiles of ln R, straight from the definition (formula 2).

Run `python tests/published/make_ratio_quantiles.py [processes]` from the checkout. Nothing of
`revinf.stats` is used. The density is taken as it is defined, in (q, ln R) for the shared prior and in
(p0, ln R) for independent Jeffreys rates, with 1 - p as a subtraction; 45 decimal digits make its loss
of digits harmless, where the library's double precision needs algebra. Both integrals are
Gauss-Legendre sums over panels that grow outwards from the peak (the library: a sinh-stretched
trapezoid inside, equal panels in a cube root outside). Doubles only place the inner panels.
Quantiles are roots of the integrated density, each found by Newton's method with a fresh integral.
"""

from __future__ import annotations

import csv
import datetime
import platform
import sys
from collections.abc import Callable
from functools import cache
from itertools import pairwise
from multiprocessing import Pool
from pathlib import Path
from typing import NamedTuple

import mpmath
import numpy as np
from mpmath import mp, mpf

TABLE = Path(__file__).with_name("ratio_quantiles_mpmath.csv")
NOTE = Path(__file__).with_name("ratio_quantiles_mpmath.txt")
LEVELS = ("0.025", "0.5", "0.975")
PRIORS = ("shared", "independent")
MILLION = 10**6

CASES = (  # hits and studies with the term, hits and studies without it
    (0, 63, 0, 388),
    (63, 63, 17, 388),
    (0, 3, 17, 388),
    (3, 3, 0, 448),
    (15, 63, 17, 388),
    (1, 1, 0, 1),
    (1, 1, 1, 1),
    (0, 1, 0, 1),
    (2, 3, 1, 2),
    (1, 63, 0, 388),
    (62, 63, 388, 388),
    (63, 63, 388, 388),
    (1, 1, 200000, MILLION),
    (1, 1, 50000, MILLION),
    (1, 1, 500, 10000),
    (0, 1, MILLION, MILLION),
    (1, MILLION, 0, MILLION),
    (MILLION, MILLION, 0, MILLION),
    (MILLION, MILLION, MILLION, MILLION),
    (500000, MILLION, 500000, MILLION),
    (1, MILLION, 1, MILLION),
    (0, MILLION, 1, MILLION),
    (0, MILLION, 0, MILLION),
    (999999, MILLION, MILLION, MILLION),
    (3, 10, 300000, MILLION),
    (10, 10, 999990, MILLION),
    (166, 869, 199, 2353),
    (189, 11034, 104, 11037),
    (231, 258, 32, 86),
    (5, 10, 5, 10),
)


class Settings(NamedTuple):
    """How finely to integrate; the second set of the check is finer in every respect."""

    digits: int = 45
    order: int = 16
    growth: float = 1.35
    widest: float = 5.0
    drop: float = 36.0  # a tail is cut where the density is below e^-36 = 2e-16 of its top


FINER = Settings(digits=55, order=24, growth=1.2, widest=3.0, drop=42.0)


@cache
def gauss_legendre(order: int, digits: int) -> list[tuple[mpf, mpf]]:
    """Nodes and weights on [-1, 1]: Newton's method on the Legendre recurrence."""
    rule = []
    with mp.workdps(digits + 5):
        for i in range(order):
            x = mp.cos(mp.pi * (order - i - mpf(1) / 4) / (order + mpf(1) / 2))
            for _ in range(8):
                before, value = mpf(1), x
                for k in range(2, order + 1):
                    before, value = value, ((2 * k - 1) * x * value - (k - 1) * before) / k
                slope = order * (before - x * value) / (1 - x * x)
                x -= value / slope
            rule.append((x, 2 / ((1 - x * x) * slope * slope)))
    return rule


def integral(f: Callable[[mpf], mpf], start: mpf, stop: mpf, settings: Settings) -> mpf:
    """Integrate over one panel."""
    middle, half = (start + stop) / 2, (stop - start) / 2
    return half * mp.fsum(w * f(middle + half * x) for x, w in gauss_legendre(settings.order, settings.digits))


class Posterior:
    """The unnormalised posterior of one table."""

    def __init__(self, case: tuple[int, int, int, int], prior: str, settings: Settings, limit: float = 20.0):
        hits1, n1, hits0, n0 = case
        self.n11, self.n10, self.n01, self.n00 = hits1, n1 - hits1, hits0, n0 - hits0
        self.shared, self.settings = prior == "shared", settings
        with mp.workdps(settings.digits):
            self.w = mpf(n1) / (n1 + n0)
            self.sd = mp.log(mpf(limit)) / mpf("1.959964")

    def kernel(self, v: mpf, log_ratio: mpf) -> mpf:
        """Density of (v, ln R), where v is the logit of the free rate as a share of its largest value."""
        ratio, share = mp.exp(log_ratio), 1 / (1 + mp.exp(-v))
        slope = share * (1 - share)
        half = mpf(1) / 2
        if self.shared:
            pooled = self.w * ratio + 1 - self.w  # q = p0 * pooled
            largest = pooled * min(1, 1 / ratio)  # p0 < 1 and p1 < 1
            q = largest * share
            p0 = q / pooled
            log = -half * (mp.log(q) + mp.log(1 - q)) - half * (log_ratio / self.sd) ** 2
            shift = 0
        else:
            largest = min(1, 1 / ratio)
            p0 = largest * share
            log, shift = log_ratio + mp.log(p0), -half  # dp1 = p1 d ln R
        p1 = ratio * p0
        for exponent, value in ((self.n11 + shift, p1), (self.n01 + shift, p0)):
            log += exponent * mp.log(value) if exponent else 0
        for exponent, value in ((self.n10 + shift, 1 - p1), (self.n00 + shift, 1 - p0)):
            log += exponent * mp.log(value) if exponent else 0
        return mp.exp(log) * largest * slope

    def density(self, log_ratio: mpf) -> mpf:
        """Density of ln R: the free rate integrated out."""
        edges = self._inner_edges(float(log_ratio))
        return mp.fsum(integral(lambda v: self.kernel(v, log_ratio), a, b, self.settings) for a, b in pairwise(edges))

    def _inner_edges(self, log_ratio: float) -> list[mpf]:
        """Panels around the top of the kernel in v, placed in doubles."""
        sign, size = np.sign(log_ratio), abs(log_ratio)
        small, large = (self.n00, self.n10) if sign > 0 else (self.n10, self.n00)
        lesser = float(1 - self.w if sign > 0 else self.w)
        shift = 0.0 if self.shared else -0.5
        power = self.n11 + self.n01 + (0.5 if self.shared else 1.0)

        def height(v: np.ndarray) -> np.ndarray:
            log_p, log_q = -np.logaddexp(0, -v), -np.logaddexp(0, v)
            q, p = np.exp(log_q), np.exp(log_p)
            log = power * log_p + (large + shift + 1) * log_q
            log = log + (small + shift) * np.log(q + p * -np.expm1(-size))
            return log - 0.5 * np.log(q + p * lesser * -np.expm1(-size)) if self.shared else log

        low, high = -160.0, 160.0
        for _ in range(9):
            grid = np.linspace(low, high, 161)
            best = int(np.argmax(height(grid)))
            low, high = grid[max(best - 2, 0)], grid[min(best + 2, 160)]
        top = (low + high) / 2
        peak = float(height(np.array(top)))

        def reach(side: int, drop: float) -> float:
            near, far = 1e-9, 1e-9
            while peak - height(np.array(top + side * far)) < drop:
                near, far = far, far * 2
            for _ in range(12):
                middle = (near + far) / 2
                falls = peak - height(np.array(top + side * middle)) < drop
                near, far = (middle, far) if falls else (near, middle)
            return far

        edges = [top]
        for side in (-1, 1):
            end, step, place = reach(side, self.settings.drop), reach(side, 1.5), 0.0
            while place < end:
                place = min(place + step, end)
                edges.append(top + side * place)
                step = min(step * self.settings.growth, self.settings.widest)
        return [mpf(edge) for edge in sorted(edges)]

    def outer_panels(self) -> list[tuple[mpf, mpf, mpf]]:
        """Panels in ln R with their mass: from the observed ratio outwards, finer at cusp and cliffs."""
        a, b, c, d = (n + 0.5 for n in (self.n11, self.n10, self.n01, self.n00))
        start = float(np.log(a / (a + b)) - np.log(c / (c + d)))
        scale = float(np.sqrt(b / (a * (a + b)) + d / (c * (c + d))))
        scale = min(scale, float(self.sd)) if self.shared else scale
        breaks = np.array([0.0] + [side * scale * 8.0**-k for side in (-1, 1) for k in range(8)])
        # Where the larger probability reaches 1 the density breaks off, over the width of the other's log.
        for side, hits, misses in ((1, c, d), (-1, a, b)):
            cliff, width = -side * np.log(hits / (hits + misses)), np.sqrt(misses / (hits * (hits + misses)))
            breaks = np.append(breaks, cliff + side * width * np.array([-512, -64, -8, -4, -2, 0, 2, 4, 8]))
        panels: list[tuple[mpf, mpf, mpf]] = []
        top = self.density(mpf(start if start else scale / 100))
        for side in (-1, 1):
            place, step = start, 1.5 * scale
            while True:
                stop = place + side * step
                between = breaks[((breaks - place) * side > 1e-12 * scale) & ((breaks - stop) * side < 0)]
                if between.size:
                    stop = float(between.min() if side > 0 else between.max())
                else:
                    step = min(step * self.settings.growth, self.settings.widest)
                edges = sorted((mpf(place), mpf(stop)))
                panels.append((*edges, integral(self.density, *edges, self.settings)))
                end = self.density(mpf(stop if stop else side * scale * 1e-9))
                top = max(top, end)
                if end < top * mp.exp(-self.settings.drop):
                    break
                place = stop
        return sorted(panels)

    def quantiles(self, levels: tuple[str, ...] = LEVELS) -> list[mpf]:
        """Quantiles of ln R."""
        with mp.workdps(self.settings.digits):
            panels = self.outer_panels()
            total = mp.fsum(mass for _, _, mass in panels)
            return [self._quantile(panels, mpf(level) * total, total) for level in levels]

    def _quantile(self, panels: list[tuple[mpf, mpf, mpf]], wanted: mpf, total: mpf) -> mpf:
        """Root of the distribution function: Newton inside the panel, halving where that would leave it."""
        index = 0
        while wanted > panels[index][2]:
            wanted -= panels[index][2]
            index += 1
        left, right, mass = panels[index]
        low, high = left, right
        x = left + (right - left) * wanted / mass
        for _ in range(80):
            excess = integral(self.density, left, x, self.settings) - wanted
            if abs(excess) < total * mpf("1e-13"):
                break
            low, high = (x, high) if excess < 0 else (low, x)
            step = x - excess / self.density(x)
            x = step if low < step < high else (low + high) / 2
        return x


def solve(job: tuple[tuple[int, int, int, int], str]) -> list[list[str]]:
    """Rows of the file for one table and prior."""
    case, prior = job
    hits1, n1, hits0, n0 = case
    found = Posterior(case, prior, Settings()).quantiles()
    counts = [str(n) for n in (hits1, n1 - hits1, hits0, n0 - hits0)]
    print(case, prior, [mp.nstr(q, 12) for q in found], file=sys.stderr, flush=True)
    return [[*counts, prior, level, mp.nstr(q, 15)] for level, q in zip(LEVELS, found, strict=True)]


def main(n_processes: int) -> None:
    """Write the file and its note."""
    jobs = [(case, prior) for case in CASES for prior in PRIORS]
    with Pool(n_processes) as pool:
        solved = pool.map(solve, jobs, chunksize=1)
    with TABLE.open("w", newline="", encoding="utf-8") as stream:
        writer = csv.writer(stream, lineterminator="\n")
        writer.writerow(["n11", "n10", "n01", "n00", "prior", "level", "log_ratio_quantile"])
        writer.writerows(row for rows in solved for row in rows)
    NOTE.write_text(
        f"""ratio_quantiles_mpmath.csv: posterior quantiles of ln R, the natural log of the likelihood ratio.

Made by      tests/published/make_ratio_quantiles.py (its docstring says how); generated, not for editing
With         mpmath {mpmath.__version__}, Python {platform.python_version()}
On           {datetime.date.today().isoformat()}
Precision    {Settings().digits} decimal digits; Gauss-Legendre of order {Settings().order} on panels;
             quantiles to 1e-13 of probability
Columns      counts n11, n10, n01, n00; prior; level (probability); log_ratio_quantile (no unit)
Tolerance    1e-6 on the posterior scale at even odds, |logistic(ours) - logistic(reference)|: the promise
             made for the ends of an interval. The reference itself is far better than that: of its 60
             pairs of table and prior, the nine that were solved again with finer settings (FINER in the
             script; cusps, cliffs, zero cells) move by 2.5e-11 at most.
""",
        encoding="utf-8",
    )


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 1)
