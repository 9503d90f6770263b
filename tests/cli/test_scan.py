"""`revinf scan` and `revinf peaks`: tables that audit takes as they are, and one line where something is wrong."""

from __future__ import annotations

import csv
import json
import time
from pathlib import Path

import nibabel as nib
import numpy as np
import pytest

from revinf.knowledge import demo_folder


def rows(path: Path) -> list[dict[str, str]]:
    with path.open(encoding="utf-8", newline="") as stream:
        return list(csv.DictReader(stream))


@pytest.mark.parametrize("ending", ["md", "docx", "pdf"])
def test_the_demos_paper_goes_from_scan_to_report(ending: str, revinf, literature: Path, tmp_path: Path) -> None:
    manuscript, table = demo_folder() / f"manuscript.{ending}", tmp_path / "claims.csv"
    done = revinf("scan", manuscript, "--literature", literature, "--out", table)
    assert (done.exit_code, done.stderr) == (0, "")
    assert "Claims, to be confirmed" in done.stdout
    audited = revinf("audit", table, "--literature", literature, "--out", tmp_path / "report")
    assert audited.exit_code == 0
    assert "2 claims still without coordinates" in audited.stdout
    lines = (tmp_path / "report" / "assessments.jsonl").read_text(encoding="utf-8").splitlines()
    assert len(lines) == 13
    assert (tmp_path / "report" / "report.html").is_file()


def test_found_coordinates_are_a_peaks_table_for_scan_and_audit(revinf, tmp_path: Path) -> None:
    manuscript = demo_folder() / "manuscript.md"
    found, again = tmp_path / "coordinates.csv", tmp_path / "claims.csv"
    assert revinf("scan", manuscript, "--out", again, "--coordinates", found).exit_code == 0
    assert len(rows(found)) == 14
    assert rows(found)[0] == {
        "x": "-22",
        "y": "-4",
        "z": "-18",
        "space": "",
        "place": "left amygdala",
        "location": "manuscript.md, Abstract, line 10",
        "how": "sentence",
    }
    (tmp_path / "text.txt").write_text(
        "Activity in the left fusiform gyrus suggests face perception.", encoding="utf-8"
    )
    done = revinf("scan", tmp_path / "text.txt", "--peaks", found, "--out", tmp_path / "two.csv", "--json")
    claim = json.loads(done.stdout)["claims"][0]
    assert (claim["x"], claim["confidence"], claim["link"]) == (-44, "likely", "same name in the peaks table")
    bare = tmp_path / "bare.csv"
    bare.write_text("claim,term,place\na,navigation,right parahippocampal gyrus\n", encoding="utf-8")
    audited = revinf("audit", bare, "--peaks", found, "--out", tmp_path / "report")
    assert audited.exit_code == 0
    assert "navigation" in audited.stdout


def test_rows_say_cue_strength_link_and_confidence(revinf, tmp_path: Path) -> None:
    (tmp_path / "a.txt").write_text("Results\n\n=Activity in the insula may suggest disgust.\n", encoding="utf-8")
    assert revinf("scan", tmp_path / "a.txt", "--out", tmp_path / "claims.csv").exit_code == 0
    (row,) = rows(tmp_path / "claims.csv")
    assert (row["cue"], row["strength"], row["confidence"], row["x"]) == ("suggest", "hedged", "none", "")
    assert row["location"] == "a.txt, Results, line 3"
    assert row["quote"].startswith("'=")


def test_a_file_that_cannot_be_read_gets_one_line_and_writes_nothing(refused, tmp_path: Path) -> None:
    broken = tmp_path / "broken.pdf"
    broken.write_bytes(b"%PDF-1.7\n\x00\x01garbage")
    assert "not a readable PDF" in refused("scan", broken, "--out", "claims.csv")
    assert "cannot be read" in refused("scan", tmp_path / "none.docx", "--out", "claims.csv")
    assert "lacks the columns" in refused(
        "scan", demo_folder() / "manuscript.md", "--peaks", demo_folder() / "annotations.csv", "--out", "claims.csv"
    )


def test_sixty_pages_are_read_in_seconds(revinf, tmp_path: Path) -> None:
    from fpdf import FPDF

    paper = FPDF()
    sentence = (
        "Storm scenes activated the left amygdala (-22, -4, -18), and the following morning was calm for everybody. "
    )
    for page in range(60):
        paper.add_page()
        paper.set_font("Times", "", 10)
        paper.multi_cell(0, 5, f"On page {page} this response suggests fear. " + sentence * 28)
    path = tmp_path / "long.pdf"
    path.write_bytes(bytes(paper.output()))
    before = time.perf_counter()
    assert revinf("scan", path, "--out", tmp_path / "claims.csv").exit_code == 0
    # No benchmark: a bound that only a scan gone wrong exceeds; it takes about a tenth of this here.
    assert time.perf_counter() - before < 60


@pytest.fixture
def stat_map(tmp_path: Path) -> Path:
    values = np.full((30, 30, 30), np.nan, dtype=np.float32)
    values[2:28, 2:28, 2:28] = 0
    values[10:13, 10:13, 10:13], values[11, 11, 11] = 4, 6
    values[20, 20, 20] = 5
    values[5:8, 5:8, 5:8] = -7
    affine = np.diag([4.0, 4, 4, 1])
    affine[:3, 3] = -60
    path = tmp_path / "map.nii.gz"
    nib.save(nib.Nifti1Image(values, affine), path)
    return path


def test_peaks_of_a_map_are_written_with_places_and_read_back(revinf, stat_map: Path, tmp_path: Path) -> None:
    out = tmp_path / "peaks.csv"
    done = revinf("peaks", stat_map, "--threshold", "3", "--out", out)
    assert (done.exit_code, done.stderr) == (0, "")
    assert [(row["x"], row["y"], row["z"], row["stat"]) for row in rows(out)] == [
        ("-16", "-16", "-16", "6"),
        ("20", "20", "20", "5"),
    ]
    assert {row["space"] for row in rows(out)} == {"MNI152"}
    assert rows(out)[0]["cluster_mm3"] == "1728"
    few = json.loads(revinf("peaks", stat_map, "--threshold", "3", "--extent", "5", "--out", out, "--json").stdout)
    assert [row["stat"] for row in few] == [6.0]
    both = json.loads(revinf("peaks", stat_map, "--threshold", "3", "--two-sided", "--out", out, "--json").stdout)
    assert sorted(row["stat"] for row in both) == [-7.0, 5.0, 6.0]
    none = revinf("peaks", stat_map, "--threshold", "30", "--out", out)
    assert none.exit_code == 0
    assert "no voxel reaches the threshold" in none.stdout


def test_a_threshold_of_nothing_is_refused(refused, stat_map: Path) -> None:
    assert "must be above 0" in refused("peaks", stat_map, "--threshold", "0", "--out", "peaks.csv")
    assert "must be above 0" in refused("peaks", stat_map, "--threshold", "nan", "--out", "peaks.csv")
    assert "no such file" in refused("peaks", "none.nii", "--threshold", "3", "--out", "peaks.csv")
