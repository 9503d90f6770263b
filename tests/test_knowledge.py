"""Where the shipped folders are found, and how their tables are read."""

from __future__ import annotations

import gzip
import json
import shutil
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

from revinf import knowledge
from revinf.exceptions import InputFileError

ROOT = Path(__file__).resolve().parents[1]
GRADES = ["bare", "positive", "strong", "very strong"]


@pytest.fixture
def fresh() -> Iterator[None]:
    """Forget what was read, before and after."""
    knowledge.read_table.cache_clear()
    knowledge._package.cache_clear()
    yield
    knowledge.read_table.cache_clear()
    knowledge._package.cache_clear()


@pytest.fixture
def installation(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, fresh: None) -> Path:
    """Return an empty place that stands for the folder the package was installed to."""
    package = tmp_path / "site" / "revinf"
    package.mkdir(parents=True)
    monkeypatch.setattr(knowledge, "_PACKAGE", package)
    return package


def put_tables(folder: Path, *, name: str = "small.csv", content: bytes = b"word\nyes\n") -> Path:
    """Write a folder with one table and its description."""
    folder.mkdir()
    (folder / name).write_bytes(content)
    description = {"resources": [{"name": "small", "path": name}]}
    (folder / "datapackage.json").write_text(json.dumps(description), encoding="utf-8")
    return folder


def test_tables_of_a_checkout_lie_beside_the_package() -> None:
    assert knowledge.shipped_tables() == ROOT / "data_tables"


def test_tables_of_a_wheel_lie_inside_the_package(installation: Path) -> None:
    inside = put_tables(installation / "data_tables")
    put_tables(installation.parent / "data_tables")
    assert knowledge.shipped_tables() == inside


def test_tables_beside_the_package_answer_when_none_lie_inside(installation: Path) -> None:
    (installation / "data_tables").mkdir()  # without datapackage.json: not the folder meant
    beside = put_tables(installation.parent / "data_tables")
    assert knowledge.shipped_tables() == beside


def test_missing_tables_are_one_line_with_the_next_step(installation: Path) -> None:
    with pytest.raises(InputFileError, match=r"lacks its folder data_tables/; install") as caught:
        knowledge.shipped_tables()
    assert "\n" not in str(caught.value)
    assert caught.value.path == installation


def test_missing_demo_is_one_line_with_the_next_step(installation: Path) -> None:
    with pytest.raises(InputFileError, match=r"lacks its folder demo/; install revinf again"):
        knowledge.demo_folder()


def test_demo_is_found_by_its_readme(installation: Path) -> None:
    (installation / "demo").mkdir()
    (installation / "demo" / "README.md").write_text("invented", encoding="utf-8")
    assert knowledge.demo_folder() == installation / "demo"


def test_every_listed_table_is_found_and_has_the_stated_rows() -> None:
    package = json.loads((ROOT / "data_tables" / "datapackage.json").read_text(encoding="utf-8"))
    assert package["resources"]
    for entry in package["resources"]:
        assert knowledge.table_path(entry["name"]) == ROOT / "data_tables" / entry["path"]
        rows = knowledge.read_table(entry["name"])
        assert len(rows) == entry["rows"]
        assert list(rows[0]) == [field["name"] for field in entry["schema"]["fields"]]


def test_cells_stay_text_in_the_order_of_the_file() -> None:
    rows = knowledge.read_table("evidence_grades")
    assert [row["grade"] for row in rows] == GRADES
    assert (rows[0]["lower"], rows[-1]["upper"]) == ("1", "")


def test_cells_with_commas_are_one_cell() -> None:
    (row,) = (row for row in knowledge.read_table("published_frequencies") if row["term"] == "language")
    assert row["source"].startswith("Poldrack 2006, Trends Cogn Sci 10:59-63, doi")


@pytest.mark.parametrize("ask", [knowledge.read_table, knowledge.table_path, knowledge.describe_table])
def test_unknown_name_lists_the_known_ones(ask: object) -> None:
    assert callable(ask)
    with pytest.raises(
        InputFileError, match=r"no shipped table named 'grades'; use one of .*evidence_grades"
    ) as caught:
        ask("grades")
    assert "\n" not in str(caught.value)
    assert str(caught.value.path).endswith("datapackage.json")


def test_gzipped_table_reads_as_the_plain_one(installation: Path) -> None:
    text = 'word,meaning\nœuvre,"a, b"\ntwo lines,"c\nd"\n'
    put_tables(
        installation / "data_tables",
        name="small.csv.gz",
        content=gzip.compress(text.encode("utf-8"), mtime=0),
    )
    assert knowledge.table_path("small").name == "small.csv.gz"
    assert knowledge.read_table("small") == (
        {"word": "œuvre", "meaning": "a, b"},
        {"word": "two lines", "meaning": "c\nd"},
    )


def test_changing_a_description_does_not_change_what_the_package_knows() -> None:
    knowledge.describe_table("evidence_grades")["path"] = "elsewhere.csv"
    assert knowledge.table_path("evidence_grades").name == "evidence_grades.csv"


def test_tables_are_found_from_any_working_folder(tmp_path: Path) -> None:
    """The package copied into a foreign folder, with its tables inside as in a wheel."""
    site = tmp_path / "site"
    (site / "revinf").mkdir(parents=True)
    (site / "revinf" / "__init__.py").touch()
    for name in ("exceptions.py", "knowledge.py"):
        shutil.copy(ROOT / "revinf" / name, site / "revinf" / name)
    shutil.copytree(ROOT / "data_tables", site / "revinf" / "data_tables")
    code = (
        f"import sys; sys.path.insert(0, {str(site)!r}); import revinf.knowledge as k; "
        "print(k.__file__, [row['grade'] for row in k.read_table('evidence_grades')], sep='|')"
    )
    done = subprocess.run([sys.executable, "-c", code], cwd=tmp_path, capture_output=True, text=True, check=False)
    assert done.stderr == ""
    assert done.stdout.strip() == f"{site / 'revinf' / 'knowledge.py'}|{GRADES}"


def test_reading_a_table_imports_no_library_outside_python() -> None:
    """Checked in a fresh process: the plain check must not wait for pandas."""
    code = (
        "import sys; before = set(sys.modules); import importlib.util as u; "
        f"sys.path.insert(0, {str(ROOT)!r}); import types; package = types.ModuleType('revinf'); "
        f"package.__path__ = [{str(ROOT / 'revinf')!r}]; sys.modules['revinf'] = package; "
        "import revinf.knowledge as k; k.read_table('processes'); "
        "new = {name.split('.')[0] for name in set(sys.modules) - before}; "
        "print(sorted(new - sys.stdlib_module_names - {'revinf'}))"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False)
    assert (done.stdout.strip(), done.stderr) == ("[]", "")
