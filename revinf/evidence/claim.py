"""A claim: activity in a region is taken as a sign of a process."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from revinf.evidence.asked_region import DEFAULT_RADIUS_MM, AskedRegion, Point
from revinf.exceptions import InvalidClaimError, InvalidProbabilityError
from revinf.knowledge import normalise_term
from revinf.stats.estimates import check_probability

__all__ = ["DEFAULT_PRIOR", "DEFAULT_RADIUS_MM", "Claim", "Point", "checked_prior", "parsed_prior"]

DEFAULT_PRIOR = 0.5


@dataclass(frozen=True, slots=True, kw_only=True)
class Claim(AskedRegion):
    """Activity in a region, taken as a sign that a process was engaged.

    Parameters
    ----------
    term : str
        The claimed process, as the literature names it.
    peaks, mask, region, radius_mm, space, transform
        Where the activity was; see `revinf.evidence.asked_region.AskedRegion`. Several peaks form a
        pattern: the studies that hit all of them are counted.
    absent : bool, default False
        The claim rests on *no* activity there: the studies without a hit are counted.
    prior : float or "prevalence", probability, default 0.5
        P(process engaged) before the activity was seen; "prevalence" takes the share of the studies that
        carry the term.
    context : sequence of str
        Count again within the studies that carry any of these terms.
    rivals, excluded : sequence of str
        Rivals to show in any case, and terms never to count as rivals.
    label : str, optional
        What a reader calls the place; not used for the answer.
    quote, location : str, optional
        The sentence and where it stands.
    id : str, optional
        The claim's name in a list of claims.

    Raises
    ------
    InvalidClaimError
        If there is no term, or not exactly one of peaks, mask and region.
    SpaceError
        If a coordinate or the radius is out of range, or space or transform is unknown.
    InvalidProbabilityError
        If the prior is not strictly between 0 and 1.

    Examples
    --------
    >>> claim = Claim(term="Theory_of_Mind", peaks=[(54, -54, 24)])
    >>> claim.term, claim.peaks, claim.radius_mm
    ('theory of mind', ((54.0, -54.0, 24.0),), 10.0)
    """

    term: str
    absent: bool = False
    prior: float | Literal["prevalence"] = DEFAULT_PRIOR
    context: Sequence[str] = ()
    rivals: Sequence[str] = ()
    excluded: Sequence[str] = ()
    label: str = ""
    quote: str = ""
    location: str = ""
    id: str = ""

    def __post_init__(self) -> None:
        AskedRegion.__post_init__(self)
        term = normalise_term(self.term)
        if not term:
            raise InvalidClaimError("a claim needs a term; name the claimed process with --term")
        object.__setattr__(self, "term", term)
        if self.prior != "prevalence":
            prior = check_probability(
                self.prior, "prior", "use 0.5 for even odds, 0.99 for near-certainty, or prevalence"
            )
            object.__setattr__(self, "prior", prior)
        for name in ("context", "rivals", "excluded"):
            terms = tuple(dict.fromkeys(normalise_term(text) for text in getattr(self, name)))
            if "" in terms:
                raise InvalidClaimError(f"a term of {name} is empty; name it or leave it out")
            object.__setattr__(self, name, terms)
        if term in self.excluded:
            raise InvalidClaimError(f"the claimed term {term!r} cannot be excluded; exclude other terms")


def parsed_prior(text: str) -> float | Literal["prevalence"]:
    """Return a prior as somebody typed it: a probability, or the word prevalence.

    Parameters
    ----------
    text : str
        What was typed.

    Returns
    -------
    float or "prevalence"
        Its range is checked by the claim.

    Raises
    ------
    InvalidProbabilityError
        If it is neither a number nor the word.

    Examples
    --------
    >>> parsed_prior("0.3"), parsed_prior(" Prevalence ")
    (0.3, 'prevalence')
    """
    word = text.strip().lower()
    if word == "prevalence":
        return "prevalence"
    try:
        return float(word)
    except ValueError:
        raise InvalidProbabilityError(
            f"prior must be a probability or the word prevalence, but got {text!r}; use 0.5 for even odds"
        ) from None


def checked_prior(text: str) -> float | Literal["prevalence"]:
    """Return a prior as somebody typed it, in its range.

    Parameters
    ----------
    text : str
        What was typed.

    Returns
    -------
    float or "prevalence"
        Strictly between 0 and 1.

    Raises
    ------
    InvalidProbabilityError
        If it is neither a probability nor the word.

    Examples
    --------
    >>> checked_prior("0.3")
    0.3
    """
    prior = parsed_prior(text)
    if prior == "prevalence":
        return "prevalence"
    return check_probability(prior, "prior", "use 0.5 for even odds, 0.99 for near-certainty, or prevalence")
