"""The import rules of DEVELOPERS.md, read from the source of every module."""

from __future__ import annotations

import ast
import subprocess
import sys
import sysconfig
from collections.abc import Iterator
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[1]
PACKAGE = ROOT / "revinf"

INSIDE = {
    "exceptions": set(),
    "whole_file": {"exceptions"},
    "whole_folder": {"exceptions"},
    "in_processes": set(),
    "knowledge": {"exceptions"},
    "stats": {"exceptions"},
    "spaces": {"exceptions", "knowledge"},
    "literature": {"exceptions", "whole_file", "whole_folder", "knowledge", "spaces"},
    "base_rates": {"exceptions", "whole_file", "stats", "spaces", "literature"},
    "evidence": {"exceptions", "in_processes", "knowledge", "stats", "spaces", "literature", "base_rates"},
    "calibration": {
        "exceptions",
        "in_processes",
        "knowledge",
        "stats",
        "spaces",
        "literature",
        "base_rates",
        "evidence",
    },
    "manuscript": {"exceptions", "knowledge"},
    "reports": {
        "exceptions",
        "whole_file",
        "whole_folder",
        "in_processes",
        "knowledge",
        "evidence",
        "calibration",
        "manuscript",
    },
    "cli": {"exceptions", "knowledge", "literature", "base_rates", "evidence", "calibration", "manuscript", "reports"},
    "__init__": {
        "exceptions",
        "knowledge",
        "literature",
        "base_rates",
        "evidence",
        "calibration",
        "manuscript",
        "reports",
    },
    "__main__": {"cli"},
}
OUTSIDE = {
    "exceptions": set(),
    "whole_file": set(),
    "whole_folder": set(),
    "in_processes": {"joblib"},
    "knowledge": set(),
    "stats": {"numpy", "scipy"},
    "spaces": {"numpy", "nibabel", "nilearn"},
    "literature": {"numpy", "pandas"},
    "base_rates": {"numpy", "pandas", "scipy"},
    "evidence": {"numpy", "pandas"},
    "calibration": {"numpy"},
    "manuscript": {"docx", "lxml", "pylatexenc", "pypdfium2"},
    "reports": {"rich", "matplotlib", "jinja2", "markupsafe"},
    "cli": {"typer"},
    "__init__": set(),
    "__main__": set(),
}
EVERYWHERE = {"numpy", "typer"}
"""Only these may be imported when a module is: all other libraries wait inside functions."""

MODULES = sorted(PACKAGE.rglob("*.py"))


def part_of(path: Path) -> str:
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


def imports(tree: ast.AST) -> Iterator[str]:
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, "relative import: name the module in full"
            assert node.module not in (None, "revinf"), "name the module in full"
            yield str(node.module)


def imports_at_load(tree: ast.Module) -> Iterator[str]:
    """Names imported when the module is, leaving out what only type checkers read."""
    for node in tree.body:
        if isinstance(node, (ast.Import, ast.ImportFrom)):
            yield from imports(node)


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_module_imports_only_what_its_layer_may(path: Path) -> None:
    part = part_of(path)
    names = [name.split(".") for name in imports(ast.parse(path.read_text(encoding="utf-8")))]
    inside = {name[1] for name in names if name[0] == "revinf"} - {part}
    outside = {name[0] for name in names} - {"revinf"} - sys.stdlib_module_names
    assert inside <= INSIDE[part]
    assert outside <= OUTSIDE[part]


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_heavy_libraries_wait_inside_functions(path: Path) -> None:
    loaded = {name.split(".")[0] for name in imports_at_load(ast.parse(path.read_text(encoding="utf-8")))}
    assert loaded - {"revinf"} - sys.stdlib_module_names <= EVERYWHERE


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_module_is_short(path: Path) -> None:
    assert len(path.read_text(encoding="utf-8").splitlines()) <= 300


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_module_filters_no_warnings_for_good_and_asserts_nothing(path: Path) -> None:
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        assert not isinstance(node, ast.Assert), f"line {node.lineno}: raise a RevinfError instead"
    if "simplefilter" in path.read_text(encoding="utf-8"):
        assert "catch_warnings" in path.read_text(encoding="utf-8")


def test_declared_layers_hold() -> None:
    command = Path(sysconfig.get_path("scripts")) / "lint-imports"
    if not command.exists():
        pytest.skip("import-linter is not installed; it comes with the test extra")
    done = subprocess.run([command, "--no-cache"], cwd=ROOT, capture_output=True, text=True, check=False, timeout=120)
    assert done.returncode == 0, done.stdout + done.stderr


def test_top_level_of_the_repository_holds_nothing_else() -> None:
    allowed = {"README.md", "DEVELOPERS.md", "pyproject.toml", "revinf", "data_tables", "tests", "demo"}
    if not (ROOT / ".ci").is_dir():
        pytest.skip("these tests do not run from a checkout")
    passing = {"build", "dist"}  # made by tools, ignored by git
    there = {path.name for path in ROOT.iterdir() if not path.name.startswith(".")}
    assert there - passing <= allowed


def test_importing_revinf_loads_no_library() -> None:
    code = "import sys, revinf; print('numpy' in sys.modules, 'typer' in sys.modules)"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, timeout=60)
    assert done.stdout.split() == ["False", "False"]
