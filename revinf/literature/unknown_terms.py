"""The answer to a term that labels no study: one line with the terms that look like it."""

from __future__ import annotations

from collections.abc import Sequence
from difflib import get_close_matches

from revinf.exceptions import UnknownTermError

__all__ = ["unknown_term"]

_LONGEST = 60
"""Characters of a term that a message repeats."""


def unknown_term(term: str, known: Sequence[str], where: str, near: Sequence[str] = ()) -> UnknownTermError:
    """Return the error for a term that labels nothing, with the terms that look like it.

    Parameters
    ----------
    term : str
        Normalised.
    known : sequence of str
        The terms there are.
    where : str
        What was searched, for the message.
    near : sequence of str, optional
        Terms that are known to be close, shown first.

    Returns
    -------
    UnknownTermError
        To be raised by the caller.

    Examples
    --------
    >>> str(unknown_term("paim", ["fear", "pain"], "the table"))
    "no study in the table carries the term 'paim'; did you mean 'pain'?"
    """
    near = list(near)
    if term:
        near += [name for name in known if (term in name or name in term) and name not in near][:3]
    near += [name for name in get_close_matches(term, known, n=5, cutoff=0.6) if name not in near]
    if near:
        hint = "did you mean " + " or ".join(repr(name) for name in near[:5]) + "?"
    elif len(known) <= 20:
        hint = "it has " + ", ".join(repr(name) for name in known)
    else:
        hint = f"search its {len(known)} terms with revinf terms"
    return UnknownTermError(f"no study in {where} carries the term {term!r}; {hint}", term=term, near=tuple(near))
