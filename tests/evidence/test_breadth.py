"""Breadth: null for few hits, domains of five studies and more, and processes above their own brain-wide rate."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import stats

from revinf.evidence.asked_region import AskedRegion
from revinf.evidence.breadth import breadth_of
from revinf.evidence.sources import LiteratureSource, TableSource
from revinf.evidence.vocabulary import Vocabulary
from revinf.stats.diversity import diversity_intervals
from tests.evidence.worlds import A_MM, ELSEWHERE, A, B, made, mixed_studies
from tests.literature.in_memory import carriers_by_loop, hit_by_loop

WORDS = Vocabulary.of(
    [
        ("fear", "emotion", ""),
        ("invented joy", "emotion", ""),
        ("naming", "language", ""),
        ("reading", "language", ""),
        ("pain", "pain", ""),
    ],
    {"amygdala": "anatomy"},
)


def breadth_at(literature, words=WORDS, peaks=(A_MM,), radius=10.0, level=0.95):
    region = AskedRegion(peaks=peaks, radius_mm=radius)
    return breadth_of(LiteratureSource(literature).answer(region), words, level=level)


@pytest.mark.parametrize(("hits", "known"), [(19, False), (20, True)])
def test_diversity_is_null_below_twenty_hits(hits, known):
    # Every hit carries two processes: the studies are counted, not their labels.
    literature = made(
        (hits - 5, [A], ["fear", "naming"]), (5, [A], ["pain", "reading"]), (30, [B], ["fear"]), (30, [B], ["pain"])
    )
    found = breadth_at(literature)
    for part in ("functional_diversity", "category_diversity", "effective_domains", "effective_processes"):
        assert (getattr(found, part) is not None) is known
    assert (found.category_diversity_minimum is not None) is known
    assert (found.n_processes, found.n_domains) == (4, 3)
    assert found.activation_percentile > 50


@pytest.mark.parametrize(("pains", "n_domains"), [(4, 2), (5, 3)])
def test_domains_with_fewer_than_five_studies_are_left_out(pains, n_domains):
    literature = made(
        (12, [A], ["fear"]), (3, [A], ["invented joy", "naming"]), (9, [A], ["reading"]), (pains, [A], ["pain"]),
        (20, [B], ["naming"]), (8, [B], ["fear", "amygdala"]),
    )  # fmt: skip
    found = breadth_at(literature)
    active, total = [12 + 3, 3 + 9], [12 + 3 + 8, 3 + 9 + 20]  # emotion, language; three studies are in both
    if n_domains == 3:
        active, total = [*active, pains], [*total, pains]
    expected = diversity_intervals(active, total, minimum_hits=20)
    assert found.n_domains == n_domains
    assert found.functional_diversity == expected.functional
    assert found.category_diversity == expected.category
    assert found.effective_domains == expected.effective_number
    assert found.category_diversity_minimum == pytest.approx(1 - (n_domains - 1) ** 0.5 / n_domains)


def test_effective_processes_leave_out_words_that_are_no_processes():
    literature = made(
        (20, [A], ["fear"]), (10, [A], ["naming"]), (30, [A], ["amygdala"]), (20, [B], ["fear", "naming"])
    )
    found = breadth_at(literature)
    rates = np.array([20 / 40, 10 / 30])
    shares = rates / rates.sum()
    assert found.effective_processes.estimate == pytest.approx(np.exp(-(shares * np.log(shares)).sum()), rel=1e-12)
    assert found.effective_processes.low <= found.effective_processes.estimate <= found.effective_processes.high
    assert found.n_processes == 2


def test_one_domain_alone_has_no_diversity():
    literature = made((25, [A], ["fear"]), (25, [A], ["invented joy"]))
    found = breadth_at(literature)
    assert (found.n_domains, found.effective_domains, found.category_diversity_minimum) == (1, None, None)
    assert found.effective_processes is not None


@pytest.mark.parametrize("level", [0.5, 0.95])
@pytest.mark.parametrize("radius", [10.0, 6.0])
def test_processes_above_their_own_rate_are_those_of_a_plain_loop(mixed, radius, level):
    studies, grid = mixed_studies(), np.asarray(mixed._arrays["grid_tenths"]).astype(np.int64)
    share = []  # of the grey-matter locations whose sphere each study hits
    for peaks, _ in studies:
        near = np.zeros(len(grid), dtype=bool)
        for peak in peaks:
            near |= ((grid - peak) ** 2).sum(axis=1) <= round(10 * radius) ** 2
        share.append(near.mean())
    hits, above = hit_by_loop(studies, A, radius), 0
    for term in {name for _, terms in studies for name in terms} - {"amygdala"}:
        own = carriers_by_loop(studies, term)
        k, n = len(own & hits), len(own)
        low = stats.beta.ppf((1 - level) / 2, k + 0.5, n - k + 0.5)
        above += low > sum(share[i] for i in own) / n
    found = breadth_at(mixed, radius=radius, level=level)
    assert found.n_processes_above_own_rate == above
    assert found.n_processes == 7
    assert above > 0


@pytest.mark.parametrize("radius", [10.0, 6.0])
def test_percentile_is_the_share_of_grey_locations_that_fewer_studies_hit(mixed, radius):
    studies, grid = mixed_studies(), np.asarray(mixed._arrays["grid_tenths"]).astype(np.int64)
    hits = np.zeros(len(grid), dtype=int)
    for peaks, _ in studies:
        distance = ((grid[:, None] - np.array(peaks)[None]) ** 2).sum(axis=2)
        hits += (distance <= round(10 * radius) ** 2).any(axis=1)
    here = len(hit_by_loop(studies, A, radius))
    expected = 100 * ((hits < here).sum() + 0.5 * (hits == here).sum()) / len(grid)
    assert breadth_at(mixed, radius=radius).activation_percentile == pytest.approx(expected, rel=1e-12)


def test_percentile_and_own_rates_belong_to_single_spheres(mixed):
    found = breadth_at(mixed, peaks=(A_MM, (-40.0, 40.0, 10.0)))
    assert (found.activation_percentile, found.n_processes_above_own_rate) == (None, None)


def test_nowhere_is_below_all_that_is_hit():
    literature = made((10, [A], ["fear"]), (10, [ELSEWHERE], ["pain"]))
    assert breadth_at(literature, peaks=((0.0, -90.0, 0.0),)).activation_percentile < 50


def test_table_gives_processes_and_neither_domains_nor_own_rates(table_of):
    table = table_of((25, 10, 15, 50), more=[("fear", (10, 40, 30, 60))])
    found = breadth_of(TableSource(table).answer(AskedRegion(region="here")), WORDS)
    assert (found.n_domains, found.effective_domains, found.functional_diversity) == (None, None, None)
    assert (found.n_processes_above_own_rate, found.activation_percentile) == (None, None)
    assert found.effective_processes == diversity_intervals([10, 25], [40, 35], minimum_hits=20).effective_number
