"""Pictures: whole or not at all, the same bytes every time, readable, and saying where their numbers are from."""

from __future__ import annotations

import struct
import xml.etree.ElementTree as ElementTree
from itertools import pairwise

import pytest
from matplotlib import pyplot
from matplotlib.figure import Figure
from matplotlib.text import Text

from revinf.base_rates.table import BaseRateTable
from revinf.evidence.asked_region import AskedRegion
from revinf.evidence.assess import assess
from revinf.evidence.choices import Choices
from revinf.evidence.claim import Claim
from revinf.evidence.profile import profile
from revinf.evidence.source_choice import choose_source
from revinf.evidence.sources import as_source
from revinf.exceptions import InputFileError
from revinf.knowledge import table_path
from revinf.reports.figures import new_figure, write_figure
from revinf.reports.profile_figure import write_profile_figure
from revinf.reports.robustness_figure import write_robustness_figure

FEAR = (-22, -4, -18)
SVG = "{http://www.w3.org/2000/svg}"
SIGNATURES = {".png": b"\x89PNG\r\n", ".svg": b"<?xml", ".pdf": b"%PDF"}


@pytest.fixture(scope="module")
def pictures(demo_literature):
    """What draws each picture to a path."""
    demo, shipped = as_source(demo_literature), choose_source(None, None, {})
    tom = Claim(term="theory of mind", peaks=[(54, -54, 24)])
    checks = {
        "check": assess(Claim(term="fear", peaks=[FEAR]), demo),
        "pattern": assess(Claim(term="theory of mind", peaks=[(54, -54, 22), (4, 54, 18)]), demo),
        "check of a table": assess(tom, shipped),
        "no hits": assess(Claim(term="spatial attention", peaks=[(60, -60, 62)]), demo),
    }
    places = {
        "profile": profile(AskedRegion(peaks=[FEAR]), demo),
        "profile of a table": profile(AskedRegion(peaks=[(54, -54, 24)]), shipped),
        "profile without hits": profile(AskedRegion(peaks=[(60, -60, 62)]), demo),
    }
    return {name: lambda path, it=it: write_robustness_figure(it, path) for name, it in checks.items()} | {
        name: lambda path, it=it: write_profile_figure(it, path) for name, it in places.items()
    }


NAMES = (
    "check",
    "pattern",
    "check of a table",
    "no hits",
    "profile",
    "profile of a table",
    "profile without hits",
)
each_picture = pytest.mark.parametrize("name", NAMES)


def svg_of(draw, tmp_path):
    """Return an SVG's tree and all its visible words."""
    tree = ElementTree.parse(draw(tmp_path / "picture.svg")).getroot()
    return tree, " ".join(" ".join(" ".join(node.itertext()) for node in tree.iter(f"{SVG}text")).split())


@pytest.mark.parametrize("name", ["check", "profile of a table"])
@pytest.mark.parametrize("ending", list(SIGNATURES))
def test_second_run_writes_the_same_bytes_and_leaves_nothing_else(pictures, name, ending, tmp_path):
    content = pictures[name](tmp_path / f"picture{ending}").read_bytes()
    assert content.startswith(SIGNATURES[ending])
    assert pictures[name](tmp_path / f"other name{ending}").read_bytes() == content
    assert pictures[name](tmp_path / f"picture{ending}").read_bytes() == content
    assert sorted(path.name for path in tmp_path.iterdir()) == [f"other name{ending}", f"picture{ending}"]


@each_picture
def test_picture_names_its_source_number_of_studies_and_unit(pictures, name, tmp_path):
    _, words = svg_of(pictures[name], tmp_path)
    shipped = "of a table" in name
    assert ("451 experiments" if shipped else "300 papers") in words
    assert ("open base rates" if shipped else "invented demonstration") in words
    assert " mm" in words
    assert "likelihood ratio" in words


@each_picture
def test_invented_stands_in_the_picture_where_and_only_where_the_data_are(pictures, name, tmp_path):
    _, words = svg_of(pictures[name], tmp_path)
    assert ("INVENTED" in words) == ("of a table" not in name)


@each_picture
def test_svg_has_a_title_and_no_date(pictures, name, tmp_path):
    tree, _ = svg_of(pictures[name], tmp_path)
    titles = [node.text for node in tree.findall(f"{SVG}title")]
    assert len(titles) == 1
    assert titles[0].startswith(("Robustness of the answer for ", "Profile of "))
    assert not [node for node in tree.iter() if node.tag.endswith("}date")]


@each_picture
def test_nothing_stays_open_in_the_plotting_library(pictures, name, tmp_path):
    before = dict(pyplot.rcParams)
    pictures[name](tmp_path / "picture.svg")
    assert pyplot.get_fignums() == []
    assert dict(pyplot.rcParams) == before


@each_picture
def test_text_is_at_least_eight_points_and_lies_inside_the_picture(pictures, name, tmp_path, monkeypatch):
    drawn = []
    save = Figure.savefig

    def keep(figure, *args, **options):
        drawn.append(figure)
        return save(figure, *args, **options)

    monkeypatch.setattr(Figure, "savefig", keep)
    pictures[name](tmp_path / "picture.png")
    (figure,) = drawn
    figure.canvas.draw()
    width, height = figure.bbox.width, figure.bbox.height
    texts = [text for text in figure.findobj(Text) if text.get_visible() and text.get_text().strip()]
    assert len(texts) > 5
    for text in texts:
        assert text.get_fontsize() >= 8, text.get_text()
    written = [figure._suptitle]
    for axis in figure.axes:
        written += [axis.xaxis.label, *axis.get_yticklabels()]
    for text in written:
        box = text.get_window_extent()
        inside = (box.x0 >= -1, box.y0 >= -1, box.x1 <= width + 1, box.y1 <= height + 1)
        assert all(inside), text.get_text()
    for axis in figure.axes:
        low, high = axis.get_xlim()
        ticks = [*axis.get_xticklabels(), *axis.get_xticklabels(minor=True)]
        shown = [tick for tick in ticks if tick.get_text() and low <= tick.get_position()[0] <= high]
        boxes = sorted((tick.get_window_extent() for tick in shown), key=lambda box: box.x0)
        assert len(boxes) > 1
        assert all(left.x1 < right.x0 for left, right in pairwise(boxes))


def test_rows_of_the_robustness_picture_are_those_of_the_answer(pictures, demo_literature, tmp_path):
    answer = assess(Claim(term="fear", peaks=[FEAR]), demo_literature)
    _, words = svg_of(pictures["check"], tmp_path)
    for row in answer.robustness.rows:
        if row.choice != "prior":
            assert f"{row.choice}: {row.setting}" in words
    assert f"left out: {answer.robustness.left_out.name}" in words
    assert "as asked 11.7 (6.74–20.0)" in words
    assert "(−22, −4, −18) mm MNI152" in words


def test_absence_and_named_regions_are_said_in_the_title(demo_literature, tmp_path):
    silent = assess(Claim(term="fear", peaks=[FEAR], absent=True), demo_literature)
    _, words = svg_of(lambda path: write_robustness_figure(silent, path), tmp_path)
    assert "fear, no activity at (−22, −4, −18) mm MNI152" in words
    table = BaseRateTable.read(table_path("published_frequencies"))
    named = assess(Claim(term="language", region="Broca's area"), table)
    _, words = svg_of(lambda path: write_robustness_figure(named, path), tmp_path)
    assert "language, Broca's area" in words
    assert " mm" not in words


def test_rows_of_the_profile_picture_have_name_and_counts(pictures, demo_literature, tmp_path):
    found = profile(AskedRegion(peaks=[FEAR]), as_source(demo_literature))
    _, words = svg_of(pictures["profile"], tmp_path)
    for row in found.rows[:25]:
        assert f"{row.term} {row.counts.term_active}/{row.counts.term_total}" in words
    assert f"{found.hits} of 300 papers active" in words


def test_level_of_the_intervals_is_written_in_full(demo_literature, tmp_path):
    choices = Choices(level=0.975)
    answer = assess(Claim(term="fear", peaks=[FEAR]), demo_literature, choices)
    found = profile(AskedRegion(peaks=[FEAR]), as_source(demo_literature), choices)
    for write, it in ((write_robustness_figure, answer), (write_profile_figure, found)):
        _, words = svg_of(lambda path, write=write, it=it: write(it, path), tmp_path)
        assert "97.5% interval" in words


@pytest.mark.parametrize("name", ["a.jpg", "a", "a.svgz", "a.tar.gz"])
def test_another_ending_is_refused_before_anything_is_written(pictures, name, tmp_path):
    with pytest.raises(InputFileError, match=r"ends in \.png, \.svg, \.pdf, but got"):
        pictures["check"](tmp_path / name)
    assert list(tmp_path.iterdir()) == []


def test_missing_folder_is_refused_and_not_made(pictures, tmp_path):
    with pytest.raises(InputFileError, match="cannot be written"):
        pictures["profile"](tmp_path / "absent" / "a.png")
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("trouble", [OSError(28, "No space left on device"), KeyboardInterrupt()])
def test_trouble_while_writing_leaves_the_old_picture_and_no_litter(pictures, trouble, tmp_path, monkeypatch):
    path = pictures["check"](tmp_path / "a.png")
    before = path.read_bytes()

    def fail(_figure, target, **_options):
        target.write_bytes(b"half a pict")
        raise trouble

    monkeypatch.setattr(Figure, "savefig", fail)
    with pytest.raises((InputFileError, KeyboardInterrupt)):
        pictures["check"](path)
    assert path.read_bytes() == before
    assert [item.name for item in tmp_path.iterdir()] == ["a.png"]


def test_png_has_the_resolution_for_print(tmp_path):
    figure, _ = new_figure(2.0, 1.0)
    content = write_figure(figure, tmp_path / "a.png", title="t").read_bytes()
    assert struct.unpack(">II", content[16:24]) == (320, 160)
