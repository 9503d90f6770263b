"""Write the invented demonstration literature: studies, peaks, labels, claims and a manuscript.

EVERYTHING IT WRITES IS INVENTED. Run `python make_demo.py` to write beside this file, or
`python make_demo.py FOLDER`. The seed is fixed: every run writes the same bytes. Needs numpy.
"""

from __future__ import annotations

import csv
import sys
from dataclasses import dataclass, field
from pathlib import Path

import numpy as np
from invented_manuscript import QUOTES, write_manuscript
from invented_world import (
    BROAD,
    BROAD_EXCEPTIONS,
    BUSY_PROCESS,
    CLAIM_COLUMNS,
    CLAIMS,
    FILLERS,
    FLUKE_DRAWN_AT,
    FLUKE_PLACE,
    KIN,
    KIN_RATE,
    LABELS,
    LABELS_OF_PROCESS,
    PAIR,
    PAIR_DECREASE_RATE,
    PROCESSES,
    RARE_TERMS,
    SELECTIVE_PLACES,
    Place,
)
from numpy.random import PCG64, Generator

SEED = 97
N_PAPERS, N_STUDIES = 300, 640  # papers with terms and peaks, and their studies
N_TERMLESS_PAPERS, N_PEAKLESS_PAPERS = 10, 10  # of two studies each, of one study each
N_TALAIRACH_PAPERS = 19
SECOND_THEME_RATE = 0.6
MAX_TERMS, MIN_PEAKS, MAX_PEAKS = 4, 3, 25
LOW, HIGH = np.array([-68, -104, -50]), np.array([68, 72, 78])
HEAD_CENTRE, HEAD_RADII = np.array([0.0, -17.0, 12.0]), np.array([69.0, 87.0, 64.0])
# MNI152 -> Talairach, pooled affine of Lancaster et al. 2007 (Hum Brain Mapp 28:1194-1205).
TO_TALAIRACH = np.array(
    [
        [0.9357, 0.0029, -0.0072, -1.0423],
        [-0.0065, 0.9396, -0.0726, -1.3940],
        [0.0103, 0.0752, 0.8967, 3.6475],
    ]
)
CLAIMED = {FLUKE_DRAWN_AT if place == FLUKE_PLACE else place for _, _, place, *_ in CLAIMS}
HOMES = tuple({place: None for _, homes in PROCESSES.values() for _, ps in homes for place in ps})
QUIET_PLACES = (*SELECTIVE_PLACES, *BROAD, FLUKE_DRAWN_AT)
PLACES = tuple(dict.fromkeys((*HOMES, *FILLERS, *BROAD)))


@dataclass(slots=True, kw_only=True)
class Study:
    """One invented experiment."""

    name: str
    group: str
    space: str = "MNI"
    processes: list[str] = field(default_factory=list)
    labels: list[str] = field(default_factory=list)
    peaks: list[tuple[Place, float]] = field(default_factory=list)
    note: str = "invented"


def main(folder: Path) -> None:
    """Write all files of the demonstration to a folder."""
    studies = _draw_literature(Generator(PCG64(SEED)))
    folder.mkdir(parents=True, exist_ok=True)
    peaks: list[list[object]] = []
    terms: list[list[object]] = []
    about: list[list[object]] = []
    for study in studies:
        peaks += [_peak_row(study, peak, stat) for peak, stat in study.peaks]
        terms += [[study.name, term] for term in (*study.processes, *study.labels)]
        about.append([study.name, study.group, _participants(study), study.note])
    _write(folder / "peaks.csv", ["study", "x", "y", "z", "space", "stat", "group"], peaks)
    _write(folder / "annotations.csv", ["study", "term"], terms)
    _write(folder / "studies.csv", ["study", "group", "n_participants", "note"], about)
    _write(folder / "claims.csv", list(CLAIM_COLUMNS), [_claim_row(index) for index in range(len(CLAIMS))])
    (folder / "manuscript.md").write_bytes(write_manuscript().encode())


def _draw_literature(rng: Generator) -> list[Study]:
    """Draw all papers, plant the rare terms, and give every study its peaks."""
    sizes = _paper_sizes(rng)
    deck = _theme_deck(rng)
    papers = [_draw_paper(rng, number, size, deck) for number, size in enumerate(sizes, start=1)]
    planted = _plant_rare_terms(rng, papers)
    for index in rng.permutation(N_PAPERS)[:N_TALAIRACH_PAPERS]:
        for study in papers[index]:
            study.space = "TAL"
    for paper in papers:
        even = rng.random() < 0.5  # half of the papers report on a 2 mm grid
        for study in paper:
            _draw_peaks(rng, study, planted.get(study.name), even)
    studies = [study for paper in papers for study in paper]
    studies += _odd_studies(rng)
    for study in studies:
        _move_fluke(study)
    return studies


def _move_fluke(study: Study) -> None:
    """Move the lucky hits of the rare term to the home of another process; keep clear of the claimed point."""
    step = np.array(FLUKE_PLACE) - np.array(FLUKE_DRAWN_AT)
    moved = []
    for place, stat in study.peaks:
        point = np.array(place)
        if RARE_TERMS[0][0] in study.processes and np.linalg.norm(point - FLUKE_DRAWN_AT) <= 10:
            point = point + step
        if tuple(point.tolist()) == FLUKE_PLACE:
            point = point + np.array([1, 0, 0])
        moved.append(((int(point[0]), int(point[1]), int(point[2])), stat))
    study.peaks = moved


def _paper_sizes(rng: Generator) -> list[int]:
    """Draw 1 to 4 studies a paper that sum to the number of studies."""
    sizes = 1 + np.searchsorted(np.cumsum([0.30, 0.37, 0.23]), rng.random(N_PAPERS))
    while (missing := N_STUDIES - int(sizes.sum())) != 0:
        index = int(rng.integers(N_PAPERS))
        sizes[index] = np.clip(sizes[index] + np.sign(missing), 1, 4)
    return [int(size) for size in sizes]


def _draw_paper(rng: Generator, number: int, size: int, deck: list[str]) -> list[Study]:
    """Draw what the studies of one paper are about."""
    themes = [deck.pop()]
    if rng.random() < SECOND_THEME_RATE:
        themes.append(deck.pop())
    if themes[0] == KIN[0] and rng.random() < KIN_RATE:
        themes.append(KIN[1])
    group = f"inv{number:03d}"
    paper = []
    for letter in "abcd"[:size]:
        processes = [themes[0]] + [term for term in themes[1:] if rng.random() < 0.75]
        if rng.random() < 0.1:
            processes.append(_draw_process(rng))
        study = Study(name=group + letter, group=group, processes=list(dict.fromkeys(processes))[:3])
        study.labels = _draw_labels(rng, study.processes)
        paper.append(study)
    return paper


def _theme_deck(rng: Generator) -> list[str]:
    """Return a shuffled deck of processes in proportion to their popularity.

    A deck and not independent draws: each process gets its share of the papers, and no popular one
    ends on two papers by bad luck.
    """
    names = list(PROCESSES)
    popularity = np.cumsum([PROCESSES[name][0] for name in names])
    n_cards = 2 * N_PAPERS
    steps = (np.arange(n_cards) + 0.5) / n_cards * popularity[-1]
    cards = np.searchsorted(popularity, steps)
    return [names[int(cards[index])] for index in rng.permutation(n_cards)]


def _draw_process(rng: Generator) -> str:
    """Draw one process, the popular ones more often."""
    names = list(PROCESSES)
    weights = np.cumsum([PROCESSES[name][0] for name in names])
    return names[int(np.searchsorted(weights, rng.random() * weights[-1]))]


def _draw_labels(rng: Generator, processes: list[str]) -> list[str]:
    """Draw the labels that are not processes, within the limit of terms a study."""
    labels = [label for term, label, rate in LABELS_OF_PROCESS if term in processes and rng.random() < rate]
    labels += [label for label, rate in LABELS.items() if rng.random() < rate]
    return list(dict.fromkeys(labels))[: MAX_TERMS - len(processes)]


def _plant_rare_terms(rng: Generator, papers: list[list[Study]]) -> dict[str, tuple[Place, bool]]:
    """Give each rare term to studies of different papers; say which of them hit its place."""
    single = [p[0] for p in papers if len(p) == 1 and len(p[0].processes) + len(p[0].labels) < 4]
    order = iter(rng.permutation(len(single)))
    planted: dict[str, tuple[Place, bool]] = {}
    for term, n_studies, n_hits, place in RARE_TERMS:
        hosts: set[str] = set()  # no two hosts share a process: the rare term has no kin
        for index in range(n_studies):
            study = next(single[i] for i in order if not hosts.intersection(single[i].processes))
            hosts.update(study.processes)
            study.processes.append(term)
            planted[study.name] = (place, index < n_hits)
    return planted


def _draw_peaks(rng: Generator, study: Study, planted: tuple[Place, bool] | None, even: bool) -> None:
    """Draw the peaks of one study: its homes, the broad places, and noise near other places."""
    wanted = np.exp(rng.normal(np.log(8.0), 0.45)) * (1.7 if BUSY_PROCESS in study.processes else 1)
    found: list[tuple[Place, float, int]] = []  # centre, spread in mm, sign
    for term in study.processes:
        for rate, places in PROCESSES.get(term, (0.0, ()))[1]:
            if rng.random() < rate:
                found += [(place, 4.0, 1) for place in places]
    for place, rate in BROAD.items():
        rates = [BROAD_EXCEPTIONS.get((term, place), rate) for term in study.processes]
        if rng.random() < min(rates, default=rate):
            found.append((place, 4.0, 1))
    if rng.random() < PAIR_DECREASE_RATE or "task-induced deactivation" in study.labels:
        found += [(place, 4.0, -1) for place in PAIR]
    if planted is not None and planted[1]:
        found.append((planted[0], 2.0, 1))
    n_peaks = int(np.clip(round(wanted), max(MIN_PEAKS, len(found)), MAX_PEAKS))
    while len(found) < n_peaks:
        place = PLACES[int(rng.integers(len(PLACES)))]
        if rng.random() < 0.25:
            place = (-place[0], place[1], place[2])
        if _is_quiet(place) and rng.random() < 0.7:
            continue
        found.append((place, 8.0, -1 if rng.random() < 0.03 else 1))
    for centre, spread, sign in found[:MAX_PEAKS]:
        stat = sign * (3.1 + float(rng.exponential(1.1)))
        study.peaks.append((_jitter(rng, centre, spread, even), round(stat, 2)))


def _is_quiet(place: Place) -> bool:
    """Say whether noise should mostly stay away, so that what was planted there stays visible."""
    distances = np.linalg.norm(np.array(QUIET_PLACES) - np.array(place), axis=1)
    return bool(distances.min() < 14)


def _jitter(rng: Generator, centre: Place, spread: float, even: bool) -> Place:
    """Draw a whole-millimetre place around a centre that lies inside a head-shaped ellipsoid."""
    while True:
        drawn = np.array(centre) + spread * rng.standard_normal(3)
        rounded = 2 * np.rint(drawn / 2) if even else np.rint(drawn)
        inside = (((rounded - HEAD_CENTRE) / HEAD_RADII) ** 2).sum() <= 1
        point = tuple(int(value) for value in rounded)
        # No study reports exactly a claimed peak: a claim should not be counted as its own evidence.
        if inside and (rounded >= LOW).all() and (rounded <= HIGH).all() and point not in CLAIMED:
            return (point[0], point[1], point[2])


def _odd_studies(rng: Generator) -> list[Study]:
    """Return studies without any term, and studies with terms but no peak."""
    odd = []
    for number in range(N_PAPERS + 1, N_PAPERS + N_TERMLESS_PAPERS + N_PEAKLESS_PAPERS + 1):
        group = f"inv{number:03d}"
        if number <= N_PAPERS + N_TERMLESS_PAPERS:
            for letter in "ab":
                study = Study(name=group + letter, group=group, note="invented; no term on purpose")
                _draw_peaks(rng, study, None, even=False)
                odd.append(study)
        else:
            study = Study(name=group + "a", group=group, note="invented; no peak on purpose")
            study.processes = [_draw_process(rng)]
            odd.append(study)
    return odd


def _participants(study: Study) -> int:
    """Return an invented sample size that depends on the paper's number only."""
    return 12 + (int(study.group[3:]) * 7919) % 37


def _peak_row(study: Study, peak: Place, stat: float) -> list[object]:
    """Return one row of the peaks table, in the space the study is given in."""
    if study.space == "TAL":
        moved = TO_TALAIRACH @ np.array([*peak, 1.0])
        peak = (round(float(moved[0])), round(float(moved[1])), round(float(moved[2])))
    return [study.name, *peak, study.space, f"{stat:.2f}", study.group]


def _claim_row(index: int) -> list[object]:
    """Return one row of the claims table with its quote and where the quote stands."""
    claim, term, place, space, context, rivals, region = CLAIMS[index]
    paragraph, quote = QUOTES[claim]
    location = f"manuscript.md, Discussion, paragraph {paragraph}"
    return [claim, term, *place, space, 10, 0.5, context, rivals, region, quote, location]


def _write(path: Path, columns: list[str], rows: list[list[object]]) -> None:
    """Write a CSV with the same line ends on every system."""
    with path.open("w", encoding="utf-8", newline="") as handle:
        writer = csv.writer(handle, lineterminator="\n")
        writer.writerow(columns)
        writer.writerows(rows)


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).resolve().parent)
