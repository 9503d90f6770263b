"""`build_literature`: import, pack, and write a literature folder."""

from __future__ import annotations

from pathlib import Path

from revinf.knowledge import VERSION
from revinf.literature.import_options import ImportOptions, Progress
from revinf.literature.importing import import_studies
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description, Manifest
from revinf.literature.packing import pack_background, pack_brain, pack_studies
from revinf.literature.refusals import ImportReport
from revinf.literature.store import array_entries, write_folder
from revinf.spaces.brain import brain_reference

__all__ = ["REFUSED", "build_literature"]

REFUSED = "refused.csv"
"""Name of the list of refused rows, beside the literature."""


def build_literature(
    options: ImportOptions,
    out: str | Path,
    description: Description,
    *,
    progress: Progress | None = None,
) -> tuple[Literature, ImportReport]:
    """Make a literature folder from peaks and annotations.

    Parameters
    ----------
    options : ImportOptions
        What to read and how.
    out : path
        The folder to make; an older literature there is replaced as a whole.
    description : Description
        Name, what a study is, source, licence, citation, whether the data are invented.
    progress : callable, optional
        Told what is being done and how many rows are through.

    Returns
    -------
    Literature
        The new literature, opened.
    ImportReport
        What was read, kept, refused and noticed; the refused rows are in `refused.csv` beside `out`.

    Raises
    ------
    InputFileError
        If a file cannot be used, or the target or `refused.csv` beside it is not ours to replace or
        cannot be written.
    """
    target = Path(out)
    studies, report = import_studies(options, progress)
    tell = progress or (lambda _what, _rows: None)
    tell("packing", 0)
    brain = brain_reference()
    packed = pack_studies(studies)
    tell("counting over the grey matter", 0)
    background = pack_background(packed, brain)
    arrays = {**packed, **pack_brain(brain), **background}
    manifest = Manifest(
        description=description,
        counts={
            "studies": len(studies.study_ids),
            "peaks": len(studies.peak_study),
            "terms": len(studies.terms),
            "annotations": len(studies.annotation_study),
            "points": len(brain.point_labels),
            "grid": len(background["grid_tenths"]),
            "negative_peaks": studies.n_negative,
        },
        merged_by=options.group,
        arrays=array_entries(arrays),
        built_with={
            "revinf": VERSION,
            "peaks": options.peaks.name,
            "annotations": options.annotations.name,
            "studies": options.studies.name if options.studies else None,
            "columns": dict(sorted(options.rename.items())),
            "sign": options.sign,
            "min_weight": options.min_weight,
            "space": options.space,
            "transform": options.transform,
            "keep_empty": options.keep_empty,
        },
        report=report.to_dict(),
    )
    report.check_target(target.parent / REFUSED)
    tell("writing", 0)
    write_folder(target, arrays, manifest)
    report.write_refused(target.parent / REFUSED)
    return Literature.open(target), report
