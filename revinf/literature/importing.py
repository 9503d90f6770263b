"""From somebody's CSV files to the studies that count: the order of the steps of `revinf build`.

Reads peaks (`import_peaks`), annotations (`import_annotations`) and studies, refuses what cannot be used
with its line, merges by group where asked, and keeps the studies that have at least one peak and one
term. Nothing is guessed: what is unclear is refused or noticed.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import InputFileError
from revinf.literature.import_annotations import LabelRows, read_annotations
from revinf.literature.import_options import ImportOptions, Progress
from revinf.literature.import_peaks import PeakRows, read_peaks
from revinf.literature.import_studies import read_studies
from revinf.literature.refusals import ImportReport
from revinf.literature.rows import open_delimited

__all__ = ["ImportedStudies", "import_studies"]


@dataclass(frozen=True, slots=True, kw_only=True)
class ImportedStudies:
    """The counted studies, as flat arrays in sorted order.

    Parameters
    ----------
    study_ids : list of str, length S
        Sorted ids of the units of counting.
    group_ids : list of str, length S
        Group of each study, empty where none is given.
    dois : list of str, length S
        DOI of each study, empty where none is given; several are joined by "; ".
    peak_study : (P,) int32 array
        Index of the study of each peak.
    peak_tenths : (P, 3) int16 array, tenths of a millimetre, MNI152
        The peaks.
    terms : list of str
        Sorted normalised terms that label at least one counted study.
    annotation_study, annotation_term : (A,) int32 arrays
        Pairs, each once, sorted.
    merged : bool
        Whether studies were merged by a group column.
    n_negative : int
        Usable peaks with a negative statistic, counted as activation.
    """

    study_ids: list[str]
    group_ids: list[str]
    dois: list[str]
    peak_study: NDArray[np.int32]
    peak_tenths: NDArray[np.int16]
    terms: list[str]
    annotation_study: NDArray[np.int32]
    annotation_term: NDArray[np.int32]
    merged: bool
    n_negative: int


def import_studies(options: ImportOptions, progress: Progress | None = None) -> tuple[ImportedStudies, ImportReport]:
    r"""Read the files and return the studies that count.

    Parameters
    ----------
    options : ImportOptions
        What to read and how.
    progress : callable, optional
        Told what is being read and how many rows are through.

    Returns
    -------
    ImportedStudies
        The counted studies.
    ImportReport
        What was read, kept, refused and noticed.

    Raises
    ------
    InputFileError
        If a file cannot be used at all, or no study is left to count.

    Examples
    --------
    >>> import tempfile
    >>> from pathlib import Path
    >>> with tempfile.TemporaryDirectory() as name:
    ...     folder = Path(name)
    ...     _ = (folder / "peaks.csv").write_text("study,x,y,z\na,1,-2,3\nb,4,5,-6\n")
    ...     _ = (folder / "terms.csv").write_text("study,term\na,Working_Memory\n")
    ...     studies, report = import_studies(
    ...         ImportOptions(peaks=folder / "peaks.csv", annotations=folder / "terms.csv"))
    >>> studies.study_ids, studies.terms
    (['a'], ['working memory'])
    """
    tell = progress or (lambda _what, _rows: None)
    report = ImportReport()
    group_column = options.group or "group"
    _check_renamed(options)
    studies = read_studies(options.studies, options.rename, group_column, report)
    peaks = read_peaks(options, group_column, report, tell)
    labels = read_annotations(options, group_column, report, tell)
    group_of = _groups(options, studies.group, peaks.group, labels.group)
    imported = _assemble(options, peaks, labels, group_of, report)
    dois = _dois_of_units(studies.doi, group_of if imported.merged else {})
    joined = ["; ".join(sorted(dois.get(study, ()))) for study in imported.study_ids]
    return replace(imported, dois=joined), report


def _check_renamed(options: ImportOptions) -> None:
    """Refuse a column that the user named and no file has: it would be ignored in silence."""
    files = [file for file in (options.peaks, options.annotations, options.studies) if file is not None]
    headers = {column for file in files for column in open_delimited(file).columns}
    for ours, theirs in options.rename.items():
        if theirs not in headers:
            raise InputFileError(
                f"no file has the column {theirs!r} that --column {ours}={theirs} names; check its spelling",
                path=options.peaks,
                row=1,
            )


def _dois_of_units(dois: dict[str, set[str]], group_of: dict[str, str]) -> dict[str, set[str]]:
    """Return the DOIs of each unit of counting: those of all the studies merged into it."""
    of_unit: dict[str, set[str]] = {}
    for study, found in dois.items():
        of_unit.setdefault(group_of.get(study, study), set()).update(found)
    return of_unit


def _groups(options: ImportOptions, *sources: dict[str, str]) -> dict[str, str]:
    """Return the group of each study that has one, wherever the column stood."""
    group_of: dict[str, str] = {}
    for source in sources:
        for study, group in source.items():
            if group_of.setdefault(study, group) != group:
                raise InputFileError(
                    f"study {study!r} is in two groups, {group_of[study]!r} and {group!r}; give it one",
                    path=options.peaks,
                )
    if options.group is not None and not group_of:
        raise InputFileError(
            f"no file has a filled column {options.group!r}; name the column that holds the group, or leave "
            "--group out",
            path=options.peaks,
        )
    return group_of


def _assemble(
    options: ImportOptions,
    peaks: PeakRows,
    labels: LabelRows,
    group_of: dict[str, str],
    report: ImportReport,
) -> ImportedStudies:
    """Merge by group where asked, keep the studies that count, and sort everything."""
    merged = options.group is not None

    def unit(study: str) -> str:
        return group_of.get(study, study) if merged else study

    peak_units = [unit(study) for study in peaks.study_ids]
    label_units = [unit(study) for study in labels.study_ids]
    with_peaks, with_terms = set(peak_units), set(label_units)
    counted = sorted(with_terms if options.keep_empty else with_peaks & with_terms)
    _notice_uncounted(options, with_peaks, with_terms, report)
    if merged:
        _notice_ungrouped({*peaks.study_ids, *labels.study_ids} - set(group_of), group_of, report)
    if not counted:
        raise InputFileError(
            f"no study has both a peak and a term{_refusals_in_words(report)}; check that the two files use "
            "the same study ids",
            path=options.annotations,
        )
    position = {study: i for i, study in enumerate(counted)}
    peak_study = _renumber(peak_units, position)[peaks.study]
    keep = peak_study >= 0
    tenths = peaks.tenths[keep]
    peak_study = peak_study[keep]
    order = np.lexsort((tenths[:, 2], tenths[:, 1], tenths[:, 0], peak_study))
    pair_study, pair_term, terms = _sorted_pairs(_renumber(label_units, position), labels)
    return ImportedStudies(
        study_ids=counted,
        group_ids=counted if merged else [group_of.get(study, "") for study in counted],
        dois=[""] * len(counted),
        peak_study=peak_study[order],
        peak_tenths=tenths[order],
        terms=terms,
        annotation_study=pair_study,
        annotation_term=pair_term,
        merged=merged,
        n_negative=peaks.n_negative,
    )


def _renumber(names: list[str], position: dict[str, int]) -> NDArray[np.int32]:
    """Return the new index of each old one; -1 for what does not count."""
    return np.array([position.get(name, -1) for name in names], dtype=np.int32)


def _sorted_pairs(
    new_study: NDArray[np.int32], labels: LabelRows
) -> tuple[NDArray[np.int32], NDArray[np.int32], list[str]]:
    """Return the (study, term) pairs of counted studies, each once, and the sorted terms they use."""
    study = new_study[labels.study]
    keep = study >= 0
    used = np.unique(labels.term[keep])
    terms = sorted(labels.terms[code] for code in used)
    new_term = _renumber(labels.terms, {term: i for i, term in enumerate(terms)})
    packed = np.unique(study[keep].astype(np.int64) * len(terms) + new_term[labels.term[keep]])
    return (
        (packed // len(terms)).astype(np.int32),
        (packed % len(terms)).astype(np.int32),
        terms,
    )


def _refusals_in_words(report: ImportReport) -> str:
    """Return how many rows were refused and the commonest reason, in brackets; empty if none."""
    if not report.refused:
        return ""
    file, reason, _, lines = max(report.by_reason(), key=lambda item: item[2])
    return f" (rows refused: {len(report.refused)}; most often, first at {file}:{lines[0]}: {reason})"


def _notice_ungrouped(ungrouped: set[str], group_of: dict[str, str], report: ImportReport) -> None:
    """Say which studies no group takes in, where groups are merged."""
    if ungrouped:
        report.notice("ungrouped", f"{len(ungrouped)} studies have no group; each is merged with nothing but itself")
    shared = sorted(ungrouped & set(group_of.values()))
    if shared:
        report.notice(
            "group-named-like-study",
            f"{len(shared)} studies without a group have the name of a group and were merged into it, such "
            f"as {shared[0]!r}",
        )


def _notice_uncounted(options: ImportOptions, with_peaks: set[str], with_terms: set[str], report: ImportReport) -> None:
    """Say how many studies are left out, and why; `studies` here are the units of counting."""
    unlabelled, empty = len(with_peaks - with_terms), len(with_terms - with_peaks)
    report.left_out["without a term"] = unlabelled
    report.left_out["without a peak"] = 0 if options.keep_empty else empty
    if unlabelled:
        report.notice(
            "studies-without-terms",
            f'{unlabelled} studies have peaks but no term and are left out of both groups: unknown is not "other"',
        )
    if empty and options.keep_empty:
        report.notice("terms-without-peaks", f"{empty} studies have terms but no peak; kept as null results")
    elif empty:
        report.notice(
            "terms-without-peaks",
            f"{empty} studies have terms but no peak and are left out; --keep-empty counts them as null results",
        )
