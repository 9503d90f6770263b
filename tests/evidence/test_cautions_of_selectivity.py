"""Each caution about rivals, breadth, other choices and counting: one input that triggers it, one that does not."""

from __future__ import annotations

import pytest

from revinf.evidence.cautions.breadth import broad_region
from revinf.evidence.cautions.choices import mirror_equal, radius_sensitive, single_study, space_doubt
from revinf.evidence.cautions.counting import (
    absence_unsearched,
    busy_reporters,
    context_small,
    overlapping_regions,
    pattern_overstated,
)
from revinf.evidence.cautions.rivals import rival_ahead, rivals_tied
from revinf.evidence.cautions.source import mixed_direction, own_study_counted, uneven_literature
from revinf.evidence.cautions.term import term_unlabelled
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.evidence.unevenness import Unevenness
from revinf.stats.estimates import Counts, Estimate

LIMITS = Thresholds()
DECIDED, OPEN = Estimate(5.0, 2.5, 9.0), Estimate(1.5, 0.8, 3.0)


def seen(caution):
    """Return code and severity, or None."""
    return None if caution is None else (caution.code, caution.severity)


@pytest.mark.parametrize(
    ("probability", "expected"),
    [(0.05, "stop"), (0.0501, "weigh"), (0.2, "weigh"), (0.2001, None), (None, None)],
)
def test_rival_ahead_stops_at_one_in_twenty_and_weighs_to_one_in_five(probability, expected):
    found = seen(rival_ahead("fear", "pain", probability, LIMITS))
    assert found == (None if expected is None else ("rival-ahead", expected))
    assert rival_ahead("fear", None, 0.01, LIMITS) is None


@pytest.mark.parametrize(("probability", "held"), [(0.2, False), (0.21, True), (0.79, True), (0.8, False)])
def test_rivals_tied_between_one_and_four_in_five(probability, held):
    found = seen(rivals_tied("fear", "pain", probability, LIMITS))
    assert found == (("rivals-tied", "note") if held else None)
    assert rivals_tied("fear", "pain", None, LIMITS) is None


@pytest.mark.parametrize(
    ("percentile", "low", "hits", "held"),
    [(95.0, 6.0, 20, True), (94.9, 6.0, 20, False), (95.0, 5.9, 20, False), (95.0, 6.0, 19, False)],
)
def test_broad_region_needs_a_busy_and_mixed_place_with_enough_hits(percentile, low, hits, held):
    found = seen(broad_region(percentile, Estimate(8.0, low, 9.0), 10, hits, LIMITS))
    assert found == (("broad-region", "weigh") if held else None)
    assert broad_region(None, Estimate(8.0, 7.0, 9.0), 10, 50, LIMITS) is None


@pytest.mark.parametrize(
    ("ratio", "by_radius", "expected"),
    [
        (DECIDED, {6.0: Estimate(0.9, 0.2, 3.0)}, "weigh"),  # crosses 1
        (DECIDED, {15.0: Estimate(9.1, 5.0, 20.0)}, "weigh"),  # leaves the interval
        (DECIDED, {8.0: Estimate(3.0, 0.9, 9.0)}, "note"),  # undecided next door
        (DECIDED, {8.0: Estimate(3.0, 1.1, 9.0)}, None),
        (DECIDED, {20.0: Estimate(0.5, 0.2, 0.9)}, None),  # 20 mm is not asked for
        (OPEN, {6.0: Estimate(0.1, 0.05, 0.2)}, None),  # nothing was decided
        (DECIDED, {6.0: None}, None),
    ],
)
def test_radius_sensitive_where_a_decided_answer_strays(ratio, by_radius, expected):
    found = seen(radius_sensitive(ratio, by_radius, LIMITS))
    assert found == (None if expected is None else ("radius-sensitive", expected))
    assert radius_sensitive(ratio, {}, LIMITS) is None


def test_single_study_where_one_study_carries_the_direction():
    assert seen(single_study(DECIDED, True, "s1", "papers")) == ("single-study", "weigh")
    assert single_study(DECIDED, False, "s1", "papers") is None
    assert single_study(OPEN, True, "s1", "papers") is None


@pytest.mark.parametrize(("stated", "severity"), [(False, "weigh"), (True, "note")])
def test_space_doubt_is_graver_where_the_space_was_not_stated(stated, severity):
    assert seen(space_doubt("for", "undecided", stated, "Talairach")) == ("space-doubt", severity)
    assert space_doubt("for", "for", stated, "Talairach") is None
    assert space_doubt("for", None, stated, "Talairach") is None


@pytest.mark.parametrize(
    ("direction", "x", "sides", "held"),
    [
        ("for", 30.0, (5, 5), True),
        ("for", 30.0, (12, 2), False),
        ("for", 10.0, (5, 5), False),
        ("undecided", 30.0, (5, 5), False),
        ("for", -30.0, (0, 0), True),
    ],
)
def test_mirror_equal_where_the_sides_cannot_be_told_apart(direction, x, sides, held):
    found = seen(mirror_equal(direction, x, 10.0, sides, LIMITS))
    assert found == (("mirror-equal", "note") if held else None)
    assert mirror_equal("against", x, 10.0, sides, LIMITS) is None


@pytest.mark.parametrize(
    ("crude", "adjusted", "held"),
    [
        (4.0, Estimate(5.1, 2.0, 9.0), True),
        (4.0, Estimate(3.1, 2.0, 9.0), True),
        (4.0, Estimate(4.9, 2.0, 9.0), False),
        (4.0, Estimate(4.0, 0.9, 9.0), True),  # only the adjusted interval includes 1
        (4.0, None, False),
        (None, Estimate(4.0, 2.0, 9.0), False),
    ],
)
def test_busy_reporters_where_the_ratio_changes_with_reporting_volume(crude, adjusted, held):
    found = seen(busy_reporters(DECIDED, crude, adjusted, LIMITS))
    assert found == (("busy-reporters", "weigh") if held else None)
    assert busy_reporters(DECIDED, None, None, LIMITS) is None


@pytest.mark.parametrize(
    ("n", "counts", "held"),
    [
        (30, Counts(2, 3, 5, 20), False),
        (29, Counts(2, 3, 4, 20), True),
        (40, Counts(2, 2, 6, 30), True),
        (40, Counts(20, 16, 2, 2), True),
    ],
)
def test_context_small_where_few_studies_are_left(n, counts, held):
    found = seen(context_small(n, counts, LIMITS))
    assert found == (("context-small", "weigh") if held else None)
    assert context_small(None, None, LIMITS) is None


def test_pattern_overstated_where_the_product_lies_above_the_joint_interval():
    caution = pattern_overstated(DECIDED, 9.1, 4, LIMITS)
    assert seen(caution) == ("pattern-overstated", "weigh")
    assert "only 4 studies hit all places" in caution.message
    assert "only" not in pattern_overstated(DECIDED, 9.1, 5, LIMITS).message
    assert pattern_overstated(DECIDED, 9.0, 4, LIMITS) is None


def test_overlapping_regions_where_places_share_ground():
    assert seen(overlapping_regions(1)) == ("overlapping-regions", "note")
    assert overlapping_regions(0) is None


def test_absence_unsearched_where_the_claim_rests_on_no_activity():
    assert seen(absence_unsearched(True)) == ("absence-unsearched", "weigh")
    assert absence_unsearched(False) is None


def uneven(term: str, share: float, effective: float, n: int) -> Unevenness:
    return Unevenness(
        largest_term=term, largest_share=share, effective_processes=effective, n_processes=n, decrease_terms=()
    )


def test_uneven_literature_says_where_counting_every_process_once_reverses_the_ratio():
    held = uneven_literature(uneven("memory", 0.6, 4.0, 8), LIMITS, observed=1.25, balanced=Estimate(0.92, 0.5, 1.5))
    assert "1.25, but 0.92" in held.message
    same = uneven_literature(uneven("memory", 0.6, 4.0, 8), LIMITS, observed=1.25, balanced=Estimate(1.92, 0.5, 2.5))
    assert "Here it matters" not in same.message


@pytest.mark.parametrize(
    ("share", "effective", "n", "held"),
    [(0.41, 8.0, 8, True), (0.4, 4.0, 8, False), (0.4, 3.9, 8, True), (1.0, 1.0, 1, False)],
)
def test_uneven_literature_where_a_few_processes_dominate(share, effective, n, held):
    found = seen(uneven_literature(uneven("memory", share, effective, n), LIMITS))
    assert found == (("uneven-literature", "weigh") if held else None)
    assert uneven_literature(uneven("memory", 0.1, 8.0, 8), LIMITS) is None


@pytest.mark.parametrize(("peaks", "terms"), [(1, ()), (0, ("task-induced deactivation",))])
def test_mixed_direction_where_decreases_are_counted(peaks, terms):
    assert seen(mixed_direction(peaks, terms)) == ("mixed-direction", "note")
    assert mixed_direction(0, ()) is None


def test_own_study_counted_where_the_coordinates_are_a_counted_study_s():
    assert seen(own_study_counted(["s1"])) == ("own-study-counted", "weigh")
    assert own_study_counted([]) is None


def test_term_unlabelled_where_no_study_carries_the_term():
    caution = term_unlabelled("juggling", 0, ["jogging"])
    assert seen(caution) == ("term-unlabelled", "stop")
    assert "'jogging'" in caution.message
    assert term_unlabelled("juggling", 1) is None
