"""The terminal screens of `build`, `inspect` and `terms`."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.numbers import count
from revinf.reports.terminal import hanging, heading, plain_table
from revinf.reports.wording import agreement, first_lines

if TYPE_CHECKING:
    from revinf.evidence.term_list import TermList

__all__ = ["import_screen", "inspect_screen", "tabulate_line", "terms_screen"]


def inspect_screen(summary: dict[str, Any], *, verified: bool = False) -> list[Any]:
    """Return the screen of a literature's summary.

    Parameters
    ----------
    summary : dict
        From `Literature.summary`.
    verified : bool, default False
        Whether every array's hash was recomputed and found right.

    Returns
    -------
    list
        Renderables.
    """
    per_study = summary["peaks_per_study"]
    rows = [
        ("Literature", summary["name"]),
        ("Folder", summary["folder"]),
        (
            "Holds",
            f"{count(summary['n_studies'])} studies (here: {summary['study_is']}), "
            f"{count(summary['n_peaks'])} peaks, {count(summary['n_terms'])} terms, "
            f"{count(summary['n_annotations'])} labels",
        ),
        (
            "Peaks",
            f"{per_study['lowest']} to {per_study['highest']} a study, "
            f"half of the studies have at most {per_study['median']:g}",
        ),
        ("Grouping", f"merged by {summary['merged_by']!r}" if summary["merged_by"] else "none"),
        ("Source", summary["source"] or "not said"),
        ("Licence", summary["licence"] or "not said"),
        ("Cite", summary["citation"] or "not said"),
        ("Built with", _built_with(summary["built_with"])),
        ("Fingerprint", summary["fingerprint"] + (", every array verified" if verified else "")),
    ]
    if summary["invented"]:
        rows.insert(1, ("", "INVENTED DATA: made for demonstration, says nothing about any brain"))
    return [hanging(rows), *import_screen(summary["import"])]


def _built_with(options: dict[str, Any]) -> str:
    """Say how a literature was built, leaving out what was not asked for."""
    asked = {name: value for name, value in options.items() if value not in (None, {}, False)}
    return ", ".join(f"{name} {value}" for name, value in asked.items())


def import_screen(report: dict[str, Any]) -> list[Any]:
    """Return the screen of what an import read, kept, refused and noticed.

    Parameters
    ----------
    report : dict
        From `ImportReport.to_dict`.

    Returns
    -------
    list
        Renderables.
    """
    refused: dict[str, int] = {}
    for item in report["refused"]:
        refused[item["file"]] = refused.get(item["file"], 0) + item["rows"]
    rows = [
        [file, count(read), count(report["kept"].get(file, 0)), count(refused.get(file, 0))]
        for file, read in report["read"].items()
    ]
    parts: list[Any] = [
        heading("Rows"),
        plain_table(["file", "read", "kept", "refused"], rows, right=(1, 2, 3)),
    ]
    if report["refused"]:
        parts += [
            heading("Refused"),
            hanging(
                [
                    (
                        item["file"],
                        f"{agreement(item['rows'], 'row')}: {item['reason']}" + first_lines(item["first_lines"]),
                    )
                    for item in report["refused"]
                ]
            ),
        ]
    if report["notices"]:
        parts += [
            heading("Noticed"),
            hanging([(item["code"], item["message"] + first_lines(item["first_lines"])) for item in report["notices"]]),
        ]
    return parts


def tabulate_line(n_rows: int, n_places: int, path: str) -> Any:
    """Say what was written by `revinf tabulate`.

    Parameters
    ----------
    n_rows, n_places : int
        Rows of the table and regions in it.
    path : str
        Where it is.

    Returns
    -------
    rich.text.Text
        One line.
    """
    from rich.text import Text

    return Text(f"{agreement(n_rows, 'row')} for {agreement(n_places, 'place')} written to {path}")


def terms_screen(found: TermList, source: str) -> list[Any]:
    """Return the screen of a list of terms.

    Parameters
    ----------
    found : TermList
        From `list_terms`.
    source : str
        Name of the literature or table.

    Returns
    -------
    list
        Renderables.
    """
    if not found.rows:
        near = " or ".join(repr(term) for term in found.near)
        hint = f"; did you mean {near}?" if near else ""
        return [hanging([("", f"{source} has no term like {found.query!r}{hint}")])]
    rows = [
        [
            row.term,
            count(row.n_studies),
            row.kind + (f" ({row.what})" if row.what else ""),
            row.domain,
        ]
        for row in found.rows
    ]
    return [
        hanging([("Counted in", source)]),
        plain_table(["term", "studies", "kind", "domain"], rows, right=(1,)),
    ]
