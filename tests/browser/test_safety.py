"""Hostile cells never run and show as themselves; two hundred claims open without lag."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import Any

from revinf.evidence.audit import Audit, audit
from revinf.evidence.claim import Claim
from revinf.evidence.sources import LiteratureSource
from revinf.literature.literature import Literature
from revinf.reports.html_report import write_html
from tests.browser.conftest import HOSTILE


def test_hostile_cells_never_run_and_show_as_text(visit: Any, hostile_page: Path) -> None:
    tab = visit(hostile_page)
    tab.wait_for_timeout(300)
    assert tab.evaluate("typeof window.pwned") == "undefined"
    assert tab.locator("img, iframe, article script, b, i").count() == 0
    quotes = tab.locator("blockquote").all_text_contents()
    headings = tab.locator("article h3").all_text_contents()
    for text in HOSTILE:
        assert any(text in quote for quote in quotes), text
        assert any(text in heading for heading in headings), text
    assert "<img src=x onerror=window.pwned=1>" in tab.locator("#refused").text_content()
    assert "<i>no place</i>" in tab.locator("#unplaced").text_content()
    assert "'</script><script>window.pwned=1'" in tab.locator("footer.end").text_content()


def test_right_to_left_text_does_not_turn_its_surroundings(visit: Any, hostile_page: Path) -> None:
    tab = visit(hostile_page)
    quote = tab.locator("blockquote", has_text="שלום")
    assert quote.evaluate("e => getComputedStyle(e).direction") == "rtl"
    assert tab.locator("h3", has_text="שלום").evaluate("e => getComputedStyle(e).direction") == "ltr"


def test_two_hundred_claims_are_small_and_move_without_lag(
    visit: Any, demo_literature: Literature, demo_claims: list[Claim], tmp_path: Path
) -> None:
    few = audit(demo_claims, LiteratureSource(demo_literature))
    # The answers repeat, the page does not know: what is measured is the page.
    many = [
        replace(item, claim=replace(item.claim, id=f"{item.claim.id}-{number}"))
        for number in range(-(-200 // len(few.audited)))
        for item in few.audited
    ][:200]
    page = write_html(Audit(source=few.source, audited=tuple(many)), tmp_path / "many.html")
    assert page.stat().st_size < 8e6
    tab = visit(page)
    assert tab.locator("article.claim").count() == 200
    took = tab.evaluate(
        """async () => { const slider = document.getElementById("prior-slider"), from = performance.now();
        for (const value of [10, 35, 60, 85]) { slider.value = value; slider.dispatchEvent(new Event("input"));
            await new Promise(requestAnimationFrame); }
        return (performance.now() - from) / 4; }"""
    )
    # Not a benchmark: a bound that only a page gone wrong exceeds. A move takes about a tenth of this here.
    assert took < 1000
    loaded = tab.evaluate("performance.getEntriesByType('navigation')[0].domContentLoadedEventEnd")
    assert loaded < 10000
