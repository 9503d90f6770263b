"""The open coordinates: sizes, and one place counted here by a plain loop over the text of the files.

Coordinates: Spreng, Mar & Kim 2009, J Cogn Neurosci 21:489-510; Mar 2011, Annu Rev Psychol 62:103-134;
Sevinc & Spreng 2014, PLoS ONE 9:e87427; Jackson 2021, NeuroImage 224:117444.
"""

from __future__ import annotations

import csv
from collections import defaultdict

from revinf.base_rates.counting import count_terms
from revinf.spaces.spheres import sphere


def test_every_row_of_the_open_coordinates_is_kept(open_literature):
    assert (open_literature.n_studies, open_literature.n_peaks, open_literature.n_terms) == (451, 5451, 13)
    report = open_literature.manifest.report
    assert report["refused"] == []
    assert report["read"] == report["kept"]
    assert report["read"] == {"experiments.csv": 451, "peaks.csv": 5451, "annotations.csv": 1081}
    assert open_literature.description.study_is == "experiments"


def test_theory_of_mind_at_the_right_temporo_parietal_junction(open_literature):
    counts = count_terms(open_literature, sphere((54, -54, 24), 10))
    assert counts.at(counts.terms.index("theory of mind")).as_tuple() == (15, 48, 17, 371)


def test_all_terms_at_several_places_equal_a_plain_loop_over_the_files(open_literature, open_coordinates):
    peaks, terms = defaultdict(list), defaultdict(set)
    with (open_coordinates / "peaks.csv").open(encoding="utf-8", newline="") as stream:
        for row in csv.DictReader(stream):
            assert row["space"] == "MNI"
            peaks[row["experiment"]].append([round(10 * float(row[axis])) for axis in "xyz"])
    with (open_coordinates / "annotations.csv").open(encoding="utf-8", newline="") as stream:
        for row in csv.DictReader(stream):
            terms[row["term"]].add(row["experiment"])
    for centre in ((54, -54, 24), (26, -36, -14), (-24, -36, -14), (-48, 26, 12), (0, 0, 0)):
        hits = {
            study
            for study, rows in peaks.items()
            if any(sum((p - 10 * c) ** 2 for p, c in zip(peak, centre, strict=True)) <= 100**2 for peak in rows)
        }
        counts = count_terms(open_literature, sphere(centre, 10))
        assert counts.terms == sorted(terms)
        for position, term in enumerate(counts.terms):
            carriers, others = terms[term], set(peaks) - terms[term]
            assert counts.at(position).as_tuple() == (
                len(carriers & hits),
                len(carriers - hits),
                len(others & hits),
                len(others - hits),
            )
