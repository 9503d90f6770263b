"""Every table of data_tables/ is held to its entry in datapackage.json, and to what its words mean.

Rows, sizes and hashes are recomputed here without the refresh script, so that neither can hide a slip
of the other.
"""

from __future__ import annotations

import csv
import gzip
import hashlib
import io
import json
import math
import re
import shutil
import subprocess
import sys
import unicodedata
from pathlib import Path
from typing import Any

import pytest

ROOT = Path(__file__).resolve().parents[1]
TABLES = ROOT / "data_tables"
SCRIPT = Path(__file__).with_name("refresh_datapackage.py")
PACKAGE = json.loads((TABLES / "datapackage.json").read_text(encoding="utf-8"))
RESOURCES: list[dict[str, Any]] = PACKAGE["resources"]
# SPDX identifiers: MIT for what was written here, CC0-1.0 for bare facts transcribed from papers.
LICENCES = {"MIT", "CC0-1.0"}
PARSERS = {"string": str, "integer": int, "number": float}
KINDS = {
    "anatomy", "method", "population", "statistics", "material", "presentation", "design", "drug",
    "measure",
}  # fmt: skip

each_table = pytest.mark.parametrize("entry", RESOURCES, ids=lambda entry: entry["name"])


def text_of(entry: dict[str, Any]) -> str:
    raw = (TABLES / entry["path"]).read_bytes()
    return (gzip.decompress(raw) if entry["path"].endswith(".gz") else raw).decode("utf-8")


def cells_of(entry: dict[str, Any]) -> list[list[str]]:
    return list(csv.reader(io.StringIO(text_of(entry), newline="")))


def rows_of(name: str) -> list[dict[str, str]]:
    entry = next(entry for entry in RESOURCES if entry["name"] == name)
    return list(csv.DictReader(io.StringIO(text_of(entry), newline="")))


def broken_rule(field: dict[str, Any], cell: str) -> str | None:
    """Return which rule of its field a cell breaks, if any."""
    rules = field.get("constraints", {})
    if cell == "":
        return "required" if rules.get("required") else None
    if cell != cell.strip():
        return "spaces around the text"
    try:
        value = PARSERS[field["type"]](cell)
    except ValueError:
        return f"type {field['type']}"
    if isinstance(value, float) and not math.isfinite(value):
        return "finite"
    if "enum" in rules and cell not in rules["enum"]:
        return "enum"
    if "minimum" in rules and value < rules["minimum"]:
        return "minimum"
    if "pattern" in rules and not re.fullmatch(rules["pattern"], cell):
        return "pattern"
    return None


def normalised(term: str) -> str:
    """Return a term as terms are compared: NFC, lower case, single spaces, underscores as spaces."""
    return " ".join(unicodedata.normalize("NFC", term).lower().replace("_", " ").split())


# --- what the package says, and what the files are -------------------------------------------------


def test_files_and_entries_are_the_same_set() -> None:
    files = {path.relative_to(TABLES).as_posix() for path in TABLES.rglob("*") if path.is_file()}
    assert files - {"datapackage.json"} == {entry["path"] for entry in RESOURCES}


def test_names_are_the_file_names_and_unique() -> None:
    names = [entry["name"] for entry in RESOURCES]
    assert names == [entry["path"].split("/")[-1].split(".")[0] for entry in RESOURCES]
    assert len(set(names)) == len(names)


def test_planned_tables_do_not_exist_yet() -> None:
    arrived = [e["path"] for e in PACKAGE.get("planned", []) if (TABLES / e["path"]).exists()]
    assert arrived == [], "run python tests/refresh_datapackage.py"


def test_package_names_every_licence_its_tables_use() -> None:
    used = {licence["name"] for entry in RESOURCES for licence in entry["licenses"]}
    assert used <= {licence["name"] for licence in PACKAGE["licenses"]} <= LICENCES
    assert PACKAGE["name"]
    assert PACKAGE["title"]


@each_table
def test_entry_says_what_the_table_is_and_how_it_was_made(entry: dict[str, Any]) -> None:
    assert all(len(entry[key].split()) >= 2 for key in ("title", "description", "made_by"))
    assert (entry["format"], entry["mediatype"], entry["encoding"]) == ("csv", "text/csv", "utf-8")
    assert entry["profile"] == "tabular-data-resource"
    assert (entry.get("compression") == "gz") == entry["path"].endswith(".gz")


@each_table
def test_entry_has_a_known_licence_and_a_source(entry: dict[str, Any]) -> None:
    assert entry["licenses"]
    assert {licence["name"] for licence in entry["licenses"]} <= LICENCES
    assert entry["sources"]
    for source in entry["sources"]:
        assert len(source["title"].split()) >= 3
        assert source.get("path", "https://doi.org/10.").startswith("https://doi.org/10.")


@each_table
def test_size_rows_and_hash_are_those_of_the_file(entry: dict[str, Any]) -> None:
    raw = (TABLES / entry["path"]).read_bytes()
    assert entry["bytes"] == len(raw)
    assert entry["hash"] == "sha256:" + hashlib.sha256(raw).hexdigest()
    assert entry["rows"] == len(cells_of(entry)) - 1 > 0


@each_table
def test_file_is_plain_text_with_line_feeds(entry: dict[str, Any]) -> None:
    text = text_of(entry)
    assert not text.startswith("\ufeff")
    assert "\r" not in text
    assert text.endswith("\n")
    assert text == unicodedata.normalize("NFC", text)


@each_table
def test_header_is_the_fields_in_order(entry: dict[str, Any]) -> None:
    fields = entry["schema"]["fields"]
    assert cells_of(entry)[0] == [field["name"] for field in fields]
    assert all(len(field["description"]) > 3 and field["type"] in PARSERS for field in fields)
    assert all(field.get("unit") for field in fields if field["type"] != "string")


@each_table
def test_every_cell_keeps_the_rules_of_its_field(entry: dict[str, Any]) -> None:
    fields = entry["schema"]["fields"]
    broken = [
        (line, field["name"], cell, rule)
        for line, row in enumerate(cells_of(entry)[1:], start=2)
        for field, cell in zip(fields, row, strict=True)
        if (rule := broken_rule(field, cell))
    ]
    assert broken == []


@each_table
def test_keys_are_unique(entry: dict[str, Any]) -> None:
    schema = entry["schema"]
    key = schema.get("primaryKey", [])
    keys = [[key] if isinstance(key, str) else key]
    keys += [[f["name"]] for f in schema["fields"] if f.get("constraints", {}).get("unique")]
    header, *rows = cells_of(entry)
    for columns in filter(None, keys):
        places = [header.index(column) for column in columns]
        found = [tuple(row[place] for place in places) for row in rows]
        assert len(set(found)) == len(found), columns


@pytest.mark.parametrize(
    ("field", "cell", "rule"),
    [
        ({"type": "string", "constraints": {"required": True}}, "", "required"),
        ({"type": "integer"}, "1.5", "type integer"),
        ({"type": "number"}, "1,5", "type number"),
        ({"type": "number"}, "nan", "finite"),
        ({"type": "integer", "constraints": {"minimum": 0}}, "-1", "minimum"),
        ({"type": "string", "constraints": {"enum": ["a"]}}, "b", "enum"),
        ({"type": "string", "constraints": {"pattern": "[a-z]+"}}, "A", "pattern"),
        ({"type": "string"}, " a", "spaces around the text"),
        ({"type": "number"}, "", None),
        ({"type": "integer", "constraints": {"minimum": 0}}, "7", None),
    ],
)
def test_rules_of_a_field_can_be_broken(field: dict[str, Any], cell: str, rule: str | None) -> None:
    assert broken_rule(field, cell) == rule


# --- words ------------------------------------------------------------------------------------------


def process_words() -> list[str]:
    """Return all terms and synonyms of processes.csv."""
    rows = rows_of("processes")
    terms = [row["term"] for row in rows]
    return terms + [word for row in rows for word in row["synonyms"].split(";") if row["synonyms"]]


def test_processes_are_many_in_many_domains() -> None:
    rows = rows_of("processes")
    assert len(rows) >= 140
    assert len({row["domain"] for row in rows}) >= 14


@pytest.mark.parametrize(
    ("term", "domain"),
    [
        ("theory of mind", "social cognition"),
        ("story-based theory of mind", "social cognition"),
        ("non-story theory of mind", "social cognition"),
        ("semantic cognition", "language"),
        ("narrative comprehension", "language"),
        ("autobiographical memory", "memory"),
        ("navigation", "spatial cognition"),
        ("moral cognition", "morality"),
        ("finger tapping", "motor control"),
        ("disgust", "emotion"),
        ("reward anticipation", "reward and value"),
        ("response inhibition", "executive control"),
    ],
)
def test_process_belongs_to_its_domain(term: str, domain: str) -> None:
    assert [row["domain"] for row in rows_of("processes") if row["term"] == term] == [domain]


def test_process_words_are_spelled_as_terms_are_compared() -> None:
    words = process_words() + [row["domain"] for row in rows_of("processes")]
    assert [word for word in words if word != normalised(word) or not word] == []


def test_no_process_word_occurs_twice() -> None:
    words = process_words()
    assert sorted(words) == sorted(set(words))


def test_term_kinds_are_many_and_every_kind_is_used() -> None:
    rows = rows_of("term_kinds")
    assert len(rows) >= 280
    assert {row["kind"] for row in rows} == KINDS


def test_term_kinds_are_spelled_as_terms_are_compared() -> None:
    words = [row["term"] for row in rows_of("term_kinds")]
    assert [word for word in words if word != normalised(word) or not word] == []


def test_no_word_is_both_a_process_and_not() -> None:
    assert set(process_words()) & {row["term"] for row in rows_of("term_kinds")} == set()


@pytest.mark.parametrize(
    ("term", "kind"),
    [
        ("verbal material", "material"),
        ("nonverbal material", "material"),
        ("visual presentation", "presentation"),
        ("auditory presentation", "presentation"),
        ("task-induced deactivation", "design"),
        ("amygdala", "anatomy"),
        ("fmri", "method"),
    ],
)
def test_word_has_its_kind(term: str, kind: str) -> None:
    assert [row["kind"] for row in rows_of("term_kinds") if row["term"] == term] == [kind]


# --- numbers ----------------------------------------------------------------------------------------


def test_grades_are_those_of_kass_and_raftery() -> None:
    """Kass & Raftery 1995, J Am Stat Assoc 90:773-795: 1 to 3, 3 to 20, 20 to 150, over 150."""
    bounds = [
        (row["grade"], float(row["lower"]), float(row["upper"] or math.inf)) for row in rows_of("evidence_grades")
    ]
    assert bounds == [
        ("bare", 1, 3),
        ("positive", 3, 20),
        ("strong", 20, 150),
        ("very strong", 150, math.inf),
    ]
    assert rows_of("evidence_grades")[0]["wording"] == "not worth more than a bare mention"


def test_grades_leave_no_gap_above_one() -> None:
    rows = rows_of("evidence_grades")
    assert rows[0]["lower"] == "1"
    assert [row["lower"] for row in rows[1:]] == [row["upper"] for row in rows[:-1]]
    assert rows[-1]["upper"] == ""


def test_broca_counts_are_those_printed() -> None:
    """Poldrack 2006, Trends Cogn Sci 10:59-63: 166, 703, 199, 2154; 0.19, 0.69 and 2.3."""
    (row,) = (row for row in rows_of("published_frequencies") if row["region"] == "Broca's area")
    k1, n1, k0, n0 = (int(row[name]) for name in ("term_active", "term_total", "other_active", "other_total"))
    assert (k1, n1 - k1, k0, n0 - k0) == (166, 703, 199, 2154)
    p1, p0 = k1 / n1, k0 / n0
    assert (round(p1, 2), round(p1 / (p1 + p0), 2), round(p1 / p0, 1)) == (0.19, 0.69, 2.3)
    assert (row["term"], row["x"], row["radius_mm"]) == ("language", "", "")


@pytest.mark.parametrize(
    "entry",
    [e for e in RESOURCES if e["schema"]["fields"][0]["name"] == "region"],
    ids=lambda entry: entry["name"],
)
def test_active_counts_do_not_exceed_their_totals(entry: dict[str, Any]) -> None:
    rows = rows_of(entry["name"])
    for side in ("term", "other"):
        wrong = [row for row in rows if int(row[f"{side}_active"]) > int(row[f"{side}_total"])]
        assert wrong == []


# --- the refresh script -----------------------------------------------------------------------------


def run_refresh(folder: Path) -> subprocess.CompletedProcess[str]:
    return subprocess.run([sys.executable, str(SCRIPT), str(folder)], capture_output=True, text=True, check=False)


@pytest.fixture
def copy(tmp_path: Path) -> Path:
    """Return a folder with a copy of all tables."""
    return Path(shutil.copytree(TABLES, tmp_path / "tables"))


def test_refresh_changes_nothing_when_all_is_in_order(copy: Path) -> None:
    done = run_refresh(copy)
    assert (done.returncode, done.stderr) == (0, "")
    left = (copy / "datapackage.json").read_bytes()
    assert left == (TABLES / "datapackage.json").read_bytes()


def test_refresh_measures_a_changed_table_and_leaves_the_prose(copy: Path) -> None:
    with (copy / "term_kinds.csv").open("a", encoding="utf-8", newline="") as file:
        file.write("a new word,design\n")
    assert run_refresh(copy).returncode == 0
    after = json.loads((copy / "datapackage.json").read_text(encoding="utf-8"))["resources"]
    measured = {"rows", "bytes", "hash"}
    for old, new in zip(RESOURCES, after, strict=True):
        changed = {key for key in new if new[key] != old[key]}
        assert changed == (measured if new["name"] == "term_kinds" else set())
        assert list(new) == list(old)
        if changed:
            assert (new["rows"], new["bytes"]) == (old["rows"] + 1, old["bytes"] + 18)


def test_refresh_refuses_a_file_without_entry(copy: Path) -> None:
    before = (copy / "datapackage.json").read_bytes()
    (copy / "stray.csv").write_text("a\n1\n", encoding="utf-8")
    done = run_refresh(copy)
    assert done.returncode == 2
    assert "no entry" in done.stderr
    assert "stray.csv" in done.stderr
    assert done.stderr.count("\n") == 1
    assert (copy / "datapackage.json").read_bytes() == before


def test_refresh_refuses_an_entry_without_file(copy: Path) -> None:
    (copy / "processes.csv").unlink()
    done = run_refresh(copy)
    assert done.returncode == 2
    assert "processes.csv, which does not exist" in done.stderr


def test_refresh_takes_in_a_planned_table_once_it_exists(copy: Path) -> None:
    package = json.loads((copy / "datapackage.json").read_text(encoding="utf-8"))
    package["planned"] = [{"name": "later", "path": "later.csv.gz"}, {"path": "never.csv"}]
    (copy / "datapackage.json").write_text(json.dumps(package), encoding="utf-8")
    (copy / "later.csv.gz").write_bytes(gzip.compress(b"a\n1\n2\n", mtime=0))
    assert run_refresh(copy).returncode == 0
    after = json.loads((copy / "datapackage.json").read_text(encoding="utf-8"))
    assert after["resources"][-1]["name"] == "later"
    assert after["resources"][-1]["rows"] == 2
    assert after["planned"] == [{"path": "never.csv"}]
