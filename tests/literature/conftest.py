"""Fixtures of the literature tests: import or build from text written in the test; all of it is invented."""

from __future__ import annotations

import gzip
from pathlib import Path

import pytest

from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.importing import import_studies
from revinf.literature.manifest import Description

TERMS = "study,term\na,fear\nb,pain\nc,pain\n"


def _options(folder: Path, peaks, terms, studies, files, options) -> ImportOptions:
    names = {"peaks": "peaks.csv", "terms": "terms.csv", "studies": "studies.csv"} | files
    for key, content in (("peaks", peaks), ("terms", terms), ("studies", studies)):
        if content is not None:
            raw = content if isinstance(content, bytes) else content.encode()
            packed = gzip.compress(raw) if names[key].endswith(".gz") else raw
            (folder / names[key]).write_bytes(packed)
    return ImportOptions(
        peaks=folder / names["peaks"],
        annotations=folder / names["terms"],
        studies=folder / names["studies"] if studies is not None else None,
        **options,
    )


@pytest.fixture
def importing(tmp_path):
    """Import texts: `importing(peaks, terms, studies=..., files={"peaks": name}, **options)`."""

    def run(peaks, terms=TERMS, *, studies=None, files=None, **options):
        return import_studies(_options(tmp_path, peaks, terms, studies, files or {}, options))

    return run


@pytest.fixture
def building(tmp_path):
    """Build a folder from texts, as `importing` imports them."""

    def run(peaks, terms=TERMS, *, out="literature", studies=None, files=None, **options):
        made = _options(tmp_path, peaks, terms, studies, files or {}, options)
        description = Description(name="invented", invented=True)
        return build_literature(made, tmp_path / out, description)

    return run


@pytest.fixture
def notices():
    """Return what a report noticed: code to (message, lines)."""
    return lambda report: {item.code: (item.message, item.lines) for item in report.notices}


@pytest.fixture
def refusals():
    """Return what a report refused: (line, reason) in order."""
    return lambda report: [(line, reason) for _, line, reason, _ in report.refused]
