"""Which process leads where, on the open coordinates: directions and ranks as their published meta-analyses say.

Coordinates: Spreng, Mar & Kim 2009, J Cogn Neurosci 21:489-510 (autobiographical memory, navigation, theory of
mind); Mar 2011, Annu Rev Psychol 62:103-134 (story-based and other theory of mind, narrative comprehension);
Sevinc & Spreng 2014, PLoS ONE 9:e87427 (moral cognition); Jackson 2021, NeuroImage 224:117444 (semantic
cognition). The counts beside the ranks are ours, counted in the files by a plain loop in tests/base_rates.
"""

from __future__ import annotations

import numpy as np
import pytest

from revinf.evidence.asked_region import AskedRegion
from revinf.evidence.assess import assess
from revinf.evidence.claim import Claim
from revinf.evidence.profile import profile
from revinf.evidence.sources import as_source
from revinf.stats.head_to_head import head_to_head

JUNCTION = (54, -54, 24)
RIGHT_HIPPOCAMPAL, LEFT_HIPPOCAMPAL = (26, -36, -14), (-24, -36, -14)
INFERIOR_FRONTAL = (-48, 26, 12)
MEDIAL_PREFRONTAL = (0, 52, 10)


@pytest.fixture(scope="module")
def ask(open_literature):
    """Assess a claim on the open coordinates, once each."""
    known = {}

    def run(term, peak):
        if (term, peak) not in known:
            known[term, peak] = assess(Claim(term=term, peaks=[peak]), open_literature)
        return known[term, peak]

    return run


def order(answer):
    """Return the processes of an answer by rank, the claimed one among them and kin left out."""
    chosen = answer.selectivity
    names = [rival.term for rival in chosen.rivals]
    names.insert(chosen.rank - 1, answer.claim.term)
    return names


def caution(answer, code):
    return next((item for item in answer.cautions if item.code == code), None)


def test_theory_of_mind_leads_at_the_right_temporo_parietal_junction(ask):
    """Mar 2011 and Spreng et al. 2009 both report the right temporo-parietal junction for theory of mind."""
    answer = ask("theory of mind", JUNCTION)
    assert answer.counts.as_tuple() == (15, 48, 17, 371)
    assert answer.selectivity.rank == 1
    assert answer.selectivity.rank_informative
    assert answer.likelihood_ratio.direction == "for"
    assert {kin.term for kin in answer.selectivity.kin} == {
        "story-based theory of mind",
        "non-story theory of mind",
    }
    assert len(order(answer)) == 6


@pytest.mark.parametrize("peak", [RIGHT_HIPPOCAMPAL, LEFT_HIPPOCAMPAL])
def test_navigation_and_autobiographical_memory_take_the_first_two_ranks_at_the_parahippocampal_gyri(ask, peak):
    """Spreng et al. 2009: both engage the parahippocampal gyri; neither engages theory of mind there."""
    pair = {"navigation", "autobiographical memory"}
    for term in pair:
        answer = ask(term, peak)
        assert set(order(answer)[:2]) == pair
        assert answer.selectivity.best_rival in pair
        assert caution(answer, "rivals-tied") is not None
        assert order(answer).index("theory of mind") >= len(order(answer)) - 3


def test_a_language_process_leads_at_the_left_inferior_frontal_gyrus(ask):
    """Jackson 2021: semantic cognition; Mar 2011: narrative comprehension."""
    answer = ask("semantic cognition", INFERIOR_FRONTAL)
    first, second = order(answer)[:2]
    assert first in {"semantic cognition", "narrative comprehension"}
    assert {first, second} == {"semantic cognition", "narrative comprehension"}
    assert answer.likelihood_ratio.direction == "for"


def on_a_grid(term_only, rival_only, points=1201, limit=20.0):
    """Return P(H > 1) of formula 2 as it is defined, on a plain grid; nothing of revinf is used.

    q = w p1 + (1-w) p0 ~ Beta(1/2, 1/2), which is uniform in the angle of q = sin^2; ln H is normal with 95 %
    between 1/limit and limit (Greenland 2006, Int J Epidemiol 35:765-775); zero where a rate reaches 1.
    """
    (k1, n1), (k0, n0) = term_only, rival_only
    w, sd = n1 / (n1 + n0), np.log(limit) / 1.959964
    log_h = np.linspace(-12, 12, 2 * points - 1)[:, None]  # eight standard deviations of the prior
    angle = (np.arange(points) + 0.5) * (np.pi / 2 / points)
    p0 = np.sin(angle) ** 2 / (w * np.exp(log_h) + 1 - w)
    p1 = np.exp(log_h) * p0
    inside = (p0 < 1) & (p1 < 1)
    p0, p1 = np.where(inside, p0, 0.5), np.where(inside, p1, 0.5)
    log_density = k1 * np.log(p1) + (n1 - k1) * np.log1p(-p1) + k0 * np.log(p0) + (n0 - k0) * np.log1p(-p0)
    log_density -= (log_h / sd) ** 2 / 2
    density = np.where(inside, np.exp(log_density - log_density.max()), 0.0).sum(axis=1)
    middle = points - 1  # ln H = 0, half of which belongs to either side
    return float((density[middle + 1 :].sum() + density[middle] / 2) / density.sum())


def test_theory_of_mind_and_moral_cognition_are_tied_at_the_medial_prefrontal_cortex(ask):
    """Sevinc & Spreng 2014: moral cognition and theory of mind overlap in the medial prefrontal cortex."""
    answer = ask("theory of mind", MEDIAL_PREFRONTAL)
    best = answer.selectivity.rivals[0]
    assert (answer.counts.term_active, answer.counts.term_total) == (13, 63)
    assert (best.term, best.counts.term_active, best.counts.term_total) == ("moral cognition", 7, 40)
    assert best.shared_studies == 0
    assert 0.66 < best.probability_ahead < 0.67
    assert answer.selectivity.probability_ahead == best.probability_ahead
    tied = caution(answer, "rivals-tied")
    assert tied is not None
    assert (tied.severity, tied.evidence["best_rival"]) == ("note", "moral cognition")
    assert caution(answer, "rival-ahead") is None


@pytest.mark.parametrize("pair", [((13, 63), (7, 40)), ((15, 63), (3, 20)), ((5, 13), (5, 20)), ((0, 13), (7, 272))])
def test_probability_ahead_is_that_of_a_plain_grid(pair):
    """Two plain grids of numpy straight from the definition; the error that falls with the square of the step,
    from cutting the density at H = 1, is taken out of them (Richardson's extrapolation).
    """
    coarse, fine = on_a_grid(*pair, points=601), on_a_grid(*pair, points=1201)
    expected = (4 * fine - coarse) / 3
    assert fine == pytest.approx(expected, abs=1e-5)
    assert head_to_head(*pair).probability_ahead == pytest.approx(expected, abs=1e-6)


def test_leaving_kin_out_of_the_others_raises_the_ratio_of_story_based_theory_of_mind(ask):
    """The other studies of theory of mind are active here too: counted as "other" they hide what is there."""
    answer = ask("story-based theory of mind", JUNCTION)
    assert [kin.term for kin in answer.selectivity.kin] == ["theory of mind"]
    (row,) = answer.robustness.of("kin")
    assert answer.counts.as_tuple() == (10, 10, 22, 409)
    assert row.counts.as_tuple() == (10, 10, 17, 371)
    assert round(answer.likelihood_ratio.value.estimate, 1) == 8.5
    assert round(row.ratio.estimate, 1) == 9.8


@pytest.mark.parametrize(
    ("term", "peak"),
    [
        ("theory of mind", JUNCTION),
        ("navigation", RIGHT_HIPPOCAMPAL),
        ("semantic cognition", INFERIOR_FRONTAL),
        ("moral cognition", MEDIAL_PREFRONTAL),
    ],
)
def test_every_answer_says_uneven_ungrouped_and_mixed(ask, term, peak):
    """By the README.md of the files: 272 of 451 are semantic, papers are not known, some peaks are decreases."""
    answer = ask(term, peak)
    uneven = caution(answer, "uneven-literature")
    assert uneven.evidence["largest_term"] == "semantic cognition"
    assert uneven.evidence["largest_share"] == pytest.approx(272 / 451)
    assert caution(answer, "ungrouped-studies") is not None
    mixed = caution(answer, "mixed-direction")
    assert mixed.evidence["decrease_terms"] == ["task-induced deactivation"]
    assert caution(answer, "invented-data") is None


def test_materials_and_decreases_are_never_ranked(ask):
    """verbal, nonverbal, visual and auditory material, and task-induced deactivation, are no processes."""
    names = {name for peak in (JUNCTION, INFERIOR_FRONTAL) for name in order(ask("navigation", peak))}
    assert names == {
        "autobiographical memory", "moral cognition", "narrative comprehension", "navigation",
        "non-story theory of mind", "semantic cognition", "story-based theory of mind", "theory of mind",
    }  # fmt: skip


def test_profile_of_the_junction_has_social_cognition_first(open_literature):
    """As the ranks above, by domain."""
    found = profile(AskedRegion(peaks=[JUNCTION]), as_source(open_literature))
    assert found.hits == 32
    assert found.domains[0].domain == "social cognition"
    assert found.rows[0].term == "story-based theory of mind"
    assert found.rows[1].term == "theory of mind"
