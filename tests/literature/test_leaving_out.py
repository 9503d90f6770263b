"""A literature without some studies is the one that would have been built without them."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from revinf.exceptions import LiteratureError
from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.leaving_out import leave_out
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description
from revinf.spaces.spheres import sphere


def built(folder: Path, peaks: list[str], terms: list[str], studies: list[str]) -> Literature:
    folder.mkdir()
    for name, header, rows in (
        ("peaks", "study,x,y,z", peaks),
        ("terms", "study,term", terms),
        ("studies", "study,group,doi", studies),
    ):
        (folder / f"{name}.csv").write_text("\n".join([header, *rows]) + "\n", encoding="utf-8")
    options = ImportOptions(
        peaks=folder / "peaks.csv", annotations=folder / "terms.csv", studies=folder / "studies.csv"
    )
    return build_literature(options, folder / "literature", Description(name="invented", invented=True))[0]


@pytest.fixture(scope="module")
def parts() -> tuple[list[str], list[str], list[str]]:
    random = np.random.default_rng(5)
    peaks, terms, studies = [], [], []
    for study in range(60):
        for x, y, z in random.integers(-50, 50, size=(random.integers(1, 6), 3)):
            peaks.append(f"s{study:02d},{x},{y},{z}")
        for term in random.choice(["a", "b", "c", "d"], size=2, replace=False):
            terms.append(f"s{study:02d},{term}")
        studies.append(f"s{study:02d},g{study // 3},10.1/Inv.{study}")
    return peaks, terms, studies


def test_leaving_out_is_building_without(parts, tmp_path: Path) -> None:
    whole = built(tmp_path / "whole", *parts)
    smaller = leave_out(whole, ["s04", "https://doi.org/10.1/INV.30"])
    gone = {"s03", "s04", "s05", "s30", "s31", "s32"}
    assert set(smaller.left_out) == gone
    kept = [[row for row in rows if row.split(",")[0] not in gone] for rows in parts]
    again = built(tmp_path / "again", *kept)
    for name, array in again.arrays().items():
        assert np.array_equal(np.asarray(array), np.asarray(smaller.arrays()[name])), name
    for centre in ((0, 0, 0), (20, -20, 10)):
        assert np.array_equal(smaller.studies_hitting(sphere(centre, 15)), again.studies_hitting(sphere(centre, 15)))


def test_the_whole_literature_stays_as_it_is_and_the_fingerprints_differ(parts, tmp_path: Path) -> None:
    whole = built(tmp_path / "whole", *parts)
    smaller = leave_out(whole, ["g2"])
    assert (whole.n_studies, smaller.n_studies) == (60, 57)
    assert smaller.fingerprint != whole.fingerprint
    assert leave_out(whole, []) is whole


def test_a_term_may_lose_all_its_studies(tmp_path: Path) -> None:
    whole = built(tmp_path / "w", ["s1,1,1,1", "s2,2,2,2"], ["s1,a", "s2,b"], ["s1,,", "s2,,"])
    smaller = leave_out(whole, ["s1"])
    assert smaller.term_totals.tolist() == [0, 1]


@pytest.mark.parametrize("name", ["nobody", "", "10.9/none"])
def test_an_unknown_study_is_refused(name: str, parts, tmp_path: Path) -> None:
    whole = built(tmp_path / "whole", *parts)
    with pytest.raises(LiteratureError, match="holds no study"):
        leave_out(whole, [name])


def test_leaving_everything_out_is_refused(tmp_path: Path) -> None:
    whole = built(tmp_path / "w", ["s1,1,1,1", "s2,2,2,2"], ["s1,a", "s2,b"], ["s1,,", "s2,,"])
    with pytest.raises(LiteratureError, match="no study would be left"):
        leave_out(whole, ["s1", "s2"])
