"""Whatever column or file a hostile text comes from, it shows as itself; and the page's own policy would stop it."""

from __future__ import annotations

import csv
import unicodedata
from pathlib import Path
from typing import Any

import pytest

from revinf.evidence.audit import audit
from revinf.evidence.claim import Claim
from revinf.evidence.claims_table import read_claims
from revinf.evidence.sources import LiteratureSource
from revinf.literature.building import build_literature
from revinf.literature.import_options import ImportOptions
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description
from revinf.reports.html_report import write_html
from tests.browser.test_access import draw_all
from tests.browser.test_prior import slide_to

TEXTS = ("<script>window.pwned=1</script>", '"><img src=x onerror=window.pwned=1>', "&lt;b&gt; <!-- ]]>", "w" * 500)
COLUMNS = ("claim", "term", "x", "y", "z", "context", "rivals", "region", "quote", "location")
# Marks that turn the direction of what follows (Unicode Standard Annex 9), and others that are not seen.
UNSEEN = "\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069\u200e\u200f\u061c\u200b\ufeff\u00ad\u0007\u001b"


@pytest.fixture(scope="module")
def columns_page(demo_literature: Literature, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Give a page of claims with a hostile text in one column after the other."""
    folder = tmp_path_factory.mktemp("columns")
    plain = dict.fromkeys(COLUMNS, "") | {"term": "fear", "x": "20", "y": "-4", "z": "-18"}
    rows = [
        plain | {"claim": f"{number}-{column}", column: f"{number}-{column}" * (column == "claim") + text}
        for number, text in enumerate(TEXTS)
        for column in COLUMNS
    ]
    rows.append(plain | {"claim": "turned", "quote": "They " + "felt".join(UNSEEN) + " it."})
    with (folder / "claims.csv").open("w", encoding="utf-8", newline="") as stream:
        writer = csv.DictWriter(stream, COLUMNS)
        writer.writeheader()
        writer.writerows(rows)
    return write_html(audit(read_claims(folder / "claims.csv"), LiteratureSource(demo_literature)), folder / "a.html")


@pytest.fixture(scope="module")
def literature_page(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Give a page of claims against a literature whose terms, studies and description are hostile."""
    folder = tmp_path_factory.mktemp("source")
    with (folder / "peaks.csv").open("w", encoding="utf-8", newline="") as stream:
        csv.writer(stream).writerows(
            [("study", "x", "y", "z"), *((f"{text}{n}", -40 + n, 20, 10) for text in TEXTS for n in range(3))]
        )
    with (folder / "terms.csv").open("w", encoding="utf-8", newline="") as stream:
        csv.writer(stream).writerows([("study", "term"), *((f"{t}{n}", t) for t in TEXTS for n in range(3))])
    options = ImportOptions(peaks=folder / "peaks.csv", annotations=folder / "terms.csv")
    description = Description(name=TEXTS[0], source=TEXTS[1], licence=TEXTS[2], invented=True)
    built = build_literature(options, folder / "literature", description)[0]
    claims = [Claim(id=f"c{number}", term=text, peaks=[(-40, 20, 10)]) for number, text in enumerate(TEXTS)]
    return write_html(audit(claims, LiteratureSource(built)), folder / "b.html", title=TEXTS[0], command=TEXTS[1])


def assert_nothing_ran(tab: Any) -> None:
    """The page holds no element that a text could have brought, and no text has run."""
    assert tab.evaluate("typeof window.pwned") == "undefined"
    assert tab.locator("img, iframe, object, embed, link, b").count() == 0
    assert tab.locator("script").count() == 1
    assert tab.evaluate("Array.from(document.querySelectorAll('*')).every(e => !e.hasAttribute('onerror'))")


def test_hostile_text_in_any_column_shows_as_itself(visit: Any, columns_page: Path) -> None:
    tab = visit(columns_page, 400, 800)
    draw_all(tab)
    assert_nothing_ran(tab)
    seen = tab.locator("body").inner_text()
    for text in TEXTS[:3]:
        assert seen.count(text) >= len(COLUMNS)
    assert tab.evaluate("document.documentElement.scrollWidth") <= 400


def test_marks_that_turn_or_hide_text_are_gone_and_the_words_stay(visit: Any, columns_page: Path) -> None:
    tab = visit(columns_page)
    assert not set(UNSEEN) & set(tab.content())
    kept = "They " + "felt" * (len(UNSEEN) - 1) + " it."
    assert tab.locator("blockquote", has_text=kept).count() == 1
    assert {unicodedata.category(mark) for mark in UNSEEN} == {"Cf", "Cc"}


def test_hostile_terms_studies_and_description_of_a_literature_show_as_themselves(
    visit: Any, literature_page: Path
) -> None:
    tab = visit(literature_page, 400, 800)
    draw_all(tab)
    slide_to(tab, 77)
    assert_nothing_ran(tab)
    assert tab.locator("article.claim .verdict [data-posterior]").count() == len(TEXTS)
    assert TEXTS[0] in tab.locator("h1").inner_text()
    for text in TEXTS[:3]:
        assert text in tab.locator("header.top").inner_text()
        assert any(text in heading for heading in tab.locator("article h3").all_inner_texts())


def test_words_of_five_hundred_letters_in_a_literature_do_not_widen_the_page(visit: Any, literature_page: Path) -> None:
    tab = visit(literature_page, 400, 800)
    draw_all(tab)
    assert tab.evaluate("document.documentElement.scrollWidth") <= 400


def test_policy_of_the_page_stops_what_would_slip_through(browser: Any, demo_page: Path, tmp_path: Path) -> None:
    slipped = (
        "<script>window.pwned=1</script><img src='http://127.0.0.1:9/x' onerror='window.pwned=2'>"
        "<iframe srcdoc='<script>parent.pwned=3</script>'></iframe><p id='styled' style='position:fixed'>x</p>"
    )
    page = tmp_path / "slipped.html"
    page.write_text(demo_page.read_text(encoding="utf-8").replace("<main>", "<main>" + slipped, 1), encoding="utf-8")
    context = browser.new_context()
    try:
        tab, stopped = context.new_page(), []
        tab.on("requestfailed", lambda request: stopped.append((request.url, request.failure)))
        tab.goto(page.as_uri())
        tab.locator("#controls").wait_for()  # our own script still runs
        assert tab.evaluate("typeof window.pwned") == "undefined"
        assert tab.locator("#styled").evaluate("e => getComputedStyle(e).position") == "static"
        assert ("http://127.0.0.1:9/x", "csp") in stopped
    finally:
        context.close()
