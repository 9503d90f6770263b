"""What revinf raises and warns of, and nothing else.

Three channels are kept apart everywhere: an *exception* says that the input cannot be used; a Python
*warning* says that our number is less reliable than usual; a *caution* says that the user's claim is
weak, and is ordinary data (`revinf.evidence.cautions`). Every message is one line with four parts: what
is wrong, where, what was given, how to mend it.
"""

from __future__ import annotations

__all__ = [
    "InputFileError",
    "InvalidClaimError",
    "InvalidCountError",
    "InvalidProbabilityError",
    "LiteratureError",
    "RevinfError",
    "RevinfWarning",
    "SpaceError",
    "UnknownTermError",
]


class RevinfError(Exception):
    """Root of everything revinf raises on purpose; `str()` of it is one line for the user."""


class InvalidProbabilityError(RevinfError, ValueError):
    """A prior, level or threshold lies outside the range in which it means something."""


class InvalidCountError(RevinfError, ValueError):
    """A count is negative, not whole, or larger than the total it belongs to."""


class SpaceError(RevinfError, ValueError):
    """A coordinate, radius, space or image grid cannot be placed in the brain."""


class InvalidClaimError(RevinfError, ValueError):
    """A claim lacks a part, or has two that exclude each other."""


class UnknownTermError(RevinfError, LookupError):
    """The term labels no counted study of this source.

    Parameters
    ----------
    message : str
        The line for the user.
    term : str
        The term as compared (normalised).
    near : tuple of str
        Terms of the source that look like it, best first.
    """

    def __init__(self, message: str, *, term: str = "", near: tuple[str, ...] = ()) -> None:
        super().__init__(message)
        self.term = term
        self.near = near


class InputFileError(RevinfError, ValueError):
    """A file cannot be read as what it should be.

    Parameters
    ----------
    problem : str
        What is wrong and how to mend it.
    path : str or path-like, optional
        The file.
    row : int, optional
        The line in the file, counted from 1.
    column : str, optional
        The name of the column.
    """

    def __init__(
        self,
        problem: str,
        *,
        path: object = None,
        row: int | None = None,
        column: str | None = None,
    ) -> None:
        where = ":".join(str(part) for part in (path, row, column) if part is not None)
        super().__init__(f"{where}: {problem}" if where else problem)
        self.path = path
        self.row = row
        self.column = column


class LiteratureError(InputFileError):
    """A literature folder is missing, damaged, foreign, or of another format version."""


class RevinfWarning(UserWarning):
    """Root of the warnings: one of our own numbers is less reliable than usual."""
