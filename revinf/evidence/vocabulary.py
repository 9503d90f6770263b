"""What kind of word a term is: a process (of which domain), not a process, or unknown; and its synonyms."""

from __future__ import annotations

import csv
import io
from collections.abc import Collection, Iterable, Mapping
from dataclasses import dataclass, field
from difflib import get_close_matches
from functools import cache
from pathlib import Path
from typing import Literal

from revinf.exceptions import InputFileError
from revinf.knowledge import normalise_term, read_table

__all__ = ["Kind", "Vocabulary", "chosen_vocabulary", "shipped_vocabulary"]

Kind = Literal["process", "not a process", "unknown"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Vocabulary:
    """Kinds, domains and synonyms of terms.

    Parameters
    ----------
    domains : mapping
        Domain of each process, by its normalised name or synonym.
    others : mapping
        For each term that is not a process, what it is ("anatomy", "method", ...).
    synonyms : mapping
        All names of the same process, by each of them.

    Examples
    --------
    >>> words = shipped_vocabulary()
    >>> words.kind("theory of mind"), words.domain("theory of mind")
    ('process', 'social cognition')
    >>> words.kind("verbal material"), words.kind("no such word")
    ('not a process', 'unknown')
    """

    domains: Mapping[str, str] = field(default_factory=dict)
    others: Mapping[str, str] = field(default_factory=dict)
    synonyms: Mapping[str, frozenset[str]] = field(default_factory=dict)

    def kind(self, term: str) -> Kind:
        """Return the kind of a normalised term."""
        if term in self.domains:
            return "process"
        return "not a process" if term in self.others else "unknown"

    def counts_as_process(self, term: str) -> bool:
        """Tell whether a normalised term may be claimed or be a rival; unknown ones may."""
        return term not in self.others

    def domain(self, term: str) -> str:
        """Return the domain of a process; empty where it is not known."""
        return self.domains.get(term, "")

    def what(self, term: str) -> str:
        """Return what a term is that is not a process; empty for the others."""
        return self.others.get(term, "")

    def names_of(self, term: str) -> frozenset[str]:
        """Return all names of a process, the given one included."""
        return self.synonyms.get(term, frozenset({term}))

    def sounding_like(self, term: str, among: Collection[str]) -> list[str]:
        """Return the terms of which a name looks like the given one, best first.

        Examples
        --------
        >>> shipped_vocabulary().sounding_like("mentalising", ["pain", "theory of mind"])
        ['theory of mind']
        """
        owners = {name: known for known in among for name in self.names_of(known)}
        near = get_close_matches(term, list(owners), n=5, cutoff=0.6)
        return list(dict.fromkeys(owners[name] for name in near))

    @classmethod
    def read(cls, path: str | Path) -> Vocabulary:
        """Read a user's own table: columns `term`, `kind`, optionally `domain` and `synonyms`.

        Parameters
        ----------
        path : path
            CSV, UTF-8; `kind` is "process" or says what the term is instead; synonyms are separated
            by ``;``.

        Returns
        -------
        Vocabulary
            It replaces the shipped one as a whole.

        Raises
        ------
        InputFileError
            If the file cannot be read, a column is missing, or a term stands twice.
        """
        path = Path(path)
        try:
            text = path.read_text(encoding="utf-8-sig")
        except (OSError, UnicodeDecodeError) as error:
            reason = getattr(error, "strerror", None) or "not UTF-8 text"
            raise InputFileError(f"cannot be read ({reason}); check the file", path=path) from None
        reader = csv.DictReader(io.StringIO(text))
        for column in ("term", "kind"):
            if column not in (reader.fieldnames or ()):
                raise InputFileError(
                    f"column {column!r} is missing; a table of kinds has term, kind, and optionally domain "
                    "and synonyms",
                    path=path,
                    row=1,
                )
        processes, others = [], {}
        seen: set[str] = set()
        for row in reader:
            term, kind = normalise_term(row["term"] or ""), (row["kind"] or "").strip().lower()
            if not term or not kind or term in seen:
                raise InputFileError(
                    f"term {term!r} is empty, has no kind, or stands twice; keep one row a term",
                    path=path,
                    row=reader.line_num,
                )
            seen.add(term)
            if kind == "process":
                processes.append((term, (row.get("domain") or "").strip(), row.get("synonyms") or ""))
            else:
                others[term] = kind
        return cls.of(processes, others)

    @classmethod
    def of(cls, processes: Iterable[tuple[str, str, str]], others: Mapping[str, str]) -> Vocabulary:
        """Make a vocabulary from (term, domain, synonyms separated by ``;``) and the other terms."""
        domains: dict[str, str] = {}
        synonyms: dict[str, frozenset[str]] = {}
        for term, domain, more in processes:
            names = frozenset(name for name in map(normalise_term, (term, *more.split(";"))) if name)
            for name in names:
                domains.setdefault(name, domain)
                synonyms.setdefault(name, names)
        return cls(domains=domains, others=dict(others), synonyms=synonyms)


@cache
def shipped_vocabulary() -> Vocabulary:
    """Return the vocabulary of data_tables/processes.csv and term_kinds.csv.

    Returns
    -------
    Vocabulary
        Read once a process.

    Examples
    --------
    >>> "mentalising" in shipped_vocabulary().names_of("theory of mind")
    True
    """
    return Vocabulary.of(
        [(row["term"], row["domain"], row["synonyms"]) for row in read_table("processes")],
        {row["term"]: row["kind"] for row in read_table("term_kinds")},
    )


def chosen_vocabulary(path: str | Path | None) -> Vocabulary:
    """Return the user's own vocabulary where a file is named, else the shipped one.

    Parameters
    ----------
    path : path, optional
        As for `Vocabulary.read`.

    Returns
    -------
    Vocabulary
        Read.

    Raises
    ------
    InputFileError
        If the file cannot be used.

    Examples
    --------
    >>> chosen_vocabulary(None) is shipped_vocabulary()
    True
    """
    return shipped_vocabulary() if path is None else Vocabulary.read(path)
