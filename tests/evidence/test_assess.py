"""Every number of an assessment, recomputed from the tables of the tiny literature by plain counting."""

from __future__ import annotations

import csv
from itertools import product

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats
from statsmodels.stats.multitest import multipletests

from revinf.base_rates.table import BaseRateTable
from revinf.base_rates.table_rows import TableRow
from revinf.evidence.assess import Choices, assess, choices_of
from revinf.evidence.claim import Claim
from revinf.evidence.vocabulary import Vocabulary
from revinf.exceptions import InvalidClaimError, InvalidCountError, InvalidProbabilityError, UnknownTermError

PLACES = {"A": (-40.0, 20.0, 10.0), "B": (30.0, -60.0, 40.0), "nowhere": (60.0, 0.0, -20.0)}
TERMS = ("invented naming", "invented reading", "invented waiting")


@pytest.fixture(scope="module")
def recount(invented_files):
    """Count (n11, n10, n01, n00) from the files with nothing of the package."""
    peaks, terms = {}, {}
    for row in csv.DictReader(invented_files.peaks.read_text(encoding="utf-8").splitlines()):
        peaks.setdefault(row["study"], []).append([float(row[axis]) for axis in "xyz"])
    for row in csv.DictReader(invented_files.annotations.read_text(encoding="utf-8").splitlines()):
        terms.setdefault(row["term"], set()).add(row["study"])

    def count(term, place, radius=10.0):
        hit = {
            study: bool((np.linalg.norm(np.array(points) - place, axis=1) <= radius).any())
            for study, points in peaks.items()
        }
        carried = [study in terms[term] for study in hit]
        pairs = list(zip(carried, hit.values(), strict=True))
        return tuple(pairs.count(pair) for pair in product((True, False), repeat=2))

    return count


def reference_quantiles(counts, level=0.95):
    """Formula 2 on a plain grid: q ~ Beta(1/2, 1/2), ln R ~ Normal(0, ln 20 / 1.959964)."""
    n11, n10, n01, n00 = counts
    w = (n11 + n10) / sum(counts)
    logit_q = np.linspace(-16, 10, 1301)[:, None]
    log_r = np.linspace(-9, 9, 1801)[None, :]
    q, r = 1 / (1 + np.exp(-logit_q)), np.exp(log_r)
    p0 = q / (w * r + 1 - w)
    p1 = r * p0
    inside = (p0 < 1) & (p1 < 1)
    p0, p1 = np.where(inside, p0, 0.5), np.where(inside, p1, 0.5)
    log_density = (
        stats.binom.logpmf(n11, n11 + n10, p1)
        + stats.binom.logpmf(n01, n01 + n00, p0)
        + 0.5 * np.log(q)
        + 0.5 * np.log1p(-q)  # Beta(1/2, 1/2) with dq = q (1 - q) d logit q
        + stats.norm.logpdf(log_r, 0, np.log(20) / 1.959964)
    )
    mass = np.where(inside, np.exp(log_density), 0).sum(axis=0)
    cumulated = np.cumsum(mass) - mass / 2
    tail = (1 - level) / 2
    return np.exp(np.interp([0.5, tail, 1 - tail], cumulated / mass.sum(), log_r[0]))


@pytest.mark.parametrize(("term", "place"), [*product(TERMS, ("A", "B"))])
def test_counts_and_observed_figures_are_those_of_plain_counting(invented_literature, recount, term, place):
    n11, n10, n01, n00 = recount(term, PLACES[place])
    answer = assess(Claim(term=term, peaks=[PLACES[place]], prior=0.3), invented_literature)
    assert answer.counts.as_tuple() == (n11, n10, n01, n00)
    p1, p0 = n11 / (n11 + n10), n01 / (n01 + n00)
    if p0:
        assert answer.likelihood_ratio.observed == pytest.approx(p1 / p0, rel=1e-12)
    else:
        assert answer.likelihood_ratio.observed is None
    assert answer.posterior.observed == pytest.approx(0.3 * p1 / (0.3 * p1 + 0.7 * p0), rel=1e-12)
    assert answer.posterior_at_prevalence.prior == (n11 + n10) / 8
    assert answer.posterior_at_prevalence.observed == n11 / (n11 + n01)


@pytest.mark.parametrize(
    ("term", "place"), [("invented reading", "B"), ("invented waiting", "B"), ("invented naming", "A")]
)
def test_ratio_and_posterior_agree_with_a_plain_grid(invented_literature, recount, term, place):
    median, low, high = reference_quantiles(recount(term, PLACES[place]))
    answer = assess(Claim(term=term, peaks=[PLACES[place]], prior=0.3), invented_literature)
    value, posterior = answer.likelihood_ratio.value, answer.posterior.value
    assert (value.estimate, value.low, value.high) == pytest.approx((median, low, high), rel=3e-3)
    odds = 0.3 / 0.7
    for ours, ratio in ((posterior.estimate, median), (posterior.low, low), (posterior.high, high)):
        assert ours == pytest.approx(odds * ratio / (1 + odds * ratio), abs=1e-3)
    for item in answer.required_prior:
        # The prior that it takes, put through Bayes' rule, gives the target.
        for prior, ratio in ((item.estimate, value.estimate), (item.at_low, value.low)):
            assert prior * ratio / (prior * ratio + 1 - prior) == pytest.approx(item.target, rel=1e-12)
    assert [item.target for item in answer.required_prior] == [0.80, 0.95]


@pytest.mark.parametrize("level", [0.5, 0.9, 0.95, 0.99])
def test_rates_are_jeffreys_medians_and_quantiles(invented_literature, recount, level):
    n11, n10, n01, n00 = recount("invented reading", PLACES["B"])
    answer = assess(Claim(term="invented reading", peaks=[PLACES["B"]]), invented_literature, Choices(level=level))
    expected = {
        "active_given_term": (n11, n11 + n10),
        "active_given_other": (n01, n01 + n00),
        "activation": (n11 + n01, 8),
        "prevalence": (n11 + n10, 8),
    }
    for name, (k, n) in expected.items():
        rate = getattr(answer.rates, name)
        levels = [0.5, (1 - level) / 2, (1 + level) / 2]
        reference = stats.beta.ppf(levels, k + 0.5, n - k + 0.5)
        assert (rate.estimate, rate.low, rate.high) == pytest.approx(reference, abs=1e-6)
    assert answer.level == level


@pytest.mark.parametrize(("term", "place"), [*product(TERMS, ("A", "B"))])
def test_association_is_fishers_p_and_the_false_discovery_q_over_the_processes(
    invented_literature, recount, term, place
):
    tables = [np.reshape(recount(name, PLACES[place]), (2, 2)) for name in TERMS]
    p_values = [stats.fisher_exact(table).pvalue for table in tables]
    q_values = multipletests(p_values, method="fdr_bh")[1]
    answer = assess(Claim(term=term, peaks=[PLACES[place]]), invented_literature).association
    assert answer.fisher_p == pytest.approx(p_values[TERMS.index(term)], rel=1e-9)
    assert answer.q == pytest.approx(q_values[TERMS.index(term)], rel=1e-9)


def test_terms_that_are_no_processes_stay_out_of_the_family_of_q(table_of):
    more = [("fear", (3, 50, 29, 401)), ("verbal material", (30, 60, 2, 391)), ("amygdala", (30, 40, 2, 411))]
    p_values = [stats.fisher_exact(t).pvalue for t in ([[15, 48], [17, 371]], [[3, 47], [29, 372]])]
    table = table_of((15, 48, 17, 371), more=more)
    answer = assess(Claim(term="pain", region="here"), table).association
    assert answer.q == pytest.approx(multipletests(p_values, method="fdr_bh")[1][0], rel=1e-9)
    claimed = assess(Claim(term="amygdala", region="here"), table).association
    with_it = [stats.fisher_exact([[30, 10], [2, 409]]).pvalue, *p_values]
    assert claimed.q == pytest.approx(multipletests(with_it, method="fdr_bh")[1][0], rel=1e-9)


def test_prior_prevalence_is_the_share_of_the_studies_and_gives_the_plain_share_of_the_hits(table_of):
    answer = assess(Claim(term="pain", region="here", prior="prevalence"), table_of((15, 48, 17, 371)))
    assert answer.posterior.prior == answer.claim.prior == 63 / 451
    assert answer.posterior.observed == 15 / 32
    assert answer.posterior == answer.posterior_at_prevalence


@settings(max_examples=60, deadline=None)
@given(st.integers(0, 40), st.integers(0, 40), st.integers(0, 400), st.integers(0, 400), st.floats(0.001, 0.999))
def test_any_counts_give_an_ordered_answer_in_strict_json(n11, n10, n01, n00, prior):
    import json

    row = TableRow("here", "pain", n11, n11 + n10, n01, n01 + n00)
    claim, table = Claim(term="pain", region="here", prior=prior), BaseRateTable([row], name="t")
    if not n11 + n10 or not n01 + n00:
        with pytest.raises((InvalidClaimError, UnknownTermError)):
            assess(claim, table)
        return
    answer = assess(claim, table)
    value, posterior = answer.likelihood_ratio.value, answer.posterior.value
    assert 0 < value.low <= value.estimate <= value.high
    assert 0 <= posterior.low <= posterior.estimate <= posterior.high <= 1
    decided = answer.likelihood_ratio.direction
    assert decided == ("for" if value.low > 1 else "against" if value.high < 1 else "undecided")
    # Equal where the ratio differs from 1 by less than a posterior can show.
    assert decided != "for" or posterior.low >= prior
    assert decided != "against" or posterior.high <= prior
    assert decided != "undecided" or posterior.low - 1e-12 <= prior <= posterior.high + 1e-12
    json.dumps(answer.to_dict(), allow_nan=False)


def test_other_priors_of_the_ratio_change_the_answer_and_only_the_answer(table_of):
    claim, table = Claim(term="pain", region="here"), table_of((3, 10, 4, 200))
    shared, independent, tight = (
        assess(claim, table, choices)
        for choices in (Choices(), Choices(ratio_prior="independent"), Choices(ratio_limit=3.0))
    )
    assert shared.counts == independent.counts == tight.counts
    estimates = [a.likelihood_ratio.value.estimate for a in (tight, shared, independent)]
    assert estimates == sorted(estimates)
    assert len(set(estimates)) == 3


def test_term_on_every_study_of_a_literature_is_refused_in_one_line(invented_files, tmp_path):
    from dataclasses import replace

    from revinf.literature.building import build_literature
    from revinf.literature.manifest import Description

    terms = tmp_path / "terms.csv"
    terms.write_text("study,term\n" + "".join(f"s{i},everywhere\n" for i in range(1, 9)), encoding="utf-8")
    options = replace(invented_files, annotations=terms)
    literature = build_literature(options, tmp_path / "lit", Description(name="all", invented=True))[0]
    with pytest.raises(InvalidClaimError) as caught:
        assess(Claim(term="everywhere", peaks=[PLACES["A"]]), literature)
    assert str(caught.value).startswith("every counted study carries 'everywhere', so there is nothing to")
    assert "\n" not in str(caught.value)


def test_unknown_term_names_the_near_misses(invented_literature):
    with pytest.raises(UnknownTermError) as caught:
        assess(Claim(term="invented nameing", peaks=[PLACES["A"]]), invented_literature)
    assert "the literature 'tiny invented literature' carries the term 'invented nameing'" in str(caught.value)
    assert caught.value.near[0] == "invented naming"
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize("asked", ["mentalising", "Mentalizing"])
def test_synonym_of_a_term_is_named_as_the_same_process(table_of, asked):
    table = table_of((15, 48, 17, 371), term="theory of mind")
    with pytest.raises(UnknownTermError) as caught:
        assess(Claim(term=asked, region="here"), table)
    assert "it calls the same process 'theory of mind'" in str(caught.value)
    assert caught.value.near == ("theory of mind",)


def test_misspelt_synonym_leads_to_the_term(table_of):
    table = table_of((15, 48, 17, 371), term="theory of mind")
    with pytest.raises(UnknownTermError, match="did you mean 'theory of mind'"):
        assess(Claim(term="mentalisin", region="here"), table)


def test_term_without_a_single_study_is_unknown(table_of):
    table = table_of((0, 0, 5, 100), more=[("fear", (1, 5, 4, 100))])
    with pytest.raises(UnknownTermError, match="no study in the table 'small table' carries the term 'pain'"):
        assess(Claim(term="pain", region="here"), table)


@pytest.mark.parametrize(
    ("changes", "error", "words"),
    [
        ({"level": 1.0}, InvalidProbabilityError, "level must lie strictly between 0 and 1, but got 1.0"),
        (
            {"ratio_prior": "flat"},
            InvalidClaimError,
            "ratio prior must be shared or independent, but got 'flat'",
        ),
    ],
)
def test_choices_that_mean_nothing_are_refused(changes, error, words):
    with pytest.raises(error, match=words):
        choices_of(**({"level": 0.95, "ratio_prior": "shared", "ratio_limit": 20.0} | changes))


@pytest.mark.parametrize("limit", [1.0, 0.5, float("nan"), float("inf")])
def test_limit_of_the_ratio_that_is_no_limit_is_refused(table_of, limit):
    with pytest.raises(InvalidCountError, match="limit of the ratio's prior must be above 1"):
        assess(Claim(term="pain", region="here"), table_of((1, 2, 3, 4)), Choices(ratio_limit=limit))


def test_own_vocabulary_decides_what_is_a_process(table_of):
    words = Vocabulary.of([("fear", "emotion", "")], {"pain": "sensation"})
    answer = assess(Claim(term="pain", region="here"), table_of((15, 48, 17, 371)), Choices(vocabulary=words))
    assert "not-a-process" in {caution.code for caution in answer.cautions}
