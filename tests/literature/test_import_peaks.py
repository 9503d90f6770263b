"""Peaks: what is refused with its line, what is noticed with its count, signs and spaces."""

from __future__ import annotations

import numpy as np
import pytest

from revinf.exceptions import InputFileError, SpaceError
from revinf.literature.import_peaks import HEAD_MM
from revinf.spaces.coordinates import to_tenths
from revinf.spaces.transforms import TRANSFORMS, talairach_to_mni

HEADER = "study,x,y,z\n"
GOOD = "a,1,-2,3\n"


@pytest.mark.parametrize(
    ("row", "reason"),
    [
        ("b,,2,3", "x is empty"),
        ("b,1,  ,3", "y is empty"),
        ("b,1,2", "z is empty"),
        ('b,"1,5",2,3', "x has a decimal comma; write a decimal point"),
        ('b,1,"−2,5",3', "y has a decimal comma; write a decimal point"),
        ("b,1,2,left", "z is not a finite number"),
        ("b,nan,2,3", "x is not a finite number"),
        ("b,1,inf,3", "y is not a finite number"),
        ("b,1,2,1e999", "z is not a finite number"),
        ("b,1 2,2,3", "x is not a finite number"),
        ("b,–5,2,3", "x is not a finite number"),  # a dash is not a minus
        (",1,2,3", "empty study id"),
        ("  ,1,2,3", "empty study id"),
        ("b,100.1,2,3", "x lies outside any head (-100 to 100 mm)"),
        ("b,-101,2,3", "x lies outside any head (-100 to 100 mm)"),
        ("b,1,110.5,3", "y lies outside any head (-140 to 110 mm)"),
        ("b,1,-141,3", "y lies outside any head (-140 to 110 mm)"),
        ("b,1,2,111", "z lies outside any head (-110 to 110 mm)"),
        ("b,1,2,-1e6", "z lies outside any head (-110 to 110 mm)"),
    ],
)
def test_a_row_that_cannot_be_used_is_refused_with_its_line(importing, refusals, row, reason):
    studies, report = importing(HEADER + GOOD + row + "\n" + GOOD)
    assert refusals(report) == [(3, reason)]
    assert (report.read["peaks.csv"], report.kept["peaks.csv"]) == (3, 2)
    assert studies.peak_tenths.tolist() == [[10, -20, 30]] * 2


def test_a_row_with_two_faults_is_refused_once_for_the_first(importing, refusals):
    assert refusals(importing(HEADER + GOOD + ",x,2,300\n")[1]) == [(3, "empty study id")]


@pytest.mark.parametrize("corner", [[low for low, _ in HEAD_MM], [high for _, high in HEAD_MM]])
def test_the_limits_of_the_head_belong_to_it(importing, corner):
    studies, report = importing(HEADER + GOOD + "a,{},{},{}\n".format(*corner))
    assert not report.refused
    assert [10 * value for value in corner] in studies.peak_tenths.tolist()


def test_refused_lines_are_right_after_blank_lines_and_cells_over_two_lines(importing, refusals):
    text = 'study,note,x,y,z\r\n\r\na,"one\r\ntwo",1,-2,3\r\n\r\nb,,?,2,3\r\nc,"x\r\ny",1,?,3\r\nb,,1,2,?\r\n'
    assert [line for line, _ in refusals(importing(text)[1])] == [6, 7, 9]


def test_semicolons_with_decimal_commas_are_refused_by_name(importing, refusals):
    _, report = importing("study;x;y;z\na;1;-2;3\nb;1,5;2;3\n")
    assert refusals(report) == [(3, "x has a decimal comma; write a decimal point")]
    assert report.refused[0][3] == "b;1,5;2;3"


def test_where_no_row_is_left_the_error_says_why(importing):
    with pytest.raises(InputFileError, match="no study has both a peak and a term") as caught:
        importing("study;x;y;z\n" + "a;1,5;2;3\n" * 3 + "b;1;2;?\n")
    assert "rows refused: 4; most often, first at peaks.csv:2: x has a decimal comma" in str(caught.value)


def test_no_negative_coordinate_looks_like_voxel_indices(importing, notices):
    seen = notices(importing(HEADER + "a,10,20,30\nb,0,0,0\n")[1])
    assert "looks like voxel indices" in seen["all-non-negative"][0]
    assert "all-non-negative" not in notices(importing(HEADER + "a,10,20,30\nb,0,0,-1\n")[1])


def test_duplicate_rows_are_counted_with_their_lines_and_kept(importing, notices):
    text = HEADER + "a,1,-2,3\nb,1,-2,3\na,1.04,-2,3.0\na,1,-2,3\na,1,-2,4\n"
    studies, report = importing(text)
    message, lines = notices(report)["duplicate-rows"]
    assert "2 rows repeat a peak of the same study" in message
    assert lines == (4, 5)
    assert len(studies.peak_tenths) == 5


def test_a_byte_order_mark_is_noticed_and_skipped(importing, notices):
    studies, report = importing("\ufeff" + HEADER + GOOD)
    assert studies.study_ids == ["a"]
    assert "byte-order mark" in notices(report)["byte-order-mark"][0]
    assert "byte-order-mark" not in notices(importing(HEADER + GOOD)[1])


def test_typographic_minus_is_read_as_minus_and_counted(importing, notices):
    studies, report = importing(HEADER + "a,−40,\u2212 2,3\na,−40.5,−2,-3\n")
    assert studies.peak_tenths.tolist() == [[-405, -20, -30]]
    assert "4 typographic minus signs" in notices(report)["minus-signs"][0]
    assert [line for _, line, _, _ in report.refused] == [2]


def test_coordinates_are_rounded_to_a_tenth_halves_away_from_zero(importing):
    studies, _ = importing(HEADER + "a,0.35,-0.35,0.3499\n")
    assert studies.peak_tenths.tolist() == [[4, -4, 3]]


@pytest.mark.parametrize("word", ["TAL", "tal", "Talairach", " talairach "])
@pytest.mark.parametrize("transform", TRANSFORMS)
def test_talairach_rows_are_transformed_then_rounded(importing, notices, word, transform):
    rows = [(-40.25, 22.5, 8.75), (31, -58, -12), (0, 0, 0)]
    text = "study,x,y,z,space\n" + "".join("a,{},{},{},{}\n".format(*row, word) for row in rows)
    studies, report = importing(text + "a,-40,22,8,mni152\n", transform=transform)
    wanted = [*to_tenths(talairach_to_mni(rows, transform)).tolist(), [-400, 220, 80]]
    assert studies.peak_tenths.tolist() == sorted(wanted)
    message = notices(report)["talairach"][0]
    assert f"3 peaks in Talairach space brought to MNI152 by the {transform!r} transform" in message


def test_the_four_transforms_give_four_answers(importing):
    text = "study,x,y,z,space\na,-40,22,-28,TAL\n"
    answers = {tuple(importing(text, transform=name)[0].peak_tenths[0].tolist()) for name in TRANSFORMS}
    assert len(answers) == 4


def test_the_stated_space_of_all_coordinates_goes_over_the_column(importing, notices):
    text = "study,x,y,z,space\na,-40,22,8,TAL\nb,-40,22,8,nonsense\n"
    studies, report = importing(text, space="mni")
    assert studies.peak_tenths.tolist() == [[-400, 220, 80]] * 2
    assert "space-unstated" not in notices(report)
    moved = to_tenths(talairach_to_mni((-40, 22, 8))).tolist()
    assert importing(HEADER + "a,-40,22,8\n", space="Tal")[0].peak_tenths.tolist() == [moved]


def test_an_unknown_space_is_refused_and_an_empty_one_noticed(importing, refusals, notices):
    text = "study,x,y,z,space\na,1,-2,3,MNI\nb,1,2,3,voxels\nc,1,2,3,\nb,1,2,3,Colin27\n"
    _, report = importing(text)
    assert refusals(report) == [
        (3, "unknown space 'voxels'; write MNI152 or Talairach"),
        (5, "unknown space 'Colin27'; write MNI152 or Talairach"),
    ]
    assert "1 rows state no space" in notices(report)["space-unstated"][0]
    assert "2 rows state no space" in notices(importing(HEADER + GOOD * 2)[1])["space-unstated"][0]


def test_unknown_space_or_transform_options_fail_before_any_row(importing):
    with pytest.raises(SpaceError, match="space must be MNI152 or Talairach"):
        importing(HEADER + GOOD, space="voxels")
    with pytest.raises(SpaceError, match="transform must be one of pooled, spm, fsl, piecewise"):
        importing(HEADER + GOOD, transform="newest")


@pytest.mark.parametrize("row", ["b,100,0,0", "b,0,-140,0", "b,0,0,110"])
def test_a_talairach_row_that_leaves_the_head_by_the_transform_is_refused(importing, refusals, row):
    _, report = importing(f"study,x,y,z,space\na,1,-2,3,MNI\n{row},TAL\n")
    ((line, reason),) = refusals(report)
    assert line == 3
    assert "outside any head after the transform to MNI152" in reason


SIGNED = "study,x,y,z,stat\na,1,-2,3,4.5\na,2,-2,3,-3\nb,3,-2,3,−2.5\nb,4,-2,3,0\nc,5,-2,3,\nc,6,-2,3,high\n"


@pytest.mark.parametrize(
    ("sign", "kept", "left_out"),
    [("all", [1, 2, 3, 4, 5, 6], 0), ("positive", [1], 3), ("negative", [2, 3], 2)],
)
def test_peaks_are_selected_by_sign(importing, notices, refusals, sign, kept, left_out):
    studies, report = importing(SIGNED, sign=sign)
    assert sorted((studies.peak_tenths[:, 0] // 10).tolist()) == kept
    unsigned = [(line, "stat is not a number, so the sign is unknown") for line in (6, 7)]
    assert refusals(report) == (unsigned if sign != "all" else [])
    seen = notices(report)
    assert ("sign" in seen) == bool(left_out)
    if left_out:
        assert f"{left_out} peaks of the other sign left out" in seen["sign"][0]


def test_the_number_of_negative_peaks_is_told(importing, notices):
    seen = notices(importing(SIGNED)[1])
    assert "2 of the kept peaks have a negative statistic" in seen["negative-peaks"][0]
    assert "negative-peaks" not in notices(importing(SIGNED, sign="positive")[1])


def test_a_sign_without_a_statistic_is_an_error(importing):
    with pytest.raises(InputFileError, match="column 'stat' is missing"):
        importing(HEADER + GOOD, sign="positive")


@pytest.mark.parametrize("missing", ["study", "x", "y", "z"])
def test_a_missing_column_is_an_error(importing, missing):
    header = [name for name in ("study", "x", "y", "z") if name != missing]
    with pytest.raises(InputFileError, match=rf"peaks\.csv:1: column '{missing}' is missing"):
        importing(",".join(header) + "\na,1,2\n")


def test_arrays_have_the_promised_types(importing):
    studies, _ = importing(HEADER + GOOD)
    assert studies.peak_tenths.dtype == np.int16
    assert studies.peak_study.dtype == np.int32
