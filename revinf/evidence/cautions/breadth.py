"""Is the place active under so many processes that its activity tells little of any?"""

from __future__ import annotations

from revinf.evidence.cautions.caution import Caution
from revinf.evidence.cautions.thresholds import Thresholds
from revinf.stats.estimates import Estimate

__all__ = ["broad_region"]


def broad_region(
    percentile: float | None,
    effective_processes: Estimate | None,
    n_processes: int,
    hits: int,
    limits: Thresholds,
) -> Caution | None:
    """Warn where the place is among the busiest of the grey matter and serves most processes alike."""
    if percentile is None or effective_processes is None or n_processes < 2:
        return None
    share = effective_processes.low / n_processes
    if percentile < limits.broad_percentile or share < limits.broad_share or hits < limits.broad_hits:
        return None
    return Caution(
        code="broad-region",
        severity="weigh",
        message=(
            f"This place is active under many processes: busier than {min(percentile, 99):.0f} % of the grey matter, "
            f"and as mixed as if {effective_processes.estimate:.1f} of {n_processes} processes used it equally."
        ),
        evidence={
            "activation_percentile": percentile,
            "effective_processes_low": effective_processes.low,
            "n_processes": n_processes,
            "hits": hits,
        },
    )
