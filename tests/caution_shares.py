"""How often does each caution fire? `python tests/caution_shares.py` prints the table of DEVELOPERS.md.

Two samples from the open coordinates, fixed seed: 300 reported peaks with a random process each (claims
that are mostly wrong), and 300 reported peaks with a process of their own study, that study left out
(claims that a study's own authors could make).
"""

from __future__ import annotations

import os
import sys
from collections import Counter
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import numpy as np

from revinf import Assessment, Claim, Description, Literature, assess
from revinf.evidence.cautions.registry import CODES
from revinf.evidence.vocabulary import shipped_vocabulary
from revinf.exceptions import UnknownTermError
from revinf.literature.import_options import ImportOptions
from revinf.literature.importing import ImportedStudies, import_studies
from revinf.literature.manifest import Manifest
from revinf.literature.packing import Arrays, pack_background, pack_brain, pack_studies
from revinf.spaces.brain import brain_reference

N_CLAIMS, SEED = 300, 20261201
FOLDER = Path(
    os.environ.get("REVINF_OPEN_COORDINATES", Path(__file__).resolve().parents[2] / "shared/open_coordinates")
)


def imported() -> ImportedStudies:
    """Return the open coordinates as imported."""
    return import_studies(
        ImportOptions(
            peaks=FOLDER / "peaks.csv",
            annotations=FOLDER / "annotations.csv",
            rename={"study": "experiment"},
        )
    )[0]


def in_memory(studies: ImportedStudies, without: int | None = None) -> Literature:
    """Return a literature that was never written, with one study left out."""
    arrays: Arrays = pack_studies(studies if without is None else left_out(studies, without))
    arrays |= pack_background(arrays, brain_reference()) | pack_brain(brain_reference())
    manifest = Manifest(
        description=Description(name="open coordinates", study_is="experiments"),
        counts={},
        merged_by=None,
        arrays={},
        built_with={},
        report={},
    )
    return Literature(Path("in memory"), manifest, arrays)


def left_out(studies: ImportedStudies, study: int) -> ImportedStudies:
    """Return the studies without one of them."""
    from dataclasses import replace

    keep_peak, keep_label = studies.peak_study != study, studies.annotation_study != study
    used = np.unique(studies.annotation_term[keep_label])
    return replace(
        studies,
        study_ids=[name for i, name in enumerate(studies.study_ids) if i != study],
        group_ids=[name for i, name in enumerate(studies.group_ids) if i != study],
        dois=[name for i, name in enumerate(studies.dois) if i != study],
        peak_study=_closed_up(studies.peak_study[keep_peak], study),
        peak_tenths=studies.peak_tenths[keep_peak],
        terms=[studies.terms[term] for term in used],
        annotation_study=_closed_up(studies.annotation_study[keep_label], study),
        annotation_term=np.searchsorted(used, studies.annotation_term[keep_label]).astype(np.int32),
    )


def _closed_up(index: Any, study: int) -> Any:
    return (index - (index > study)).astype(np.int32)


def claims(studies: ImportedStudies, own: bool) -> Iterator[Assessment]:
    """Yield the assessments of one sample."""
    rng = np.random.default_rng(SEED + own)
    words = shipped_vocabulary()
    processes = [i for i, term in enumerate(studies.terms) if words.counts_as_process(term)]
    whole = in_memory(studies)
    done = 0
    while done < N_CLAIMS:
        peak = int(rng.integers(len(studies.peak_study)))
        study = int(studies.peak_study[peak])
        labels = studies.annotation_term[studies.annotation_study == study]
        candidates = [i for i in labels.tolist() if i in processes] if own else processes
        if not candidates:
            continue
        term = studies.terms[int(rng.choice(candidates))]
        xyz = (studies.peak_tenths[peak] / 10).tolist()
        source = in_memory(studies, study) if own else whole
        try:
            yield assess(Claim(term=term, peaks=[xyz], space="MNI152"), source)
        except UnknownTermError:  # the study left out was the term's only one
            continue
        done += 1


def main() -> None:
    """Print the table."""
    if not FOLDER.is_dir():
        sys.exit(f"{FOLDER}: there is no such folder; set REVINF_OPEN_COORDINATES")
    studies = imported()
    columns: list[Counter[tuple[str, str]]] = []
    decided: list[int] = []
    for own in (False, True):
        counter: Counter[tuple[str, str]] = Counter()
        n_decided = 0
        for assessment in claims(studies, own):
            n_decided += assessment.likelihood_ratio.direction != "undecided"
            counter.update({(caution.code, caution.severity) for caution in assessment.cautions})
        columns.append(counter)
        decided.append(n_decided)
    print("| caution | severity | random process | own study's process, study left out |")
    print("|---|---|---|---|")
    for code in CODES:
        for severity in ("stop", "weigh", "note"):
            shares = [column[(code, severity)] for column in columns]
            if any(shares):
                cells = " | ".join(f"{share / N_CLAIMS:.0%}" for share in shares)
                print(f"| {code} | {severity} | {cells} |")
    cells = " | ".join(f"{number / N_CLAIMS:.0%}" for number in decided)
    print(f"| (direction decided) | | {cells} |")


if __name__ == "__main__":
    main()
