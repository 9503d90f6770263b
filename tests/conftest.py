"""Fixtures shared by all tests: a tiny invented literature and the open coordinates, built once a session."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description

# Eight invented studies around two invented places, A = (-40, 20, 10) and B = (30, -60, 40):
# s1-s3 hit A, s3-s6 hit B, s7 and s8 hit neither; s3 hits both.
INVENTED_PEAKS = """study,x,y,z,space
s1,-40,20,10,MNI
s2,-42,22,12,MNI
s3,-40,20,16,MNI
s3,30,-60,40,MNI
s4,30,-60,50,MNI
s5,28,-58,38,MNI
s6,32,-62,44,MNI
s7,0,50,0,MNI
s8,10,-90,-5,MNI
s8,-60,-20,5,MNI
"""
INVENTED_TERMS = """study,term
s1,invented naming
s2,invented naming
s2,invented reading
s3,invented naming
s3,invented waiting
s4,invented waiting
s5,invented waiting
s6,invented reading
s7,invented naming
s8,invented waiting
"""


@pytest.fixture(scope="session")
def invented_files(tmp_path_factory: pytest.TempPathFactory) -> ImportOptions:
    """Give the files of the tiny invented literature, as options to build it."""
    folder = tmp_path_factory.mktemp("invented")
    (folder / "peaks.csv").write_text(INVENTED_PEAKS, encoding="utf-8")
    (folder / "terms.csv").write_text(INVENTED_TERMS, encoding="utf-8")
    return ImportOptions(peaks=folder / "peaks.csv", annotations=folder / "terms.csv")


@pytest.fixture(scope="session")
def invented_literature(invented_files: ImportOptions, tmp_path_factory: pytest.TempPathFactory) -> Literature:
    """Give the tiny invented literature, opened; do not write to its folder."""
    target = tmp_path_factory.mktemp("invented-built") / "literature"
    description = Description(name="tiny invented literature", source="invented for tests", invented=True)
    return build_literature(invented_files, target, description)[0]


@pytest.fixture(scope="session")
def open_coordinates() -> Path:
    """Give the folder of the open coordinates; skip where there is none."""
    stated = os.environ.get("REVINF_OPEN_COORDINATES")
    beside = Path(__file__).resolve().parents[2] / "shared" / "open_coordinates"
    folder = Path(stated) if stated else beside
    if not (folder / "peaks.csv").is_file():
        pytest.skip(f"no open coordinates in {folder}; set REVINF_OPEN_COORDINATES to their folder")
    return folder


@pytest.fixture(scope="session")
def open_files(open_coordinates: Path) -> ImportOptions:
    """Give the files of the open coordinates, as options to build them."""
    return ImportOptions(
        peaks=open_coordinates / "peaks.csv",
        annotations=open_coordinates / "annotations.csv",
        studies=open_coordinates / "experiments.csv",
        rename={"study": "experiment"},
    )


@pytest.fixture(scope="session")
def open_literature(open_files: ImportOptions, tmp_path_factory: pytest.TempPathFactory) -> Literature:
    """Give the open coordinates, built and opened; do not write to their folder."""
    target = tmp_path_factory.mktemp("open-built") / "literature"
    description = Description(
        name="open coordinates",
        study_is="experiments",
        source="451 published experiments, see the README.md beside the files",
        licence="MIT",
    )
    return build_literature(open_files, target, description)[0]
