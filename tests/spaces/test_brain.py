"""What is said of a place, on the real reference and on a small invented one."""

from __future__ import annotations

import subprocess
import sys

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from revinf.exceptions import SpaceError
from revinf.spaces.brain import (
    BrainReference,
    LabelledPoint,
    brain_reference,
    distance_outside_mm,
    grey_lattice,
    hemisphere,
    nearest_label,
    nearest_network,
    place_in_words,
    tissue_at,
)
from revinf.spaces.published_points import DOSENBACH, SEITZMAN

PLACES = st.tuples(st.integers(-1300, 1300), st.integers(-1700, 1300), st.integers(-1200, 1300))


def invented_reference(**parts) -> BrainReference:
    """Return an invented grid of 2 mm voxels, centred on the origin, with one voxel of each kind."""
    tissue = np.zeros((5, 5, 5), dtype=np.uint8)
    tissue[1, 2, 2], tissue[2, 2, 2], tissue[3, 2, 2] = 2, 3, 1
    affine = np.diag([2.0, 2, 2, 1])
    affine[:3, 3] = -4
    content = {
        "tissue": tissue,
        "affine": affine,
        "point_xyz_tenths": np.array([[0, 0, 50], [0, 0, -50], [0, 30, 0]], dtype=np.int16),
        "point_labels": ("above", "below", ""),
        "point_sources": (DOSENBACH, SEITZMAN, SEITZMAN),
        "point_networks": ("first", "", "third"),
    }
    return BrainReference(**(content | parts))


class TestReference:
    def test_grid_and_codes_are_those_of_the_design(self):
        reference = brain_reference()
        assert reference.tissue.shape == (99, 117, 95)
        assert reference.tissue.dtype == np.uint8
        assert set(np.unique(reference.tissue)) == {0, 1, 2, 3}
        assert reference.point_xyz_tenths.dtype == np.int16
        assert reference.point_xyz_tenths.shape == (460, 3)

    def test_cannot_be_written_to_and_is_built_once(self):
        reference = brain_reference()
        assert brain_reference() is reference
        with pytest.raises(ValueError, match="read-only"):
            reference.tissue[0, 0, 0] = 1

    def test_parts_that_do_not_fit_are_refused(self):
        with pytest.raises(SpaceError, match="one label, source and network a point"):
            invented_reference(point_labels=("only one",))

    def test_importing_the_part_loads_no_heavy_library(self):
        code = (
            "import sys, revinf.spaces.brain, revinf.spaces.regions, revinf.spaces.transforms;"
            "print([m for m in ('nibabel','nilearn','pandas','scipy','sklearn') if m in sys.modules])"
        )
        result = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
        assert result.stdout.strip() == "[]"


class TestTissue:
    @pytest.mark.parametrize(
        ("x", "tissue"),
        [
            (-2.9, "grey matter"),
            (-2, "grey matter"),
            (-1, "grey matter"),
            (-0.9, "white matter"),
            (1, "white matter"),
            (1.1, "other brain"),
            (3, "other brain"),
            (3.1, "outside"),
            (-3.1, "outside"),
            (100, "outside"),
        ],
    )
    def test_of_two_touching_voxels_the_nobler_tissue_is_named(self, x, tissue):
        assert tissue_at(invented_reference(), (x, 0, 0)) == tissue

    @settings(deadline=None)  # the first example loads the reference
    @given(PLACES)
    def test_outside_is_where_the_distance_is_positive(self, tenths):
        reference = brain_reference()
        place = np.array(tenths) / 10
        outside = tissue_at(reference, place) == "outside"
        assert outside == (distance_outside_mm(reference, place) > 0)


class TestDistanceOutside:
    @settings(max_examples=40, deadline=None)
    @given(PLACES)
    def test_equals_the_smallest_of_all_distances(self, tenths):
        reference = brain_reference()
        place = np.array(tenths) / 10
        found = distance_outside_mm(reference, place)
        if found == 0:
            return
        brain = np.argwhere(reference.tissue) @ reference.affine[:3, :3].T
        away = brain + reference.affine[:3, 3] - place
        nearest = float(np.sqrt((away**2).sum(axis=1).min()))
        assert found == (pytest.approx(nearest, abs=1e-9) if nearest <= 60 else float("inf"))

    @pytest.mark.parametrize(("z", "distance"), [(1, 0), (1.1, 1.1), (4, 4), (60, 60)])
    def test_is_counted_from_the_centre_of_the_nearest_voxel(self, z, distance):
        assert distance_outside_mm(invented_reference(), (0, 0, z)) == pytest.approx(distance)

    def test_is_infinite_beyond_sixty_millimetres(self):
        assert distance_outside_mm(invented_reference(), (0, 0, 60.1)) == float("inf")


class TestHemisphere:
    @given(st.integers(-900, 900))
    def test_sides_are_mirrored_and_the_midline_is_four_millimetres_wide_on_each(self, tenths):
        side = hemisphere((tenths / 10, 0, 0))
        assert (side == "midline") == (abs(tenths) <= 40)
        opposite = {"left": "right", "right": "left", "midline": "midline"}
        assert hemisphere((-tenths / 10, 0, 0)) == opposite[side]

    def test_negative_x_is_left(self):
        assert hemisphere((-30, 0, 0)) == "left"


class TestLandmarks:
    def test_of_equally_near_points_the_first_set_is_taken(self):
        found = nearest_label(invented_reference(), (0, 0, 0))
        assert found == LabelledPoint(label="above", distance_mm=5.0, source=DOSENBACH, network="first")

    def test_a_nearer_point_without_label_is_passed_over(self):
        assert nearest_label(invented_reference(), (0, 3, -1)).label == "below"

    def test_the_furthest_distance_counts_itself(self):
        reference = invented_reference()
        assert nearest_label(reference, (0, 0, 0), within_mm=5.0) is not None
        assert nearest_label(reference, (0, 0, 0), within_mm=4.9) is None
        assert nearest_label(reference, (0, 0, 11)).distance_mm == 6.0
        assert nearest_label(reference, (0, 0, 11.1)) is None

    def test_network_comes_from_the_second_set_only(self):
        assert nearest_network(invented_reference(), (0, 0, 5)) == ("third", pytest.approx(5.831, abs=1e-3))

    def test_a_nearest_point_without_network_gives_none(self):
        assert nearest_network(invented_reference(), (0, 0, -5)) is None

    def test_a_reference_without_points_gives_none(self):
        bare = invented_reference(
            point_xyz_tenths=np.empty((0, 3), np.int16),
            point_labels=(),
            point_sources=(),
            point_networks=(),
        )
        assert nearest_label(bare, (0, 0, 0)) is None
        assert nearest_network(bare, (0, 0, 0)) is None

    def test_networks_are_words_for_a_reader(self):
        networks = set(brain_reference().point_networks)
        assert {"default mode", "fronto-parietal", "cingulo-opercular", ""} <= networks
        assert "unassigned" not in networks
        assert all(network == network.lower() for network in networks)


class TestGreyLattice:
    @pytest.mark.parametrize("spacing_mm", [4, 6.0, 7.5, 10])
    def test_points_are_sorted_multiples_of_the_spacing_in_grey_matter(self, spacing_mm):
        reference = brain_reference()
        lattice = grey_lattice(reference, spacing_mm)
        assert lattice.dtype == np.int16
        assert (lattice % round(10 * spacing_mm) == 0).all()
        np.testing.assert_array_equal(lattice, np.unique(lattice, axis=0))
        some = np.random.default_rng(0).choice(lattice, 50)
        assert {tissue_at(reference, point / 10) for point in some} == {"grey matter"}

    def test_none_is_left_out(self):
        reference = brain_reference()
        found = {tuple(point) for point in grey_lattice(reference, 30).tolist()}
        axis = range(-1500, 1501, 300)
        every = {
            (x, y, z)
            for x in axis
            for y in axis
            for z in axis
            if tissue_at(reference, (x / 10, y / 10, z / 10)) == "grey matter"
        }
        assert found == every

    def test_two_millimetres_list_every_grey_voxel(self):
        reference = brain_reference()
        assert len(grey_lattice(reference, 2)) == (reference.tissue == 2).sum()

    @pytest.mark.parametrize("spacing_mm", [0, -4, 0.5, 4.25, 51, np.nan, np.inf])
    def test_a_spacing_out_of_range_is_refused(self, spacing_mm):
        with pytest.raises(SpaceError, match="spacing_mm must be 1 to 50 mm in whole tenths"):
            grey_lattice(brain_reference(), spacing_mm)


class TestWords:
    def test_all_that_is_known_is_said(self):
        reference = invented_reference(
            point_xyz_tenths=np.array([[-100, 0, 0], [-50, 0, 0]], dtype=np.int16),
            point_labels=("near place", ""),
            point_sources=(DOSENBACH, SEITZMAN),
            point_networks=("", "default mode"),
        )
        shifted = reference.affine.copy()
        shifted[0, 3] -= 4
        moved = invented_reference(
            affine=shifted,
            point_xyz_tenths=reference.point_xyz_tenths,
            point_labels=reference.point_labels,
            point_sources=reference.point_sources,
            point_networks=reference.point_networks,
        )
        assert place_in_words(moved, (-6, 0, 0)) == (
            "left hemisphere, grey matter; 4 mm from a published point labelled 'near place' "
            "(160-point set of Dosenbach et al. 2010); "
            "network of the nearest point of Seitzman et al. 2020: default mode, 1 mm"
        )

    def test_nothing_near_is_said_to_be_so(self):
        assert place_in_words(invented_reference(), (90, 0, 0)) == (
            "right side, outside the brain; no labelled point within 6 mm"
        )

    def test_other_brain_is_explained(self):
        assert place_in_words(invented_reference(), (3, 0, 0)).startswith(
            "midline, brain, but neither grey nor white matter; "
        )

    @settings(deadline=None)  # the first example loads the reference
    @given(PLACES)
    def test_no_place_is_ever_said_to_lie_in_a_region(self, tenths):
        words = place_in_words(brain_reference(), np.array(tenths) / 10)
        assert " in " not in words
        assert "labelled" in words
        assert words.split(",")[0] in (
            "midline",
            *("left hemisphere", "right hemisphere", "left side", "right side"),
        )
