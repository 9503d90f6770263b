"""Processes at a place, ranked by shrunk rate with kin apart; the best rival is met head to head."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import stats

from revinf.base_rates.counting import TermCounts
from revinf.evidence.assess import Choices, assess
from revinf.evidence.claim import Claim
from revinf.evidence.ratio_settings import RatioSettings
from revinf.evidence.selectivity import RivalRequest, select
from revinf.evidence.vocabulary import Vocabulary, shipped_vocabulary
from revinf.exceptions import UnknownTermError
from revinf.stats.bayes import posterior_estimate
from revinf.stats.estimates import Counts
from revinf.stats.head_to_head import head_to_head
from revinf.stats.ratio import likelihood_ratio
from revinf.stats.shrinkage import fit_beta_binomial
from tests.evidence.worlds import A_MM, ELSEWHERE, A, B, made, mixed_studies
from tests.literature.in_memory import carriers_by_loop, hit_by_loop

N_STUDIES = 400
RATES = {  # (hits, studies) at one invented place where 100 of 400 studies hit
    "invented frying": (12, 30),
    "invented humming": (12, 30),
    "invented asking": (40, 80),
    "invented rare": (2, 3),
    "invented sleeping": (3, 60),
    "pain": (30, 90),
    "amygdala": (50, 55),
}


def term_counts(rates=RATES, hits=100, n_studies=N_STUDIES) -> TermCounts:
    active = np.array([k for k, _ in rates.values()], dtype=np.int64)
    total = np.array([n for _, n in rates.values()], dtype=np.int64)
    return TermCounts(
        terms=list(rates),
        term_active=active,
        term_total=total,
        other_active=hits - active,
        other_total=n_studies - total,
    )


def chosen(term, counts=None, words=None, **request):
    counts = counts or term_counts()
    return select(
        counts.terms.index(term),
        counts,
        None,
        words or shipped_vocabulary(),
        RivalRequest(**request),
        RatioSettings(),
    )


def ranking(rates, excluded=()):
    """Rank by the median of Beta(mu M + k, (1 - mu) M + n - k); ties by number of studies, then name."""
    kept = {name: pair for name, pair in rates.items() if name not in excluded and name != "amygdala"}
    fit = fit_beta_binomial([k for k, _ in kept.values()], [n for _, n in kept.values()])
    a, b = fit.mean * fit.strength, (1 - fit.mean) * fit.strength
    medians = {name: stats.beta.median(a + k, b + n - k) for name, (k, n) in rates.items()}
    order = sorted(kept, key=lambda name: (-round(medians[name], 9), -kept[name][1], name))
    return order, medians


@pytest.mark.parametrize("term", [name for name in RATES if name != "amygdala"])
def test_rank_is_by_the_shrunk_rate_and_ties_go_by_name(term):
    order, medians = ranking(RATES)
    found = chosen(term)
    assert order.index("invented frying") + 1 == order.index("invented humming")
    assert found.rank == order.index(term) + 1
    assert found.n_process_terms == len(order) == 6
    assert found.n_rivals_ahead == found.rank - 1
    assert [rival.term for rival in found.rivals] == [name for name in order if name != term]
    assert found.best_rival == found.rivals[0].term
    assert found.shrunk_rate == pytest.approx(medians[term], abs=1e-6)
    for rival in found.rivals:
        k, n = RATES[rival.term]
        assert rival.shrunk_rate == pytest.approx(medians[rival.term], abs=1e-6)
        assert rival.rate == k / n
        assert rival.counts == Counts(k, n - k, 100 - k, N_STUDIES - n - 100 + k)
        assert rival.likelihood_ratio == likelihood_ratio(rival.counts)
        assert rival.posterior == posterior_estimate(0.5, rival.likelihood_ratio)


def test_rare_fluke_does_not_lead_a_well_supported_process():
    """The crude rate of 2 in 3 is the highest of all processes."""
    found = chosen("invented sleeping")
    assert max((rival.rate, rival.term) for rival in found.rivals)[1] == "invented rare"
    assert found.best_rival == "invented asking"
    assert [rival.term for rival in found.rivals].index("invented rare") > 0


def test_word_that_is_no_process_is_never_a_rival_even_when_named():
    found = chosen("pain", named=("amygdala",))
    assert "amygdala" not in {rival.term for rival in found.rivals}
    assert found.n_process_terms == 6


def test_claimed_word_that_is_no_process_has_no_rank_but_a_best_rival():
    found = chosen("amygdala")
    assert (found.rank, found.n_rivals_ahead) == (None, None)
    assert found.best_rival == "invented asking"
    assert found.n_process_terms == 6
    assert 0 < found.shrunk_rate < 50 / 55


def test_kinds_are_told_apart():
    kinds = {rival.term: rival.kind for rival in chosen("invented asking").rivals}
    assert kinds["pain"] == "process"
    assert {kind for term, kind in kinds.items() if term != "pain"} == {"unknown"}


def test_excluded_terms_are_no_rivals_and_shape_nothing():
    order, medians = ranking(RATES, excluded=("invented asking", "invented frying"))
    found = chosen("pain", excluded=("invented asking", "invented frying"))
    assert [rival.term for rival in found.rivals] == [name for name in order if name != "pain"]
    assert (found.rank, found.n_process_terms) == (order.index("pain") + 1, 4)
    assert found.shrunk_rate == pytest.approx(medians["pain"], abs=1e-6)


@pytest.mark.parametrize("shown", [0, 1, 2, None])
def test_named_rivals_are_shown_in_any_case_and_the_others_best_first(shown):
    order, _ = ranking(RATES)
    rivals = [name for name in order if name != "pain"]
    last = rivals[-1]
    found = chosen("pain", named=(last,), shown=shown)
    others = rivals[:-1] if shown is None else rivals[:shown]
    assert [rival.term for rival in found.rivals] == [*others, last]
    assert found.best_rival == rivals[0]


@pytest.mark.parametrize("request_name", ["named", "excluded"])
def test_unknown_rival_is_refused_with_the_terms_that_look_like_it(request_name):
    with pytest.raises(UnknownTermError) as caught:
        chosen("pain", **{request_name: ("invented hummin",)})
    assert caught.value.near[0] == "invented humming"
    assert "\n" not in str(caught.value)


def test_terms_without_a_study_are_neither_ranked_nor_shown():
    rates = {**RATES, "invented nothing": (0, 0)}
    found = chosen("pain", term_counts(rates))
    assert found.n_process_terms == 6
    assert "invented nothing" not in {rival.term for rival in found.rivals}


def test_synonym_stands_with_the_kin_and_not_in_the_ranking():
    words = Vocabulary.of([("pain", "d", "invented asking")], {"amygdala": "anatomy"})
    order, medians = ranking(RATES, excluded=("invented asking",))
    found = chosen("pain", words=words)
    assert [row.term for row in found.kin] == ["invented asking"]
    assert found.kin[0].shrunk_rate == pytest.approx(medians["invented asking"], abs=1e-6)
    assert [rival.term for rival in found.rivals] == [name for name in order if name != "pain"]


def test_only_process_has_no_rival():
    found = chosen("pain", term_counts({"pain": (3, 10), "amygdala": (4, 9)}))
    assert (found.rank, found.n_process_terms, found.best_rival, found.rivals) == (1, 1, None, ())
    assert found.probability_ahead is None


def test_processes_with_one_rate_cannot_be_told_apart_and_the_rank_says_so():
    assert not chosen("pain", term_counts({"pain": (10, 50), "fear": (10, 50), "naming": (10, 50)})).rank_informative
    assert chosen("pain", term_counts({"pain": (45, 50), "fear": (5, 50), "naming": (25, 50)})).rank_informative


def test_table_knows_no_shared_studies_so_nothing_is_set_head_to_head():
    found = chosen("pain")
    assert found.probability_ahead is None
    for rival in found.rivals:
        assert (rival.head_to_head, rival.probability_ahead, rival.shared_studies) == (None, None, None)


@pytest.mark.parametrize("term", ["fear", "pain", "naming"])
@pytest.mark.parametrize("settings", [{}, {"level": 0.8, "ratio_prior": "independent"}, {"ratio_limit": 5.0}])
def test_heads_to_head_are_those_of_the_studies_that_carry_only_one_of_the_two(mixed, term, settings):
    studies = mixed_studies()
    hits, own = hit_by_loop(studies, A, 10), carriers_by_loop(studies, term)
    found = assess(Claim(term=term, peaks=[A_MM]), mixed, Choices(shown_rivals=None, **settings)).selectivity
    assert len(found.rivals) + len(found.kin) + 1 == len({t for _, terms in studies for t in terms} - {"amygdala"})
    for rival in (*found.rivals, *found.kin):
        other = carriers_by_loop(studies, rival.term)
        duel = head_to_head(
            (len((own - other) & hits), len(own - other)),
            (len((other - own) & hits), len(other - own)),
            level=settings.get("level", 0.95),
            prior=settings.get("ratio_prior", "shared"),
            limit=settings.get("ratio_limit", 20.0),
        )
        assert rival.shared_studies == len(own & other)
        assert rival.head_to_head == (duel.ratio if duel else None)
        assert rival.probability_ahead == (duel.probability_ahead if duel else None)
    assert found.best_rival == found.rivals[0].term
    assert found.probability_ahead == found.rivals[0].probability_ahead


def test_side_without_a_study_of_its_own_leaves_the_probability_open():
    literature = made((6, [A], ["invented whole"]), (6, [A], ["invented whole", "invented part"]), (90, [B], ["fear"]))
    claim = Claim(term="invented part", peaks=[A_MM])
    found = assess(claim, literature)
    (kin,) = found.selectivity.kin
    assert (kin.term, kin.shared_studies) == ("invented whole", 6)
    assert (kin.head_to_head, kin.probability_ahead) == (None, None)


def test_answer_keeps_the_claims_wishes_about_rivals():
    literature = made(
        (20, [A], ["fear"]), (20, [A], ["pain"]), (20, [ELSEWHERE], ["naming"]), (20, [ELSEWHERE], ["reading"])
    )
    claim = Claim(term="fear", peaks=[A_MM], excluded=["pain"], rivals=["reading"])
    found = assess(claim, literature, Choices(shown_rivals=0)).selectivity
    assert (found.rank, found.n_process_terms, found.best_rival) == (1, 3, "naming")
    assert [rival.term for rival in found.rivals] == ["reading"]
    assert found.probability_ahead > 0.99
