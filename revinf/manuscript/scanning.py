"""`scan`: the claims and the coordinates of a manuscript, for its reader to confirm."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import replace

from revinf.manuscript.cues import find_cues
from revinf.manuscript.document import Block, Document
from revinf.manuscript.found import FoundClaim, FoundSentence, LinkedPlace, Scan
from revinf.manuscript.inference import Inference, Reading, Statement
from revinf.manuscript.linking import FoundTriple, Link, link_place, owners
from revinf.manuscript.peaks_labels import labelled_place
from revinf.manuscript.phrases import Token, tokens
from revinf.manuscript.places import PlaceMention, defined_places, find_places
from revinf.manuscript.processes import ProcessMention, ProcessNames, defined_processes, shipped_processes
from revinf.manuscript.sentences import split_sentences
from revinf.manuscript.side_by_side import side_by_side
from revinf.manuscript.statements import read_statement
from revinf.manuscript.table_peaks import table_peak
from revinf.manuscript.triples import find_triples, space_said
from revinf.manuscript.unlisted import unlisted_processes

__all__ = ["scan"]


def scan(document: Document, *, peaks: Sequence[FoundTriple] = (), terms: Iterable[str] = ()) -> Scan:
    """Find the claims and the coordinates of a document.

    Parameters
    ----------
    document : Document
        From `revinf.read_document`.
    peaks : sequence of FoundTriple
        Of a labelled peaks table.
    terms : iterable of str
        Terms of the literature that will answer; a process is called as it calls it.

    Returns
    -------
    Scan
        For its reader to confirm.

    Examples
    --------
    >>> from revinf.manuscript.document import Block
    >>> text = "The left amygdala (-22, -4, -18) was active. This response suggests fear."
    >>> found = scan(Document(name="invented.txt", blocks=(Block(kind="prose", text=text),)))
    >>> [(claim.term, claim.places[0].label, claim.places[0].link.xyz) for claim in found.claims]
    [('fear', 'left amygdala', (-22.0, -4.0, -18.0))]
    """
    names = shipped_processes().speaking(terms) if terms else shipped_processes()
    raw = [(block, offset, text) for block in document.prose() for offset, text in split_sentences(block.text)]
    words = [tokens(text) for _, _, text in raw]
    places, processes = _definitions([text for _, _, text in raw], words, names)
    space = _document_space(document)
    sentences: list[FoundSentence] = []
    for number, ((block, offset, text), run) in enumerate(zip(raw, words, strict=True)):
        reading = Reading(
            text=text,
            places=find_places(text, run, places),
            processes=_processes(text, run, names, processes),
            cues=find_cues(text),
        )
        before = sentences[-1].reading if sentences and raw[number - 1][0] is block else None
        location = _location(document, block, offset)
        sentences.append(
            FoundSentence(
                text=text,
                location=location,
                section=block.section,
                reading=reading,
                statement=_statement(reading, before, block),
                triples=_triples_of(reading, number, location, space),
            )
        )
    in_text = [triple for sentence in sentences for triple in sentence.triples]
    in_tables = [
        triple for block in document.blocks if block.kind == "row" for triple in _row_triple(document, block, space)
    ]
    every = [*peaks, *in_tables, *in_text]
    claims = _claims(sentences, every)
    return Scan(
        name=document.name,
        claims=tuple(claims),
        triples=tuple(_in_order(document, sentences, in_tables)),
        sentences=tuple(sentences),
    )


_NOT_OWN = frozenset(["introduction", "methods"])


def _statement(reading: Reading, before: Reading | None, block: Block) -> Statement:
    """Say what a sentence does; as a last resort, that its place and its process stand side by side."""
    statement = read_statement(reading, before)
    if statement.kind not in ("none", "forward") or block.section in _NOT_OWN:
        return statement
    steps = side_by_side(reading, before)
    return Statement(kind="claim", inferences=tuple(steps)) if steps else statement


def _processes(text: str, run: list[Token], names: ProcessNames, defined: dict[str, str]) -> list[ProcessMention]:
    """Return the listed processes of a sentence, and what else looks like one, in its order."""
    listed = names.find(run, defined)
    others = [
        mention
        for mention in unlisted_processes(text, run)
        if not any(mention.start < known.end and known.start < mention.end for known in listed)
    ]
    return sorted([*listed, *others], key=lambda mention: mention.start)


def _definitions(
    texts: Sequence[str], words: Sequence[list[Token]], names: ProcessNames
) -> tuple[dict[str, str], dict[str, str]]:
    """Return the abbreviations of places and of processes that the document explains."""
    places: dict[str, str] = {}
    processes: dict[str, str] = {}
    for text, run in zip(texts, words, strict=True):
        if "(" not in text and "[" not in text:
            continue
        places |= defined_places(text, find_places(text, run))
        processes |= defined_processes(text, names.find(run))
    return places, processes


def _document_space(document: Document) -> str:
    """Return the one space that a document speaks of; "" where it speaks of both or of none."""
    said = {space_said(sentence) for block in document.blocks for sentence in [block.text] if sentence}
    spaces = said - {""}
    return spaces.pop() if len(spaces) == 1 else ""


def _location(document: Document, block: Block, offset: int) -> str:
    """Say where a sentence stands."""
    section = block.section.capitalize() if block.section not in ("", "other") else ""
    return ", ".join(part for part in (document.name, section, block.where(offset)) if part)


def _triples_of(reading: Reading, number: int, location: str, space: str) -> tuple[FoundTriple, ...]:
    """Return the coordinates of a sentence with their places."""
    triples = find_triples(reading.text)
    return tuple(
        FoundTriple(
            xyz=triple.xyz,
            space=triple.space or space,
            place=owner.place if owner else "",
            side=_side(owner.side if owner else "", triple.xyz[0]) if owner else "",
            location=location,
            how="sentence",
            sentence=number,
        )
        for triple, owner in zip(triples, owners(reading.text, triples, reading.places), strict=True)
    )


def _side(said: str, x: float) -> str:
    """Return the side that is said, else the one that x has."""
    if said in ("left", "right"):
        return said
    return "left" if x < 0 else "right" if x > 0 else ""


def _row_triple(document: Document, block: Block, space: str) -> list[FoundTriple]:
    """Return the coordinates of a row of a table."""
    found = table_peak(block)
    if found is None:
        return []
    place, side = labelled_place(found.label, found.xyz[0])
    return [
        FoundTriple(
            xyz=found.xyz,
            space=found.space or space,
            place=place,
            side=side,
            location=_location(document, block, 0),
            how="table",
        )
    ]


def _in_order(
    document: Document, sentences: Sequence[FoundSentence], in_tables: Sequence[FoundTriple]
) -> list[FoundTriple]:
    """Return all coordinates in the order of the text."""
    tables = iter(in_tables)
    waiting = next(tables, None)
    prose = iter(sentences)
    ordered: list[FoundTriple] = []
    for block in document.blocks:
        if block.kind == "row":
            if waiting is not None and waiting.location == _location(document, block, 0):
                found = table_peak(block)
                if found is not None and found.xyz == waiting.xyz:
                    ordered.append(waiting)
                    waiting = next(tables, None)
            continue
        for _ in split_sentences(block.text):
            ordered += next(prose).triples
    return ordered


def _claims(sentences: Sequence[FoundSentence], every: Sequence[FoundTriple]) -> list[FoundClaim]:
    """Return the claims, numbered."""
    claims: list[FoundClaim] = []
    for number, sentence in enumerate(sentences):
        for inference in sentence.statement.inferences:
            before = sentences[number - 1] if inference.from_before else None
            claims.append(_claim(len(claims) + 1, number, sentence, before, inference, every))
    width = max(2, len(str(len(claims))))
    return [replace(claim, id=f"c{int(claim.id):0{width}d}") for claim in claims]


def _label(place: PlaceMention, link: Link) -> str:
    """Return the name of a place; of one on both sides, the side that its coordinates are on."""
    if place.side == "bilateral" and link.xyz is not None:
        return f"{_side('', link.xyz[0])} {place.place}".strip()
    return place.label


def _claim(
    order: int,
    number: int,
    sentence: FoundSentence,
    before: FoundSentence | None,
    inference: Inference,
    every: Sequence[FoundTriple],
) -> FoundClaim:
    """Return one claim with its places linked."""
    own = [*(before.triples if before else ()), *sentence.triples]
    places = [
        LinkedPlace(label=_label(place, link), link=link)
        for place in inference.places
        for link in link_place(place, number, own, every)
    ]
    shift = len(before.text) + 1 if before else 0
    marks = [
        (place.start + (0 if before else shift), place.end + (0 if before else shift), "place")
        for place in inference.places
    ]
    marks += [
        (inference.cue.start + shift, inference.cue.end + shift, "cue"),
        (inference.process.start + shift, inference.process.end + shift, "process"),
    ]
    return FoundClaim(
        id=str(order),
        term=inference.process.term,
        listed=inference.process.listed,
        places=tuple(places),
        quote=f"{before.text} {sentence.text}" if before else sentence.text,
        location=(before or sentence).location,
        cue=inference.cue.words,
        hedged=inference.hedged,
        marks=tuple(sorted(marks)),
        sentence=number,
    )
