"""A claim looks in one place, in millimetres rounded once, with a prior that means something."""

from __future__ import annotations

from dataclasses import FrozenInstanceError

import numpy as np
import pytest

from revinf.evidence.claim import Claim, parsed_prior
from revinf.exceptions import InvalidClaimError, InvalidProbabilityError, RevinfError, SpaceError

# MNI152 -> Talairach, rows of Lancaster et al. 2007, Hum Brain Mapp 28:1194-1205.
LANCASTER = {
    "pooled": [
        [0.9357, 0.0029, -0.0072, -1.0423],
        [-0.0065, 0.9396, -0.0726, -1.3940],
        [0.0103, 0.0752, 0.8967, 3.6475],
    ],
    "spm": [
        [0.9254, 0.0024, -0.0118, -1.0207],
        [-0.0048, 0.9316, -0.0871, -1.7667],
        [0.0152, 0.0883, 0.8924, 4.0926],
    ],
    "fsl": [
        [0.9464, 0.0034, -0.0026, -1.0680],
        [-0.0083, 0.9479, -0.0580, -1.0239],
        [0.0053, 0.0617, 0.9010, 3.1883],
    ],
}
# Brett 1999, MNI z >= 0.
BRETT_UPPER = [[0.9900, 0, 0, 0], [0, 0.9688, 0.0460, 0], [0, -0.0485, 0.9189, 0]]
PEAK = (-37.0, -24.0, 51.0)


@pytest.mark.parametrize(
    ("place", "number"),
    [
        ({}, 0),
        ({"peaks": [(1, 2, 3)], "mask": "a.nii"}, 2),
        ({"peaks": [(1, 2, 3)], "region": "here"}, 2),
        ({"mask": "a.nii", "region": "here"}, 2),
        ({"peaks": [(1, 2, 3)], "mask": "a.nii", "region": "here"}, 3),
    ],
)
def test_claim_takes_exactly_one_of_peak_mask_and_region(place, number):
    with pytest.raises(InvalidClaimError, match=f"in exactly one kind of place, but got {number}; give peaks, a mask"):
        Claim(term="fear", **place)


@pytest.mark.parametrize("place", [{"peaks": [(1, 2, 3)]}, {"mask": "a.nii"}, {"region": "here"}])
def test_claim_with_one_place_stands(place):
    claim = Claim(term="fear", **place)
    assert [bool(claim.peaks), claim.mask is not None, claim.region is not None].count(True) == 1


def test_several_peaks_form_a_pattern_in_the_order_given():
    claim = Claim(term="fear", peaks=[(4, 5, 6), (1, 2, 3)])
    assert claim.peaks == claim.mni_peaks() == ((4.0, 5.0, 6.0), (1.0, 2.0, 3.0))


@pytest.mark.parametrize("peaks", [[(1, 2, 3)] * 2, [(1, 2, 3), (4, 5, 6), (1.04, 1.96, 3)]])
def test_peak_that_stands_twice_is_refused_in_one_line(peaks):
    with pytest.raises(InvalidClaimError) as caught:
        Claim(term="fear", peaks=peaks)
    assert str(caught.value) == "a peak of the pattern stands twice; give each place once"


@pytest.mark.parametrize("term", ["", "   ", "_ _"])
def test_claim_without_a_term_is_refused(term):
    with pytest.raises(InvalidClaimError, match="a claim needs a term"):
        Claim(term=term, peaks=[(1, 2, 3)])


@pytest.mark.parametrize("term", ["Theory_of_Mind", " theory  of mind ", "THEORY OF MIND"])
def test_term_is_compared_in_one_spelling(term):
    assert Claim(term=term, peaks=[(1, 2, 3)]).term == "theory of mind"


@pytest.mark.parametrize("prior", [0, 1, -0.1, 1.1, float("nan"), float("inf"), "half", None])
def test_prior_outside_the_open_unit_interval_is_refused(prior):
    with pytest.raises(InvalidProbabilityError, match="prior must lie strictly between 0 and 1, but got"):
        Claim(term="fear", peaks=[(1, 2, 3)], prior=prior)


@pytest.mark.parametrize("prior", [1e-9, 0.5, 1 - 1e-9, "prevalence"])
def test_prior_inside_or_the_word_prevalence_is_kept(prior):
    assert Claim(term="fear", peaks=[(1, 2, 3)], prior=prior).prior == prior


@pytest.mark.parametrize(("text", "prior"), [("0.3", 0.3), (" PREVALENCE ", "prevalence"), ("1e-3", 0.001)])
def test_typed_prior_is_a_number_or_the_word(text, prior):
    assert parsed_prior(text) == prior


@pytest.mark.parametrize("text", ["", "half", "50%", "0,5"])
def test_typed_prior_of_another_kind_is_refused(text):
    with pytest.raises(InvalidProbabilityError, match="a probability or the word prevalence, but got"):
        parsed_prior(text)


@pytest.mark.parametrize("transform", [*LANCASTER, "piecewise"])
def test_talairach_peak_is_moved_by_the_inverse_of_the_published_transform(transform):
    matrix = np.array(LANCASTER.get(transform, BRETT_UPPER))
    expected = np.linalg.solve(matrix[:, :3], np.array(PEAK) - matrix[:, 3])
    claim = Claim(term="fear", peaks=[PEAK], space="TAL", transform=transform)
    assert claim.peaks == (PEAK,)
    assert claim.space == "Talairach"
    assert claim.mni_peaks()[0] == pytest.approx(expected, abs=0.05 + 1e-9)
    assert all(round(value, 1) == value for value in claim.mni_peaks()[0])


def test_the_four_transforms_lead_to_different_places():
    places = {
        Claim(term="fear", peaks=[PEAK], space="Talairach", transform=name).mni_peaks()
        for name in (*LANCASTER, "piecewise")
    }
    assert len(places) == 4


def test_mni_peak_stays_where_it_is():
    assert Claim(term="fear", peaks=[PEAK], space="mni", transform="fsl").mni_peaks() == (PEAK,)


@pytest.mark.parametrize(
    ("given", "kept"),
    [
        ((1.04, 2.06, -3.04), (1.0, 2.1, -3.0)),
        ((0.05, -0.05, 0.35), (0.1, -0.1, 0.4)),
        ((54, -54, 24), (54.0, -54.0, 24.0)),
    ],
)
def test_peak_is_rounded_to_a_tenth_of_a_millimetre_halves_away_from_zero(given, kept):
    assert Claim(term="fear", peaks=[given]).peaks == (kept,)


@pytest.mark.parametrize(
    ("changes", "error", "words"),
    [
        ({"peaks": [(1, 2)]}, SpaceError, "a peak must have x, y and z in mm, but got 2 numbers"),
        ({"peaks": [(1, 2, 3, 4)]}, SpaceError, "but got 4 numbers"),
        ({"peaks": [(1, 2, float("nan"))]}, SpaceError, "within 1000 mm of the origin, but got nan"),
        ({"peaks": [(1, 2, 5000)]}, SpaceError, "but got 5000.0; give millimetres"),
        ({"peaks": [(1, 2, "z")]}, SpaceError, "xyz must be numbers"),
        ({"radius_mm": -1}, SpaceError, "radius_mm must lie between 0 and 200 mm, but got -1"),
        ({"radius_mm": float("nan")}, SpaceError, "radius_mm must lie between"),
        ({"space": "moon"}, SpaceError, "space must be MNI152 or Talairach, but got 'moon'"),
        ({"transform": "magic"}, SpaceError, "transform must be one of pooled, spm, fsl, piecewise"),
        ({"space": "TAL", "transform": "magic"}, SpaceError, "but got 'magic'"),
    ],
)
def test_unusable_place_is_refused_in_one_line(changes, error, words):
    with pytest.raises(error) as caught:
        Claim(**({"term": "fear", "peaks": [(1, 2, 3)]} | changes))
    assert isinstance(caught.value, RevinfError)
    assert words in str(caught.value)
    assert "\n" not in str(caught.value)


def test_radius_is_checked_even_where_no_sphere_is_wanted():
    with pytest.raises(SpaceError, match="radius_mm"):
        Claim(term="fear", region="here", radius_mm=500)


def test_claim_cannot_be_changed():
    claim = Claim(term="fear", peaks=[(1, 2, 3)])
    with pytest.raises(FrozenInstanceError):
        claim.term = "joy"


def test_sphere_of_a_claim_has_its_radius():
    assert Claim(term="fear", peaks=[(1, 2, 3)], radius_mm=6).sphere_at((4, 5, 6)).radius_mm == 6
