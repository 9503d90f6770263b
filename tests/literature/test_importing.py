"""Which studies count: terms and peaks, groups, null results, and that the order of rows does not matter."""

from __future__ import annotations

import random

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from revinf.exceptions import InputFileError
from revinf.literature.manifest import Description, Manifest
from revinf.literature.packing import pack_studies
from revinf.literature.store import array_entries

PEAKS = "study,x,y,z\na,1,-2,3\nb,4,-5,6\nb,5,-5,6\nc,7,-8,9\n"
TERMS = "study,term\na,fear\nb,pain\nb,fear\nd,rest\n"


def units(studies):
    """Return what each counted study has: peaks and terms by its id."""
    return {
        name: (
            studies.peak_tenths[studies.peak_study == i].tolist(),
            [studies.terms[t] for t in studies.annotation_term[studies.annotation_study == i]],
        )
        for i, name in enumerate(studies.study_ids)
    }


def test_studies_with_a_peak_and_a_term_count_and_the_others_are_told(importing, notices):
    studies, report = importing(PEAKS, TERMS)
    assert units(studies) == {
        "a": ([[10, -20, 30]], ["fear"]),
        "b": ([[40, -50, 60], [50, -50, 60]], ["fear", "pain"]),
    }
    assert dict(report.left_out) == {"without a term": 1, "without a peak": 1}
    assert "1 studies have peaks but no term" in notices(report)["studies-without-terms"][0]
    assert "1 studies have terms but no peak" in notices(report)["terms-without-peaks"][0]


def test_keep_empty_counts_studies_without_peaks_as_null_results(importing, notices):
    studies, report = importing(PEAKS, TERMS, keep_empty=True)
    assert units(studies)["d"] == ([], ["rest"])
    assert studies.study_ids == ["a", "b", "d"]
    assert dict(report.left_out) == {"without a term": 1, "without a peak": 0}
    assert "kept as null results" in notices(report)["terms-without-peaks"][0]


def test_a_study_whose_peaks_are_all_of_the_other_sign_has_no_peak(importing):
    peaks = "study,x,y,z,stat\na,1,-2,3,4\nb,4,-5,6,-4\n"
    assert importing(peaks, TERMS, sign="positive")[0].study_ids == ["a"]
    assert importing(peaks, TERMS, sign="positive", keep_empty=True)[0].study_ids == ["a", "b", "d"]


def test_different_ids_in_the_two_files_are_an_error(importing):
    with pytest.raises(InputFileError, match="check that the two files use the same study ids"):
        importing(PEAKS, "study,term\nA,fear\n")


def test_ids_are_compared_without_the_space_around_them(importing):
    assert importing("study,x,y,z\n a ,1,-2,3\n", 'study,term\n"a  ",fear\n')[0].study_ids == ["a"]


def test_columns_are_renamed_in_every_file(importing):
    studies, _ = importing(
        "experiment,mm_x,y,z\na,1,-2,3\n",
        "experiment,topic\na,fear\n",
        studies="experiment,paper doi\na,10.0/invented\n",
        rename={"study": "experiment", "x": "mm_x", "term": "topic", "doi": "paper doi"},
    )
    assert units(studies) == {"a": ([[10, -20, 30]], ["fear"])}
    assert studies.dois == ["10.0/invented"]


def test_dois_are_kept_and_a_study_named_twice_is_noticed(importing, notices, refusals):
    text = "study,doi\nb,10.0/b\na,\nb,10.0/a\nb,10.0/b\n,10.0/c\n"
    studies, report = importing(PEAKS, TERMS, studies=text)
    assert studies.dois == ["", "10.0/a; 10.0/b"]
    assert notices(report)["duplicate-rows"] == (
        "studies.csv: 2 rows name a study again; all its DOIs are kept",
        (4, 5),
    )
    assert refusals(report) == [(6, "empty study id")]


GROUPED = "study,x,y,z,paper\na,1,-2,3,P\nb,1,-2,3,P\nb,5,-5,6,P\nc,7,-8,9,Q\n"
GROUPED_TERMS = "study,term\na,fear\nb,pain\nb,fear\nc,rest\n"


def test_a_group_is_one_unit_with_all_peaks_and_terms_of_its_studies(importing):
    studies, _ = importing(GROUPED, GROUPED_TERMS, group="paper")
    assert studies.merged
    assert units(studies) == {
        "P": ([[10, -20, 30], [10, -20, 30], [50, -50, 60]], ["fear", "pain"]),
        "Q": ([[70, -80, 90]], ["rest"]),
    }
    assert studies.group_ids == ["P", "Q"]


def test_a_group_counts_if_one_study_has_its_peaks_and_another_its_terms(importing):
    terms = "study,term,paper\na,fear,P\nz,pain,P\n"
    studies, report = importing("study,x,y,z,paper\nb,1,-2,3,P\n", terms, group="paper")
    assert units(studies) == {"P": ([[10, -20, 30]], ["fear", "pain"])}
    assert dict(report.left_out) == {"without a term": 0, "without a peak": 0}


@pytest.mark.parametrize("where", ["peaks", "terms", "studies"])
def test_the_group_column_may_stand_in_any_file(importing, where):
    tables = {"peaks": "study,x,y,z\na,1,-2,3\nb,4,-5,6\n", "terms": "study,term\na,fear\nb,pain\n"}
    tables["studies"] = "study\na\nb\n"
    first, *rows = tables[where].splitlines()
    tables[where] = "\n".join([first + ",lab", *(row + ",L" for row in rows)]) + "\n"
    studies, _ = importing(tables["peaks"], tables["terms"], studies=tables["studies"], group="lab")
    assert studies.study_ids == ["L"]


def test_dois_of_a_group_are_those_of_its_studies(importing):
    text = "study,doi\na,10.0/x\nb,10.0/x\nc,10.0/z\n"
    assert importing(GROUPED, GROUPED_TERMS, studies=text, group="paper")[0].dois == ["10.0/x", "10.0/z"]


def test_a_group_column_without_merging_is_stored(importing):
    studies, _ = importing(GROUPED.replace("paper", "group"), GROUPED_TERMS)
    assert not studies.merged
    assert studies.study_ids == ["a", "b", "c"]
    assert studies.group_ids == ["P", "P", "Q"]


def test_studies_without_a_group_stay_themselves_and_are_told(importing, notices):
    text = GROUPED.replace("c,7,-8,9,Q", "c,7,-8,9,")
    studies, report = importing(text, GROUPED_TERMS, group="paper")
    assert studies.study_ids == ["P", "c"]
    assert "1 studies have no group" in notices(report)["ungrouped"][0]
    assert "group-named-like-study" not in notices(report)


def test_a_study_named_like_a_group_joins_it_and_is_told(importing, notices):
    text = GROUPED.replace("c,7,-8,9,Q", "P,7,-8,9,")
    studies, report = importing(text, GROUPED_TERMS, group="paper")
    assert studies.study_ids == ["P"]
    assert "such as 'P'" in notices(report)["group-named-like-study"][0]


@pytest.mark.parametrize(
    ("peaks", "studies", "place"),
    [
        ("study,x,y,z,group\na,1,-2,3,P\nb,1,-2,3,P\na,1,2,3,Q\n", None, r"peaks\.csv:4:group: "),
        ("study,x,y,z,group\na,1,-2,3,P\n", "study,group\na,Q\n", r"peaks\.csv: "),
        ("study,x,y,z\na,1,-2,3\n", "study,group\na,P\na,Q\n", r"studies\.csv:3:group: "),
    ],
)
def test_a_study_in_two_groups_is_an_error(importing, peaks, studies, place):
    with pytest.raises(InputFileError, match=place + "study 'a' is in two groups, '[PQ]' and '[PQ]'"):
        importing(peaks, TERMS, studies=studies)


def test_a_group_column_that_no_file_has_is_an_error(importing):
    with pytest.raises(InputFileError, match="no file has a filled column 'paper'"):
        importing(PEAKS, TERMS, group="paper")


def test_progress_is_told_rows_that_only_grow(tmp_path):
    from revinf.literature.import_options import ImportOptions
    from revinf.literature.importing import import_studies

    (tmp_path / "p.csv").write_text(PEAKS)
    (tmp_path / "t.csv").write_text(TERMS)
    told = []
    import_studies(
        ImportOptions(peaks=tmp_path / "p.csv", annotations=tmp_path / "t.csv"),
        lambda what, rows: told.append((what, rows)),
    )
    assert told == [("reading peaks", 4), ("reading annotations", 4)]


PEAK_ROWS = [
    *(
        f"s{i % 7},{i - 20}.{i % 10},{2 * i - 30},{i},{'TAL' if i % 3 else 'MNI'},{i - 9},g{i % 7 // 2}"
        for i in range(30)
    ),
    "s1,-20.0,-30,0,MNI,1,g0",
    "s1,1,?,0,MNI,1,g0",
    "z,1,2,3,MNI,1,",
]
LABEL_ROWS = [
    *(f"s{i % 7},{name},{i % 4}" for i, name in enumerate(["Fear", "pain", "fear", "b_c", "b c"] * 5)),
    "y,pain,1",
]
STUDY_ROWS = ["s0,10.0/a", "s0,10.0/b", "s1,10.0/a", "s2,", "s5,10.0/c"]


def arrays_of(importing, peak_rows, label_rows, study_rows, **options):
    """Return the packed arrays and the fingerprint that their manifest would state."""
    studies, _ = importing(
        "\n".join(["study,x,y,z,space,stat,group", *peak_rows]),
        "\n".join(["study,term,weight", *label_rows]),
        studies="\n".join(["study,doi", *study_rows]),
        **options,
    )
    arrays = pack_studies(studies)
    manifest = Manifest(
        description=Description(name="invented", invented=True),
        counts={},
        merged_by=None,
        arrays=array_entries(arrays),
        built_with={},
        report={},
    )
    return {name: array.tobytes() for name, array in arrays.items()}, manifest.fingerprint


@settings(max_examples=15, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(
    seed=st.integers(0, 2**32),
    group=st.sampled_from([None, "group"]),
    sign=st.sampled_from(["all", "positive", "negative"]),
)
def test_shuffled_rows_give_byte_identical_arrays_and_fingerprint(importing, seed, group, sign):
    shuffler = random.Random(seed)
    rows = (PEAK_ROWS, LABEL_ROWS, STUDY_ROWS)
    shuffled = [shuffler.sample(table, len(table)) for table in rows]
    options = {"group": group, "sign": sign}
    assert arrays_of(importing, *rows, **options) == arrays_of(importing, *shuffled, **options)


def test_another_peak_gives_another_fingerprint(importing):
    changed = [PEAK_ROWS[0].replace("s0,-20.0", "s0,-20.1"), *PEAK_ROWS[1:]]
    assert changed != PEAK_ROWS
    before = arrays_of(importing, PEAK_ROWS, LABEL_ROWS, STUDY_ROWS)
    after = arrays_of(importing, changed, LABEL_ROWS, STUDY_ROWS)
    assert before[1] != after[1]
