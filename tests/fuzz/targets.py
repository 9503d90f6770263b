"""Every reader of files from outside, each with good files that are to be spoiled."""

from __future__ import annotations

import gzip
import json
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from revinf.base_rates.places import atlas_places
from revinf.base_rates.table import BaseRateTable
from revinf.evidence.assess import assess
from revinf.evidence.cautions.thresholds import read_thresholds
from revinf.evidence.choices import choices_of
from revinf.evidence.claim import Claim
from revinf.evidence.claims_table import read_claims
from revinf.evidence.map_peaks import map_peaks
from revinf.evidence.named_peaks import read_named_peaks
from revinf.knowledge import demo_folder
from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.importing import import_studies
from revinf.literature.kept_calibration import FILE, kept_discount
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description
from revinf.manuscript.reading import read_document
from revinf.manuscript.scanning import scan

__all__ = ["Target", "targets"]


@dataclass(frozen=True, slots=True)
class Target:
    """A good file, the name under which its spoiled copies are written, and what reads them."""

    name: str
    file: str
    content: bytes
    read: Callable[[Path], object]


def targets(folder: Path) -> list[Target]:
    """Return all targets.

    Parameters
    ----------
    folder : pathlib.Path
        A scratch folder, in which a tiny literature is built and the readers find what they need beside a spoiled file.
    """
    return _tables(folder) + _others() + _manuscripts() + _literature(folder)


def _tables(folder: Path) -> list[Target]:
    """Return the tables that a literature is built from, and leave good ones in the folder."""
    good = {name: _head(demo_folder() / name) for name in ("peaks.csv", "annotations.csv", "studies.csv")}
    for name, content in good.items():
        (folder / name).write_bytes(content)

    def reader(part: str) -> Callable[[Path], object]:
        def read(path: Path) -> object:
            files: dict[str, Path] = {"peaks": folder / "peaks.csv", "annotations": folder / "annotations.csv"}
            return import_studies(ImportOptions(**{**files, part: path}))  # type: ignore[arg-type]

        return read

    wide = b"study,fear,pain\n" + b"".join(b"inv%03da,%d,0.5\n" % (n, n % 2) for n in range(1, 9))
    return [
        Target("peaks", "p.csv", good["peaks.csv"], reader("peaks")),
        Target("peaks, packed", "p.csv.gz", gzip.compress(good["peaks.csv"]), reader("peaks")),
        Target("annotations", "a.csv", good["annotations.csv"], reader("annotations")),
        Target("annotations, wide", "w.csv", wide, reader("annotations")),
        Target("studies", "s.csv", good["studies.csv"], reader("studies")),
    ]


def _others() -> list[Target]:
    """Return tables and images that a question is asked with."""
    kept = {
        "discount": {"exponent": 0.5},
        "radius_mm": 10.0,
        "literature": {"fingerprint": "x"},
    }
    return [
        Target("claims", "c.csv", (demo_folder() / "claims.csv").read_bytes(), read_claims),
        Target("named peaks", "n.csv", b"place,x,y,z\namygdala,-22,-4,-18\ninsula,36,22,-2\n", read_named_peaks),
        Target("base rates", "b.csv", _BASE_RATES, BaseRateTable.read),
        Target("thresholds", "t.toml", b"thin_weigh = 12.5\nbroad_hits = 25\n", read_thresholds),
        Target("kinds", "k.csv", _KINDS, lambda path: choices_of(kinds=path)),
        Target("kept calibration", FILE, json.dumps(kept).encode(), lambda path: kept_discount(path.parent, "x")),
        Target("map", "m.nii.gz", _image(), lambda path: map_peaks(path, 3.0)),
        Target("atlas", "m.nii", gzip.decompress(_image()), atlas_places),
    ]


def _manuscripts() -> list[Target]:
    """Return manuscripts of every kind."""
    demo = demo_folder()
    files = {
        "m.md": (demo / "manuscript.md").read_bytes()[-2500:],
        "m.txt": (demo / "manuscript.md").read_bytes()[:2500],
        "m.tex": _LATEX,
        "m.html": _HTML,
        "m.docx": (demo / "manuscript.docx").read_bytes(),
        "m.pdf": (demo / "manuscript.pdf").read_bytes(),
    }
    return [
        Target(f"manuscript{Path(name).suffix}", name, content, lambda path: scan(read_document(path)))
        for name, content in files.items()
    ]


def _head(path: Path) -> bytes:
    """Return the first lines of a table: a small file is spoiled more often in a second."""
    return b"\n".join(path.read_bytes().split(b"\n")[:40]) + b"\n"


def _image() -> bytes:
    """Return a small statistical map of whole numbers."""
    import nibabel as nib

    values = np.zeros((12, 12, 12), dtype=np.int16)
    values[4:6, 4:6, 4:6], values[8, 8, 8] = 5, 7
    return gzip.compress(nib.Nifti1Image(values, np.diag([4.0, 4, 4, 1])).to_bytes())


_BASE_RATES = b"""region,term,term_active,term_total,other_active,other_total,x,y,z,radius_mm
left amygdala,fear,12,15,17,285,-22,-4,-18,10
left amygdala,pain,2,15,27,285,-22,-4,-18,10
"""
_KINDS = b"term,kind,domain,synonyms\nfear,process,emotion,afraid;scared\nrest,state,,\n"
_LATEX = rb"""\documentclass{article}\begin{document}\section{Results}
The \textbf{left} amygdala ($x=-22$, $y=-4$, $z=-18$) was active. % a comment
\begin{tabular}{lccc} place & x & y & z \\ right insula & 36 & 22 & -2 \\ \end{tabular}
\section{Discussion} This activity suggests \emph{fear}. \cite{nobody}
\begin{thebibliography}{1}\bibitem{nobody} Nobody. \end{thebibliography}\end{document}
"""
_HTML = b"""<!doctype html><html><head><title>x</title><style>p{}</style></head><body><h2>Results</h2>
<p>The left <b>amygdala</b> (&minus;22, &minus;4, &minus;18) was active.</p><table><tr><th>place</th><th>x</th>
<th>y</th><th>z</th></tr><tr><td>right insula</td><td>36</td><td>22</td><td>-2</td></tr></table><script>1</script>
<h2>Discussion</h2><p>This activity suggests fear.</p><h2>References</h2><p>Nobody.</p></body></html>
"""


def _literature(folder: Path) -> list[Target]:
    """Return the manifest and some arrays of a literature folder; a spoiled one stands among the good others."""
    built = folder / "literature"
    files = ImportOptions(peaks=folder / "peaks.csv", annotations=folder / "annotations.csv")
    literature, _ = build_literature(files, built, Description(name="tiny", invented=True))
    claim = Claim(term=literature.terms[0], peaks=[(0, 0, 0)])

    def opened(path: Path) -> object:
        good = (built / path.name).read_bytes()
        (built / path.name).write_bytes(path.read_bytes())
        try:
            # With their sums checked, spoiled arrays would be refused at once; they must be safe to read without.
            return assess(claim, Literature.open(built, verify=False))
        finally:
            (built / path.name).unlink()
            (built / path.name).write_bytes(good)

    names = [
        "literature.json",
        "peak_tenths.npy",
        "peak_study.npy",
        "study_terms.npy",
        "term_text.npy",
        "term_ends.npy",
    ]
    return [Target(f"literature, {name}", name, (built / name).read_bytes(), opened) for name in names]
