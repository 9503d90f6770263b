"""How numbers are written for a reader: the only place that formats them."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Protocol

__all__ = ["coordinates", "count", "interval", "p_value", "percent", "place_share", "probability", "ratio", "strip"]


class HasInterval(Protocol):
    """An estimate with the ends of its interval."""

    @property
    def estimate(self) -> float:
        """Middle."""
        ...

    @property
    def low(self) -> float:
        """Lower end."""
        ...

    @property
    def high(self) -> float:
        """Upper end."""
        ...


def count(value: int) -> str:
    """Write a count with thousands apart.

    Examples
    --------
    >>> count(5451)
    '5,451'
    """
    return f"{value:,}"


def probability(value: float) -> str:
    """Write a probability with three decimals, never rounded to 0 or 1.

    Examples
    --------
    >>> probability(0.83270), probability(0.0002), probability(0.99999), probability(0.0)
    ('0.833', '<0.001', '>0.999', '0')
    """
    if value in (0.0, 1.0):
        return f"{value:g}"
    if value < 0.0005:
        return "<0.001"
    return ">0.999" if value >= 0.9995 else f"{value:.3f}"


def ratio(value: float) -> str:
    """Write a ratio with three significant digits.

    Examples
    --------
    >>> ratio(4.977), ratio(0.04224), ratio(202918.3), ratio(19.96), ratio(0.00001234)
    ('4.98', '0.0422', '203,000', '20.0', '1.23e-05')
    """
    if value == 0:
        return "0"
    if value < 0.001:
        return f"{value:.3g}"
    text = f"{float(f'{value:.3g}'):,.15g}"
    digits = sum(character.isdigit() for character in text.replace(",", "").lstrip("0."))
    if value < 1000 and digits < 3:  # show 20.0, not 20: the zero is known
        text += ("" if "." in text else ".") + "0" * (3 - digits)
    return text


def p_value(value: float) -> str:
    """Write a p- or q-value with two significant digits.

    Examples
    --------
    >>> p_value(0.0123), p_value(2.69e-6)
    ('0.012', '2.7e-06')
    """
    return f"{value:.2g}"


def percent(level: float) -> str:
    """Write the probability that an interval holds, with every digit that was asked for.

    Examples
    --------
    >>> percent(0.95), percent(0.999)
    ('95%', '99.9%')
    """
    return f"{100 * level:.9g}%"


def interval(estimate: HasInterval, write: object = probability) -> str:
    """Write an estimate and its interval.

    Examples
    --------
    >>> from collections import namedtuple
    >>> interval(namedtuple("E", "estimate low high")(0.833, 0.722, 0.904))
    '0.833 (0.722–0.904)'
    """
    if not callable(write):
        raise TypeError("write must be one of the formats of this module")
    return f"{write(estimate.estimate)} ({write(estimate.low)}–{write(estimate.high)})"


def coordinates(point: Sequence[float]) -> str:
    """Write a point in mm.

    Examples
    --------
    >>> coordinates((54.0, -54.0, 24.5))
    '(54, −54, 24.5)'
    """
    return "(" + ", ".join(f"{value:g}".replace("-", "−") for value in point) + ")"


def place_share(percentile: float) -> str:
    """Write a share of places in percent, never rounded to none or all.

    Examples
    --------
    >>> place_share(93.7), place_share(99.96), place_share(0.2)
    ('94 %', 'over 99 %', 'under 1 %')
    """
    if percentile >= 99.5:
        return "over 99 %"
    return "under 1 %" if percentile < 0.5 else f"{percentile:.0f} %"


def strip(low: float, middle: float, high: float, width: int, *, mark: float | None = None) -> str:
    """Draw an interval as a line of characters; the arguments are positions from 0 to 1.

    `mark` is a position to compare with, drawn as a bar where the interval leaves it free.

    Examples
    --------
    >>> strip(0.2, 0.5, 0.8, 11)
    '··├──●──┤··'
    >>> strip(0.5, 0.7, 0.9, 11, mark=0.1)
    '·│···├─●─┤·'
    """
    at = [min(width - 1, max(0, round(position * (width - 1)))) for position in (low, middle, high)]
    cells = ["·"] * width
    if mark is not None:
        cells[round(mark * (width - 1))] = "│"
    cells[at[0] : at[2] + 1] = "─" * (at[2] - at[0] + 1)
    cells[at[0]], cells[at[2]] = "├", "┤"
    cells[at[1]] = "●"
    return "".join(cells)
