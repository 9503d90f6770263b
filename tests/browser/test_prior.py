"""The prior of the page: every posterior moves to the digits that `check --prior` prints."""

from __future__ import annotations

import re
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from revinf.evidence.audit import audit
from revinf.evidence.claim import Claim
from revinf.evidence.sources import LiteratureSource
from revinf.literature.literature import Literature


def shown(tab: Any) -> dict[str, str]:
    """Return each claim's posterior as the page holds it, also where it is not scrolled to."""
    return {
        article.get_attribute("id"): article.query_selector(".verdict [data-posterior]").text_content()
        for article in tab.query_selector_all("article.claim")
    }


def slide_to(tab: Any, percent: int) -> None:
    tab.locator("#prior-slider").evaluate(
        "(slider, value) => { slider.value = value; slider.dispatchEvent(new Event('input', {bubbles: true})); }",
        percent,
    )


def type_prior(tab: Any, text: str) -> None:
    tab.locator("#prior-value").fill(text)
    tab.locator("#prior-value").press("Enter")


def arguments(claim: Claim) -> list[str]:
    """Return the claim as options of `revinf check`."""
    words = ["--term", claim.term, "--radius", f"{claim.radius_mm:g}", "--space", str(claim.space)]
    for peak in claim.peaks:
        words += ["--peak", *(f"{value:g}" for value in peak)]
    return words


@pytest.fixture(scope="module")
def checked(demo_literature: Literature) -> Callable[[Claim, str], str]:
    """Give a function that returns the posterior that `revinf check --prior` prints for a claim."""
    from typer.testing import CliRunner

    from revinf.cli.app import app

    folder = str(demo_literature.folder)

    def run(claim: Claim, prior: str) -> str:
        command = ["check", "--literature", folder, "--prior", prior, *arguments(claim)]
        done = CliRunner().invoke(app, command, env={"COLUMNS": "140"})
        assert done.exit_code == 0
        block = done.stdout.split("at a prior of", 1)[1]
        found = re.search(r"\((?:even odds|as asked)\)\s+([<>\d.]+ \([<>\d.]+–[<>\d.]+\))", block)
        assert found, block
        return found.group(1)

    return run


@pytest.fixture(scope="module")
def ordered_claims(demo_literature: Literature, demo_claims: list[Claim]) -> list[Claim]:
    """Give the claims in the order of the page."""
    return [item.claim for item in audit(demo_claims, LiteratureSource(demo_literature)).by_attention()]


@pytest.mark.parametrize(
    ("how", "prior"), [("slide", "0.1"), ("slide", "0.77"), ("type", "0.003"), ("type", "0.12345")]
)
def test_moved_prior_shows_what_check_prints(
    how: str,
    prior: str,
    visit: Any,
    demo_page: Path,
    ordered_claims: list[Claim],
    checked: Callable[[Claim, str], str],
) -> None:
    tab = visit(demo_page)
    if how == "slide":
        slide_to(tab, round(100 * float(prior)))
        assert tab.locator("#prior-value").input_value() == prior
    else:
        type_prior(tab, prior)
    expected = {f"claim-{number}": checked(claim, prior) for number, claim in enumerate(ordered_claims[:5], start=1)}
    assert {name: text for name, text in shown(tab).items() if name in expected} == expected
    assert prior in tab.locator("#prior-said").inner_text()


def test_reset_brings_back_the_prior_that_each_claim_was_asked_with(visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page)
    before, priors = shown(tab), tab.locator(".verdict [data-prior-shown]").all_text_contents()
    assert len(set(priors)) == 2
    slide_to(tab, 90)
    assert shown(tab) != before
    assert set(tab.locator(".verdict [data-prior-shown]").all_text_contents()) == {"0.900"}
    tab.locator("#prior-reset").click()
    assert shown(tab) == before
    assert tab.locator(".verdict [data-prior-shown]").all_text_contents() == priors


@pytest.mark.parametrize("text", ["", " ", "abc", "0", "1", "-1", "1e999", "nan", "Infinity", "0x1", "1.5", "0.5.5"])
def test_typed_nonsense_changes_no_number_and_is_said(text: str, visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page)
    slide_to(tab, 30)
    before = shown(tab)
    type_prior(tab, text)
    assert shown(tab) == before
    assert tab.locator("#prior-value").get_attribute("aria-invalid") == "true"
    assert "between 0 and 1" in tab.locator("#prior-said").inner_text()
    type_prior(tab, "0,5")
    assert tab.locator("#prior-value").get_attribute("aria-invalid") is None


def test_no_typed_prior_makes_a_number_that_is_none(visit: Any, demo_page: Path) -> None:
    tab = visit(demo_page)
    for text in ("1e-300", "5e-324", "0.9999999999999999", "1e-9"):
        type_prior(tab, text)
        assert not re.search("NaN|Infinity|undefined", tab.locator("main").text_content())


def test_ties_are_written_as_python_writes_them(visit: Any, demo_page: Path) -> None:
    from revinf.reports.numbers import probability

    tab = visit(demo_page)
    for sixteenth in range(1, 16):
        type_prior(tab, repr(sixteenth / 16))
        assert tab.locator(".verdict [data-prior-shown]").first.text_content() == probability(sixteenth / 16)


def test_without_scripts_every_number_stands_as_asked(visit: Any, demo_page: Path) -> None:
    with_scripts, without = visit(demo_page), visit(demo_page, java_script_enabled=False)
    assert shown(without) == shown(with_scripts)
    assert not without.locator("#controls").is_visible()
    assert "Scripts are off" in without.locator("noscript").inner_text()
