"""A map's value at a voxel is what a check says there, to the last digit."""

from __future__ import annotations

import gzip
import json
from pathlib import Path

import nibabel as nib
import numpy as np
import pytest

from revinf.evidence.assess import assess
from revinf.evidence.brain_map import FILES, BrainMap
from revinf.evidence.claim import Claim
from revinf.evidence.map_term import map_term
from revinf.evidence.map_terms import hits_of_terms, map_terms
from revinf.evidence.source_choice import choose_source
from revinf.exceptions import InvalidClaimError, SpaceError, UnknownTermError
from revinf.literature.literature import Literature


@pytest.fixture(scope="module")
def found(open_literature: Literature) -> BrainMap:
    return map_term("theory of mind", open_literature, spacing_mm=2.0, prior="prevalence")


def test_two_hundred_voxels_equal_their_checks(found: BrainMap, open_literature: Literature) -> None:
    random = np.random.default_rng(8)
    for at in random.choice(len(found.grid_tenths), 200, replace=False).tolist():
        point = (found.grid_tenths[at] / 10).tolist()
        answer = assess(Claim(term="theory of mind", peaks=[point], prior="prevalence"), open_literature)
        ratio, posterior = answer.likelihood_ratio.value, answer.posterior.value
        values = {name: found.values[name][at] for name in found.values}
        assert values == {
            "hits": answer.counts.term_active,
            "active": answer.counts.active_total,
            "ratio": ratio.estimate,
            "ratio-low": ratio.low,
            "ratio-high": ratio.high,
            "posterior": posterior.estimate,
            "posterior-low": posterior.low,
            "posterior-high": posterior.high,
        }


def test_volumes_keep_every_digit_and_say_where_they_are(found: BrainMap, tmp_path: Path) -> None:
    volumes = dict(found.volumes())
    assert set(volumes) == {f"{name}.nii.gz" for name in FILES}
    assert dict(found.volumes()) == volumes  # no clock in the bytes
    (tmp_path / "ratio.nii.gz").write_bytes(volumes["ratio.nii.gz"])
    image = nib.load(tmp_path / "ratio.nii.gz")
    for at in (0, 5_000, len(found.grid_tenths) - 1):
        voxel = np.linalg.inv(image.affine) @ [*(found.grid_tenths[at] / 10), 1]
        where = tuple(np.round(voxel[:3]).astype(int))
        assert np.allclose(voxel[:3], where)
        assert float(np.asarray(image.dataobj)[where]) == found.values["ratio"][at]
    mask = nib.Nifti1Image.from_bytes(gzip.decompress(volumes["mask.nii.gz"]))
    assert int(np.asarray(mask.dataobj).sum()) == len(found.grid_tenths)


def test_every_process_is_mapped_in_turn(open_literature: Literature) -> None:
    maps = list(map_terms(open_literature, spacing_mm=4.0))
    assert [number for number, _, _ in maps] == list(range(1, maps[0][1] + 1))
    one = next(item for _, _, item in maps if item.term == "navigation")
    alone = map_term("navigation", open_literature, spacing_mm=4.0)
    assert all(np.array_equal(one.values[name], alone.values[name]) for name in alone.values)
    json.dumps(one.to_dict(), allow_nan=False)


def test_counts_of_all_processes_are_those_of_each_map(open_literature: Literature) -> None:
    found = hits_of_terms(open_literature, spacing_mm=4.0)
    assert "navigation" in found.terms
    assert "verbal material" not in found.terms  # no process
    for term in ("navigation", "theory of mind"):
        alone = map_term(term, open_literature, spacing_mm=4.0)
        row = found.terms.index(term)
        assert np.array_equal(found.hits[row], alone.values["hits"])
        assert found.n_term[row] == alone.n_term
        assert np.array_equal(found.active, alone.values["active"])
    packed = {name: b"".join(chunks) for name, chunks in found.volumes()}
    series = nib.Nifti1Image.from_bytes(gzip.decompress(packed["hits.nii.gz"]))
    mask = np.asarray(nib.Nifti1Image.from_bytes(gzip.decompress(packed["mask.nii.gz"])).dataobj) > 0
    assert series.shape == (*mask.shape, len(found.terms))
    assert np.array_equal(series.affine, nib.Nifti1Image.from_bytes(gzip.decompress(packed["active.nii.gz"])).affine)
    voxels = np.rint(np.linalg.inv(series.affine) @ np.c_[found.grid_tenths / 10, np.ones(len(found.grid_tenths))].T)
    volume = np.asarray(series.dataobj)[..., row]
    assert np.array_equal(volume[tuple(voxels[:3].astype(int))], found.hits[row])
    assert not volume[~mask].any()


def test_solving_in_other_processes_changes_no_digit(open_literature: Literature, monkeypatch) -> None:
    plain = {item.term: item for _, _, item in map_terms(open_literature)}
    monkeypatch.setattr("revinf.evidence.map_terms._MANY_TABLES", 0)
    for _, _, item in map_terms(open_literature):
        assert all(np.array_equal(item.values[name], plain[item.term].values[name]) for name in item.values)


def test_strongest_places_do_not_overlap(found: BrainMap) -> None:
    points = found.grid_tenths[found.strongest(5)].astype(int)
    gaps = ((points[:, None] - points[None]) ** 2).sum(axis=2)
    assert gaps[~np.eye(5, dtype=bool)].min() >= 200**2


def test_what_cannot_be_mapped_is_refused(open_literature: Literature) -> None:
    with pytest.raises(SpaceError, match="2 or 4 mm"):
        map_term("navigation", open_literature, spacing_mm=3.0)
    with pytest.raises(UnknownTermError):
        map_term("juggling", open_literature)
    with pytest.raises(InvalidClaimError, match="needs the studies"):
        map_term("navigation", choose_source(None, None, {}))
