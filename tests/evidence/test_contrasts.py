"""Reporting volume, context, mirror, pattern and absence, each recounted from sets of the same studies."""

from __future__ import annotations

import numpy as np
import pytest
from statsmodels.stats.contingency_tables import StratifiedTable

from revinf.evidence.assess import Choices, assess
from revinf.evidence.claim import Claim
from revinf.exceptions import InvalidClaimError, UnknownTermError
from revinf.spaces.transforms import mni_to_talairach
from revinf.stats.estimates import Counts
from revinf.stats.ratio import likelihood_ratio
from tests.evidence.worlds import A_MM, B_MM, ELSEWHERE, MIRRORED_A, TERMS, A, B, made, mixed_studies
from tests.literature.in_memory import carriers_by_loop, four_counts, hit_by_loop

STUDIES = mixed_studies()
EVERYONE = set(range(len(STUDIES)))


def recount(term, hits, among=EVERYONE) -> Counts:
    return Counts(*four_counts(carriers_by_loop(STUDIES, term), hits, among))


@pytest.mark.parametrize("absent", [False, True])
@pytest.mark.parametrize("term", TERMS)
def test_adjusted_ratio_is_statsmodels_pooled_ratio_over_the_same_strata(mixed, term, absent):
    """Reference: statsmodels StratifiedTable.riskratio_pooled."""
    peaks = np.array([len(rows) for rows, _ in STUDIES])
    rank = [((peaks < n).sum() + (peaks == n).sum() / 2) / len(peaks) for n in peaks]
    stratum = np.floor(5 * np.array(rank) + 1e-9).astype(int)
    hits = hit_by_loop(STUDIES, A, 10)
    hits = EVERYONE - hits if absent else hits
    tables = [recount(term, hits, set(np.flatnonzero(stratum == s).tolist())) for s in np.unique(stratum)]
    usable = [np.reshape(table.as_tuple(), (2, 2)) for table in tables if table.term_total and table.other_total]
    assert len(usable) > 2
    answer = assess(Claim(term=term, peaks=[A_MM], absent=absent), mixed)
    assert answer.reporting_volume.crude_ratio == answer.likelihood_ratio.observed
    expected = StratifiedTable([table.astype(float) for table in usable]).riskratio_pooled
    assert answer.reporting_volume.adjusted_ratio.estimate == pytest.approx(expected, rel=1e-12)
    wide = assess(Claim(term=term, peaks=[A_MM], absent=absent), mixed, Choices(level=0.99)).reporting_volume
    assert wide.adjusted_ratio.low < answer.reporting_volume.adjusted_ratio.low
    assert wide.adjusted_ratio.high > answer.reporting_volume.adjusted_ratio.high


def test_adjusted_ratio_is_null_where_all_studies_report_alike():
    literature = made((10, [A], ["fear"]), (10, [B], ["pain"]))
    assert assess(Claim(term="fear", peaks=[A_MM]), literature).reporting_volume.adjusted_ratio is None


@pytest.mark.parametrize("context", [["pain"], ["pain", "reading"], ["amygdala", "Fear", "naming"]])
@pytest.mark.parametrize("absent", [False, True])
def test_context_counts_within_the_studies_that_carry_any_of_its_terms(mixed, context, absent):
    among = set().union(*(carriers_by_loop(STUDIES, term.lower()) for term in context))
    hits = hit_by_loop(STUDIES, A, 10)
    found = assess(Claim(term="navigation", peaks=[A_MM], context=context, absent=absent), mixed)
    expected = recount("navigation", EVERYONE - hits if absent else hits, among)
    assert found.context.n_studies == len(among)
    assert found.context.counts == expected
    assert found.context.ratio == likelihood_ratio(expected)
    assert found.counts.total == len(STUDIES)
    assert found.to_dict()["claim"]["context"] == [term.lower() for term in context]


def test_context_that_all_carry_the_term_leaves_nothing_to_compare():
    literature = made((9, [A], ["fear", "naming"]), (9, [A], ["pain"]), (9, [B], ["reading"]))
    found = assess(Claim(term="fear", peaks=[A_MM], context=["naming"]), literature)
    assert (found.context.n_studies, found.context.ratio) == (9, None)


def test_context_is_null_where_none_is_asked_for(mixed):
    assert assess(Claim(term="fear", peaks=[A_MM]), mixed).context is None


def test_unknown_context_is_refused_with_near_misses(mixed):
    with pytest.raises(UnknownTermError, match="did you mean 'reading'"):
        assess(Claim(term="fear", peaks=[A_MM], context=["readin"]), mixed)


def test_table_refuses_a_context(table_of):
    with pytest.raises(InvalidClaimError, match="a context needs the studies themselves; use a literature"):
        assess(Claim(term="pain", region="here", context=["fear"]), table_of((1, 2, 3, 4)))


@pytest.mark.parametrize("term", TERMS)
@pytest.mark.parametrize("space", ["MNI152", "Talairach"])
def test_mirror_is_the_same_claim_at_minus_x(mixed, term, space):
    peak = A_MM if space == "MNI152" else tuple(mni_to_talairach(A_MM, "pooled").tolist())
    claim = Claim(term=term, peaks=[peak], space=space)
    here = tuple(round(10 * value) for value in claim.mni_peaks()[0])
    own = carriers_by_loop(STUDIES, term)
    this, other = hit_by_loop(STUDIES, here, 10), hit_by_loop(STUDIES, (-here[0], *here[1:]), 10)
    found = assess(claim, mixed).mirror
    assert found.counts == recount(term, other)
    assert found.ratio == likelihood_ratio(found.counts)
    assert (found.this_side_only, found.other_side_only) == (len(own & this - other), len(own & other - this))
    assert found.counts.active_total > 5


def test_midline_peak_and_pattern_have_no_mirror(mixed):
    assert assess(Claim(term="fear", peaks=[(0, 50, 0)]), mixed).mirror is None
    assert assess(Claim(term="fear", peaks=[A_MM, B_MM]), mixed).mirror is None


@pytest.mark.parametrize("term", TERMS)
@pytest.mark.parametrize("peaks", [(A_MM, B_MM), (B_MM, A_MM, (40.0, 20.0, 10.0))])
def test_pattern_counts_the_studies_that_hit_every_place(mixed, term, peaks):
    each = [hit_by_loop(STUDIES, tuple(round(10 * v) for v in peak), 10) for peak in peaks]
    joint = recount(term, set.intersection(*each))
    answer = assess(Claim(term=term, peaks=peaks), mixed)
    found = answer.pattern
    assert answer.counts == joint
    assert answer.likelihood_ratio.value == found.joint == likelihood_ratio(joint)
    assert found.joint_hits == len(set.intersection(*each)) > 0
    assert [region.peak for region in found.regions] == list(peaks)
    product = 1.0
    for region, hits in zip(found.regions, each, strict=True):
        n11, n10, n01, n00 = recount(term, hits).as_tuple()
        product *= ((n11 + 0.5) / (n11 + n10 + 1)) / ((n01 + 0.5) / (n01 + n00 + 1))
        assert region.counts == Counts(n11, n10, n01, n00)
        assert region.ratio == likelihood_ratio(region.counts)
    assert found.product == pytest.approx(product, rel=1e-12)
    estimate = found.joint.estimate
    expected = product / estimate if product >= 1 else estimate / product
    assert found.overstatement == pytest.approx(expected, rel=1e-12)
    content = answer.to_dict()["pattern"]
    assert [region["peak"] for region in content["regions"]] == [list(peak) for peak in peaks]


def test_overstatement_is_above_1_where_the_product_goes_further_than_the_joint_answer_on_either_side():
    literature = made(
        (20, [A, B], ["fear"]), (20, [ELSEWHERE], ["fear"]), (4, [A, B], ["pain"]), (56, [ELSEWHERE], ["pain"])
    )
    for term, above in (("fear", True), ("pain", False)):
        found = assess(Claim(term=term, peaks=[A_MM, B_MM]), literature).pattern
        assert (found.product > 1) is above
        assert found.overstatement > 2


def test_single_peak_is_no_pattern(mixed):
    assert assess(Claim(term="fear", peaks=[A_MM]), mixed).pattern is None


@pytest.mark.parametrize("term", TERMS)
@pytest.mark.parametrize("peaks", [(A_MM,), (A_MM, B_MM)])
def test_absence_counts_the_studies_that_hit_none_of_the_places(mixed, term, peaks):
    each = [hit_by_loop(STUDIES, tuple(round(10 * v) for v in peak), 10) for peak in peaks]
    silent = EVERYONE - set.union(*each)
    answer = assess(Claim(term=term, peaks=peaks, absent=True), mixed)
    assert answer.counts == recount(term, silent)
    assert answer.likelihood_ratio.value == likelihood_ratio(answer.counts)
    assert answer.claim.absent
    assert "no reported activity here" in answer.wording
    if len(peaks) == 1:
        present = assess(Claim(term=term, peaks=peaks), mixed)
        assert answer.counts.term_active == present.counts.term_inactive
        assert answer.mirror.counts == recount(term, EVERYONE - hit_by_loop(STUDIES, MIRRORED_A, 10))
    else:
        assert answer.pattern.joint_hits == len(silent)
        assert [region.counts for region in answer.pattern.regions] == [recount(term, EVERYONE - h) for h in each]


def test_absence_in_a_table_exchanges_active_and_inactive(table_of):
    table = table_of((15, 48, 17, 371))
    answer = assess(Claim(term="pain", region="here", absent=True), table)
    assert answer.counts == Counts(48, 15, 371, 17)
    assert answer.breadth.activation_percentile is None


def test_peaks_of_a_study_with_the_term_are_recognised_as_its_own(mixed):
    for number, (peaks, terms) in enumerate(STUDIES[:20]):
        asked = [tuple(value / 10 for value in peak) for peak in dict.fromkeys(peaks)]
        for term in ("fear", "pain"):
            found = assess(Claim(term=term, peaks=asked), mixed).own_studies
            assert found == ((f"s{number:03}",) if term in terms else ())
    moved = [(asked[0][0] + 0.1, *asked[0][1:]), *asked[1:]]
    assert assess(Claim(term=STUDIES[19][1][0], peaks=moved), mixed).own_studies == ()
