"""`revinf settle`, and --without on the commands that count."""

from __future__ import annotations

import json
from pathlib import Path


def test_settle_prints_candidates_places_and_outcomes(revinf, literature: Path) -> None:
    asked = ("settle", "--literature", literature, "--peak", "-22", "-4", "-18", "--term", "fear")
    done = revinf(*asked)
    assert (done.exit_code, done.stderr) == (0, "")
    for words in ("Where else to look", "if active, leads", "INVENTED DATA", "never about a person"):
        assert words in " ".join(done.stdout.split())
    found = json.loads(revinf(*asked, "--json").stdout)
    assert found["candidates"][0]["term"] == "fear"
    assert found["places"]
    assert found["places"][0]["gain"]["low"] <= found["places"][0]["gain"]["estimate"]


def test_settle_needs_a_literature(refused) -> None:
    assert "needs the studies themselves" in refused("settle", "--peak", "0", "0", "0", "--term", "navigation")


def test_without_leaves_a_paper_and_its_group_out(revinf, literature: Path) -> None:
    asked = ("check", "--literature", literature, "--peak", "-22", "-4", "-18", "--term", "fear", "--json")
    whole = json.loads(revinf(*asked).stdout)["literature"]
    less = json.loads(revinf(*asked, "--without", "inv001").stdout)["literature"]
    assert less["n_studies"] == whole["n_studies"] - 1
    assert less["fingerprint"] != whole["fingerprint"]
    assert "without 1 that" in revinf(*asked[:-1], "--without", "inv001").stdout


def test_without_names_what_it_does_not_know(refused, literature: Path) -> None:
    asked = ("check", "--peak", "0", "0", "0", "--term", "fear", "--without", "nobody")
    assert "holds no study" in refused(*asked, "--literature", literature)
    assert "--without needs a literature" in refused(*asked)


def test_audit_says_what_would_settle_a_claim(revinf, literature: Path, tmp_path: Path) -> None:
    table = tmp_path / "claims.csv"
    table.write_text("claim,term,x,y,z\na,fear,-22,-4,-18\n", encoding="utf-8")
    out = tmp_path / "report"
    assert revinf("audit", table, "--literature", literature, "--out", out, "--without", "inv001").exit_code == 0
    assert "What would settle it?" in (out / "report.md").read_text(encoding="utf-8")
    page = (out / "report.html").read_text(encoding="utf-8")
    assert "What would settle it?" in page
    assert "1 study, as asked, with their groups" in page
