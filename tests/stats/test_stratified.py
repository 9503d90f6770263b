"""The Mantel-Haenszel ratio and the quintiles of reporting; references are in tests/published."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from revinf.exceptions import InvalidCountError, InvalidProbabilityError
from revinf.stats.estimates import Counts
from revinf.stats.ratio import observed_ratio
from revinf.stats.stratified import mantel_haenszel_ratio, quintile_strata
from tests.strategies import full_tables, levels, tables

STRATA = st.lists(tables(10**4), min_size=2, max_size=6)
PEAKS = st.lists(st.integers(0, 60), min_size=1, max_size=80)


class TestRatio:
    @given(STRATA, levels())
    def test_swapping_the_groups_inverts_the_ratio_and_its_interval(self, strata, level):
        ratio = mantel_haenszel_ratio(strata, level=level)
        swapped = mantel_haenszel_ratio([stratum.swapped() for stratum in strata], level=level)
        assert (ratio is None) == (swapped is None)
        assume(ratio is not None)
        assert swapped.estimate == pytest.approx(1 / ratio.estimate, rel=1e-12)
        assert swapped.low == pytest.approx(1 / ratio.high, rel=1e-9)

    @given(STRATA, levels(), levels())
    def test_a_wider_level_has_the_wider_interval_around_the_same_estimate(self, strata, one, other):
        narrow, wide = (mantel_haenszel_ratio(strata, level=level) for level in sorted((one, other)))
        assume(narrow is not None)
        assert wide.low <= narrow.low <= narrow.estimate == wide.estimate <= narrow.high <= wide.high

    @given(full_tables(10**4), st.integers(2, 5))
    def test_equal_strata_have_the_ratio_of_each(self, table, n_strata):
        assume(table.term_active and table.other_active)
        ratio = mantel_haenszel_ratio([table] * n_strata)
        assert ratio.estimate == pytest.approx(observed_ratio(table), rel=1e-12)

    @given(STRATA)
    def test_the_ratio_lies_between_those_of_the_strata(self, strata):
        assume(all(s.term_active and s.other_active for s in strata))
        ratio = mantel_haenszel_ratio(strata)
        each = [observed_ratio(stratum) for stratum in strata]
        assert min(each) * (1 - 1e-12) <= ratio.estimate <= max(each) * (1 + 1e-12)

    @given(STRATA, st.lists(st.builds(Counts, st.integers(0, 9), st.integers(0, 9), st.just(0), st.just(0))))
    def test_strata_that_lack_a_group_are_skipped(self, strata, lacking):
        assert mantel_haenszel_ratio(strata + lacking) == mantel_haenszel_ratio(strata)

    def test_busy_studies_alone_no_longer_make_a_ratio(self):
        # In either stratum both groups have one rate; the term's studies are the busy ones.
        calm, busy = Counts(1, 9, 9, 81), Counts(45, 45, 5, 5)
        crude = observed_ratio(Counts(46, 54, 14, 86))
        ratio = mantel_haenszel_ratio([calm, busy])
        assert crude > 3
        assert ratio.estimate == pytest.approx(1, rel=1e-12)
        assert ratio.covers(1)

    def test_nothing_but_hits_leaves_no_scatter(self):
        ratio = mantel_haenszel_ratio([Counts(5, 0, 9, 0), Counts(2, 0, 3, 0)])
        assert (ratio.estimate, ratio.low, ratio.high) == pytest.approx((1, 1, 1), abs=1e-12)

    @pytest.mark.parametrize(
        "strata",
        [
            [],
            [Counts(3, 4, 5, 6)],
            [Counts(3, 4, 5, 6), Counts(3, 4, 0, 0)],
            [Counts(0, 7, 5, 6), Counts(0, 3, 2, 2)],
            [Counts(3, 4, 0, 6), Counts(1, 4, 0, 6)],
        ],
        ids=["no stratum", "one", "one usable", "no hit with the term", "no hit without it"],
    )
    def test_there_is_no_ratio_with_one_stratum_or_without_hits_on_a_side(self, strata):
        assert mantel_haenszel_ratio(strata) is None

    def test_the_least_number_of_strata_is_the_callers(self):
        assert mantel_haenszel_ratio([Counts(3, 4, 5, 6)], minimum_strata=1) is not None
        assert mantel_haenszel_ratio([Counts(3, 4, 5, 6)] * 2, minimum_strata=3) is None
        assert mantel_haenszel_ratio([], minimum_strata=0) is None

    def test_a_level_outside_is_refused(self):
        with pytest.raises(InvalidProbabilityError, match=r"^level must .* but got 0\.0; use 0\.95"):
            mantel_haenszel_ratio([Counts(3, 4, 5, 6)] * 2, level=0.0)


class TestQuintiles:
    @given(PEAKS)
    def test_studies_with_as_many_peaks_share_a_stratum_and_busier_ones_are_not_below(self, peaks):
        strata = quintile_strata(peaks)
        assert set(strata.tolist()) <= set(range(5))
        by_peaks = dict(zip(peaks, strata.tolist(), strict=True))
        assert [by_peaks[n] for n in peaks] == strata.tolist()
        assert sorted(by_peaks.values()) == [by_peaks[n] for n in sorted(by_peaks)]

    @given(st.integers(1, 40), st.randoms(use_true_random=False))
    def test_without_ties_every_stratum_holds_a_fifth(self, fifth, random):
        peaks = list(range(5 * fifth))
        random.shuffle(peaks)
        assert np.bincount(quintile_strata(peaks)).tolist() == [fifth] * 5

    @given(PEAKS, st.integers(1, 5), st.integers(0, 5))
    def test_only_the_order_of_the_numbers_matters(self, peaks, factor, shift):
        stretched = [factor * n + shift for n in peaks]
        assert quintile_strata(stretched).tolist() == quintile_strata(peaks).tolist()

    def test_equal_numbers_are_one_middle_stratum(self):
        assert quintile_strata([4] * 7).tolist() == [2] * 7

    def test_without_studies_there_is_no_stratum(self):
        assert quintile_strata([]).tolist() == []

    @pytest.mark.parametrize(
        ("peaks", "message"),
        [
            ([1, -1], r"^n_peaks must hold whole numbers of 0 or more, but got \[1, -1\]; count the peaks$"),
            ([1.5], r"^n_peaks must hold whole numbers of 0 or more, but got \[1\.5\]"),
            ([[1]], r"^n_peaks must be one list, but got shape \(1, 1\); give one number for each study$"),
        ],
    )
    def test_what_is_no_list_of_counts_is_refused(self, peaks, message):
        with pytest.raises(InvalidCountError, match=message):
            quintile_strata(peaks)
