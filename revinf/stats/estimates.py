"""The two small results that all of the statistics share: an estimate with its interval, and a 2x2 table."""

from __future__ import annotations

from dataclasses import dataclass
from operator import index

from revinf.exceptions import InvalidCountError, InvalidProbabilityError

__all__ = ["Counts", "Estimate", "check_level", "check_probability"]


@dataclass(frozen=True, slots=True)
class Estimate:
    """A number with the ends of its equal-tailed posterior interval.

    Parameters
    ----------
    estimate : float
        Posterior median.
    low, high : float
        Ends of the interval.

    Examples
    --------
    >>> Estimate(0.5, 0.2, 0.8).covers(0.7)
    True
    """

    estimate: float
    low: float
    high: float

    def covers(self, value: float) -> bool:
        """Tell whether `value` lies in the closed interval."""
        return self.low <= value <= self.high


@dataclass(frozen=True, slots=True)
class Counts:
    """The four counts behind one claim.

    Parameters
    ----------
    term_active, term_inactive : int
        Studies with the term that do and do not hit the region (n11, n10).
    other_active, other_inactive : int
        Studies without the term that do and do not (n01, n00).

    Raises
    ------
    InvalidCountError
        If a count is not a whole number or is negative.

    Examples
    --------
    >>> counts = Counts(166, 703, 199, 2154)
    >>> counts.term_total, counts.other_total, counts.total
    (869, 2353, 3222)
    >>> counts.swapped().term_active
    199
    """

    term_active: int
    term_inactive: int
    other_active: int
    other_inactive: int

    def __post_init__(self) -> None:
        for name in ("term_active", "term_inactive", "other_active", "other_inactive"):
            value = getattr(self, name)
            try:
                whole = index(value)
            except TypeError:
                raise InvalidCountError(
                    f"{name} must be a whole number, but got {value!r}; give a count of studies"
                ) from None
            if whole < 0:
                raise InvalidCountError(f"{name} must not be negative, but got {whole}; give a count of studies")
            object.__setattr__(self, name, whole)

    @property
    def term_total(self) -> int:
        """Studies with the term (n1)."""
        return self.term_active + self.term_inactive

    @property
    def other_total(self) -> int:
        """Studies without the term (n0)."""
        return self.other_active + self.other_inactive

    @property
    def active_total(self) -> int:
        """Studies that hit the region."""
        return self.term_active + self.other_active

    @property
    def total(self) -> int:
        """All counted studies."""
        return self.term_total + self.other_total

    def swapped(self) -> Counts:
        """Return the table with term and other exchanged."""
        return Counts(self.other_active, self.other_inactive, self.term_active, self.term_inactive)

    def as_tuple(self) -> tuple[int, int, int, int]:
        """Return n11, n10, n01, n00."""
        return (self.term_active, self.term_inactive, self.other_active, self.other_inactive)


def check_probability(value: float, name: str, remedy: str) -> float:
    """Return `value` as a float strictly between 0 and 1.

    Parameters
    ----------
    value : float
        What was given.
    name : str
        The argument, for the message.
    remedy : str
        The next step, for the message.

    Returns
    -------
    float
        The checked value.

    Raises
    ------
    InvalidProbabilityError
        If the value is not a number strictly between 0 and 1.

    Examples
    --------
    >>> check_probability(0.5, "prior", "use 0.5 for even odds")
    0.5
    """
    try:
        number = float(value)
    except (TypeError, ValueError):
        number = float("nan")
    if not 0.0 < number < 1.0:
        raise InvalidProbabilityError(f"{name} must lie strictly between 0 and 1, but got {value!r}; {remedy}")
    return number


def check_level(level: float) -> float:
    """Return the probability that an interval holds, checked.

    Parameters
    ----------
    level : float
        Such as 0.95.

    Returns
    -------
    float
        The checked level.

    Raises
    ------
    InvalidProbabilityError
        If it is not strictly between 0 and 1.

    Examples
    --------
    >>> check_level(0.95)
    0.95
    """
    return check_probability(level, "level", "use 0.95 for a 95 % interval")
