"""From a document to claims with linked places: the demo's paper, and small invented texts for each rule."""

from __future__ import annotations

import pytest

from revinf.knowledge import demo_folder
from revinf.manuscript.document import Block, Document
from revinf.manuscript.found import Scan
from revinf.manuscript.linking import FoundTriple
from revinf.manuscript.peaks_labels import read_labelled_peaks
from revinf.manuscript.reading import read_document
from revinf.manuscript.scanning import scan

DEMO = {
    ("fear", "left amygdala"),
    ("navigation", "right parahippocampal gyrus"),
    ("disgust", "right anterior insula"),
    ("autobiographical memory", "dorsal midcingulate cortex"),
    ("humour", "left fusiform gyrus"),
    ("trust", "right caudate nucleus"),
    ("motor learning", "left parietal cortex"),
    ("spatial attention", "right parietal cortex"),
    ("face perception", "right fusiform gyrus"),
    ("theory of mind", "right temporo-parietal junction"),
    ("theory of mind", "medial prefrontal cortex"),
    ("finger tapping", "left hand area"),
}


def found(*texts: str, peaks: list[FoundTriple] | None = None) -> Scan:
    return scan(Document(name="a", blocks=tuple(Block(kind="prose", text=text) for text in texts)), peaks=peaks or [])


def claims(*texts: str) -> list[tuple[str, str]]:
    return [(claim.term, place.label) for claim in found(*texts).claims for place in claim.places]


def kind(text: str) -> str:
    return found(text).sentences[-1].statement.kind


@pytest.mark.parametrize("ending", ["md", "docx", "pdf"])
def test_every_claim_of_the_demo_is_found_in_each_of_its_copies(ending: str) -> None:
    result = scan(read_document(demo_folder() / f"manuscript.{ending}"))
    pairs = {(claim.term, place.label) for claim in result.claims for place in claim.places}
    assert pairs >= DEMO
    assert len(result.triples) == 14
    assert {claim.term for claim in result.claims if claim.hedged} >= {"trust", "inner speech"}


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("The insula was active, suggesting disgust.", "claim"),
        ("Fear was inferred from the amygdala response.", "claim"),
        ("Because the insula was active, we conclude that viewers felt disgust.", "claim"),
        ("Consistent with fear, the left amygdala responded to every wave.", "claim"),
        ("Because nobody moved, this insula response must reflect disgust.", "claim"),
        ("The insula response suggests that readers found the menu repulsive.", "claim"),
        ("The insula response suggests an effect of sample size.", "none"),
        ("Storm scenes activated the left amygdala.", "forward"),
        ("The amygdala is known to signal fear.", "background"),
        ("We cannot conclude from the amygdala response that viewers felt fear.", "negated"),
        ("Activity in the insula does not imply disgust.", "negated"),
        ("Does activity in the insula reflect disgust?", "negated"),
        ("Earlier work interpreted the insula response as a sign of disgust.", "reported"),
        ("Twenty volunteers took part.", "none"),
    ],
)
def test_statements_are_told_apart(text: str, expected: str) -> None:
    assert kind(text) == expected


def test_a_claim_may_span_two_sentences_of_one_paragraph_only() -> None:
    first, second = "The left amygdala was active.", "This response suggests fear."
    assert claims(f"{first} {second}") == [("fear", "left amygdala")]
    assert claims(first, second) == []


def test_a_contrasted_place_and_a_rejected_process_are_left_out() -> None:
    assert claims("Unlike the insula, the amygdala was active, which suggests fear rather than disgust.") == [
        ("fear", "amygdala")
    ]


def test_abbreviations_that_the_text_explains_are_known_everywhere() -> None:
    text = "The nucleus accumbens (NX) was active in theory of mind (ToM) tasks. NX activity suggests ToM."
    assert claims(text) == [("theory of mind", "nucleus accumbens")]


def test_two_points_on_both_sides_make_a_pattern() -> None:
    result = found("Bilateral amygdala activity (-22, -4, -18 and 24, -2, -18) suggests fear.")
    assert [(p.label, p.link.xyz) for p in result.claims[0].places] == [
        ("left amygdala", (-22.0, -4.0, -18.0)),
        ("right amygdala", (24.0, -2.0, -18.0)),
    ]


def test_coordinates_are_left_empty_where_several_fit() -> None:
    text = "Peaks lay in the left amygdala (-22, -4, -18) and the left amygdala (-30, -2, -20)."
    result = found(text, "Much later, left amygdala activity suggests fear.")
    (place,) = result.claims[0].places
    assert place.link.xyz is None
    assert place.link.confidence == "none"


def test_a_peaks_table_fills_in_what_the_text_does_not_say(tmp_path) -> None:
    path = tmp_path / "peaks.csv"
    path.write_text("place,x,y,z,space\nL amygdala,-22,-4,-18,MNI\nright amygdala,24,-2,-18,MNI\n", encoding="utf-8")
    result = found("Left amygdala activity suggests fear.", peaks=read_labelled_peaks(path))
    link = result.claims[0].places[0].link
    assert (link.xyz, link.space, link.confidence) == ((-22.0, -4.0, -18.0), "MNI", "likely")


def test_terms_of_a_literature_are_spoken_as_it_has_them() -> None:
    document = Document(name="a", blocks=(Block(kind="prose", text="FFA activity suggests face perception."),))
    assert [claim.term for claim in scan(document, terms=["face recognition", "fear"]).claims] == ["face recognition"]


def test_a_process_that_no_table_lists_is_kept_in_its_own_words() -> None:
    (claim,) = found("Activity in the insula suggests quizzical appraisal.").claims
    assert (claim.term, claim.listed) == ("quizzical appraisal", False)


def test_methods_without_inference_give_no_claim() -> None:
    assert claims("The threshold for the amygdala was p < 0.001 and fear was rated from 1 to 9.") == []
