"""Where each caution begins, with the reason; the one place that holds these numbers."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["Thresholds"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Thresholds:
    """Where each caution begins. All are our own choices, made on open coordinates unless said otherwise.

    Parameters
    ----------
    thin_weigh, thin_stop : float, ratio
        High over low end of the likelihood ratio. Ten: an interval as wide as a whole grade and more.
        Fifty: it spans from "positive" past "strong".
    prior_distance : float, probability
        How far from 1/2 a prior must be for an undecided posterior to look like a finding.
    off_brain_mm : float, mm
        Distance outside the brain mask that no smoothing explains (common practice, no source).
    far_share : float
        Share of the table's radius beyond which its nearest place answers for another neighbourhood.
    """

    thin_weigh: float = 10.0
    thin_stop: float = 50.0
    prior_distance: float = 0.2
    off_brain_mm: float = 4.0
    far_share: float = 0.5
