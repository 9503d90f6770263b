"""Which words are processes, what the others are, and which names mean the same."""

from __future__ import annotations

import pytest

from revinf.evidence.vocabulary import Vocabulary, chosen_vocabulary, shipped_vocabulary
from revinf.exceptions import InputFileError
from revinf.knowledge import read_table

OWN = """term,kind,domain,synonyms
Juggling,process,motor control,throwing_balls;Ball juggling
Circus,population,,
"""


@pytest.fixture
def own(tmp_path):
    path = tmp_path / "kinds.csv"
    path.write_text(OWN, encoding="utf-8")
    return path


def test_every_shipped_process_is_a_process_with_a_domain():
    words = shipped_vocabulary()
    for row in read_table("processes"):
        assert words.kind(row["term"]) == "process"
        assert words.domain(row["term"]) == row["domain"] != ""
        assert words.counts_as_process(row["term"])
        assert words.what(row["term"]) == ""


def test_every_shipped_other_word_is_not_a_process_and_says_what_it_is():
    words = shipped_vocabulary()
    for row in read_table("term_kinds"):
        assert words.kind(row["term"]) == "not a process"
        assert words.what(row["term"]) == row["kind"] != ""
        assert not words.counts_as_process(row["term"])
        assert words.domain(row["term"]) == ""


def test_unknown_word_counts_as_process_and_is_marked_unknown():
    words = shipped_vocabulary()
    assert words.kind("wool gathering by night") == "unknown"
    assert words.counts_as_process("wool gathering by night")
    assert words.names_of("wool gathering by night") == {"wool gathering by night"}


def test_synonyms_name_each_other_and_share_kind_and_domain():
    words = shipped_vocabulary()
    names = words.names_of("theory of mind")
    assert {"theory of mind", "mentalising", "mentalizing"} <= names
    for name in names:
        assert words.names_of(name) == names
        assert (words.kind(name), words.domain(name)) == ("process", "social cognition")


def test_no_shipped_name_means_two_processes():
    words = shipped_vocabulary()
    for row in read_table("processes"):
        for name in words.names_of(row["term"]):
            assert row["term"] in words.names_of(name)


@pytest.mark.parametrize("word", ["verbal material", "nonverbal material", "visual presentation",
                                  "auditory presentation", "task-induced deactivation"])  # fmt: skip
def test_the_labels_of_the_open_coordinates_that_are_no_processes_are_known(word):
    assert shipped_vocabulary().kind(word) == "not a process"


def test_a_name_that_sounds_alike_leads_to_the_term_that_owns_it():
    words = shipped_vocabulary()
    assert words.sounding_like("mentalisin", ["pain", "theory of mind"]) == ["theory of mind"]
    assert words.sounding_like("qqqqqq", ["pain", "theory of mind"]) == []


def test_own_table_replaces_the_shipped_one_as_a_whole(own):
    words = chosen_vocabulary(own)
    assert words.kind("juggling") == "process"
    assert words.domain("throwing balls") == "motor control"
    assert words.names_of("ball juggling") == {"juggling", "throwing balls", "ball juggling"}
    assert words.what("circus") == "population"
    assert words.kind("theory of mind") == "unknown"


def test_own_table_needs_neither_domain_nor_synonyms(tmp_path):
    path = tmp_path / "kinds.csv"
    path.write_text("\ufeffterm,kind\njuggling,Process\n", encoding="utf-8")
    words = Vocabulary.read(path)
    assert (words.kind("juggling"), words.domain("juggling")) == ("process", "")


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (b"", "kinds.csv:1: column 'term' is missing"),
        (b"term,domain\nfear,emotion\n", "kinds.csv:1: column 'kind' is missing"),
        (b"kind\nprocess\n", "kinds.csv:1: column 'term' is missing"),
        (
            b"term,kind\nfear,process\nFear,process\n",
            "kinds.csv:3: term 'fear' is empty, has no kind, or stands",
        ),
        (b"term,kind\n,process\n", "kinds.csv:2: term ''"),
        (b"term,kind\nfear,\n", "kinds.csv:2: term 'fear'"),
        (b"term,kind\nfear\n", "kinds.csv:2: term 'fear'"),
        (b"term,kind\nf\xffar,process\n", "cannot be read (not UTF-8 text)"),
    ],
)
def test_own_table_that_cannot_be_used_is_refused_with_its_line(tmp_path, content, words):
    path = tmp_path / "kinds.csv"
    path.write_bytes(content)
    with pytest.raises(InputFileError) as caught:
        chosen_vocabulary(path)
    assert words in str(caught.value)
    assert "\n" not in str(caught.value)


def test_missing_own_table_is_refused(tmp_path):
    with pytest.raises(InputFileError, match="cannot be read"):
        chosen_vocabulary(tmp_path / "absent.csv")
