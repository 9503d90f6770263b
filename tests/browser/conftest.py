"""A real browser, and pages for it; every test here skips, with the reason, where there is no browser."""

from __future__ import annotations

import os
import shutil
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest

from revinf.evidence.audit import audit
from revinf.evidence.claim import Claim
from revinf.evidence.claims_table import read_claims
from revinf.evidence.sources import LiteratureSource
from revinf.knowledge import demo_folder
from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description
from revinf.reports.html_report import write_html

BROWSERS = ("chromium", "chromium-browser", "google-chrome")
QUIET = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--disable-dev-shm-usage",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--no-first-run",
)
HOSTILE = (
    "<script>window.pwned=1</script>",
    '"><img src=x onerror="window.pwned=1">',
    "'\"&<>",
    "{{7*7}} {% raw %}",
    "</script><script>window.pwned=1</script>",
    "javascript:window.pwned=1",
    "=1+1",
    "+1",
    "@SUM(A1)",
    "w" * 500,
    "שלום עולם مرحبا",
    "👩‍🔬 🧠",
)


@pytest.fixture(scope="session")
def browser() -> Iterator[Any]:
    """Give a headless Chromium that is installed already."""
    driver = pytest.importorskip(
        "playwright.sync_api", reason="playwright is not installed; it comes with the test extra"
    )
    named = os.environ.get("REVINF_BROWSER")
    found = named or next((path for name in BROWSERS if (path := shutil.which(name))), None)
    if found is None:
        pytest.skip(f"no browser: none of {', '.join(BROWSERS)} is installed, and REVINF_BROWSER names none")
    with driver.sync_playwright() as running:
        opened = running.chromium.launch(executable_path=found, args=list(QUIET))
        yield opened
        opened.close()


@pytest.fixture(scope="session")
def demo_literature(tmp_path_factory: pytest.TempPathFactory) -> Literature:
    """Give the invented literature of the demo."""
    options = ImportOptions(
        peaks=demo_folder() / "peaks.csv",
        annotations=demo_folder() / "annotations.csv",
        studies=demo_folder() / "studies.csv",
        group="group",
    )
    description = Description(name="Invented demonstration literature", study_is="papers", invented=True)
    return build_literature(options, tmp_path_factory.mktemp("demo") / "literature", description)[0]


@pytest.fixture(scope="session")
def demo_claims() -> list[Claim]:
    """Give the claims of the demo, every third with a prior of its own."""
    claims = list(read_claims(demo_folder() / "claims.csv").claims)
    for number, claim in enumerate(claims):
        if number % 3 == 0:
            object.__setattr__(claim, "prior", 0.2)
    return claims


@pytest.fixture(scope="session")
def demo_page(demo_literature: Literature, demo_claims: list[Claim], tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Give the page of the demo's claims."""
    folder = tmp_path_factory.mktemp("page")
    return write_html(
        audit(demo_claims, LiteratureSource(demo_literature)), folder / "demo.html", command="revinf audit"
    )


@pytest.fixture(scope="session")
def hostile_page(demo_literature: Literature, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Give a page of claims whose every text is hostile."""
    folder = tmp_path_factory.mktemp("hostile")
    rows = ["claim,term,x,y,z,quote,location"]
    for text in HOSTILE:
        cell = '"' + text.replace('"', '""') + '"'
        rows.append(f"{cell},fear,20,-4,-18,{cell},{cell}")
    rows.append('<script>window.pwned=1</script>,fear,"<img src=x onerror=window.pwned=1>",0,0,,')
    rows.append("<b>waiting</b>,fear,,,,<i>no place</i>,")
    (folder / "claims.csv").write_text("\n".join(rows) + "\n", encoding="utf-8")
    result = audit(read_claims(folder / "claims.csv"), LiteratureSource(demo_literature))
    return write_html(result, folder / "hostile.html", command="revinf audit '</script><script>window.pwned=1'")


@pytest.fixture
def visit(browser: Any) -> Iterator[Callable[..., Any]]:
    """Give a function that opens a page; afterwards nothing may have been said, asked for, or failed."""
    contexts, faults = [], []

    def opened(page: Path, width: int = 1280, height: int = 900, **context: Any) -> Any:
        contexts.append(browser.new_context(viewport={"width": width, "height": height}, **context))
        tab = contexts[-1].new_page()
        tab.on("console", lambda message: faults.append(f"console {message.type}: {message.text}"))
        tab.on("pageerror", lambda error: faults.append(f"error: {error}"))
        tab.on("dialog", lambda dialog: (faults.append(f"dialog: {dialog.message}"), dialog.dismiss()))
        tab.on("request", lambda request: request.url == page.as_uri() or faults.append(f"request: {request.url}"))
        tab.goto(page.as_uri())
        return tab

    yield opened
    for context in contexts:
        context.close()
    assert faults == []
