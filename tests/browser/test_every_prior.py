"""At every prior, all posteriors of the page are those of the library, and no input leaves a number that is none."""

from __future__ import annotations

import random
import re
from pathlib import Path
from typing import Any, NamedTuple

import pytest

from revinf.reports.numbers import interval
from revinf.stats.bayes import posterior_probability
from tests.browser.test_prior import slide_to, type_prior

EVERY_POSTERIOR = """priors => priors.map(prior => {
    const value = document.getElementById("prior-value");
    value.value = prior;
    value.dispatchEvent(new Event("change"));
    return Array.from(document.querySelectorAll("[data-posterior]"),
        e => [e.dataset.middle, e.dataset.low, e.dataset.high, e.textContent]);
})"""
# What a reader sees or a screen reader says, and where the drawings put their marks; the script itself is no number.
SAID_AND_DRAWN = """() => Array.from(document.querySelectorAll("body *:not(script)"), e =>
    Array.from(e.childNodes).filter(n => n.nodeType === 3).map(n => n.data).join(" ") + " "
    + Array.from(e.attributes, a => a.value).join(" ")).join(" ")"""

MARKS = """() => Array.from(document.querySelectorAll(
    "[data-strip] :is(.tick, .bar, .dot), [data-curve] :is(.at, .dot)"),
    e => ["x1", "x2", "y1", "y2", "cx", "cy"].map(name => Number(e.getAttribute(name)))).flat()"""


class Quantiles(NamedTuple):
    estimate: float
    low: float
    high: float


def test_every_posterior_at_four_hundred_priors_is_written_as_the_library_writes_it(
    visit: Any, demo_page: Path
) -> None:
    chance = random.Random(20)
    priors = [repr(percent / 100) for percent in range(1, 100)]
    priors += ["1e-9", "0.0005", "0.003", "0.12345", "0.9995", "0.999999"]
    priors += [repr(chance.random()) for _ in range(300)]
    tab = visit(demo_page)
    posteriors = tab.evaluate(EVERY_POSTERIOR, priors)
    wrong = [
        (prior, text, expected)
        for prior, row in zip(priors, posteriors, strict=True)
        for *ratios, text in row
        for expected in [interval(Quantiles(*(posterior_probability(float(prior), float(ratio)) for ratio in ratios)))]
        if text != expected
    ]
    assert wrong == []
    claims = tab.locator("article.claim .verdict [data-posterior]").count()
    assert claims > 1
    assert {len(row) for row in posteriors} == {2 * claims}  # at a glance, and in the claim


@pytest.mark.parametrize("moved", [False, True])
def test_no_typed_text_leaves_a_number_that_is_none_in_words_or_drawings(
    moved: bool, visit: Any, demo_page: Path
) -> None:
    tab = visit(demo_page)
    if moved:
        slide_to(tab, 77)
    for text in ("", "   ", "abc", "0", "0.0", "1", "-1", "+0.5", "1e999", "1e-400", "nan", "0.5%", "٠٫٥", "<b>"):
        type_prior(tab, text)
        assert tab.locator("#prior-value").get_attribute("aria-invalid") == "true", text
        assert not re.search("NaN|Infinity|undefined|null", tab.evaluate(SAID_AND_DRAWN)), text


@pytest.mark.parametrize("text", ["0,3", " 0.3 ", ".3", "3e-1"])
def test_a_prior_may_be_written_in_other_usual_ways(text: str, visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page)
    type_prior(tab, text)
    assert tab.locator("#prior-value").get_attribute("aria-invalid") is None
    assert set(tab.locator("[data-prior-shown]").all_text_contents()) == {"0.300"}


def test_reset_brings_back_the_digits_and_drawings_of_the_file(visit: Any, demo_page: Path) -> None:
    pattern = r"<span [^>]*data-posterior[^>]*>([^<]+)</span>"
    written = re.findall(pattern, demo_page.read_text(encoding="utf-8"))
    tab = visit(demo_page)
    drawn = tab.evaluate(MARKS)
    for text in ("0.12345", "nonsense"):
        slide_to(tab, 90)
        assert tab.evaluate(MARKS) != pytest.approx(drawn, abs=1)
        type_prior(tab, text)
        tab.locator("#prior-reset").click()
        assert tab.locator("[data-posterior]").all_text_contents() == written
        assert tab.locator("#prior-value").get_attribute("aria-invalid") is None
        assert tab.evaluate(MARKS) == pytest.approx(drawn, abs=0.001)  # of 100; the file holds three decimals
