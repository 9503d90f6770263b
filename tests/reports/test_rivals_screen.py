"""The second half of the check screen: rivals, breadth, other ways to count, and whether the answer holds."""

from __future__ import annotations

import pytest

from revinf.evidence.assess import assess
from revinf.evidence.claim import Claim
from revinf.evidence.source_choice import choose_source
from revinf.reports.check_screen import check_screen
from revinf.reports.numbers import coordinates, interval, place_share, probability, ratio
from revinf.reports.terminal import fitting

WIDTHS = (60, 80, 104)
FEAR, INSULA = (-22, -4, -18), (36, 22, -2)
PAIR = ((54, -54, 22), (4, 54, 18))
NAMES = ("fear", "disgust", "rank 8", "context", "pattern", "absent", "faces", "shipped", "silent table", "tied")


@pytest.fixture(scope="module")
def answers(demo_literature, invented_literature):
    shipped = choose_source(None, None, {})
    tom = {"term": "theory of mind", "peaks": [(54, -54, 24)]}
    return {
        "fear": assess(Claim(term="fear", peaks=[FEAR]), demo_literature),
        "disgust": assess(Claim(term="disgust", peaks=[INSULA]), demo_literature),
        "rank 8": assess(Claim(term="disgust", peaks=[FEAR]), demo_literature),
        "context": assess(Claim(term="fear", peaks=[FEAR], context=["sadness", "fear"]), demo_literature),
        "pattern": assess(Claim(term="theory of mind", peaks=PAIR), demo_literature),
        "absent": assess(Claim(term="fear", peaks=[FEAR], absent=True), demo_literature),
        "faces": assess(Claim(term="faces", peaks=[(40, -52, -20)]), demo_literature),
        "shipped": assess(Claim(**tom), shipped),
        "silent table": assess(Claim(**tom, absent=True), shipped),
        "tied": assess(Claim(term="invented naming", peaks=[(10, -20, 50)]), invented_literature),
    }


@pytest.fixture
def screen(answers, lines_of):
    def draw(name, width=104):
        return lines_of(check_screen(answers[name], width=width), width)

    return draw


def part(lines, title):
    """Return the lines under a heading."""
    start = lines.index(next(line for line in lines if line.startswith(title)))
    rest = [line.rstrip() for line in lines[start + 1 :]]
    return rest[: rest.index("")] if "" in rest else rest


def flat(lines):
    return " ".join(" ".join(lines).split())


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES)
def test_no_line_is_wider_than_the_screen_and_every_part_is_there(screen, name, width):
    lines = screen(name, width)
    assert max(map(len, lines)) <= width
    titles = [line.rstrip() for line in lines]
    for title in ("What else could it mean?", "Does the answer hold?", "Cautions"):
        assert title in titles


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES[:-1])  # the names of the last all begin alike
def test_claimed_term_is_marked_once_among_the_processes_in_order_of_shrunk_rate(answers, screen, name, width):
    answer = answers[name]
    chosen = answer.selectivity
    text = flat(part(screen(name, width), "What else"))
    assert text.count("►") == 1
    counts = answer.counts
    assert f"► {answer.claim.term.split()[0]}" in text
    assert f"{counts.term_active} of {counts.term_total}" in text
    ahead = [rival for rival in chosen.rivals[:6] if rival.shrunk_rate > chosen.shrunk_rate]
    before = text.split("►")[0]
    for rival in chosen.rivals[:6]:
        assert (rival.term.split()[0] in before.split("active here")[-1]) == (rival in ahead), rival.term


@pytest.mark.parametrize("width", WIDTHS)
def test_names_of_processes_are_never_cut_on_a_narrow_screen(answers, screen, width):
    rows = part(screen("fear", width), "What else")
    for rival in answers["fear"].selectivity.rivals[:6]:
        assert any(row.strip().startswith(rival.term.split()[0]) for row in rows)
    choices = flat(part(screen("fear", width), "Does the answer hold?"))
    for choice in ("radius at 5 of 7", "space holds", "peak holds", "one left out holds"):
        assert choice in choices


@pytest.mark.parametrize("name", ["fear", "disgust", "pattern", "shipped"])
def test_wide_screen_shows_shrunk_rate_ratio_and_lead_of_each_rival(answers, screen, name):
    text = flat(part(screen(name), "What else"))
    for rival in answers[name].selectivity.rivals[:6]:
        row = f"{rival.term} {rival.counts.term_active} of {rival.counts.term_total} "
        row += f"{probability(rival.shrunk_rate)} {interval(rival.likelihood_ratio, ratio)}"
        assert row in text
        if rival.probability_ahead is not None:
            assert f"{row} {probability(rival.probability_ahead)}" in text


@pytest.mark.parametrize("width", WIDTHS)
def test_rank_kin_and_how_many_more_are_said(answers, screen, width):
    text = flat(screen("fear", width))
    assert "rank 1 of 53 processes, kin left out" in text
    assert "kin emotional faces, threat detection (largely the same studies)" in text
    assert "14 more with --json" in text
    assert "the claimed term is no process and is not ranked" in flat(screen("faces", width))


def test_claimed_term_below_the_rivals_shown_stands_last_and_its_rank_tells_where(answers, screen):
    rank = answers["rank 8"].selectivity.rank
    rows = part(screen("rank 8"), "What else")
    assert rank > 6
    marked = next(i for i, row in enumerate(rows) if row.startswith("►"))
    assert marked == 7
    assert f"rank         {rank} of" in rows[8]


def test_places_that_tell_nothing_apart_say_that_the_rank_says_nothing(answers, screen):
    assert not answers["tied"].selectivity.rank_informative
    assert "cannot be told apart here, so the rank says nothing" in flat(screen("tied"))
    assert "says nothing" not in flat(part(screen("fear"), "What else"))


@pytest.mark.parametrize("width", WIDTHS)
def test_breadth_is_said_in_words(answers, screen, width):
    breadth = answers["disgust"].breadth
    text = flat(screen("disgust", width))
    assert f"136 of 300 studies are active here, more than at {place_share(breadth.activation_percentile)}" in text
    assert f"as if used equally by {interval(breadth.effective_processes, ratio)} of 54 processes" in text
    assert f"by {interval(breadth.effective_domains, ratio)} of {breadth.n_domains} domains" in text
    assert f"{breadth.n_processes_above_own_rate} of 54 processes are credibly above" in text
    assert "broad-region" in text


def test_too_few_hits_are_said_to_be_too_few(demo_literature, lines_of):
    answer = assess(Claim(term="humour", peaks=[(-30, 50, 8)]), demo_literature)
    text = flat(lines_of(check_screen(answer), 104))
    assert answer.breadth.effective_processes is None
    assert "too few hits to tell how many processes share the place" in text


@pytest.mark.parametrize("width", WIDTHS)
def test_context_volume_and_mirror_stand_under_counted_otherwise(answers, screen, width):
    answer = answers["context"]
    text = flat(part(screen("context", width), "Counted otherwise"))
    counts = answer.context.counts
    assert f"{interval(answer.reporting_volume.adjusted_ratio, ratio)} among studies alike" in text
    assert f"{interval(answer.mirror.ratio, ratio)} at the same place of the other hemisphere" in text
    assert (
        f"{interval(answer.context.ratio, ratio)} within sadness, fear: {counts.term_active} of "
        f"{counts.term_total} against {counts.other_active} of {counts.other_total}"
    ) in text
    assert " context " not in flat(part(screen("fear", width), "Counted otherwise"))


@pytest.mark.parametrize("width", WIDTHS)
def test_pattern_shows_each_place_alone_and_what_multiplying_would_claim(answers, screen, width):
    pattern = answers["pattern"].pattern
    lines = screen("pattern", width)
    text = flat(part(lines, "Counted otherwise"))
    for place in pattern.regions:
        assert f"alone {interval(place.ratio, ratio)} at {coordinates(place.peak)}" in text
    assert f"{ratio(pattern.product)} if the places were independent, {pattern.overstatement:.1f} times" in text
    opening = flat(lines[:8])
    assert "activity at (54, −54, 22) and (4, 54, 18) MNI152" in opening
    assert "Place right hemisphere" in opening
    assert "| midline" in opening


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", ["absent", "silent table"])
def test_absence_is_never_called_activity(answers, screen, name, width):
    lines = screen(name, width)
    text = flat(lines).replace("cannot tell absence from silence", "")
    assert text.startswith("Claim no activity at")
    assert "How often is this place not active?" in text
    assert "not active here" in text
    assert "active here" not in text.replace("not active here", "")
    assert "given no activity?" in text
    assert "as if used equally" not in text
    assert "is active here more often" not in text
    counts = answers[name].counts
    assert f"{counts.active_total} of {counts.total} studies are not active here" in text


def test_absence_in_a_named_region_of_a_table_is_said(lines_of):
    from revinf.base_rates.table import BaseRateTable
    from revinf.knowledge import table_path

    table = BaseRateTable.read(table_path("published_frequencies"))
    answer = assess(Claim(term="language", region="Broca's area", absent=True), table)
    text = flat(lines_of(check_screen(answer), 104))
    assert "no activity in Broca's area is taken as a sign of 'language'" in text
    assert "703 of 869" in text


@pytest.mark.parametrize("width", WIDTHS)
def test_table_without_studies_shows_no_lead_no_kin_and_only_priors_as_choices(screen, width):
    lines = screen("shipped", width)
    assert "kin cannot be told from a table" in flat(lines)
    assert not any(line.startswith("Counted otherwise") for line in lines)
    choices = [row.split("  ")[0] for row in part(lines, "Does the answer hold?")[1:]]
    assert choices == ["prior", "prior of the ratio"]


def test_answer_that_fails_at_some_settings_says_at_how_many_it_holds(answers, screen):
    robust = answers["fear"].robustness
    rows = part(screen("fear"), "Does the answer hold?")
    assert rows[0].split("  ")[0] == "choice"
    for choice, holds in robust.holds().items():
        members = robust.of(choice)
        row = next(row for row in rows if row.startswith(f"{choice}  "))
        kept = sum(member.holds for member in members)
        assert ("  holds  " in row) == holds
        assert (f"at {kept} of {len(members)}" in row) != holds
    assert f"most without {robust.left_out.name}" in flat(rows)


def test_columns_go_one_by_one_until_the_rest_fits():
    header, rows = ["process", "a", "bb", "ccc"], [["a name of some length", "1", "2", "3"]]
    full = 18 + 1 + 2 + 3 + 2 * 4
    assert fitting(header, rows, full, (2, 3)) == (header, rows)
    assert fitting(header, rows, full - 1, (2, 3))[0] == ["process", "a", "ccc"]
    assert fitting(header, rows, full - 5, (2, 3))[0] == ["process", "a"]
    assert fitting(header, rows, 1, ()) == (header, rows)
