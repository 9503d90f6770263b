"""Published labelled points and the grey-matter template, read from nilearn and never copied.

Dosenbach et al. 2010, Science 329:1358-1361: 160 points, six networks.
Seitzman et al. 2020, NeuroImage 206:116290: 300 points, subcortical classes, networks.
"""

from __future__ import annotations

import re

import numpy as np
import pytest
from nilearn import datasets

from revinf.spaces.brain import (
    brain_reference,
    distance_outside_mm,
    grey_lattice,
    nearest_label,
    nearest_network,
    place_in_words,
    tissue_at,
)

DOSENBACH = datasets.fetch_coords_dosenbach_2010()
SEITZMAN = datasets.fetch_coords_seitzman_2018()


def rows(rois) -> list[tuple[float, ...]]:
    return [tuple(point) for point in np.column_stack([rois[axis] for axis in "xyz"]).tolist()]


def test_every_point_of_dosenbach_2010_finds_itself_at_no_distance():
    reference = brain_reference()
    points = rows(DOSENBACH.rois)
    assert len(points) == 160
    for point, label in zip(points, DOSENBACH.labels, strict=True):
        found = nearest_label(reference, point, within_mm=0)
        assert found is not None
        assert found.distance_mm == 0.0
        assert re.fullmatch(re.escape(found.label) + r" \d+", label)
        assert found.source == "160-point set of Dosenbach et al. 2010"


def test_every_point_of_seitzman_2020_finds_itself_at_no_distance():
    reference = brain_reference()
    points = rows(SEITZMAN.rois)
    assert len(points) == 300
    for point, network in zip(points, SEITZMAN.networks, strict=True):
        found = nearest_network(reference, point, within_mm=0)
        if network == "unassigned":
            assert found is None
        else:
            assert found is not None
            words, distance_mm = found
            assert distance_mm == 0.0
            assert re.sub("[ -]", "", words) == network.lower()


def test_only_subcortical_points_of_seitzman_2020_give_a_label():
    reference = brain_reference()
    own = {
        "thalamus": "thalamus",
        "amygdala": "amygdala",
        "hippocampus": "hippocampus",
        "basalGanglia": "basal ganglia",
        "cerebellum": "cerebellum",
    }
    labels = reference.point_labels[160:]
    assert [own.get(region, "") for region in SEITZMAN.regions] == list(labels)
    assert {label for label in labels if label} == set(own.values())
    assert sum(label == "" for label in labels) == sum(region.startswith("cortex") for region in SEITZMAN.regions)


@pytest.mark.parametrize(("spacing_mm", "count", "margin"), [(4, 16_700, 200), (6, 4_900, 100)])
def test_grey_lattice_has_the_expected_number_of_places(spacing_mm, count, margin):
    """About an eighth of the 2 mm voxels of the ICBM 2009a template above 0.5, as nilearn ships it."""
    lattice = grey_lattice(brain_reference(), spacing_mm)
    assert abs(len(lattice) - count) <= margin


def test_published_points_lie_in_the_brain_and_mostly_in_grey_matter():
    """Both papers placed their points in grey matter; the template of an average brain blurs some."""
    reference = brain_reference()
    points = rows(DOSENBACH.rois) + rows(SEITZMAN.rois)
    assert {distance_outside_mm(reference, point) for point in points} == {0.0}
    grey = np.mean([tissue_at(reference, point) == "grey matter" for point in points])
    # By chance it would be the share of grey voxels in the brain, 57 %.
    assert 0.7 < grey < 0.9


def test_the_motor_cortex_and_a_deep_white_point_have_their_tissue():
    """Anatomy: precentral cortex is grey, the centrum semiovale white (common practice, no source)."""
    reference = brain_reference()
    assert tissue_at(reference, (-42, -22, 52)) == "grey matter"
    assert tissue_at(reference, (26, -16, 34)) == "white matter"
    assert tissue_at(reference, (0, 0, 110)) == "outside"


def test_a_point_of_the_set_is_described_by_its_own_label():
    point = next(p for p, label in zip(rows(DOSENBACH.rois), DOSENBACH.labels, strict=True) if "TPJ" in label)
    assert "0 mm from a published point labelled 'TPJ' (160-point set of Dosenbach et al. 2010)" in place_in_words(
        brain_reference(), point
    )
