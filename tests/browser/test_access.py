"""The page can be used by everybody: narrow and wide, light and dark, by keyboard, on paper."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from tests.browser.test_prior import shown, slide_to

WIDTHS = (400, 1600)
LEVELS = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"]


def draw_all(tab: Any) -> None:
    """Draw the claims that are not in sight, too."""
    tab.evaluate("document.querySelectorAll('.claim').forEach(e => { e.style.contentVisibility = 'visible'; })")


@pytest.mark.parametrize(
    ("name", "width", "scheme"),
    [
        *(("demo_page", width, scheme) for width in WIDTHS for scheme in ("light", "dark")),
        ("hostile_page", 400, "dark"),
    ],
)
def test_no_accessibility_fault_of_level_a_or_aa(
    name: str, width: int, scheme: str, visit: Any, request: pytest.FixtureRequest
) -> None:
    axe = pytest.importorskip("axe_playwright_python.sync_playwright", reason="axe-core comes with the test extra")
    tab = visit(request.getfixturevalue(name), width, color_scheme=scheme)
    draw_all(tab)
    slide_to(tab, 80)  # with the words that a moved prior brings, too
    found = axe.Axe().run(tab, options={"runOnly": {"type": "tag", "values": LEVELS}, "resultTypes": ["violations"]})
    faults = [
        (fault["id"], fault["impact"], [node["target"] for node in fault["nodes"][:3]])
        for fault in found.response["violations"]
    ]
    assert faults == []
    assert found.response["passes"]


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", ["demo_page", "hostile_page"])
def test_nothing_runs_over_the_side(name: str, width: int, visit: Any, request: pytest.FixtureRequest) -> None:
    tab = visit(request.getfixturevalue(name), width, 800)
    draw_all(tab)
    assert tab.evaluate("document.documentElement.scrollWidth") <= width
    wide = tab.evaluate(
        """() => Array.from(document.querySelectorAll(
            "h1, h2, h3, h4, p, li, blockquote, dd, dt, figure, input, button, svg.curve, svg.brain"))
        .filter(e => !e.closest(".scroll, .shared, .skip, .unseen") && !e.matches(".unseen, .skip"))
        .filter(e => e.getBoundingClientRect().right > innerWidth + 0.5 || e.scrollWidth > e.clientWidth + 1)
        .filter(e => getComputedStyle(e).display !== "inline" && e.getBoundingClientRect().width > 1)
        .map(e => e.tagName + " " + e.className + " " + e.textContent.slice(0, 40))"""
    )
    assert wide == []


@pytest.mark.parametrize("width", WIDTHS)
def test_prior_stays_in_reach_while_reading(width: int, visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page, width, 800)
    tab.locator("article.claim").nth(3).scroll_into_view_if_needed()
    box = tab.locator("#prior-slider").bounding_box()
    assert 0 <= box["y"] < 200
    assert box["width"] > 100
    assert tab.locator("#controls").bounding_box()["height"] < 170


def test_keyboard_reaches_everything_and_shows_where_it_is(visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page)
    reached = []
    for _ in range(18):
        tab.keyboard.press("Tab")
        reached.append(
            tab.evaluate(
                """() => { const e = document.activeElement, s = getComputedStyle(e);
                const name = e.id || e.getAttribute("href") || e.className;
                return [name, s.outlineStyle !== "none" && s.outlineWidth !== "0px"]; }"""
            )
        )
    names = [name for name, _ in reached]
    assert names[:4] == ["#glance-title", "prior-slider", "prior-value", "prior-reset"]
    assert {"#claim-1", "#claim-5"} <= set(names)
    assert all(outlined for _, outlined in reached), reached


def test_arrow_key_on_the_slider_moves_the_numbers(visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page)
    before = shown(tab)
    tab.locator("#prior-slider").focus()
    tab.keyboard.press("ArrowRight")
    assert shown(tab) != before


def test_a_link_at_a_glance_brings_its_claim_into_sight_below_the_prior(visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page)
    tab.locator("#glance a").nth(4).click()
    tab.wait_for_timeout(200)
    heading = tab.locator("#claim-5 h3").bounding_box()
    bar = tab.locator("#controls").bounding_box()
    assert bar["y"] + bar["height"] <= heading["y"] < 900


def test_paper_shows_every_claim_and_no_controls(visit: Any, demo_page: Path, demo_claims: list[Any]) -> None:
    tab = visit(demo_page)
    tab.emulate_media(media="print")
    assert not tab.locator("#controls").is_visible()
    assert tab.locator("article.claim:visible").count() == len(demo_claims)
    assert tab.pdf(format="A4").startswith(b"%PDF")
