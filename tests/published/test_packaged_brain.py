"""The standard brain read straight from nilearn's files is the one that nilearn itself gives.

Templates: Fonov et al. 2011, NeuroImage 54:313-327; points: Dosenbach et al. 2010, Science 329:1358-1361,
Seitzman et al. 2020, NeuroImage 206:116290. All are read from nilearn, never copied.
"""

from __future__ import annotations

import numpy as np
import pytest

from revinf.spaces import published_points, reference
from revinf.spaces.packaged import packaged_points, packaged_templates


def test_templates_from_the_files_are_those_of_nilearn() -> None:
    read = packaged_templates()
    assert read is not None, "this nilearn keeps its files elsewhere; the slower way is used"
    asked = reference._asked_templates()
    assert np.array_equal(read[0], asked[0])
    assert np.allclose(read[1], asked[1], atol=1e-6)
    assert np.allclose(read[2], asked[2], atol=1e-6)
    assert np.array_equal(read[3], asked[3])


def test_points_from_the_files_are_those_of_nilearn_in_its_order() -> None:
    read = packaged_points()
    assert read is not None, "this nilearn keeps its files elsewhere; the slower way is used"
    assert read == published_points._asked_points()


def test_brain_is_the_same_where_the_files_cannot_be_found(monkeypatch: pytest.MonkeyPatch) -> None:
    usual = reference.brain_reference()
    monkeypatch.setattr(reference, "packaged_templates", lambda: None)
    monkeypatch.setattr(published_points, "packaged_points", lambda: None)
    slow = reference.brain_reference.__wrapped__()
    assert np.array_equal(usual.tissue, slow.tissue)
    assert np.array_equal(usual.affine, slow.affine)
    assert np.array_equal(usual.point_xyz_tenths, slow.point_xyz_tenths)
    assert usual.point_labels == slow.point_labels
    assert usual.point_networks == slow.point_networks
    assert usual.point_sources == slow.point_sources
