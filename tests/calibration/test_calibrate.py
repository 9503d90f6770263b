"""Calibration on literatures whose truth is known, and on the open coordinates."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest

from revinf.calibration.calibrate import calibrate
from revinf.calibration.folds import grouped_folds
from revinf.calibration.verdict import verdict
from revinf.exceptions import InvalidClaimError
from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.kept_calibration import keep_calibration, kept_discount
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description
from revinf.stats.bayes import posterior_probability
from revinf.stats.estimates import Counts
from revinf.stats.ratio import likelihood_ratios

SPREAD = np.log(20) / 1.959964


def invented(folder: Path, *, copies: int, seed: int = 3, n_studies: int = 240) -> Literature:
    """Build a literature of three processes and six places; every peak stands `copies` times, 2 mm apart."""
    random = np.random.default_rng(seed)
    places = np.array([[-40, 20, 10], [30, -60, 40], [0, 50, 0], [10, -90, -5], [-60, -20, 5], [50, 10, 20]])
    rates = np.array([[0.6, 0.2, 0.2, 0.3, 0.3, 0.3], [0.2, 0.6, 0.2, 0.3, 0.3, 0.3], [0.2, 0.2, 0.6, 0.3, 0.3, 0.3]])
    peaks, terms = [], []
    for study in range(n_studies):
        process = study % 3
        hit = random.random(6) < rates[process]
        hit[3] |= not hit.any()
        for place in places[hit]:
            for copy in range(copies):
                x, y, z = place + random.integers(-2, 3, size=3) + [0, 0, 2 * copy]
                peaks.append(f"s{study:03d},{x},{y},{z}")
        terms.append(f"s{study:03d},process {'abc'[process]}")
    folder.mkdir(parents=True)
    (folder / "peaks.csv").write_text("study,x,y,z\n" + "\n".join(peaks) + "\n", encoding="utf-8")
    (folder / "terms.csv").write_text("study,term\n" + "\n".join(terms) + "\n", encoding="utf-8")
    options = ImportOptions(peaks=folder / "peaks.csv", annotations=folder / "terms.csv")
    return build_literature(options, folder / "literature", Description(name="invented", invented=True))[0]


def test_intervals_cover_and_posteriors_are_reliable_where_truth_is_drawn_from_the_prior() -> None:
    """ln R and the pooled rate drawn from the prior of formula 2: 95 % intervals cover, posteriors come true."""
    random = np.random.default_rng(11)
    n1, n0, n_tables = 40, 160, 4000
    share = n1 / (n1 + n0)
    ratio, p0 = np.zeros(n_tables), np.zeros(n_tables)
    for at in range(n_tables):
        while True:  # the corner where a rate would exceed 1 has no density
            r = np.exp(random.normal(0, SPREAD))
            q = random.beta(0.5, 0.5)
            base = q / (share * r + 1 - share)
            if base < 1 and base * r < 1:
                break
        ratio[at], p0[at] = r, base
    n11, n01 = random.binomial(n1, ratio * p0), random.binomial(n0, p0)
    tables = [Counts(int(a), n1 - int(a), int(b), n0 - int(b)) for a, b in zip(n11, n01, strict=True)]
    found = likelihood_ratios(tables)
    covered = np.mean([e.low <= r <= e.high for e, r in zip(found, ratio, strict=True) if e is not None])
    assert 0.93 <= covered <= 0.97

    # A further study at even odds that is active at the place: was the process there?
    there = random.random(n_tables) < 0.5
    active = random.random(n_tables) < np.where(there, ratio * p0, p0)
    forecast = np.array([posterior_probability(0.5, e.estimate) for e in found if e is not None])[active]
    logit = np.log(forecast / (1 - forecast))
    truth = there[active].astype(float)
    linear = pytest.importorskip("sklearn.linear_model")
    slope = float(linear.LogisticRegression(C=np.inf).fit(logit[:, None], truth).coef_[0, 0])
    # The standard error of this slope over 40 seeds is about 0.05; over the pooled draw below it is smaller.
    assert slope == pytest.approx(1, abs=0.15)


def test_reliability_slope_is_one_on_many_simulated_claims() -> None:
    """As above with 30,000 claims, so that the slope can be held to 0.05."""
    random = np.random.default_rng(12)
    n1, n0, n = 40, 160, 30_000
    share = n1 / (n1 + n0)
    r, q = np.exp(random.normal(0, SPREAD, 4 * n)), random.beta(0.5, 0.5, 4 * n)
    base = q / (share * r + 1 - share)
    fine = (base < 1) & (base * r < 1)
    r, base = r[fine][:n], base[fine][:n]
    n11, n01 = random.binomial(n1, r * base), random.binomial(n0, base)
    there = random.random(n) < 0.5
    active = random.random(n) < np.where(there, r * base, base)
    pairs = np.stack([n11, n01], axis=1)[active]
    distinct, inverse = np.unique(pairs, axis=0, return_inverse=True)
    solved = likelihood_ratios([Counts(int(a), n1 - int(a), int(b), n0 - int(b)) for a, b in distinct])
    forecast = np.array([posterior_probability(0.5, e.estimate) for e in solved if e is not None])[inverse.reshape(-1)]
    linear = pytest.importorskip("sklearn.linear_model")
    logit = np.log(forecast / (1 - forecast))[:, None]
    slope = float(linear.LogisticRegression(C=np.inf).fit(logit, there[active].astype(float)).coef_[0, 0])
    assert slope == pytest.approx(1, abs=0.05)


def test_planted_dependence_makes_the_report_say_that_the_product_overstates(tmp_path: Path) -> None:
    once = calibrate(invented(tmp_path / "once", copies=1), folds=4)
    thrice = calibrate(invented(tmp_path / "thrice", copies=4), folds=4)
    assert once.discount.exponent > 0.75
    assert thrice.discount.exponent < 0.4
    assert "overstates" in " ".join(thrice.verdict)
    assert "strongly overstates" not in " ".join(once.verdict)
    skills = [scores.brier_skill or 0 for scores in (thrice.combined, thrice.discounted)]
    assert skills[1] > skills[0]


def test_the_same_for_any_number_of_jobs(tmp_path: Path) -> None:
    literature = invented(tmp_path / "one", copies=1, n_studies=60)
    told: list[tuple[int, int]] = []
    one = calibrate(literature, folds=3, progress=lambda done, of: told.append((done, of)))
    assert told == [(step, 6) for step in range(1, 7)]
    assert calibrate(literature, folds=3, jobs=2).to_dict() == one.to_dict()
    json.dumps(one.to_dict(), allow_nan=False)


def test_groups_are_held_out_together() -> None:
    groups = np.repeat(np.arange(20), [1, 2, 3, 4] * 5)
    folds = grouped_folds(groups, 5)
    assert all(len(set(folds[groups == group])) == 1 for group in range(20))
    assert np.bincount(folds).max() - np.bincount(folds).min() <= 2
    with pytest.raises(InvalidClaimError):
        grouped_folds(groups, 21)


def test_a_literature_of_one_process_is_refused(tmp_path: Path) -> None:
    (tmp_path / "p.csv").write_text("study,x,y,z\na,1,2,3\nb,1,2,4\n", encoding="utf-8")
    (tmp_path / "t.csv").write_text("study,term\na,fear\nb,fear\n", encoding="utf-8")
    options = ImportOptions(peaks=tmp_path / "p.csv", annotations=tmp_path / "t.csv")
    literature = build_literature(options, tmp_path / "l", Description(name="x", invented=True))[0]
    with pytest.raises(InvalidClaimError, match="at least two processes"):
        calibrate(literature)


def test_the_discount_is_kept_with_its_literature_only(tmp_path: Path) -> None:
    literature = invented(tmp_path / "one", copies=1, n_studies=60)
    found = calibrate(literature, folds=3)
    keep_calibration(literature.folder, found.to_dict())
    again = Literature.open(literature.folder, verify=True)
    assert again.discount == (found.discount.exponent, 10.0)
    assert kept_discount(literature.folder, "another") is None
    for text in ("", "{}", "[1]", '{"discount": {"exponent": NaN}}', "[" * 5000):
        (literature.folder / "calibration.json").write_text(text, encoding="utf-8")
        assert kept_discount(literature.folder, literature.fingerprint) is None


def test_open_coordinates_rank_well_multiplied_and_are_far_too_sure(open_literature: Literature) -> None:
    found = calibrate(open_literature, folds=5)
    assert 0.0 <= (found.single.brier_skill or 0) <= 0.06
    assert (found.combined.area or 0) > 0.7
    assert (found.combined.brier_skill or 0) < 0
    words = " ".join(found.verdict)
    assert "far too sure" in words
    assert "overstates" in words
    assert verdict(found.single, found.combined, found.discounted, found.discount, found.terms) == found.verdict
