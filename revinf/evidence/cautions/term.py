"""Is the claimed term a process at all, and does any study carry it?"""

from __future__ import annotations

from collections.abc import Sequence

from revinf.evidence.cautions.caution import Caution

__all__ = ["not_a_process", "term_unlabelled"]


def not_a_process(term: str, what: str) -> Caution | None:
    """Warn where the claimed term is anatomy, method, material or the like, which activity cannot reveal."""
    if not what:
        return None
    return Caution(
        code="not-a-process",
        severity="weigh",
        message=(
            f"'{term}' labels studies by {what}, it is not a mental process; a claim about it is no reverse inference."
        ),
        evidence={"term": term, "kind": what},
    )


def term_unlabelled(term: str, n_studies: int, near: Sequence[str] = ()) -> Caution | None:
    """Stop where no counted study carries the term: there is nothing to count."""
    if n_studies:
        return None
    hint = f"; it has {' or '.join(repr(name) for name in near)}" if near else ""
    return Caution(
        code="term-unlabelled",
        severity="stop",
        message=f"No counted study carries the term {term!r}{hint}.",
        evidence={"term": term, "near": list(near)},
    )
