"""What would decide a claim, for the terminal, the page and the Markdown."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.cells import one_line
from revinf.reports.numbers import coordinates, count, percent, probability
from revinf.reports.terminal import fitting, hanging, heading, plain_table
from revinf.reports.wording import NO_INDIVIDUALS

if TYPE_CHECKING:
    from revinf.evidence.settlement import Settlement, SettlingPlace

__all__ = ["bits", "outcome_words", "place_line", "settle_screen", "settling_lines"]


def bits(value: float) -> str:
    """Write a gain in bits.

    Examples
    --------
    >>> bits(0.2928), bits(0.0004)
    ('0.29', '<0.01')
    """
    return "<0.01" if 0 < value < 0.005 else f"{value:.2f}"


def outcome_words(found: Settlement, place: SettlingPlace) -> tuple[str, str]:
    """Say what activity and what silence at a place would do to the claimed process.

    Parameters
    ----------
    found : Settlement
        Whose candidates.
    place : SettlingPlace
        One of its places.

    Returns
    -------
    str, str
        For each outcome the candidate that would lead, and its probability.
    """
    said = []
    for weights in (place.if_active, place.if_silent):
        leader = max(range(len(weights)), key=lambda at: weights[at])
        said.append(f"{one_line(found.candidates[leader].term)} {probability(weights[leader])}")
    return said[0], said[1]


def place_line(found: Settlement, place: SettlingPlace) -> str:
    """Say in one sentence what a look at a place would do."""
    active, silent = outcome_words(found, place)
    return (
        f"{coordinates(place.peak)}, {place.words}: if active, {active}; if silent, {silent}; expected gain "
        f"{bits(place.gain.estimate)} bits ({bits(place.gain.low)}–{bits(place.gain.high)})"
    )


def settling_lines(found: Settlement) -> list[str]:
    """Return what a report says of where else to look: between whom, and one line a place.

    Parameters
    ----------
    found : Settlement
        From `revinf.settle`.

    Returns
    -------
    list of str
        Empty where no place was found.
    """
    if not found.places:
        return []
    among = ", ".join(
        f"{one_line(candidate.term)} {probability(candidate.probability)}" for candidate in found.candidates
    )
    return [
        f"At even odds the activity leaves: {among}.",
        *(one_line(place_line(found, place)) for place in found.places),
    ]


def settle_screen(found: Settlement, *, width: int = 104) -> list[Any]:
    """Return the screen of `revinf settle`.

    Parameters
    ----------
    found : Settlement
        From `revinf.settle`.
    width : int, columns
        Of the terminal.

    Returns
    -------
    list
        Renderables.
    """
    facts = found.literature
    where = " and ".join(coordinates(peak) for peak in found.peaks)
    rows = [
        ("Claim", f"activity at {where} MNI152, within {found.radius_mm:g} mm, is taken as a sign of {found.term!r}"),
        ("Counted in", f"{facts.name}: {count(facts.n_studies)} studies (here: {facts.study_is})"),
    ]
    if facts.invented:
        rows.append(("", "INVENTED DATA: these numbers say nothing about any brain"))
    listed = [
        [
            one_line(candidate.term),
            f"{candidate.n_active} of {candidate.n_studies}",
            probability(candidate.probability),
            "those active here" if candidate.n_asked == candidate.n_active else "all of them",
        ]
        for candidate in found.candidates
    ]
    header = ["candidate", "active here", "probability so far", "asked where else"]
    notes = [("", f"left out: {one_line(term)}, {number} studies of its own") for term, number in found.left_out]
    parts: list[Any] = [
        hanging(rows),
        heading("The claim and its rivals, on the studies that carry only one of them"),
        plain_table(*fitting(header, listed, width, drop=(3,)), right=(1, 2)),
        *([hanging(notes)] if notes else []),
    ]
    table = []
    for place in found.places:
        active, silent = outcome_words(found, place)
        gain = f"{bits(place.gain.estimate)} ({bits(place.gain.low)}–{bits(place.gain.high)})"
        table.append([coordinates(place.peak), gain, active, silent])
    head = ["look at (mm)", f"gain, bits ({percent(found.level)} interval)", "if active, leads", "if silent, leads"]
    parts += [
        heading("Where else to look in the same map, best first"),
        plain_table(*fitting(head, table, width, drop=(1,))),
        hanging([("where", "")] + [("", f"{coordinates(place.peak)}: {place.words}") for place in found.places]),
        hanging(
            [
                (
                    "reading",
                    f"the candidates leave {bits(found.entropy_bits)} bits open; a gain is the expected fall. The best "
                    "of thousands of places look better than they are: trust the lower end. Where 'all of them' "
                    "stands, too few studies are active at the claim's place, and the two places are taken as "
                    "independent under that process.",
                )
            ]
        ),
    ]
    return [*parts, hanging([("", "")]), hanging([("", NO_INDIVIDUALS)], label_width=0)]
