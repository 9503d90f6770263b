"""What `revinf map` says in the terminal: how much is decided, and the strongest places."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.cells import one_line
from revinf.reports.numbers import coordinates, count, probability, ratio
from revinf.reports.terminal import hanging, heading, plain_table
from revinf.reports.wording import NO_INDIVIDUALS

if TYPE_CHECKING:
    from revinf.evidence.brain_map import BrainMap
    from revinf.evidence.map_terms import TermHits

__all__ = ["brain_map_screen", "term_hits_screen"]

_PLACES = 5


def brain_map_screen(found: BrainMap | None, where: str, names: list[str]) -> list[Any]:
    """Return the screen of a map, or of all maps of a literature.

    Parameters
    ----------
    found : BrainMap or None
        One map; None where every process was mapped.
    where : str
        The folder.
    names : list of str
        What was written into it.

    Returns
    -------
    list
        Renderables.
    """
    if found is None:
        return [hanging([("Written", f"{where}: {count(len(names) - 1)} maps, one a sub-folder")])]
    facts, values = found.literature, found.values
    above, below = int((values["ratio-low"] > 1).sum()), int((values["ratio-high"] < 1).sum())
    total = len(found.grid_tenths)
    rows = [
        ("Map of", f"{one_line(found.term)}: {count(found.n_term)} studies with it, {count(found.n_other)} without"),
        ("Counted in", f"{one_line(facts.name)} (here: {one_line(facts.study_is)})"),
    ]
    if facts.invented:
        rows.append(("", "INVENTED DATA: these numbers say nothing about any brain"))
    rows += [
        (
            "Decided",
            f"the interval lies above 1 at {count(above)} and below 1 at {count(below)} of {count(total)} points; at "
            "so many points some do by chance",
        ),
        ("Written", f"{where}: {', '.join(names)}"),
    ]
    chosen = found.strongest(_PLACES)
    table = [
        [
            coordinates((found.grid_tenths[at] / 10).tolist()),
            f"{int(values['hits'][at])} of {found.n_term}",
            f"{int(values['active'][at] - values['hits'][at])} of {found.n_other}",
            f"{ratio(values['ratio'][at])} ({ratio(values['ratio-low'][at])}–{ratio(values['ratio-high'][at])})",
            probability(values["posterior"][at]),
        ]
        for at in chosen
    ]
    header = ["point (mm)", "with the term", "others", "likelihood ratio", "posterior"]
    return [
        hanging(rows),
        heading("Strongest places, by the lower end of the interval"),
        plain_table(header, table, right=(1, 2, 4)),
        hanging([("", "")]),
        hanging([("", NO_INDIVIDUALS)], label_width=0),
    ]


def term_hits_screen(found: TermHits, where: str, names: list[str]) -> list[Any]:
    """Return the screen of the counts of all processes.

    Parameters
    ----------
    found : TermHits
        The counts.
    where : str
        The folder.
    names : list of str
        What was written into it.

    Returns
    -------
    list
        Renderables.
    """
    facts = found.literature
    rows = [
        ("Counted", f"{count(len(found.terms))} processes at {count(len(found.grid_tenths))} points of grey matter"),
        ("Counted in", f"{one_line(facts.name)} (here: {one_line(facts.study_is)})"),
    ]
    if facts.invented:
        rows.append(("", "INVENTED DATA: these numbers say nothing about any brain"))
    rows += [
        ("Written", f"{where}: {', '.join(names)}"),
        ("Next", "counts alone are no evidence; revinf map --term gives ratio, posterior and interval of one process"),
    ]
    return [hanging(rows), hanging([("", "")]), hanging([("", NO_INDIVIDUALS)], label_width=0)]
