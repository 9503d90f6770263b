"""The posterior of a pattern against scikit-learn's BernoulliNB(alpha=0.5), fitted to simulated studies."""

from __future__ import annotations

import numpy as np
import pytest
from sklearn.naive_bayes import BernoulliNB

from revinf.stats.estimates import Counts
from revinf.stats.product import naive_bayes_posterior, product_of_ratios


def simulated(seed, n_regions, n_studies=120):
    """Return invented studies: which regions each hits, and whether it carries the term."""
    rng = np.random.default_rng(seed)
    term = rng.random(n_studies) < 0.3
    rates = np.where(term[:, None], rng.random(n_regions), rng.random(n_regions))
    return rng.random((n_studies, n_regions)) < rates, term


def tables_of(hits, term):
    return [
        Counts(int(h[term].sum()), int((~h[term]).sum()), int(h[~term].sum()), int((~h[~term]).sum())) for h in hits.T
    ]


@pytest.mark.parametrize("seed", range(5))
@pytest.mark.parametrize("n_regions", [1, 3, 8])
@pytest.mark.parametrize("prior", [0.1, 0.5])
def test_every_pattern_has_the_posterior_of_scikit_learn(seed, n_regions, prior):
    hits, term = simulated(seed, n_regions)
    classifier = BernoulliNB(alpha=0.5, class_prior=[1 - prior, prior]).fit(hits, term)
    patterns = np.random.default_rng(seed + 100).random((20, n_regions)) < 0.5
    patterns[0] = True
    found = [naive_bayes_posterior(tables_of(hits, term), prior, row) for row in patterns.tolist()]
    np.testing.assert_allclose(found, classifier.predict_proba(patterns)[:, 1], rtol=1e-10)
    assert naive_bayes_posterior(tables_of(hits, term), prior) == found[0]


def test_the_product_is_the_likelihood_ratio_of_scikit_learn():
    hits, term = simulated(11, 4)
    classifier = BernoulliNB(alpha=0.5).fit(hits, term)
    log_ratio = classifier.feature_log_prob_[1] - classifier.feature_log_prob_[0]
    assert product_of_ratios(tables_of(hits, term)) == pytest.approx(np.exp(log_ratio.sum()), rel=1e-10)
