"""The page: one file, everything escaped, the same bytes, and the numbers that the rest of revinf prints."""

from __future__ import annotations

import html
import re
from html.parser import HTMLParser
from pathlib import Path

import pytest

from revinf.evidence.audit import Audit, audit, audit_of
from revinf.evidence.choices import Choices
from revinf.evidence.claim import Claim
from revinf.evidence.source_choice import choose_source
from revinf.exceptions import InputFileError
from revinf.reports.html_report import html_text, write_html
from revinf.reports.methods import METHODS_SOURCES, methods_paragraph, source_facts
from revinf.reports.numbers import interval, ratio
from revinf.reports.wording import LIMITS, NO_INDIVIDUALS

HOSTILE = "</script><script>alert(1)</script>\"'><img src=x onerror=alert(1)> {{7*7}} {% raw %} \u202eevil\u202c"


class Page(HTMLParser):
    """Collects the tags, the attributes, and the text of a page."""

    def __init__(self, text: str) -> None:
        super().__init__()
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.words: list[str] = []
        self.feed(text)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))

    def handle_data(self, data: str) -> None:
        self.words.append(data)

    @property
    def text(self) -> str:
        return " ".join(" ".join(self.words).split())


@pytest.fixture(scope="module")
def result() -> Audit:
    claims = [
        Claim(id="c1", term="semantic cognition", peaks=[(-54, 24, 12)], quote="They understood.", location="page 2"),
        Claim(id=HOSTILE, term="navigation", peaks=[(0, 54, 12)], prior=0.2, quote=HOSTILE, location=HOSTILE),
        Claim(id="c3", term="juggling", peaks=[(0, 54, 12)], quote="They juggled."),
        Claim(id="c4", term="navigation", peaks=[(24, -36, -14)], space="Talairach"),
    ]
    return audit(claims, choose_source(None, None, {}))


@pytest.fixture(scope="module")
def page(result: Audit) -> Page:
    return Page(html_text(result, command="revinf audit 'a b.csv' --out report"))


def test_the_same_audit_gives_the_same_page(result: Audit) -> None:
    assert html_text(result) == html_text(result)


def test_numbers_are_those_of_the_assessments(result: Audit, page: Page) -> None:
    for answer in result.assessments:
        assert interval(answer.likelihood_ratio.value, ratio) in page.text
        assert interval(answer.posterior.value) in page.text


def test_page_carries_the_quantiles_of_the_ratio_with_every_digit(result: Audit, page: Page) -> None:
    carried = {
        (attributes["data-middle"], attributes["data-low"], attributes["data-high"], attributes["data-prior"])
        for _, attributes in page.tags
        if "data-posterior" in attributes
    }
    expected = {
        (repr(value.estimate), repr(value.low), repr(value.high), repr(answer.posterior.prior))
        for answer in result.assessments
        for value in [answer.likelihood_ratio.value]
    }
    assert carried == expected


def test_hostile_cells_are_text(result: Audit, page: Page) -> None:
    tags = [tag for tag, _ in page.tags]
    assert tags.count("script") == 1
    assert "img" not in tags
    assert "{{7*7}} {% raw %} evil" in page.text
    assert "\u202e" not in page.text
    assert not any(name.startswith("on") for _, attributes in page.tags for name in attributes)


def test_nothing_in_the_page_points_outside(page: Page) -> None:
    for tag, attributes in page.tags:
        for name in ("src", "href", "action", "data", "xlink:href"):
            assert (attributes.get(name) or "#").startswith("#"), (tag, attributes)
    policy = next(a["content"] for _, a in page.tags if a.get("http-equiv") == "Content-Security-Policy")
    assert str(policy).startswith("default-src 'none';")
    assert "unsafe" not in str(policy)
    assert not re.search(
        r"url\(|@import|http", (Path(write_html.__code__.co_filename).parent / "templates" / "report.css").read_text()
    )


def test_every_link_has_its_target_and_every_id_is_there_once(page: Page) -> None:
    ids = [attributes["id"] for _, attributes in page.tags if "id" in attributes]
    assert len(ids) == len(set(ids))
    for _, attributes in page.tags:
        for name in ("href", "aria-labelledby", "for", "aria-describedby"):
            if attributes.get(name):
                assert str(attributes[name]).lstrip("#") in ids


def test_page_says_what_was_counted_how_and_what_it_must_not_be_used_for(result: Audit, page: Page) -> None:
    said = html.unescape(page.text)
    for sentence in (NO_INDIVIDUALS, *LIMITS, *METHODS_SOURCES, methods_paragraph(result)):
        assert sentence in said
    for _, text in source_facts(result):
        assert text in said
    assert result.source.fingerprint in said
    assert "revinf audit 'a b.csv' --out report" in said


def test_claim_without_an_answer_is_shown_with_the_reason(page: Page) -> None:
    assert "Not assessed:" in page.text
    assert "They juggled." in page.text


def test_methods_follow_the_choices_made() -> None:
    claim, source = Claim(term="navigation", peaks=[(24, -36, -14)]), choose_source(None, None, {})
    wide = audit([claim], source, Choices(ratio_prior="independent", level=0.9))
    assert "independent Beta(1/2, 1/2)" in methods_paragraph(wide)
    assert "90% interval" in methods_paragraph(wide)
    narrow = audit([claim], source, Choices(ratio_limit=5))
    assert "between 1/5 and 5" in methods_paragraph(narrow)


def test_one_claim_makes_a_page_too(result: Audit) -> None:
    single = audit_of(result.audited[0].claim, result.assessments[0])
    assert Page(html_text(single)).text.count("Suggested wording") == 1


def test_missing_licence_is_said(invented_literature) -> None:
    source = choose_source(invented_literature.folder, None, {})
    claim = Claim(term="invented naming", peaks=[(-40, 20, 10)])
    text = Page(html_text(audit([claim], source))).text
    assert "not stated by who built it" in text
    assert "INVENTED DATA" in text
    assert "invented for tests" in text


def test_write_html_is_whole_or_not_at_all(result: Audit, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    target = tmp_path / "page.html"
    target.write_text("old", encoding="utf-8")

    def full(self: Path, target: Path) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(Path, "replace", full)
    with pytest.raises(InputFileError, match="cannot be written"):
        write_html(result, target)
    assert target.read_text(encoding="utf-8") == "old"
    assert list(tmp_path.iterdir()) == [target]


def test_write_html_refuses_another_ending(result: Audit, tmp_path: Path) -> None:
    with pytest.raises(InputFileError, match=r"ends in \.html"):
        write_html(result, tmp_path / "page.pdf")
