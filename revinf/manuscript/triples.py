"""Finds coordinates in prose: triples of numbers in mm, not statistics, sizes, dates or citations."""

from __future__ import annotations

import re
from dataclasses import dataclass

__all__ = ["Triple", "find_triples", "space_said"]

_MINUS = r"[-+\u2212\u2010\u2011\u2012\u2013\u2014\uff0d]"
_NUMBER = rf"(?:{_MINUS}\s?)?\d{{1,3}}(?:\.\d{{1,2}})?"
_COMMA_NUMBER = rf"(?:{_MINUS}\s?)?\d{{1,3}}(?:,\d{{1,2}})?"
_EDGE = r"(?<![\w.,/:\u2212\u2013-])(?<!\d\s)"
_AFTER = r"(?![\w%°]|[.,]\d|\s?[/×]\s?\d|\s?(?:%|°))"
_SEPARATOR = r"\s*[,;/|]\s*|\s+"

_LABELLED = re.compile(
    rf"\bx\s*[=:]\s*(?P<x>{_NUMBER})\s*(?:mm)?\s*[,;/]?\s*(?:and\s+)?y\s*[=:]\s*(?P<y>{_NUMBER})\s*(?:mm)?\s*[,;/]?\s*"
    rf"(?:and\s+)?z\s*[=:]\s*(?P<z>{_NUMBER})",
    re.IGNORECASE,
)
_RUN = re.compile(
    rf"{_EDGE}(?P<x>{_NUMBER})(?P<s>{_SEPARATOR})(?P<y>{_NUMBER})(?P<t>{_SEPARATOR})(?P<z>{_NUMBER}){_AFTER}"
)
_SEMICOLONS = re.compile(rf"{_EDGE}(?P<x>{_COMMA_NUMBER});\s*(?P<y>{_COMMA_NUMBER});\s*(?P<z>{_COMMA_NUMBER}){_AFTER}")

_WORDS = re.compile(
    r"\bcoordinates?\b|\bMNI\b|\bMNI152\b|\bTalairach\b|\bTAL\b|\bTLRC\b|\bpeak\w*\b|\bmaxim\w+\b|\bvoxels?\b|"
    r"\bcentred\b|\bcentered\b|\bcentroid\b|\blocated\b|\bfoc(?:us|i)\b|\bxyz\b|\bx,\s*y,\s*(?:and\s+)?z\b|"
    r"\bx\s*/\s*y\s*/\s*z\b|\bstereotax\w+\b|\bseed\w*\b|\bsphere\b|\bat\b",
    re.IGNORECASE,
)
_STATISTIC = re.compile(
    r"(?:\b(?:[FtZTpqrnNdkRBM]|df|SD|SE|SEM|CI|OR|BF|ps|ts|Fs|ns|chi|χ2?|χ²|η2?|β|mean|means|M|Mdn|range|"
    r"power|voxel size|"
    r"TR|TE|FOV|FWHM|kernel|alpha|threshold\w*)\s*(?:values?)?\s*(?:of|=|<|>|≤|≥|:|\(|were|was|are)?\s*[(\[]?\s*)$",
)
_COUNTED = re.compile(
    r"^\s*(?:years?|months?|weeks?|days?|hours?|minutes?|min|seconds?|secs?|s\b|ms|Hz|kHz|trials?|"
    r"participants?|subjects?|"
    r"volunteers?|patients?|controls?|women|men|items|words|images|scans?|runs?|volumes?|blocks?|points?|"
    r"times|studies|"
    r"sessions?|conditions?|degrees|percent|per cent|slices|and \d+ (?:years?|months?|participants?|trials?))",
    re.IGNORECASE,
)
_COUNTING = re.compile(
    r"\b(?:aged?|ages|years?|months?|dates?|sections?|figures?|figs?|tables?|equations?|experiments?|studies|days?|"
    r"items?|chapters?|refs?|references?|pages?|pp|runs?|blocks?|sessions?|BAs?|Brodmann areas?|lobules?|"
    r"levels?|scores?|ratings?|sizes?|lasted|durations?|delays?|lags?|loads?|set sizes?|groups? of|versions?|"
    r"numbers?|participants?|subjects?|volunteers?|questions?|steps?)(?:\s+(?:of|were|was|are|at|with|between|from))?"
    r"\s*[:(]?\s*$",
    re.IGNORECASE,
)
_STRONG = re.compile(r"coordinates?|MNI|Tal|x[\s,/]+y[\s,/]+z|peak|maxim|voxel|foc[ui]|centr|center|xyz|stereotax")
_BRAIN = re.compile(
    r"gyr|sulc|cort|lob[eu]|insul|amygd|hippoc|thalam|striat|caud|putam|pallid|cerebel|cuneus|cingul|junction|nucle|"
    r"\barea|\bpole|opercul|brain|\bpons|collic|vermis|accumbens|activ|respon|[A-Z]{2,}"
)
_OUTSIDE = (100.0, 140.0, 110.0)
"""No head reaches as far (mm)."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Triple:
    """Coordinates in mm as the text has them, the space said beside them ("" where none is), and offsets."""

    xyz: tuple[float, float, float]
    space: str
    start: int
    end: int
    form: str


def find_triples(text: str) -> list[Triple]:
    """Return the coordinates in a sentence.

    Parameters
    ----------
    text : str
        A sentence, or a longer piece of prose.

    Returns
    -------
    list of Triple
        In the order of the text; none overlaps another.

    Examples
    --------
    >>> [triple.xyz for triple in find_triples("The insula (36, 22, \u22124; t(22) = 4.1) was active, F(2, 36) = 4.")]
    [(36.0, 22.0, -4.0)]
    """
    found: list[Triple] = []
    for pattern, form in ((_LABELLED, "labelled"), (_SEMICOLONS, "semicolons"), (_RUN, "listed")):
        position = 0
        while match := pattern.search(text, position):
            position = match.end()
            if any(match.start() < other.end and other.start < match.end() for other in found):
                continue
            xyz = tuple(_value(match[axis]) for axis in "xyz")
            if not all(abs(value) <= limit for value, limit in zip(xyz, _OUTSIDE, strict=True)):
                continue
            if form != "labelled" and not _is_place(text, match):
                position = match.end("x")  # the run may begin one number later
                continue
            found.append(
                Triple(
                    xyz=(xyz[0], xyz[1], xyz[2]),
                    space=space_said(text, match.start(), match.end()),
                    start=match.start(),
                    end=match.end(),
                    form=form,
                )
            )
    return sorted(found, key=lambda triple: triple.start)


def _value(text: str) -> float:
    """Return a number with any kind of minus sign, and a point or a comma."""
    sign = -1.0 if re.match(r"[-\u2212\u2010\u2011\u2012\u2013\u2014\uff0d]", text) else 1.0
    return sign * float(re.sub(r"[^\d.,]", "", text).replace(",", ".")) + 0.0


def _is_place(text: str, match: re.Match[str]) -> bool:
    """Tell coordinates from statistics, sizes, counts, dates and citations."""
    before, after = text[max(0, match.start() - 60) : match.start()], text[match.end() : match.end() + 40]
    if _STATISTIC.search(before) or _COUNTED.match(after):
        return False
    if match.re is _RUN and not _alike(match["s"], match["t"]):
        return False
    signed = any(re.match(_MINUS, match[axis]) for axis in "xyz")
    opened = re.search(r"[(\[{][^)\]}]*$", before)
    named = _WORDS.search(before[-45:]) is not None
    if _COUNTING.search(before) and not (signed and opened):
        return False
    largest = max(abs(_value(match[axis])) for axis in "xyz")
    if signed and (opened or named or (match["s"].strip() and largest >= 10)):
        return True
    if not signed and re.search(r"\[\s*$", before) and re.match(r"\s*[\],]", after) and "," in match["s"] and not named:
        return False  # [12, 14, 18] cites
    if signed:
        return _STRONG.search(before[-45:]) is not None
    if _STRONG.search(before[-45:]) or (opened and named) or re.search(r"[(\[][A-Za-z-]{2,8}[;,:]\s*$", before):
        return True
    if not re.search(r"[(\[]\s*$", before) or not re.match(r"\s*[)\];,]", after):
        return False
    # Three plain numbers alone in brackets: numbers that rise may cite, so a place must stand before them.
    x, y, z = (_value(match[axis]) for axis in "xyz")
    return not x < y < z or _BRAIN.search(before[-50:]) is not None


def _alike(first: str, second: str) -> bool:
    """Tell whether the two separators of a run are of one kind."""
    return (first.strip() or " ") == (second.strip() or " ")


def space_said(text: str, start: int = 0, end: int | None = None) -> str:
    """Return the space that a text says, the nearest to a span if it says both; "" if none.

    Examples
    --------
    >>> space_said("Talairach coordinates -38 20 4"), space_said("at 4, 5, 6")
    ('Talairach', '')
    """
    end = len(text) if end is None else end
    nearest: tuple[int, str] | None = None
    for word in re.finditer(r"\b(?P<tal>Talairach|TAL|TLRC)\b|\b(?P<mni>MNI(?:-?152)?)\b", text, re.IGNORECASE):
        gap = start - word.end() if word.end() <= start else 2 * max(0, word.start() - end)
        if nearest is None or gap < nearest[0]:
            nearest = (gap, "Talairach" if word["tal"] else "MNI")
    return nearest[1] if nearest else ""
