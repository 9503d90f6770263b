"""The invented scenario is what its README promises, by plain counting that shares no code with it."""

from __future__ import annotations

import csv
import subprocess
import sys
from collections import Counter, defaultdict
from functools import cache
from itertools import combinations
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray

ROOT = Path(__file__).resolve().parents[2]
DEMO = ROOT / "demo"
WRITTEN = ("peaks.csv", "annotations.csv", "studies.csv", "claims.csv", "manuscript.md")
# MNI152 -> Talairach, pooled: Lancaster et al. 2007, Hum Brain Mapp 28:1194-1205.
TO_TALAIRACH = np.array(
    [
        [0.9357, 0.0029, -0.0072, -1.0423],
        [-0.0065, 0.9396, -0.0726, -1.3940],
        [0.0103, 0.0752, 0.8967, 3.6475],
        [0, 0, 0, 1],
    ]
)
INSULA, CINGULATE = (36.0, 22.0, -2.0), (2.0, 18.0, 46.0)
FEAR_PLACE, NAVIGATION_PLACE = (-22.0, -4.0, -18.0), (26.0, -38.0, -12.0)
UNITS = ("study", "group")
Point = tuple[float, float, float]
# claim: term studies that hit and that do not, other studies that hit and that do not; counted
# when the scenario was made, so that README, reports and tests elsewhere may quote them.
COUNTS = {
    ("c01", "study"): (18, 8, 18, 596),
    ("c02", "study"): (12, 12, 20, 596),
    ("c03", "study"): (8, 22, 156, 454),
    ("c04", "study"): (0, 21, 158, 461),
    ("c05", "study"): (2, 1, 45, 592),
    ("c06", "study"): (1, 3, 33, 603),
    ("c07", "study"): (2, 14, 20, 604),
    ("c08", "study"): (0, 24, 0, 616),
    ("c09", "study"): (4, 11, 38, 587),
    ("c10", "study"): (17, 19, 45, 559),
    ("c11", "study"): (15, 6, 16, 603),
    ("c01", "group"): (12, 3, 17, 268),
    ("c02", "group"): (9, 2, 19, 270),
    ("c03", "group"): (9, 7, 127, 157),
    ("c04", "group"): (2, 11, 126, 161),
    ("c05", "group"): (2, 1, 37, 260),
    ("c06", "group"): (1, 3, 33, 263),
    ("c07", "group"): (1, 7, 20, 272),
    ("c08", "group"): (0, 15, 0, 285),
    ("c09", "group"): (6, 6, 32, 256),
    ("c10", "group"): (12, 7, 42, 239),
    ("c11", "group"): (9, 1, 16, 274),
}


@cache
def rows_of(path: Path) -> tuple[dict[str, str], ...]:
    with path.open(encoding="utf-8", newline="") as handle:
        return tuple(csv.DictReader(handle))


@cache
def process_terms() -> frozenset[str]:
    return frozenset(row["term"] for row in rows_of(ROOT / "data_tables" / "processes.csv"))


def mni(row: dict[str, str]) -> NDArray[np.float64]:
    point = np.array([float(row[axis]) for axis in "xyz"])
    if row["space"] == "TAL":
        point = np.linalg.solve(TO_TALAIRACH, np.array([*point, 1.0]))[:3]
    return np.round(point, 1)


@cache
def counted(unit: str) -> tuple[dict[str, NDArray[np.float64]], dict[str, set[str]]]:
    """Peaks and terms of every study, or every group, that has both."""
    group_of = {row["study"]: row["group"] for row in rows_of(DEMO / "studies.csv")}
    points, terms = defaultdict(list), defaultdict(set)
    for row in rows_of(DEMO / "peaks.csv"):
        points[row["study"] if unit == "study" else group_of[row["study"]]].append(mni(row))
    for row in rows_of(DEMO / "annotations.csv"):
        name = row["study"] if unit == "study" else group_of[row["study"]]
        terms[name].add(row["term"])
    both = sorted(points.keys() & terms.keys())
    return {name: np.array(points[name]) for name in both}, {name: terms[name] for name in both}


def hits(unit: str, place: Point, radius_mm: float = 10.0) -> set[str]:
    peaks, _ = counted(unit)
    squares = {name: ((points - place) ** 2).sum(axis=1) for name, points in peaks.items()}
    return {name for name, values in squares.items() if values.min() <= radius_mm**2 + 1e-9}


def carriers(unit: str) -> dict[str, set[str]]:
    found: dict[str, set[str]] = defaultdict(set)
    for name, terms in counted(unit)[1].items():
        for term in terms:
            found[term].add(name)
    return found


def table(unit: str, term: str, active: set[str]) -> tuple[int, int, int, int]:
    having, everyone = carriers(unit)[term], set(counted(unit)[0])
    return (
        len(having & active),
        len(having - active),
        len(active - having),
        len(everyone - having - active),
    )


def share_of_processes_above(unit: str, place: Point, rate: float) -> float:
    active = hits(unit, place)
    rates = [len(names & active) / len(names) for term, names in carriers(unit).items() if term in process_terms()]
    return float(np.mean([value >= rate for value in rates]))


def claims() -> dict[str, list[dict[str, str]]]:
    found: dict[str, list[dict[str, str]]] = defaultdict(list)
    for row in rows_of(DEMO / "claims.csv"):
        found[row["claim"]].append(row)
    return found


def claim_counts(claim: str, unit: str) -> tuple[int, int, int, int]:
    rows = claims()[claim]
    active = set(counted(unit)[0])
    for row in rows:
        x, y, z = (float(value) for value in mni(row))
        active &= hits(unit, (x, y, z), float(row["radius_mm"]))
    return table(unit, rows[0]["term"], active)


def observed_ratio(counts: tuple[int, int, int, int]) -> float:
    n11, n10, n01, n00 = counts
    return (n11 / (n11 + n10)) / (n01 / (n01 + n00))


def test_a_fresh_run_writes_the_committed_bytes(tmp_path: Path) -> None:
    command = [sys.executable, "-B", str(DEMO / "make_demo.py"), str(tmp_path)]
    subprocess.run(command, check=True, capture_output=True)
    assert sorted(path.name for path in tmp_path.iterdir()) == sorted(WRITTEN)
    for name in WRITTEN:
        assert (tmp_path / name).read_bytes() == (DEMO / name).read_bytes(), name


def test_the_folder_is_small_enough_to_commit() -> None:
    kept = [path for path in DEMO.iterdir() if path.is_file()]
    assert sum(path.stat().st_size for path in kept) < 600_000


def test_there_are_640_usable_studies_of_300_papers_and_30_odd_ones() -> None:
    studies = {row["study"] for row in rows_of(DEMO / "studies.csv")}
    with_peaks = {row["study"] for row in rows_of(DEMO / "peaks.csv")}
    with_terms = {row["study"] for row in rows_of(DEMO / "annotations.csv")}
    assert (len(with_peaks & with_terms), len(counted("group")[0])) == (640, 300)
    assert len({row["group"] for row in rows_of(DEMO / "studies.csv")}) == 320
    assert (len(studies - with_terms), len(studies - with_peaks)) == (20, 10)
    assert with_peaks | with_terms == studies


def test_studies_carry_one_to_four_terms_and_three_to_25_peaks() -> None:
    n_terms = Counter(row["study"] for row in rows_of(DEMO / "annotations.csv"))
    n_peaks = Counter(row["study"] for row in rows_of(DEMO / "peaks.csv"))
    assert set(n_terms.values()) == {1, 2, 3, 4}
    assert (min(n_peaks.values()), max(n_peaks.values())) == (3, 25)


def test_every_term_is_known_and_many_domains_and_labels_occur() -> None:
    used = {row["term"] for row in rows_of(DEMO / "annotations.csv")}
    domains = {row["term"]: row["domain"] for row in rows_of(ROOT / "data_tables" / "processes.csv")}
    labels = {row["term"] for row in rows_of(ROOT / "data_tables" / "term_kinds.csv")}
    assert used <= set(domains) | labels
    assert len(used & set(domains)) >= 40
    assert len({domains[term] for term in used & set(domains)}) >= 10
    assert len(used - set(domains)) >= 15
    named = {row["term"] for row in rows_of(DEMO / "claims.csv")}
    for row in rows_of(DEMO / "claims.csv"):
        named |= {term for term in (row["context"] + ";" + row["rivals"]).split(";") if term}
    assert named <= used


def test_mni_peaks_stay_in_the_ranges_of_a_brain() -> None:
    points = np.array([mni(row) for row in rows_of(DEMO / "peaks.csv") if row["space"] == "MNI"])
    assert (points >= (-68, -104, -50)).all()
    assert (points <= (68, 72, 78)).all()
    every = np.array([mni(row) for row in rows_of(DEMO / "peaks.csv")])
    assert (every >= (-69, -105, -51)).all()  # Talairach rows were rounded to 1 mm
    assert (every <= (69, 73, 79)).all()


def test_about_forty_studies_are_in_talairach_space_and_a_study_keeps_to_one_space() -> None:
    spaces: dict[str, set[str]] = defaultdict(set)
    for row in rows_of(DEMO / "peaks.csv"):
        spaces[row["study"]].add(row["space"])
    assert all(len(found) == 1 for found in spaces.values())
    assert 35 <= sum(found == {"TAL"} for found in spaces.values()) <= 45


def test_some_peaks_are_decreases() -> None:
    signs = [float(row["stat"]) < 0 for row in rows_of(DEMO / "peaks.csv")]
    assert 0.01 < np.mean(signs) < 0.10


@pytest.mark.parametrize("place", [INSULA, CINGULATE])
@pytest.mark.parametrize(("unit", "rate"), [("study", 0.10), ("group", 0.20)])
def test_a_broad_place_is_hit_by_studies_of_nearly_all_processes(place: Point, unit: str, rate: float) -> None:
    assert share_of_processes_above(unit, place, rate) >= 0.80


@pytest.mark.parametrize("place", [FEAR_PLACE, NAVIGATION_PLACE])
@pytest.mark.parametrize(("unit", "rate"), [("study", 0.10), ("group", 0.20)])
def test_a_selective_place_is_not(place: Point, unit: str, rate: float) -> None:
    assert share_of_processes_above(unit, place, rate) <= 0.30


@pytest.mark.parametrize("unit", UNITS)
@pytest.mark.parametrize(("term", "place"), [("fear", FEAR_PLACE), ("navigation", NAVIGATION_PLACE)])
def test_the_process_of_a_selective_place_leads_there(term: str, place: Point, unit: str) -> None:
    active = hits(unit, place)
    rates = {
        name: len(having & active) / len(having)
        for name, having in carriers(unit).items()
        if name in process_terms() and len(having) >= 5
    }
    assert max(rates, key=lambda name: rates[name]) == term


@pytest.mark.parametrize("unit", UNITS)
def test_fear_and_threat_detection_are_the_only_kin(unit: str) -> None:
    having = {term: ids for term, ids in carriers(unit).items() if term in process_terms()}
    n_all = len(counted(unit)[0])
    kin = set()
    for one, other in combinations(sorted(having), 2):
        shared, n1, n2 = len(having[one] & having[other]), len(having[one]), len(having[other])
        if shared / min(n1, n2) >= 0.5 and shared * n_all / (n1 * n2) >= 1.5:
            kin.add((one, other))
    assert kin == {("fear", "threat detection")}


@pytest.mark.parametrize("unit", UNITS)
def test_rare_terms_stand_on_three_and_four_studies(unit: str) -> None:
    assert (len(carriers(unit)["humour"]), len(carriers(unit)["trust"])) == (3, 4)


@pytest.mark.parametrize(("claim", "unit"), sorted(COUNTS))
def test_claims_count_as_reported(claim: str, unit: str) -> None:
    assert claim_counts(claim, unit) == COUNTS[(claim, unit)]


@pytest.mark.parametrize("unit", UNITS)
def test_claims_come_out_differently(unit: str) -> None:
    assert observed_ratio(claim_counts("c01", unit)) > 5  # fear: supported
    assert 0.8 < observed_ratio(claim_counts("c03", unit)) < 1.5  # disgust: says nothing
    assert observed_ratio(claim_counts("c04", unit)) < 0.5  # autobiographical memory: against
    assert observed_ratio(claim_counts("c05", unit)) > 5  # humour: a large ratio from two hits


@pytest.mark.parametrize("unit", UNITS)
def test_the_product_overstates_the_pattern(unit: str) -> None:
    product = 1.0
    for row in claims()["c10"]:
        x, y, z = (float(value) for value in mni(row))
        product *= observed_ratio(table(unit, row["term"], hits(unit, (x, y, z))))
    assert product > 1.5 * observed_ratio(claim_counts("c10", unit))


def test_claims_ask_for_ten_millimetres_at_even_odds_and_one_is_a_pattern() -> None:
    assert {len(rows) for rows in claims().values()} == {1, 2}
    assert [claim for claim, rows in claims().items() if len(rows) == 2] == ["c10"]
    rows = rows_of(DEMO / "claims.csv")
    assert {(float(row["radius_mm"]), float(row["prior"])) for row in rows} == {(10.0, 0.5)}


def test_no_study_reports_exactly_a_claimed_peak() -> None:
    reported = {tuple(mni(row)) for row in rows_of(DEMO / "peaks.csv")}
    assert not reported & {tuple(mni(row)) for row in rows_of(DEMO / "claims.csv")}


def test_every_quote_stands_word_for_word_in_the_paragraph_it_names() -> None:
    discussion = (DEMO / "manuscript.md").read_text(encoding="utf-8").split("## Discussion\n\n")[1]
    paragraphs = discussion.split("\n\n")
    for row in rows_of(DEMO / "claims.csv"):
        number = int(row["location"].rsplit(" ", 1)[1])
        assert row["quote"] in paragraphs[number - 1]


def test_every_claimed_peak_stands_in_the_table_of_the_manuscript() -> None:
    text = (DEMO / "manuscript.md").read_text(encoding="utf-8")
    for row in rows_of(DEMO / "claims.csv"):
        assert f"| {row['region']} | {row['x']} | {row['y']} | {row['z']} | {row['space']} |" in text


def test_everything_says_it_is_invented() -> None:
    assert all(row["note"].startswith("invented") for row in rows_of(DEMO / "studies.csv"))
    assert all(row["study"].startswith("inv") for row in rows_of(DEMO / "peaks.csv"))
    assert "INVENTED" in (DEMO / "README.md").read_text(encoding="utf-8")[:200]
    assert "INVENTED" in (DEMO / "manuscript.md").read_text(encoding="utf-8")[:200]
