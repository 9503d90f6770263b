"""Nilearn's packaged map of left against right button presses: its peaks lie on the hand areas.

That the hand area of each precentral gyrus is about (±38, -24, 56) mm is common practice, no source; that the
right hemisphere moves the left hand likewise.
"""

from __future__ import annotations

import math
from importlib.util import find_spec
from pathlib import Path

import pytest

from revinf.evidence.map_peaks import map_peaks

HANDS = {1: (38.0, -24.0, 56.0), -1: (-38.0, -24.0, 56.0)}


def test_highest_increase_and_decrease_lie_on_the_two_hand_areas() -> None:
    origin = find_spec("nilearn")
    assert origin is not None
    file = Path(str(origin.origin)).parent / "datasets" / "data" / "image_10426.nii.gz"
    if not file.is_file():
        pytest.skip("this nilearn does not carry the button-press map")
    peaks = [item.peak for item in map_peaks(file, 5.0, extent_voxels=10, two_sided=True)]
    largest = {
        sign: max((p for p in peaks if p.statistic * sign > 0), key=lambda p: p.cluster_mm3 or 0) for sign in HANDS
    }
    for sign, hand in HANDS.items():
        assert math.dist(largest[sign].xyz, hand) < 10
