"""Hypothesis strategies that several test files share."""

from __future__ import annotations

from hypothesis import settings
from hypothesis import strategies as st

from revinf.stats.estimates import Counts

# No deadline: the first example of a test may import scipy, and the machine may be busy.
settings.register_profile("revinf", deadline=None)
settings.load_profile("revinf")

MILLION = 10**6
"""The largest count for which an accuracy is promised."""

BILLION = 10**9
"""The largest count with which the tests try whether answers stay ordered and finite."""


def count(largest: int = MILLION) -> st.SearchStrategy[int]:
    """Draw a count; small ones, where the corner cases are, come as often as large ones."""
    return st.one_of(st.integers(0, 5), st.integers(0, min(300, largest)), st.integers(0, largest))


def tables(largest: int = MILLION) -> st.SearchStrategy[Counts]:
    """Draw the four counts of any table, empty sides included."""
    return st.builds(Counts, *(count(largest),) * 4)


def full_tables(largest: int = MILLION) -> st.SearchStrategy[Counts]:
    """Draw a table with at least one study on either side."""
    return tables(largest).filter(lambda table: table.term_total > 0 and table.other_total > 0)


def active_tables(largest: int = MILLION) -> st.SearchStrategy[Counts]:
    """Draw a full table with at least one active study."""
    return full_tables(largest).filter(lambda table: table.active_total > 0)


def hits_of_studies(largest: int = MILLION) -> st.SearchStrategy[tuple[int, int]]:
    """Draw a count and the total that it belongs to, at least 1."""
    return st.tuples(count(largest), count(largest)).map(sorted).map(tuple).filter(lambda pair: pair[1] > 0)


def priors() -> st.SearchStrategy[float]:
    """Draw a prior probability, strictly between 0 and 1."""
    return st.floats(1e-9, 1 - 1e-9)


def ratios() -> st.SearchStrategy[float]:
    """Draw a likelihood ratio, over all that evidence can reach."""
    return st.floats(-50, 50).map(lambda log: float(2.0**log))


def levels() -> st.SearchStrategy[float]:
    """Draw the probability that an interval holds."""
    return st.floats(0.01, 0.999)
