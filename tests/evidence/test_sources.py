"""Literature, mask, table, nearest region: different ways to the same counts give the same digits."""

from __future__ import annotations

import nibabel as nib
import numpy as np
import pytest

from revinf.base_rates.places import NamedPlace
from revinf.base_rates.table import BaseRateTable
from revinf.base_rates.table_rows import write_table
from revinf.base_rates.tabulate import tabulate
from revinf.evidence.assess import assess
from revinf.evidence.claim import Claim
from revinf.evidence.source_choice import ENVIRONMENT, choose_source
from revinf.evidence.sources import LiteratureSource, TableSource
from revinf.evidence.term_list import list_terms
from revinf.exceptions import InputFileError, InvalidClaimError, LiteratureError, SpaceError
from revinf.spaces.spheres import sphere

A, B = (-40.0, 20.0, 10.0), (30.0, -60.0, 40.0)
NUMBERS = ("counts", "rates", "likelihood_ratio", "posterior", "posterior_at_prevalence", "required_prior",
           "association")  # fmt: skip


@pytest.fixture
def box(tmp_path):
    """Write a mask of 2 mm voxels whose centres lie within `half_mm` of a point along each axis."""

    def write(centre, half_mm, name="box.nii.gz"):
        shape, affine = (
            (91, 109, 91),
            np.array([[2, 0, 0, -90], [0, 2, 0, -126], [0, 0, 2, -72], [0, 0, 0, 1.0]]),
        )
        ijk = np.stack(np.meshgrid(*(np.arange(n) for n in shape), indexing="ij"), axis=-1)
        xyz = ijk @ affine[:3, :3].T + affine[:3, 3]
        inside = (np.abs(xyz - centre) <= half_mm).all(axis=-1).astype(np.uint8)
        image = nib.Nifti1Image(inside, affine)
        image.header.set_sform(affine, code=4)
        nib.save(image, tmp_path / name)
        return tmp_path / name

    return write


@pytest.fixture(scope="module")
def table(invented_literature, tmp_path_factory):
    """The tiny literature tabulated at A and B, written and read again."""
    path = tmp_path_factory.mktemp("table") / "counts.csv.gz"
    places = [NamedPlace("place A", sphere(A, 10)), NamedPlace("place B", sphere(B, 10))]
    assert write_table(tabulate(invented_literature, places), path) == 6
    return BaseRateTable.read(path)


@pytest.mark.parametrize(("centre", "half_mm"), [(A, 8), (B, 12)])
@pytest.mark.parametrize("term", ["invented naming", "invented reading", "invented waiting"])
def test_mask_with_the_same_peaks_answers_as_the_sphere(invented_literature, box, centre, half_mm, term):
    by_mask = assess(Claim(term=term, mask=box(centre, half_mm)), invented_literature).to_dict()
    by_sphere = assess(Claim(term=term, peaks=[centre]), invented_literature).to_dict()
    assert {name: by_mask[name] for name in NUMBERS} == {name: by_sphere[name] for name in NUMBERS}
    assert (by_mask["claim"]["region_kind"], by_sphere["claim"]["region_kind"]) == ("mask", "sphere")
    assert (by_mask["claim"]["peaks"], by_mask["claim"]["radius_mm"]) == ([], None)


def test_smaller_mask_holds_fewer_studies(invented_literature, box):
    answer = assess(Claim(term="invented naming", mask=box(A, 3)), invented_literature)
    assert answer.counts.as_tuple() == (2, 2, 0, 4)


def test_place_of_a_mask_is_its_name_size_and_centre(invented_literature, box):
    place = assess(Claim(term="invented naming", mask=box(A, 8)), invented_literature).place
    assert place.words == "mask box, 729 voxels, centre of gravity (-40, 20, 10)"
    assert (place.hemisphere, place.tissue, place.nearest) == ("left", None, None)


@pytest.mark.parametrize(("name", "centre"), [("place A", A), ("PLACE  b", B)])
@pytest.mark.parametrize("term", ["invented naming", "invented reading", "invented waiting"])
def test_table_made_from_a_literature_answers_in_the_same_digits(invented_literature, table, name, centre, term):
    direct = assess(Claim(term=term, peaks=[centre], prior=0.2), invented_literature).to_dict()
    for claim in (Claim(term=term, region=name, prior=0.2), Claim(term=term, peaks=[centre], prior=0.2)):
        tabled = assess(claim, table).to_dict()
        assert {part: tabled[part] for part in NUMBERS} == {part: direct[part] for part in NUMBERS}
        assert tabled["literature"]["invented"]
        assert tabled["literature"]["n_studies"] == direct["literature"]["n_studies"] == 8
        assert tabled["literature"]["n_peaks"] is None


@pytest.mark.parametrize(
    ("peak", "region", "distance"),
    [(A, "place A", 0.0), ((-43, 24, 10), "place A", 5.0), ((30, -60, 50), "place B", 10.0)],
)
def test_nearest_region_of_a_table_answers_and_says_how_far_it_is(table, peak, region, distance):
    answer = assess(Claim(term="invented naming", peaks=[peak]), table).to_dict()
    assert answer["place"]["table_region"] == {
        "region": region,
        "centre": list(A if region == "place A" else B),
        "distance_mm": distance,
    }
    assert answer["claim"]["peaks"] == [[float(value) for value in peak]]
    assert answer["claim"]["region_kind"] == "table"


def test_peak_beyond_the_radius_of_the_nearest_region_is_refused(table):
    with pytest.raises(SpaceError, match=r"the nearest place of the table 'counts' is 10\.1 mm away"):
        assess(Claim(term="invented naming", peaks=[(30, -60, 50.1)]), table)


def test_talairach_peak_is_compared_with_a_table_in_mni(table):
    from revinf.spaces.transforms import mni_to_talairach

    peak = mni_to_talairach(A, "spm").tolist()
    answer = assess(Claim(term="invented naming", peaks=[peak], space="TAL", transform="spm"), table)
    assert answer.place.table_region.region == "place A"
    assert answer.place.table_region.distance_mm <= 0.1
    assert answer.claim.space == "Talairach"


@pytest.mark.parametrize(
    ("place", "words"),
    [
        (
            {"region": "place A"},
            "region 'place A' names a place of a table; a literature needs a peak or a mask",
        ),
    ],
)
def test_literature_refuses_the_name_of_a_table_region(invented_literature, place, words):
    with pytest.raises(InvalidClaimError, match=words):
        assess(Claim(term="invented naming", **place), invented_literature)


def test_table_refuses_a_mask(table, box):
    with pytest.raises(InvalidClaimError, match="a base-rate table has no peaks to put into a mask"):
        assess(Claim(term="invented naming", mask=box(A, 8)), table)


def test_table_without_coordinates_asks_for_the_name_of_its_region(table_of):
    with pytest.raises(SpaceError, match="gives no coordinates; name the region with --region"):
        assess(Claim(term="pain", peaks=[A]), table_of((1, 2, 3, 4), at=None))


def test_unknown_region_is_refused_with_the_regions_that_look_like_it(table):
    with pytest.raises(SpaceError, match="has no region 'plaice A'; it has 2, such as 'place A'"):
        assess(Claim(term="invented naming", region="plaice A"), table)


def test_table_source_answers_as_the_table_itself(table):
    claim = Claim(term="invented naming", region="place A")
    assert assess(claim, TableSource(table)).to_dict() == assess(claim, table).to_dict()


def test_literature_source_answers_as_the_literature_itself(invented_literature):
    claim = Claim(term="invented naming", peaks=[A])
    assert (
        assess(claim, LiteratureSource(invented_literature)).to_dict() == assess(claim, invented_literature).to_dict()
    )


def test_named_literature_beats_the_environment_and_the_environment_the_shipped_table(invented_literature):
    folder = str(invented_literature.folder)
    assert choose_source(folder, None, {ENVIRONMENT: "nowhere"}).facts.kind == "literature"
    assert choose_source(None, None, {ENVIRONMENT: folder}).facts.name == "tiny invented literature"
    assert choose_source(None, None, {ENVIRONMENT: ""}).facts.kind == "shipped table"
    assert choose_source(None, None, {}).facts.name == "open base rates"


def test_named_table_beats_the_environment(tmp_path, invented_literature):
    path = tmp_path / "own.csv"
    path.write_text("region,term,term_active,term_total,other_active,other_total\nx,pain,1,2,3,4\n")
    source = choose_source(None, path, {ENVIRONMENT: str(invented_literature.folder)})
    assert (source.facts.name, source.facts.kind, source.facts.n_studies) == ("own", "table", 6)


def test_two_sources_are_refused(tmp_path):
    with pytest.raises(InvalidClaimError, match="give --literature or --table, not both"):
        choose_source(tmp_path, tmp_path / "t.csv", {})


def test_source_that_is_not_there_is_refused(tmp_path):
    with pytest.raises(LiteratureError, match="there is no such literature folder"):
        choose_source(None, None, {ENVIRONMENT: str(tmp_path / "absent")})
    with pytest.raises(InputFileError, match="there is no such file"):
        choose_source(None, tmp_path / "absent.csv", {})


def test_terms_are_listed_by_number_of_studies_then_name(invented_literature):
    found = list_terms(LiteratureSource(invented_literature))
    assert [(row.term, row.n_studies) for row in found.rows] == [
        ("invented naming", 4),
        ("invented waiting", 4),
        ("invented reading", 2),
    ]
    assert {row.kind for row in found.rows} == {"unknown"}


@pytest.mark.parametrize(
    ("query", "found"),
    [
        ("theory", ["theory of mind", "non-story theory of mind", "story-based theory of mind"]),
        ("Mentalising", ["theory of mind"]),
        ("spatial cognition", ["navigation"]),
        ("zzz", []),
    ],
)
def test_terms_are_found_by_part_synonym_or_domain(query, found):
    assert [row.term for row in list_terms(choose_source(None, None, {}), query).rows] == found


def test_terms_that_look_like_the_query_are_named_where_none_match():
    found = list_terms(choose_source(None, None, {}), "navigaton")
    assert (found.rows, found.near) == ((), ("navigation",))
    assert found.to_dict() == {"query": "navigaton", "terms": [], "near": ["navigation"]}
