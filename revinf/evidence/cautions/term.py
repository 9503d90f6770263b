"""Is the claimed term a process at all?"""

from __future__ import annotations

from revinf.evidence.cautions.caution import Caution

__all__ = ["not_a_process"]


def not_a_process(term: str, what: str) -> Caution | None:
    """Warn where the claimed term is anatomy, method, material or the like, which activity cannot reveal."""
    if not what:
        return None
    return Caution(
        code="not-a-process",
        severity="weigh",
        message=(
            f"'{term}' labels studies by {what}, it is not a mental process; a claim about it is no reverse "
            "inference."
        ),
        evidence={"term": term, "kind": what},
    )
