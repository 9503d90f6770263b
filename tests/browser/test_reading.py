"""The page reads well where people read it: on phones, tablets and paper, magnified, and by keyboard alone."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from tests.browser.test_access import LEVELS, draw_all
from tests.browser.test_prior import shown, slide_to, type_prior

# 320 CSS pixels are what 1280 become at 400 % (WCAG 2.2, success criterion 1.4.10, Reflow); the others are
# usual widths of phones and tablets (common practice, no source), and both sides of 46 and 52 rem.
WIDTHS = (320, 360, 375, 400, 412, 600, 736, 737, 768, 820, 832, 833, 1024, 1600)


def faults_of_level_a_or_aa(tab: Any, context: str | None = None) -> list[tuple[str, list[Any]]]:
    """Return what axe-core finds, readably."""
    axe = pytest.importorskip("axe_playwright_python.sync_playwright", reason="axe-core comes with the test extra")
    found = axe.Axe().run(
        tab, context=context, options={"runOnly": {"type": "tag", "values": LEVELS}, "resultTypes": ["violations"]}
    )
    assert found.response["passes"]
    return [(fault["id"], [node["target"] for node in fault["nodes"][:3]]) for fault in found.response["violations"]]


@pytest.mark.parametrize("name", ["demo_page", "hostile_page"])
def test_no_usual_width_scrolls_sideways(name: str, visit: Any, request: pytest.FixtureRequest) -> None:
    tab = visit(request.getfixturevalue(name), 400, 800)
    draw_all(tab)
    over = {}
    for width in WIDTHS:
        tab.set_viewport_size({"width": width, "height": 800})
        if (wide := tab.evaluate("document.documentElement.scrollWidth")) > width:
            over[width] = wide
    assert over == {}


@pytest.mark.parametrize(("width", "height"), [(400, 800), (1600, 1000)])
def test_controls_and_every_heading_are_in_sight_between_the_edges(
    width: int, height: int, visit: Any, demo_page: Path
) -> None:
    tab = visit(demo_page, width, height)
    draw_all(tab)
    for part in ("#prior-slider", "#prior-value", "#prior-reset", "#prior-said", "article.claim h3", "#glance a"):
        places = tab.locator(part).all()
        assert places
        for place in places:
            box = place.bounding_box()
            assert place.is_visible()
            assert 0 <= box["x"] < box["x"] + box["width"] <= width


def test_prior_leaves_most_of_a_low_window_to_the_text(visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page, 320, 256)  # 1280 x 1024 at 400 %
    slide_to(tab, 77)
    tab.evaluate("scrollTo(0, document.getElementById('claim-3').offsetTop)")
    covered = tab.evaluate(
        """() => { const box = document.getElementById("controls").getBoundingClientRect();
        return Math.max(0, Math.min(innerHeight, box.bottom) - Math.max(0, box.top)) / innerHeight; }"""
    )
    assert covered < 0.5


@pytest.mark.parametrize("key", ["Tab", "Shift+Tab"])
def test_what_has_the_focus_is_never_hidden_behind_the_prior(key: str, visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page, 400, 800)
    slide_to(tab, 77)
    hidden, met = [], set()
    for _ in range(50):
        tab.keyboard.press(key)
        name, seen = tab.evaluate(
            """() => { const e = document.activeElement, box = e.getBoundingClientRect();
            const x = box.left + Math.min(box.width, innerWidth) / 2;
            const from = Math.max(box.top, 0), to = Math.min(box.bottom, innerHeight);
            const at = [0.1, 0.5, 0.9].map(part => document.elementFromPoint(x, from + part * (to - from)));
            return [e.id || e.getAttribute("href") || e.getAttribute("aria-label"),
                e === document.body || (to > from && at.some(top => e.contains(top)))]; }"""
        )
        met.add(name)
        if not seen:
            hidden.append(name)
    assert hidden == []
    assert len(met) > 15


def test_no_accessibility_fault_as_opened_nor_after_a_prior_that_is_none(visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page, 400, 800)
    assert faults_of_level_a_or_aa(tab) == []
    type_prior(tab, "abc")
    for scheme in ("light", "dark"):
        tab.emulate_media(color_scheme=scheme)
        assert faults_of_level_a_or_aa(tab, "#controls") == []


def test_paper_carries_every_claim_with_the_numbers_on_the_screen(visit: Any, demo_page: Path) -> None:
    reader = pytest.importorskip("pypdfium2", reason="pypdfium2 reads the paper; it comes with the test extra")
    tab = visit(demo_page)
    slide_to(tab, 77)
    document = reader.PdfDocument(tab.pdf(format="A4", margin=dict.fromkeys(("left", "right"), "1cm")))
    words = []
    for sheet in document:
        text = sheet.get_textpage()
        words.append(text.get_text_range())
        text.close()
        sheet.close()
    document.close()
    text = " ".join(" ".join(words).split())
    for name in tab.locator("article.claim h3 bdi:first-child").all_text_contents():
        assert name in text
    for posterior in shown(tab).values():
        assert f"posterior {posterior} at a prior of 0.770" in text


def test_paper_of_a_moved_prior_says_that_it_was_moved(visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page)
    slide_to(tab, 77)
    tab.emulate_media(media="print")
    assert "stay those of the prior asked" in tab.locator("body").inner_text()
