"""The pages that the commands write: what they show at a prior is what `revinf check` prints at that prior."""

from __future__ import annotations

import re
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from revinf.evidence.claim import Claim
from revinf.evidence.claims_table import read_claims
from revinf.knowledge import demo_folder
from revinf.literature.literature import Literature
from tests.browser.test_prior import arguments, shown, slide_to, type_prior

Revinf = Callable[..., str]


@pytest.fixture(scope="module")
def revinf(demo_literature: Literature) -> Revinf:
    """Give a function that runs a command on the demo's literature and returns its screen."""
    from typer.testing import CliRunner

    from revinf.cli.app import app

    def run(*words: object) -> str:
        command = [*map(str, words), "--literature", str(demo_literature.folder)]
        done = CliRunner().invoke(app, command, env={"COLUMNS": "140"}, prog_name="revinf")
        assert (done.exit_code, done.stderr) == (0, "")
        return str(done.stdout)

    return run


@pytest.fixture(scope="module")
def audit_page(revinf: Revinf, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Give the page of `revinf audit` on the demo's claims as they stand."""
    out = tmp_path_factory.mktemp("audit") / "report"
    revinf("audit", demo_folder() / "claims.csv", "--out", out)
    return out / "report.html"


def printed(screen: str) -> str:
    """Return the posterior at the prior asked, from the screen of `revinf check`."""
    found = re.search(r"\((?:even odds|as asked)\)\s+([<>\d.]+ \([<>\d.]+–[<>\d.]+\))", screen)
    assert found, screen
    return found.group(1)


def by_claim(tab: Any) -> dict[str, str]:
    """Return the posteriors of the page by the id of the claim that its heading begins with."""
    names = {
        article.get_attribute("id"): article.query_selector("h3 bdi").text_content()
        for article in tab.query_selector_all("article.claim")
    }
    return {names[anchor]: text for anchor, text in shown(tab).items()}


def test_every_claim_of_an_audit_moves_to_the_digits_that_check_prints(
    visit: Any, audit_page: Path, revinf: Revinf
) -> None:
    claims: dict[str, Claim] = {claim.id: claim for claim in read_claims(demo_folder() / "claims.csv").claims}
    tab = visit(audit_page)
    for move, prior in ((slide_to, 77), (type_prior, "0.9")):
        move(tab, prior)
        asked = prior / 100 if isinstance(prior, int) else prior
        expected = {
            name: printed(revinf("check", "--prior", asked, *arguments(claim))) for name, claim in claims.items()
        }
        assert by_claim(tab) == expected


def test_page_of_one_claim_shows_and_moves_to_what_check_prints(visit: Any, revinf: Revinf, tmp_path: Path) -> None:
    check = ("check", "--term", "fear", "--peak", -22, -4, -18)
    screen = revinf(*check, "--prior", "0.2", "--report", tmp_path / "one.html")
    tab = visit(tmp_path / "one.html")
    assert list(shown(tab).values()) == [printed(screen)]
    assert tab.locator("#prior-value").input_value() == "0.2"
    slide_to(tab, 50)
    assert list(shown(tab).values()) == [printed(revinf(*check))]
    tab.locator("#prior-reset").click()
    assert list(shown(tab).values()) == [printed(screen)]
