"""Worked 2x2 tables of papers and textbooks; the source stands beside each check.

Figures that a source prints are held to the printed digits. Figures of our own method on the same counts
(formula 2) are marked so: they come from an independent quadrature, see test_ratio_quantiles.py.
"""

from __future__ import annotations

import pytest
from statsmodels.stats.proportion import confint_proportions_2indep

from revinf.stats.bayes import observed_posterior, posterior_estimate, posterior_probability, prevalence
from revinf.stats.estimates import Counts
from revinf.stats.ratio import likelihood_ratio, observed_ratio

# Poldrack 2006, Trends Cogn Sci 10:59-63, table 1: Broca's area and language.
BROCA = Counts(166, 703, 199, 2154)

# Altman & Bland 1994, BMJ 308:1552 and 309:102: abnormal liver scan, given abnormal pathology or not.
LIVER = Counts(231, 27, 32, 54)
NORMAL_SCAN = Counts(27, 231, 54, 32)  # the same patients, with the normal scan as the finding

# Agresti, Categorical Data Analysis (from memory): heart attacks under placebo and under aspirin.
ASPIRIN = Counts(189, 11034 - 189, 104, 11037 - 104)


def digits(value, n):
    return f"{value:.{n}f}"


def test_broca_s_area_and_language_as_published_by_poldrack_2006():
    assert digits(BROCA.term_active / BROCA.term_total, 2) == "0.19"
    assert digits(observed_posterior(BROCA, 0.5), 2) == "0.69"
    assert digits(observed_ratio(BROCA), 1) == "2.3"


def test_broca_s_area_and_language_by_formula_2():
    # Not printed in the paper: our interval on its counts.
    ratio = likelihood_ratio(BROCA)
    posterior = posterior_estimate(0.5, ratio)
    assert [digits(x, 3) for x in (ratio.estimate, ratio.low, ratio.high)] == ["2.249", "1.857", "2.720"]
    assert [digits(x, 3) for x in (posterior.estimate, posterior.low, posterior.high)] == [
        "0.692",
        "0.650",
        "0.731",
    ]
    assert ratio.covers(2.3)
    assert posterior.covers(0.69)


def test_liver_scan_sensitivity_and_specificity_as_published_by_altman_and_bland_1994():
    assert digits(LIVER.term_active / LIVER.term_total, 2) == "0.90"
    assert digits(LIVER.other_inactive / LIVER.other_total, 2) == "0.63"


def test_liver_scan_predictive_values_as_published_by_altman_and_bland_1994():
    assert digits(prevalence(LIVER), 2) == "0.75"
    assert digits(observed_posterior(LIVER), 2) == "0.88"
    assert digits(1 - observed_posterior(NORMAL_SCAN), 2) == "0.67"
    assert digits(observed_posterior(LIVER, 0.25), 2) == "0.45"


def test_screening_example_of_eddy_1982():
    # From memory: prior 0.01, sensitivity 0.79, false-positive rate 0.096; answer 0.077.
    assert digits(posterior_probability(0.01, 0.79 / 0.096), 3) == "0.077"


def test_aspirin_trial_as_agresti_prints_it():
    # From memory: ratio 1.82, printed interval 1.43-2.30; recomputed, its upper end is 2.306.
    assert digits(observed_ratio(ASPIRIN), 2) == "1.82"
    low, high = confint_proportions_2indep(189, 11034, 104, 11037, compare="ratio", method="log")
    assert [digits(low, 3), digits(high, 3)] == ["1.433", "2.306"]


def test_aspirin_trial_by_formula_2_agrees_with_the_log_method_of_statsmodels():
    # Counts this large leave the prior little to say: both intervals agree to half a percent.
    ratio = likelihood_ratio(ASPIRIN)
    assert [digits(x, 3) for x in (ratio.estimate, ratio.low, ratio.high)] == ["1.814", "1.434", "2.306"]
    low, high = confint_proportions_2indep(189, 11034, 104, 11037, compare="ratio", method="log")
    assert ratio.low == pytest.approx(low, rel=0.005)
    assert ratio.high == pytest.approx(high, rel=0.005)


@pytest.mark.parametrize(
    ("counts", "estimate", "low", "high"),
    [
        (Counts(0, 63, 0, 388), "1.00", "0.050", "19.96"),
        (Counts(63, 0, 17, 371), "21.17", "14.00", "34.35"),
        (Counts(0, 3, 17, 371), "0.674", "0.042", "6.19"),
        (Counts(3, 0, 0, 448), "117.5", "18.3", "598.7"),
        (Counts(15, 48, 17, 371), "4.977", "2.602", "9.369"),
    ],
)
def test_extremes_of_formula_2_by_independent_quadrature(counts, estimate, low, high):
    # Source: recomputed from the definition of formula 2, not printed in any paper.
    ratio = likelihood_ratio(counts)
    for value, printed in ((ratio.estimate, estimate), (ratio.low, low), (ratio.high, high)):
        assert digits(value, len(printed.partition(".")[2])) == printed
