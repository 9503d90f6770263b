"""Labelled points as a literature: one study a point, its network as its term; each network is found at its own.

Dosenbach et al. 2010, Science 329:1358-1361: 160 points in six networks. Seitzman et al. 2020, NeuroImage
206:116290: 300 points, 285 of them in 13 networks. Both are read from nilearn and never copied. At 10 mm nearly
every point hits only itself, which proves nothing but the counting; 15 mm reaches neighbours. The shares seen are
beside the bounds. Points of the one set asked of the other are a test that no point can pass by being itself.
"""

from __future__ import annotations

import numpy as np
import pytest
from nilearn import datasets

from revinf.evidence.asked_region import AskedRegion
from revinf.evidence.assess import assess
from revinf.evidence.claim import Claim
from revinf.evidence.profile import profile
from revinf.evidence.sources import as_source
from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.manifest import Description

# Networks that both sets have, by their names in the first; its cerebellum has no counterpart in the second.
SAME = {
    "default": {"network defaultmode"},
    "occipital": {"network visual"},
    "fronto-parietal": {"network frontoparietal"},
    "sensorimotor": {"network somatomotordorsal", "network somatomotorlateral"},
    "cingulo-opercular": {"network cinguloopercular"},
}


def points_of(fetch):
    """Return each point in mm with its network, points without one left out."""
    found = fetch()
    rows = np.column_stack([found.rois[axis] for axis in "xyz"]).tolist()
    pairs = zip(rows, map(str, found.networks), strict=True)
    return [(tuple(point), name) for point, name in pairs if name != "unassigned"]


DOSENBACH = points_of(datasets.fetch_coords_dosenbach_2010)
SEITZMAN = points_of(datasets.fetch_coords_seitzman_2018)


@pytest.fixture(scope="module")
def built(tmp_path_factory):
    """Both sets as literatures, by the number of their points."""
    literatures = {}
    for pairs in (DOSENBACH, SEITZMAN):
        folder = tmp_path_factory.mktemp("points")
        peaks = "".join(f"p{i},{x},{y},{z},MNI\n" for i, ((x, y, z), _) in enumerate(pairs))
        terms = "".join(f"p{i},network {name}\n" for i, (_, name) in enumerate(pairs))
        (folder / "peaks.csv").write_text("study,x,y,z,space\n" + peaks)
        (folder / "terms.csv").write_text("study,term\n" + terms)
        files = ImportOptions(peaks=folder / "peaks.csv", annotations=folder / "terms.csv")
        literature, _ = build_literature(files, folder / "literature", Description(name="points"))
        literatures[len(pairs)] = literature
    return literatures


def shares(literature, asked, radius_mm):
    """Return over the points asked how often an expected term has a ratio above 1, and how often it is first."""
    above, first = [], []
    for point, terms in asked:
        rows = profile(AskedRegion(peaks=[point], radius_mm=radius_mm), as_source(literature)).rows
        above.append(any(row.likelihood_ratio.estimate > 1 for row in rows if row.term in terms))
        first.append(rows[0].term in terms)
    return np.mean(above), np.mean(first)


def test_both_sets_are_whole(built):
    assert {count: literature.n_studies for count, literature in built.items()} == {160: 160, 285: 285}
    assert [literature.n_terms for literature in built.values()] == [6, 13]


@pytest.mark.parametrize(
    ("pairs", "least_first"),
    [
        (DOSENBACH, 0.85),  # seen: 0.92 of all 160; by chance at most 34/160
        (SEITZMAN, 0.72),  # seen: 0.81 of all 285; by chance at most 67/285
    ],
    ids=["dosenbach 2010", "seitzman 2020"],
)
def test_network_is_found_at_its_own_points(built, pairs, least_first):
    asked = [(point, {f"network {name.lower()}"}) for point, name in pairs[:: len(pairs) // 80]]
    above, first = shares(built[len(pairs)], asked, 15.0)
    assert above > 0.97  # seen: 1.00 and 0.996 of all
    assert first > least_first


def test_networks_of_one_set_are_found_at_the_points_of_the_other(built):
    asked = [(point, SAME[name]) for point, name in DOSENBACH if name in SAME]
    assert len(asked) == 142
    above, first = shares(built[285], asked[::2], 15.0)
    assert above > 0.65  # seen: 0.78 of all 142
    assert first > 0.45  # seen: 0.61 of all 142; by chance at most 67/285 = 0.24


@pytest.mark.parametrize("name", sorted({name for _, name in DOSENBACH}))
def test_check_at_a_point_of_each_network_speaks_for_it_and_ranks_it_first(built, name):
    """The point of each network that has most of its own kind within 20 mm: the heart of it."""
    places = np.array([point for point, other in DOSENBACH if other == name])
    near = (((places[:, None] - places[None]) ** 2).sum(axis=2) <= 20**2).sum(axis=1)
    heart = places[near.argmax()].tolist()
    answer = assess(Claim(term=f"network {name}", peaks=[heart], radius_mm=20), built[160])
    assert answer.counts.term_active == near.max()
    assert answer.likelihood_ratio.direction == "for"
    assert answer.selectivity.rank == 1
