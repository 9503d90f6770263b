"""Precision and recall of the scan on the invented, labelled evaluation set.

Run from the checkout: ``python tests/manuscript/evaluate.py``; with ``--misses`` it also prints what was missed
and what was found too much in the part that may be tuned on. The part held apart is measured and never printed.
"""

from __future__ import annotations

import json
import sys
from collections import Counter
from collections.abc import Hashable, Iterable
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from revinf.manuscript.document import Block, Document
from revinf.manuscript.found import Scan
from revinf.manuscript.phrases import tokens
from revinf.manuscript.places import find_places
from revinf.manuscript.processes import shipped_processes
from revinf.manuscript.scanning import scan

SET = Path(__file__).with_name("evaluation_set.json")
PARTS = ("tuning", "held apart", "second tuning", "second held apart", "third tuning", "third held apart")


@dataclass
class Score:
    """How many were to be found, were found, and were right; and which were not."""

    wanted: int = 0
    found: int = 0
    right: int = 0
    missed: list[str] = field(default_factory=list)
    extra: list[str] = field(default_factory=list)

    @property
    def recall(self) -> float:
        return self.right / self.wanted

    @property
    def precision(self) -> float:
        return self.right / self.found

    def add(self, wanted: Iterable[Hashable], found: Iterable[Hashable], sentence: str) -> None:
        """Count the things of one sentence; a thing that stands there twice is to be found twice."""
        want, have = Counter(wanted), Counter(found)
        self.wanted += want.total()
        self.found += have.total()
        self.right += (want & have).total()
        self.missed += [f"{item}: {sentence}" for item in (want - have).elements()]
        self.extra += [f"{item}: {sentence}" for item in (have - want).elements()]


def paragraphs() -> list[dict[str, Any]]:
    content: dict[str, Any] = json.loads(SET.read_text(encoding="utf-8"))
    return list(content["paragraphs"])


def scanned(paragraph: dict[str, Any]) -> Scan:
    """Scan a paragraph as a document of its own, one block a sentence pair would see anyway."""
    text = " ".join(sentence["text"] for sentence in paragraph["sentences"])
    return scan(Document(name=paragraph["id"], blocks=(Block(kind="prose", text=text, section=paragraph["section"]),)))


def aligned(paragraph: dict[str, Any], found: Scan) -> list[int]:
    """Return, for each sentence that was found, the number of the labelled one in which it begins."""
    starts, position = [], 0
    for sentence in paragraph["sentences"]:
        starts.append(position)
        position += len(sentence["text"]) + 1
    text = " ".join(sentence["text"] for sentence in paragraph["sentences"])
    labels, position = [], 0
    for piece in found.sentences:
        position = text.index(piece.text, position)
        labels.append(sum(start <= position for start in starts) - 1)
        position += len(piece.text)
    return labels


def process_of(name: str) -> str:
    """Return our term for a label's process."""
    mentions = shipped_processes().find(tokens(name))
    return mentions[0].term if len(mentions) == 1 else name


def called(term: str, listed: bool, labels: set[str]) -> str:
    """Return the label that a process which the table does not list stands for, if it holds its words."""
    if not listed:
        words = set(term.split())
        for label in sorted(labels):
            if set(label.split()) <= words or words <= set(label.split()):
                return label
    return term


def place_of(name: str | None) -> str:
    """Return our name for a label's place."""
    mentions = find_places(name or "", tokens(name or ""))
    return mentions[0].place if mentions else (name or "")


def evaluate(part: str) -> dict[str, Score]:
    """Return the scores of a part: claims, coordinates, their places, and links of claims to coordinates."""
    scores = {
        name: Score()
        for name in ("claims (sentence)", "claims (process)", "coordinates", "places of coordinates", "links")
    }
    for paragraph in paragraphs():
        if paragraph["part"] != part:
            continue
        found = scanned(paragraph)
        labelled = aligned(paragraph, found)
        for number, sentence in enumerate(paragraph["sentences"]):
            own = [at for at, label in enumerate(labelled) if label == number]
            claims = [claim for claim in found.claims if claim.sentence in own]
            text = f"[{paragraph['id']}] {sentence['text']}"
            labels = {process_of(claim["process"]) for claim in sentence["claims"]}
            terms = {claim.id: called(claim.term, claim.listed, labels) for claim in claims}
            scores["claims (sentence)"].add(["claim"] * bool(labels), ["claim"] * bool(claims), text)
            scores["claims (process)"].add(labels, set(terms.values()), text)
            triples = [triple for at in own for triple in found.sentences[at].triples]
            wanted = [tuple(map(float, triple["xyz"])) for triple in sentence["triples"]]
            scores["coordinates"].add(wanted, [triple.xyz for triple in triples], text)
            owned = [(xyz, place_of(t["place"])) for xyz, t in zip(wanted, sentence["triples"], strict=True)]
            scores["places of coordinates"].add(owned, [(triple.xyz, triple.place) for triple in triples], text)
            links = {
                (process_of(claim["process"]), tuple(map(float, xyz)))
                for claim in sentence["claims"]
                for xyz in claim["coordinates"]
            }
            linked = {
                (terms[claim.id], place.link.xyz)
                for claim in claims
                for place in claim.places
                if place.link.xyz is not None
            }
            scores["links"].add(links, linked, text)
    return scores


def main() -> None:
    """Print the table."""
    print(f"{'part':18}{'what':24}{'wanted':>8}{'found':>8}{'right':>8}{'recall':>9}{'precision':>11}")
    for part in PARTS:
        for name, score in evaluate(part).items():
            print(
                f"{part:18}{name:24}{score.wanted:8}{score.found:8}{score.right:8}{score.recall:9.3f}{score.precision:11.3f}"
            )
            if part.endswith("tuning") and "--misses" in sys.argv:
                for kind, items in (("missed", score.missed), ("extra", score.extra)):
                    for item in items:
                        print(f"    {kind}: {item}")


if __name__ == "__main__":
    main()
