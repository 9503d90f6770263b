"""What the evidence tests share: small base-rate tables and the tiny literature with its papers known."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest

from revinf.base_rates.table import BaseRateTable
from revinf.base_rates.table_rows import TableRow
from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description
from tests.evidence.worlds import mixed_groups, mixed_studies
from tests.literature.in_memory import in_memory

GREY = (-42.0, -22.0, 52.0)
"""Precentral cortex: grey matter in the template (common practice, no source)."""


@pytest.fixture
def table_of() -> Callable[..., BaseRateTable]:
    """Make a table of one region: `table_of((n11, n10, n01, n00), term=..., at=..., radius=...)`."""

    def make(counts, *, term="pain", at=GREY, radius=10.0, source="typed", more=()) -> BaseRateTable:
        n11, n10, n01, n00 = counts
        rows = [TableRow("here", term, n11, n11 + n10, n01, n01 + n00, at, radius, source)]
        rows += [TableRow("here", name, *values, at, radius, source) for name, values in more]
        return BaseRateTable(rows, name="small table")

    return make


@pytest.fixture(scope="session")
def grouped_literature(invented_files: ImportOptions, tmp_path_factory: pytest.TempPathFactory) -> Literature:
    """Give the tiny invented literature with s1 and s2 merged as one paper."""
    folder = tmp_path_factory.mktemp("grouped")
    papers: Path = folder / "studies.csv"
    papers.write_text(
        "study,paper\n" + "".join(f"s{i},{'p1' if i < 3 else f'p{i}'}\n" for i in range(1, 9)),
        encoding="utf-8",
    )
    options = replace(invented_files, studies=papers, group="paper")
    description = Description(name="grouped", study_is="papers", invented=True)
    return build_literature(options, folder / "literature", description)[0]


@pytest.fixture(scope="session")
def mixed() -> Literature:
    """Give the mixed invented literature, every study of which `mixed_studies` lists."""
    return in_memory(mixed_studies(), groups=mixed_groups(), brain=True)
