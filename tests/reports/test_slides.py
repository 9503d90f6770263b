"""Slides: everything stands on the slide and nothing on anything else, whatever the words are."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure
from matplotlib.text import Text

from revinf.evidence.audit import Audit, audit
from revinf.evidence.claim import Claim
from revinf.evidence.source_choice import choose_source
from revinf.reports.drawn_text import drawable, fitted
from revinf.reports.slides import slide, write_slides

LONG = "a process whose name is so long that no title could ever hold it on its two lines, small letters or not"
HOSTILE = "\u6050\u6016 $x$ \u05de\u05d9\u05dc\u05d4 \U0001f600 <b>&amp; " + "w" * 300


def one(**claim: Any) -> Audit:
    """Audit one invented claim against the shipped base rates."""
    asked = {"id": "c1", "term": "semantic cognition", "peaks": [(-54, 24, 12)], **claim}
    return audit(
        [Claim(**asked), Claim(id="c0", term="navigation", peaks=[(0, 54, 12)])], choose_source(None, None, {})
    )


def boxes(figure: Figure) -> dict[str, Any]:
    """Return the extents, as shares of the slide, of its texts and of its axes with their labels."""
    renderer = FigureCanvasAgg(figure).get_renderer()
    figure.draw(renderer)
    inverse = figure.transFigure.inverted()
    found = {text.get_text(): text.get_window_extent(renderer).transformed(inverse) for text in figure.texts}
    for axis in figure.axes:
        found["axes"] = axis.get_tightbbox(renderer).transformed(inverse)
    return found


CLAIMS = [
    {},
    {"quote": "Since the frontal operculum lit up, readers understood the words."},
    {"quote": HOSTILE, "id": "=" + "i" * 200},
    {"term": LONG},
    {"term": HOSTILE},
    {"absent": True, "quote": "No response there, so no meaning was found."},
    {"prior": 0.001},
    {"prior": 0.999},
    {"peaks": [(-54, 24, 12), (-48, 26, 12), (-36, -60, 40), (54, -54, 24), (0, 54, 12)], "label": "five places"},
]


@pytest.mark.parametrize("claim", CLAIMS, ids=[str(number) for number in range(len(CLAIMS))])
def test_texts_stand_on_the_slide_and_beside_each_other(claim: dict[str, Any]) -> None:
    result = one(**claim)
    found = list(boxes(slide(result.audited[0], result.source)).items())
    for at, (words, box) in enumerate(found):
        assert box.x0 >= 0, words
        assert box.x1 <= 1, words
        assert box.y0 >= 0, words
        assert box.y1 <= 1, words
        for other_words, other in found[at + 1 :]:
            assert not box.overlaps(other), (words, other_words)


@pytest.mark.parametrize("prior", [0.001, 0.05, 0.3, 0.5, 0.7, 0.95, 0.999])
@pytest.mark.parametrize("term", ["semantic cognition", "navigation"])
def test_the_posterior_is_written_inside_the_axes(prior: float, term: str) -> None:
    result = one(prior=prior, term=term)
    figure = slide(result.audited[0], result.source)
    renderer = FigureCanvasAgg(figure).get_renderer()
    figure.draw(renderer)
    (axis,) = figure.axes
    (label,) = (text for text in axis.texts if isinstance(text, Text))
    inside, box = axis.get_window_extent(renderer), label.get_window_extent(renderer)
    assert inside.x0 <= box.x0 < box.x1 <= inside.x1
    assert inside.y0 <= box.y0 < box.y1 <= inside.y1


def test_the_slide_says_which_claim_it_is_and_what_was_written() -> None:
    result = one(quote="Readers understood the words.")
    words = " ".join(boxes(slide(result.audited[0], result.source)))
    assert "c1: \u201cReaders understood the words.\u201d" in words
    assert "Does activity here mean semantic cognition?" in words


def test_many_slides_drawn_beside_each_other_are_the_bytes_of_few(tmp_path: Path) -> None:
    claims = [Claim(id=f"c{n}", term="navigation", peaks=[(-24, -36, -14 + n)]) for n in range(18)]
    source = choose_source(None, None, {})
    told: list[tuple[int, int]] = []
    for name, some in (("many", claims), ("few", claims[:3])):
        (tmp_path / name).mkdir()
        write_slides(audit(some, source), tmp_path / name, progress=lambda done, total: told.append((done, total)))
    assert told[:18] == [(n, 18) for n in range(1, 19)]
    assert len(list((tmp_path / "many").glob("slide-*.png"))) == 18
    for number in (1, 2, 3):
        name = f"slide-{number:02d}.png"
        assert (tmp_path / "many" / name).read_bytes() == (tmp_path / "few" / name).read_bytes()


@settings(max_examples=60, deadline=None)
@given(text=st.text(max_size=200), width=st.floats(0.1, 1.0), lines=st.integers(1, 4))
def test_any_text_fits_the_room_that_it_is_given(text: str, width: float, lines: int) -> None:
    figure = Figure(figsize=(8, 4))
    broken = fitted(figure, text, 14, width=width, lines=lines)
    assert broken.count("\n") < lines
    drawn = figure.text(0, 0.5, broken, fontsize=14)
    renderer = FigureCanvasAgg(figure).get_renderer()
    assert drawn.get_window_extent(renderer).width <= width * figure.bbox.width + 1


@given(text=st.text(max_size=60))
def test_no_character_is_drawn_that_the_font_lacks(text: str) -> None:
    shown = drawable(text)
    assert "\n" not in shown
    assert shown.replace(r"\$", "").count("$") == 0
