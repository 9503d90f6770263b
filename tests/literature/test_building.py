"""Building: equal builds are equal bytes, the list of refused rows, and what the folder says of itself."""

from __future__ import annotations

import csv
import json

import pytest

from revinf.exceptions import InputFileError
from revinf.literature.literature import Literature
from revinf.literature.manifest import Description

PEAKS = "study,x,y,z\na,1,-2,3\nb,4,-5,6\n"
BAD = PEAKS + 'b,1,2,?\n"c, the third",1,2,\n'
LIST = "file,line,reason,row\n"


def content(folder):
    """Return the bytes of every file of a folder by name."""
    return {path.name: path.read_bytes() for path in sorted(folder.iterdir())}


def test_building_twice_gives_byte_identical_folders(building, tmp_path):
    building(BAD, out="one")
    refused = (tmp_path / "refused.csv").read_bytes()
    building(BAD, out="two")
    assert content(tmp_path / "one") == content(tmp_path / "two")
    assert (tmp_path / "refused.csv").read_bytes() == refused


def test_shuffled_rows_change_neither_arrays_nor_fingerprint(building, tmp_path):
    one, _ = building(PEAKS, "study,term\na,fear\nb,pain\n", out="one")
    two, _ = building("study,x,y,z\nb,4,-5,6\na,1,-2,3\n", "study,term\nb,pain\na,fear\n", out="two")
    assert one.fingerprint == two.fingerprint
    assert content(tmp_path / "one") == content(tmp_path / "two")


def test_the_built_literature_reads_back_what_was_imported(building):
    literature, report = building(PEAKS, "study,term\na,fear\nb,pain\nb,fear\n")
    assert (literature.n_studies, literature.n_peaks, literature.n_terms) == (2, 2, 2)
    assert literature.study_ids == ["a", "b"]
    assert literature.terms == ["fear", "pain"]
    assert literature.term_totals.tolist() == [2, 1]
    assert literature.studies_with("Fear").tolist() == [0, 1]
    assert literature.manifest.report == json.loads(json.dumps(report.to_dict()))


def test_the_summary_says_what_the_literature_is(building):
    literature, _ = building(BAD, group=None)
    summary = literature.summary()
    assert summary["invented"] is True
    assert summary["peaks_per_study"] == {"lowest": 1, "median": 1.0, "highest": 1}
    assert summary["import"]["refused"] == [
        {"file": "peaks.csv", "reason": "z is not a finite number", "rows": 1, "first_lines": [4]},
        {"file": "peaks.csv", "reason": "z is empty", "rows": 1, "first_lines": [5]},
    ]
    json.dumps(summary, allow_nan=False)


def test_nothing_in_the_folder_names_a_path_of_the_machine(building, tmp_path):
    building(BAD)
    assert str(tmp_path).encode() not in b"".join(content(tmp_path / "literature").values())


def test_the_grouping_is_kept_with_the_literature(building):
    grouped = "study,x,y,z,paper\na,1,-2,3,P\nb,4,-5,6,P\n"
    merged, _ = building(grouped, group="paper")
    assert merged.manifest.merged_by == "paper"
    assert merged.study_ids == ["P"]
    assert building(PEAKS)[0].manifest.merged_by is None


def test_a_literature_without_a_single_peak_answers(building):
    literature, _ = building("study,x,y,z\n", keep_empty=True)
    from revinf.spaces.spheres import sphere

    assert (literature.n_studies, literature.n_peaks) == (3, 0)
    assert literature.studies_hitting(sphere((0, 0, 0), 200)).tolist() == []


def test_many_kinds_of_text_survive(building):
    names = ["Ünlü", "a;b", "日本", "🧠", 'quo"te']
    rows = "".join('"{}",1,-2,3\n'.format(name.replace('"', '""')) for name in names)
    terms = "".join('"{}",{}\n'.format(name.replace('"', '""'), f"term {name[0]}") for name in names)
    literature, _ = building("study,x,y,z\n" + rows, "study,term\n" + terms)
    assert literature.study_ids == sorted(names)


def test_refused_rows_are_listed_beside_the_output(building, tmp_path):
    building(BAD, out="deep/literature")
    with (tmp_path / "deep" / "refused.csv").open(encoding="utf-8", newline="") as stream:
        assert list(csv.reader(stream)) == [
            ["file", "line", "reason", "row"],
            ["peaks.csv", "4", "z is not a finite number", "b,1,2,?"],
            ["peaks.csv", "5", "z is empty", "c, the third,1,2,"],
        ]
    assert sorted(path.name for path in (tmp_path / "deep").iterdir()) == ["literature", "refused.csv"]


def test_an_old_list_of_ours_goes_when_nothing_is_refused(building, tmp_path):
    building(BAD)
    assert (tmp_path / "refused.csv").read_text().startswith(LIST)
    building(PEAKS)
    assert not (tmp_path / "refused.csv").exists()


@pytest.mark.parametrize("text", ["", "applicant,reason\nx,late\n", LIST.replace("row", "rows"), "file,line"])
def test_somebody_elses_refused_csv_is_never_touched(building, tmp_path, text):
    (tmp_path / "refused.csv").write_text(text)
    building(PEAKS)
    with pytest.raises(InputFileError, match=r"refused\.csv: 2 refused rows .* not a list of ours"):
        building(BAD, out="other")
    assert (tmp_path / "refused.csv").read_text() == text
    assert not (tmp_path / "other").exists()


def test_a_folder_named_refused_csv_is_in_the_way(building, tmp_path):
    (tmp_path / "refused.csv").mkdir()
    with pytest.raises(InputFileError, match="not a list of ours"):
        building(BAD)


def test_reasons_are_counted_with_their_first_lines(building):
    _, report = building(PEAKS + "b,?,2,3\n" * 7 + ",1,2,3\n")
    assert report.by_reason() == [
        ("peaks.csv", "x is not a finite number", 7, (4, 5, 6, 7, 8)),
        ("peaks.csv", "empty study id", 1, (11,)),
    ]


def test_the_description_stands_in_the_manifest(invented_literature):
    stated = Literature.open(invented_literature.folder).description
    assert stated == Description(name="tiny invented literature", source="invented for tests", invented=True)
    assert "8 studies (here: studies), 10 peaks, 3 terms" in repr(invented_literature)
