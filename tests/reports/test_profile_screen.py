"""The screen of a place: from a literature, a table, a region and a pattern, at any usual width."""

from __future__ import annotations

import pytest

from revinf.base_rates.table import BaseRateTable
from revinf.evidence.asked_region import AskedRegion
from revinf.evidence.choices import Choices
from revinf.evidence.profile import profile
from revinf.evidence.source_choice import choose_source
from revinf.evidence.sources import TableSource, as_source
from revinf.knowledge import table_path
from revinf.reports.numbers import interval, p_value, place_share, probability, ratio
from revinf.reports.profile_screen import profile_screen
from revinf.reports.wording import NO_INDIVIDUALS

WIDTHS = (60, 80, 104)
NAMES = ("literature", "pattern", "shipped", "region", "small")


@pytest.fixture(scope="module")
def places(demo_literature, invented_literature):
    demo, shipped = as_source(demo_literature), choose_source(None, None, {})
    published = TableSource(BaseRateTable.read(table_path("published_frequencies")))
    return {
        "literature": profile(AskedRegion(peaks=[(-22, -4, -18)]), demo),
        "pattern": profile(AskedRegion(peaks=[(54, -54, 22), (4, 54, 18)]), demo),
        "shipped": profile(AskedRegion(peaks=[(54, -54, 24)]), shipped),
        "region": profile(AskedRegion(region="Broca's area"), published),
        "small": profile(AskedRegion(peaks=[(-40, 20, 10)]), as_source(invented_literature)),
    }


@pytest.fixture
def screen(places, lines_of):
    def draw(name, width=104):
        return lines_of(profile_screen(places[name], width=width), width)

    return draw


def flat(lines):
    return " ".join(" ".join(lines).split())


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES)
def test_no_line_is_wider_than_the_screen_and_the_limits_are_said(screen, name, width):
    lines = screen(name, width)
    assert max(map(len, lines)) <= width
    assert NO_INDIVIDUALS in flat(lines)


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES)
def test_every_process_shown_has_its_counts_and_ratio_at_every_width(places, screen, name, width):
    text = flat(screen(name, width))
    for row in places[name].rows[:20]:
        assert f"{row.counts.term_active} of {row.counts.term_total}" in text
        if row.likelihood_ratio is not None:
            assert interval(row.likelihood_ratio, ratio) in text


@pytest.mark.parametrize("width", WIDTHS)
def test_names_of_processes_break_only_between_words(places, screen, width):
    words = {word for line in screen("literature", width) for word in line.split()}
    for row in places["literature"].rows[:20]:
        assert set(row.term.split()) <= words


def test_wide_screen_has_rate_shrunk_rate_and_q_too(places, screen):
    text = flat(screen("literature", 104))
    for row in places["literature"].rows[:20]:
        parts = (
            interval(row.rate),
            probability(row.shrunk_rate),
            interval(row.likelihood_ratio, ratio),
            p_value(row.q),
        )
        assert " ".join(parts) in text


@pytest.mark.parametrize("width", WIDTHS)
def test_invented_is_shown_where_and_only_where_the_data_are(places, screen, width):
    for name in NAMES:
        assert ("INVENTED DATA" in flat(screen(name, width))) == places[name].literature.invented
    assert [name for name in NAMES if places[name].literature.invented] == ["literature", "pattern", "small"]


@pytest.mark.parametrize("width", WIDTHS)
def test_opening_says_where_how_many_how_busy_and_how_mixed(places, screen, width):
    text, found = flat(screen("literature", width)), places["literature"]
    assert "Place (−22, −4, −18), within 10 mm: left hemisphere, grey matter" in text
    assert "300 studies (here: papers), 73 terms" in text
    assert f"{found.hits} studies are active here" in text
    assert f"more than {place_share(found.breadth.activation_percentile)} of the places" in text
    assert f"as if used equally by {interval(found.breadth.effective_processes, ratio)} of 54" in text
    assert f"{len(found.rows) - 20} more with --json" in text


def test_domains_are_shown_for_a_literature_and_not_for_a_table(places, screen):
    text = flat(screen("literature"))
    for row in places["literature"].domains:
        assert f"{row.domain} {row.active} of {row.total} {interval(row.rate)}" in text
    assert "Domains" not in flat(screen("shipped"))


def test_table_is_named_with_place_and_distance(screen):
    assert "answered by the table's '48 -54 24', 6.0 mm away" in flat(screen("shipped"))
    assert flat(screen("region")).startswith("Place Broca's area Counted in")


def test_order_that_says_nothing_is_said_to_say_nothing(places, screen):
    assert not places["small"].rank_informative
    assert "the order says nothing" in flat(screen("small"))
    assert "the order says nothing" not in flat(screen("literature"))


def test_level_of_the_intervals_is_that_asked_for(demo_literature, lines_of):
    found = profile(AskedRegion(peaks=[(-22, -4, -18)]), as_source(demo_literature), Choices(level=0.975))
    text = flat(lines_of(profile_screen(found, width=104), 104))
    assert "rate (97.5% interval)" in text
