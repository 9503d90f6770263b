"""Finds coordinates in prose: triples of numbers in mm, not statistics, sizes, dates or citations."""

from __future__ import annotations

import re
from dataclasses import dataclass

__all__ = ["Triple", "find_triples", "space_said"]

_MINUS = r"[-+\u2212\u2010\u2011\u2012\u2013\u2014\uff0d]"
_NUMBER = rf"(?:{_MINUS}\s?|minus\s)?\d{{1,3}}(?:\.\d{{1,2}})?"
_COMMA_NUMBER = rf"(?:{_MINUS}\s?)?\d{{1,3}}(?:,\d{{1,2}})?"
_EDGE = r"(?<![\w.,/:\u2212\u2013-])(?<!\d\s)"
_AFTER = r"(?![\w%°]|[.,]\d|\s?[/×]\s?\d|\s?(?:%|°))"
_SEPARATOR = r"(?:\s?mm)?\s*[,;/|]\s*|\s+"

_LABELLED = re.compile(
    rf"\bx\s*[=:]?\s*(?P<x>{_NUMBER})\s*(?:mm)?\s*[,;/]?\s*(?:and\s+)?y\s*[=:]?\s*(?P<y>{_NUMBER})\s*(?:mm)?\s*"
    rf"[,;/]?\s*(?:and\s+)?z\s*[=:]?\s*(?P<z>{_NUMBER})",
    re.IGNORECASE,
)
_RUN = re.compile(
    rf"{_EDGE}(?P<x>{_NUMBER})(?P<s>{_SEPARATOR})(?P<y>{_NUMBER})(?P<t>{_SEPARATOR})(?P<z>{_NUMBER}){_AFTER}"
)
_SEMICOLONS = re.compile(rf"{_EDGE}(?P<x>{_COMMA_NUMBER});\s*(?P<y>{_COMMA_NUMBER});\s*(?P<z>{_COMMA_NUMBER}){_AFTER}")

_WITH_AND = re.compile(rf"{_EDGE}(?P<x>{_NUMBER})(?P<s>\s*,\s*)(?P<y>{_NUMBER}),?\s+and\s+(?P<z>{_NUMBER}){_AFTER}")

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
_PLACE_BEFORE = re.compile(rf"(?:{_BRAIN.pattern})\w*(?:\s*[:,]|[^()\[\]]{{0,20}}[(\[][^)\]]*[;,])\s*$")
"""The name of a place right before plain numbers, or before the bracket in which they stand behind something else."""

_NUMBERED = re.compile(r"\b(?:BAs?|Brodmann areas?|areas?|lobules?|weights?|(?:[nNk]|kE)\s*=)\s*:?\s*$", re.IGNORECASE)
"""Right before a number that cannot be an x, whatever signs follow."""

_SIDE = re.compile(r"(?:\b[LR]\s*:|[(\[;,]\s*[LR])\s*$")
_COMPANY = 60
"""Letters between a triple that is sure and a plain one of the same look that it vouches for."""

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
    plain: list[tuple[re.Match[str], str]] = []
    forms = ((_LABELLED, "labelled"), (_SEMICOLONS, "semicolons"), (_RUN, "listed"), (_WITH_AND, "listed"))
    for pattern, form in forms:
        position = 0
        while match := pattern.search(text, position):
            if _overlaps(match, found):
                position = match.end()
                continue
            if _is_possible(match) and (form == "labelled" or _is_place(text, match)):
                position = match.end()
                found.append(_triple(text, match, form))
                continue
            if form == "listed" and _is_possible(match) and _could_be(text, match):
                plain.append((match, form))
            position = match.end("x")  # the run may begin one number later
    for match, form in plain:
        if not _overlaps(match, found) and any(_is_company(text, match, other) for other in found):
            found.append(_triple(text, match, form))
    return sorted(found, key=lambda triple: triple.start)


def _overlaps(match: re.Match[str], found: list[Triple]) -> bool:
    """Tell whether a match shares letters with a triple that was found before."""
    return any(match.start() < other.end and other.start < match.end() for other in found)


def _triple(text: str, match: re.Match[str], form: str) -> Triple:
    """Return a match as a triple."""
    x, y, z = (_value(match[axis]) for axis in "xyz")
    space = space_said(text, match.start(), match.end())
    return Triple(xyz=(x, y, z), space=space, start=match.start(), end=match.end(), form=form)


def _is_possible(match: re.Match[str]) -> bool:
    """Tell whether three numbers lie in a head and are no fractions below 1, which are statistics."""
    sizes = [abs(_value(match[axis])) for axis in "xyz"]
    if not all(size <= limit for size, limit in zip(sizes, _OUTSIDE, strict=True)):
        return False
    return max(sizes) >= 1 or all(size == 0 for size in sizes)


def _is_company(text: str, match: re.Match[str], other: Triple) -> bool:
    """Tell whether a sure triple vouches for a plain one: near, as open or closed, with the same separator."""
    first, second = sorted([(match.start(), match.end()), (other.start, other.end)])
    between = text[first[1] : second[0]]
    if len(between) > _COMPANY or re.search(r"[=<>%]|\b(?:of|than|refs?)\b", between):
        return False
    bracket, other_bracket = (_open_bracket(text[:start]) for start in (match.start(), other.start))
    if bracket != other_bracket:
        return False
    separators = re.findall(r"[,;/|]", text[other.start : other.end])
    return (separators[0] if separators else "") == match["s"].replace("mm", "").strip()


def _open_bracket(before: str) -> str:
    """Return the bracket that is open at the end of a text; "" for none."""
    found = re.search(r"[(\[{](?=[^)\]}]*$)", before)
    return found.group() if found else ""


def _value(text: str) -> float:
    """Return a number with any kind of minus sign, and a point or a comma."""
    sign = -1.0 if re.match(r"minus|[-\u2212\u2010\u2011\u2012\u2013\u2014\uff0d]", text) else 1.0
    return sign * float(re.sub(r"[^\d.,]", "", text).replace(",", ".")) + 0.0


def _is_place(text: str, match: re.Match[str]) -> bool:
    """Tell coordinates from statistics, sizes, counts, dates and citations."""
    before, after = text[max(0, match.start() - 60) : match.start()], text[match.end() : match.end() + 40]
    signed = _is_signed(match)
    opened = re.search(r"[(\[{][^)\]}]*$", before)
    named = _WORDS.search(before[-45:]) is not None
    if not _could_be(text, match):
        return False
    if match.re is _WITH_AND:
        return signed and _STRONG.search(before[-45:]) is not None
    largest = max(abs(_value(match[axis])) for axis in "xyz")
    if signed and (opened or named or (match["s"].strip() and largest >= 10)):
        return True
    if not signed and re.search(r"\[\s*$", before) and re.match(r"\s*[\],]", after) and "," in match["s"] and not named:
        return False  # [12, 14, 18] cites
    if signed:
        # A row of a table that stands in the prose: the name of the place right before.
        return _STRONG.search(before[-45:]) is not None or (largest >= 10 and _BRAIN.search(before[-22:]) is not None)
    if _STRONG.search(before[-45:]) or (opened and named) or re.search(r"[(\[][A-Za-z-]{2,8}[;,:]\s*$", before):
        return True
    rising = _value(match["x"]) < _value(match["y"]) < _value(match["z"])
    if not rising and largest >= 10 and _PLACE_BEFORE.search(before[-50:]) and re.match(r"\s*[)\];,.]|\s*$", after):
        return True
    if not re.search(r"[(\[]\s*$", before) or not re.match(r"\s*[)\];,]", after):
        return False
    # Three plain numbers alone in brackets: numbers that rise may cite, so a place must stand before them.
    return not rising or _BRAIN.search(before[-50:]) is not None


def _is_signed(match: re.Match[str]) -> bool:
    """Tell whether a number of a triple has a sign."""
    return any(re.match(rf"minus|{_MINUS}", match[axis]) for axis in "xyz")


def _could_be(text: str, match: re.Match[str]) -> bool:
    """Tell whether nothing around three numbers says that they are statistics, sizes, counts, dates or citations."""
    before, after = text[max(0, match.start() - 60) : match.start()], text[match.end() : match.end() + 40]
    if re.search(r"\b(?:at|slices?|sections?|planes?|cuts?|levels?)\s+(?:at\s+)?[xyz]\s*=\s*$", before):
        return False  # where a picture is cut
    if _COUNTED.match(after) or _NUMBERED.search(before) or (_STATISTIC.search(before) and not _SIDE.search(before)):
        return False
    if match.re is _RUN and not _alike(match["s"], match["t"]):
        return False
    opened = re.search(r"[(\[{][^)\]}]*$", before)
    return not _COUNTING.search(before) or bool(_is_signed(match) and opened)


def _alike(first: str, second: str) -> bool:
    """Tell whether the two separators of a run are of one kind."""
    return first.replace("mm", "").strip() == second.replace("mm", "").strip()


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
