"""One page for a browser: a single file without a server, a network or a clock."""

from __future__ import annotations

import base64
import hashlib
import os
from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING, Any

from revinf.exceptions import InputFileError
from revinf.reports.html_view import report_view
from revinf.whole_file import replacing_file

if TYPE_CHECKING:
    from revinf.evidence.audit import Audit

__all__ = ["html_text", "write_html"]

_TEMPLATES = Path(__file__).parent / "templates"


def html_text(audit: Audit, *, command: str = "", title: str = "") -> str:
    """Return the page.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`, or `revinf.evidence.audit.audit_of` for one claim.
    command : str, optional
        What reproduces it.
    title : str, optional
        Heading of the page.

    Returns
    -------
    str
        The same audit gives the same text.

    Examples
    --------
    >>> from revinf import BaseRateTable, Claim, assess
    >>> from revinf.evidence.audit import audit_of
    >>> from revinf.knowledge import table_path
    >>> claim = Claim(term="language", region="Broca's area")
    >>> page = html_text(audit_of(claim, assess(claim, BaseRateTable.read(table_path("published_frequencies")))))
    >>> "0.692 (0.650–0.731)" in page
    True
    """
    from markupsafe import Markup

    style, script = _part("report.css"), _part("report.js")
    # The browser itself then refuses every script but ours, every request, and every form.
    policy = (
        f"default-src 'none'; style-src '{_digest(style)}'; script-src '{_digest(script)}'; "
        "base-uri 'none'; form-action 'none'"
    )
    view = report_view(audit, command=command, title=title)
    page: str = _template().render(**view, style=Markup(style), script=Markup(script), policy=policy)
    return page


def write_html(audit: Audit, path: str | Path, *, command: str = "", title: str = "") -> Path:
    """Write the page as a whole or not at all.

    Parameters
    ----------
    audit, command, title
        As for `html_text`.
    path : path
        Ends in .html or .htm; an older file there is replaced.

    Returns
    -------
    pathlib.Path
        The file.

    Raises
    ------
    InputFileError
        If the ending is another one, or the file cannot be written.
    """
    path = Path(path)
    if path.suffix.lower() not in (".html", ".htm"):
        raise InputFileError(f"a report ends in .html, but got {path.suffix!r}; rename it", path=path)
    text = html_text(audit, command=command, title=title)
    beside = path.with_name(f".{path.stem}.part-{os.getpid()}.html")
    with replacing_file(path, beside, "choose another place"):
        beside.write_text(text, encoding="utf-8", newline="\n")
    return path


@cache
def _template() -> Any:
    """Return the template; every value that it puts in place is escaped."""
    from jinja2 import Environment, FileSystemLoader, StrictUndefined

    environment = Environment(
        loader=FileSystemLoader(_TEMPLATES),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    return environment.get_template("report.html.j2")


@cache
def _part(name: str) -> str:
    """Return a part of the page that is ours and goes in as it is."""
    return (_TEMPLATES / name).read_text(encoding="utf-8").strip()


def _digest(text: str) -> str:
    """Return what a content security policy calls a piece of script or style by."""
    return "sha256-" + base64.b64encode(hashlib.sha256(text.encode()).digest()).decode()
