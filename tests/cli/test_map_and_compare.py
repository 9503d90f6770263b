"""`revinf map` and `revinf compare`."""

from __future__ import annotations

import json
from pathlib import Path

from revinf.evidence.brain_map import FILES
from revinf.knowledge import demo_folder


def test_map_writes_volumes_sidecar_and_picture(revinf, literature: Path, tmp_path: Path) -> None:
    out = tmp_path / "map"
    asked = ("map", "--term", "fear", "--literature", literature, "--out", out)
    done = revinf(*asked)
    assert (done.exit_code, done.stderr) == (0, "")
    assert "INVENTED DATA" in done.stdout
    assert {path.name for path in out.iterdir()} == {f"{name}.nii.gz" for name in FILES} | {"map.json", "map.png"}
    sidecar = json.loads((out / "map.json").read_text(encoding="utf-8"))
    assert (sidecar["term"], sidecar["prior"], sidecar["literature"]["invented"]) == ("fear", 0.5, True)
    before = (out / "ratio.nii.gz").read_bytes()
    assert revinf(*asked).exit_code == 0
    assert (out / "ratio.nii.gz").read_bytes() == before
    assert list(tmp_path.iterdir()) == [out]


def test_map_keeps_off_what_is_not_its_own(revinf, literature: Path, tmp_path: Path) -> None:
    (tmp_path / "mine.txt").write_text("mine", encoding="utf-8")
    done = revinf("map", "--term", "fear", "--literature", literature, "--out", tmp_path)
    assert done.exit_code == 2
    assert "not a map" in done.stderr
    assert (tmp_path / "mine.txt").read_text(encoding="utf-8") == "mine"


def test_map_counts_all_processes_into_one_volume(revinf, refused, literature: Path, tmp_path: Path) -> None:
    asked = ("map", "--all-terms", "--hits-only", "--literature", literature, "--out", tmp_path / "hits")
    for _ in range(2):  # the second time it replaces its own
        done = revinf(*asked)
        assert (done.exit_code, done.stderr) == (0, "")
    assert "INVENTED DATA" in done.stdout
    files = {"hits.nii.gz", "active.nii.gz", "mask.nii.gz", "terms.csv", "map.json"}
    assert {path.name for path in (tmp_path / "hits").iterdir()} == files
    terms = (tmp_path / "hits" / "terms.csv").read_text(encoding="utf-8").splitlines()
    assert terms[0] == "volume,term,n_studies"
    assert len(terms) - 1 == json.loads((tmp_path / "hits" / "map.json").read_text(encoding="utf-8"))["n_terms"]
    assert "--all-terms" in refused("map", "--term", "fear", "--hits-only", "--literature", literature, "--out", "m")


def test_map_wants_one_term_or_all(refused, literature: Path) -> None:
    assert "--all-terms" in refused("map", "--literature", literature, "--out", "map")
    assert "prior must" in refused("map", "--term", "fear", "--prior", "2", "--literature", literature, "--out", "m")


def test_compare_tells_agreement_and_what_is_missing(revinf, literature: Path, tmp_path: Path) -> None:
    out = tmp_path / "comparison.md"
    asked = ("compare", literature, literature, "--claims", demo_folder() / "claims.csv")
    done = revinf(*asked, "--out", out)
    assert (done.exit_code, done.stderr) == (0, "")
    assert "built in" in " ".join(done.stdout.split())
    assert out.read_text(encoding="utf-8").startswith("# Do two literatures agree?")
    found = json.loads(revinf(*asked, "--json").stdout)
    assert found["counts"]["contradict"] == 0


def test_compare_needs_sources_that_are_there(refused, literature: Path) -> None:
    claims = demo_folder() / "claims.csv"
    assert "no such literature" in refused("compare", "nowhere", literature, "--claims", claims)
