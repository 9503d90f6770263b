"""The screen of an assessment says everything that matters, at any usual width, and marks invented data."""

from __future__ import annotations

import pytest

from revinf.base_rates.table import BaseRateTable
from revinf.base_rates.table_rows import TableRow
from revinf.evidence.assess import Choices, assess
from revinf.evidence.claim import Claim
from revinf.evidence.grading import grade_words
from revinf.evidence.source_choice import choose_source
from revinf.knowledge import table_path
from revinf.reports.check_screen import check_screen
from revinf.reports.numbers import coordinates, count, interval, probability, ratio
from revinf.reports.terminal import show
from revinf.reports.wording import LIMITS, NO_INDIVIDUALS, grade_line

WIDTHS = (60, 80, 104)


@pytest.fixture(scope="module")
def answers(invented_literature):
    """Answers of each kind: by direction, source, region, with and without trouble."""

    def typed(counts, term="pain", **more):
        n11, n10, n01, n00 = counts
        rows = [TableRow("here", term, n11, n11 + n10, n01, n01 + n00, (-42.0, -22.0, 52.0), 10.0)]
        return assess(Claim(term=term, region="here", **more), BaseRateTable(rows, name="small table"))

    broca = BaseRateTable.read(table_path("published_frequencies"))
    return {
        "published": assess(Claim(term="language", region="Broca's area"), broca),
        "against": typed((2, 100, 80, 269), prior=0.05),
        "undecided": typed((5, 20, 80, 320), prior=0.1),
        "no hits": typed((0, 63, 0, 388)),
        "large": typed((12345, 6789, 2345678, 9876543), prior="prevalence"),
        "long term": typed((15, 48, 17, 371), term="remembering where one has left a bicycle"),
        "shipped": assess(
            Claim(term="theory of mind", peaks=[(54, -54, 24)], prior=0.3), choose_source(None, None, {})
        ),
        "literature": assess(Claim(term="invented naming", peaks=[(-40, 20, 10)], prior=0.05), invented_literature),
        "outside": assess(Claim(term="invented reading", peaks=[(0, 0, 110)]), invented_literature),
    }


NAMES = (
    "published",
    "against",
    "undecided",
    "no hits",
    "large",
    "long term",
    "shipped",
    "literature",
    "outside",
)


@pytest.fixture
def screen(answers, capsys):
    """Print an answer and return the lines."""

    def draw(name, width):
        show(*check_screen(answers[name], width=width), width=width)
        printed = capsys.readouterr()
        assert printed.err == ""
        return printed.out.splitlines()

    return draw


def in_one_line(lines):
    return " ".join(" ".join(lines).split())


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES)
def test_no_line_is_wider_than_the_screen(screen, name, width):
    lines = screen(name, width)
    assert max(len(line) for line in lines) <= width
    assert len(lines) > 20


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES)
def test_screen_has_claim_counts_rates_ratio_posteriors_and_required_priors(answers, screen, name, width):
    answer, text = answers[name], in_one_line(screen(name, width))
    counts, rates, value = answer.counts, answer.rates, answer.likelihood_ratio
    expected = [
        f"is taken as a sign of {answer.claim.term!r}",
        f"{answer.literature.name}: {count(answer.literature.n_studies)} studies",
        f"{count(counts.term_active)} of {count(counts.term_total)}",
        f"{count(counts.other_active)} of {count(counts.other_total)}",
        interval(rates.active_given_term),
        interval(rates.active_given_other),
        interval(value.value, ratio),
        "observed " + ("undefined" if value.observed is None else ratio(value.observed)),
        grade_line(value.direction, value.headline_grade, value.estimate_grade),
        probability(answer.posterior.prior),
        probability(answer.posterior_at_prevalence.prior),
        interval(answer.posterior.value),
        interval(answer.posterior_at_prevalence.value),
        answer.wording,
    ]
    for item in answer.required_prior:
        expected += [
            f"for {item.target:.2f}",
            f"the prior must have been {probability(item.estimate)}, or {probability(item.at_low)} at the",
        ]
    for part in expected:
        assert part in text


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES)
def test_every_caution_stands_with_code_severity_and_message(answers, screen, name, width):
    lines = screen(name, width)
    for caution in answers[name].cautions:
        assert any(line.split()[1:3] == [caution.severity, caution.code] for line in lines)
    start = next(i for i, line in enumerate(lines) if line.startswith("Cautions"))
    cautions = in_one_line(lines[start + 1 :])
    for caution in answers[name].cautions:
        assert caution.message in cautions
    if not answers[name].cautions:
        assert "none of those that can be judged from this source" in cautions


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES)
def test_screen_says_its_limits_and_that_it_must_not_be_used_on_persons(screen, name, width):
    text = in_one_line(screen(name, width))
    for sentence in (*LIMITS, NO_INDIVIDUALS):
        assert sentence in text
    assert "never about a person. They must not be used for clinical, forensic, hiring or lie-detection" in text


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", NAMES)
def test_invented_is_shown_where_and_only_where_the_data_are_invented(answers, screen, name, width):
    text = in_one_line(screen(name, width))
    assert ("INVENTED DATA" in text) == answers[name].literature.invented == (name in {"literature", "outside"})


@pytest.mark.parametrize("width", WIDTHS)
def test_figures_of_a_published_table_are_on_its_screen(screen, width):
    """Poldrack 2006, Trends Cogn Sci 10:59-63, table 1: 166/703 against 199/2154, Bayes factor 2.3."""
    text = in_one_line(screen("published", width))
    for part in (
        "activity in Broca's area is taken as a sign of 'language'",
        "166 of 869", "199 of 2,353", "2.25 (1.86–2.72)", "observed 2.26", "0.692 (0.650–0.731)",
        "166 of 365 = 0.455 carry the term", "speaks for the claim; grade at least bare",
        "not worth more than a bare mention",
    ):  # fmt: skip
        assert part in text


def test_table_that_answered_for_a_peak_is_named_with_place_distance_and_radius(answers, screen):
    text = in_one_line(screen("shipped", 104))
    region = answers["shipped"].place.table_region
    assert f"the table's place {region.region!r} at {coordinates(region.centre)}, 6.0 mm from the peak" in text
    assert "451 studies (here: experiments)" in text
    assert "sphere of 10 mm" in text


def test_even_odds_are_named_and_another_prior_is_named_as_asked(screen):
    assert "even odds" in in_one_line(screen("published", 104))
    asked = in_one_line(screen("shipped", 104))
    assert "0.300" in asked
    assert "as asked" in asked
    assert "even odds" not in asked


def test_prior_of_the_prevalence_is_shown_once(screen):
    assert in_one_line(screen("large", 104)).count("share of the studies") == 1


def test_grade_is_also_said_in_the_words_of_the_published_scale(answers, screen):
    grade = answers["against"].likelihood_ratio.headline_grade
    text = in_one_line(screen("against", 80))
    assert "speaks against the claim" in text
    assert grade_words(grade) in text


def test_intervals_are_drawn_on_a_wide_screen_and_left_out_on_a_narrow_one(screen):
    assert "●" in "".join(screen("published", 104))
    assert "●" not in "".join(screen("published", 60))


@pytest.mark.parametrize("level", [0.5, 0.95, 0.999])
def test_level_of_the_intervals_is_said_in_full(invented_literature, capsys, level):
    claim = Claim(term="invented naming", peaks=[(-40, 20, 10)])
    show(*check_screen(assess(claim, invented_literature, Choices(level=level))))
    assert capsys.readouterr().out.count(f"({100 * level:g}% interval)") == 3


def test_severities_differ_by_shape_and_not_only_by_colour(screen):
    marks = {line[0] for line in screen("literature", 104) if line[:1] in "■▲·" and line.strip()}
    assert marks == {"■", "▲", "·"}


def test_term_that_looks_like_markup_is_printed_as_it_is(capsys):
    rows = [TableRow("here", "[bold]odd[/] term", 3, 10, 4, 200)]
    answer = assess(Claim(term="[bold]odd[/] term", region="here"), BaseRateTable(rows, name="[red]t[/red]"))
    show(*check_screen(answer))
    text = capsys.readouterr().out
    assert "'[bold]odd[/] term'" in text
    assert "[red]t[/red]" in text
