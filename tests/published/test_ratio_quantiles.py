"""Quantiles of the likelihood ratio against mpmath, which integrates the definition of formula 2.

ratio_quantiles_mpmath.txt says how the reference was made. Tolerance: 1e-6 on the posterior scale at
even odds, which is what the library promises for the ends of an interval.
"""

from __future__ import annotations

import csv
import math
from functools import cache

import mpmath
import numpy as np
import pytest
from mpmath import mp

from revinf.stats.estimates import Counts
from revinf.stats.ratio import log_ratio_quantiles
from tests.published.make_ratio_quantiles import CASES, LEVELS, NOTE, PRIORS, TABLE, Posterior, Settings

TOLERANCE = 1e-6
# A few seconds in pure Python; such a table comes out to 1e-9 even so.
COARSE = Settings(digits=18, order=8, growth=1.6, widest=6.0, drop=20.0)


@cache
def reference():
    found = {}
    with TABLE.open(encoding="utf-8", newline="") as stream:
        for row in csv.DictReader(stream):
            counts = Counts(*(int(row[name]) for name in ("n11", "n10", "n01", "n00")))
            found[counts, row["prior"], row["level"]] = float(row["log_ratio_quantile"])
    return found


def counts_of(case):
    hits1, n1, hits0, n0 = case
    return Counts(hits1, n1 - hits1, hits0, n0 - hits0)


def posterior(log_ratio):
    return 1 / (1 + np.exp(-np.asarray(log_ratio)))


def ours(counts, prior):
    return log_ratio_quantiles([counts], np.array([float(level) for level in LEVELS]), prior=prior)[0]


def test_the_reference_holds_every_case_of_the_script_that_made_it():
    wanted = {(counts_of(case), prior, level) for case in CASES for prior in PRIORS for level in LEVELS}
    assert set(reference()) == wanted
    assert len(CASES) >= 24
    assert "mpmath" in NOTE.read_text(encoding="utf-8")


@pytest.mark.parametrize("prior", PRIORS)
@pytest.mark.parametrize("case", CASES, ids="{0[0]} of {0[1]} v {0[2]} of {0[3]}".format)
def test_quantiles_agree_with_mpmath(case, prior):
    expected = [reference()[counts_of(case), prior, level] for level in LEVELS]
    found = ours(counts_of(case), prior)
    np.testing.assert_allclose(posterior(found), posterior(expected), rtol=0, atol=TOLERANCE)


def test_the_interval_of_log_r_agrees_to_a_thousandth_of_its_width():
    # The posterior scale hardly sees an error where R is beyond 1e6; the scale of ln R does.
    for (counts, prior, level), expected in reference().items():
        found = ours(counts, prior)
        error = abs(found[LEVELS.index(level)] - expected)
        assert error <= 1e-3 * (found[2] - found[0]), (counts, prior, level)


@pytest.mark.parametrize("case", [(15, 63, 17, 388), (2, 3, 1, 2)])
def test_a_table_solved_anew_by_mpmath_agrees(case):
    anew = [float(value) for value in Posterior(case, "shared", COARSE).quantiles(("0.025", "0.975"))]
    np.testing.assert_allclose(posterior(ours(counts_of(case), "shared")[[0, 2]]), posterior(anew), atol=TOLERANCE)
    stored = [reference()[counts_of(case), "shared", level] for level in ("0.025", "0.975")]
    np.testing.assert_allclose(anew, stored, rtol=0, atol=1e-8)


@pytest.mark.parametrize("counts", [Counts(15, 48, 17, 371), Counts(2, 1, 1, 1), Counts(3, 0, 17, 371)])
def test_independent_rates_agree_with_their_closed_form(counts):
    # Euler's integral: with the smaller rate integrated out, the density of ln R > 0 is
    # e^(-E ln R) B(A, B) 2F1(-C, A; A+B; 1/R), A = n11+n01+1, B = n10+1/2, C = n00-1/2, E = n01+1/2.
    n11, n10, n01, n00 = counts.as_tuple()
    power = n11 + n01 + 1

    def density(log_ratio):
        size = abs(log_ratio)
        miss, small_miss, fade = (n10, n00, n01) if log_ratio > 0 else (n00, n10, n11)
        series = mpmath.hyp2f1(0.5 - small_miss, power, power + miss + 0.5, mp.exp(-size))
        return mp.exp(-(fade + 0.5) * size) * mp.beta(power, miss + 0.5) * series

    found = [float(value) for value in ours(counts, "independent")]
    fixed = [-60, -20, -8, -4, -2, -1, -0.5, 0, 0.5, 1, 1.5, 2, 2.5, 3, 3.5, 4, 5, 6, 8, 12, 60]
    breaks = sorted([*fixed, *found])
    masses = [mp.quad(density, breaks[i : i + 2]) for i in range(len(breaks) - 1)]
    total = math.fsum(masses)
    for value, level in zip(found, LEVELS, strict=True):
        below = math.fsum(masses[: breaks.index(value)])
        assert below / total == pytest.approx(float(level), abs=TOLERANCE)
