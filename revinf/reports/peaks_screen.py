"""What `revinf peaks` says in the terminal."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from revinf.reports.numbers import coordinates
from revinf.reports.terminal import fitting, hanging, plain_table
from revinf.reports.wording import agreement

if TYPE_CHECKING:
    from revinf.evidence.map_peaks import NamedPeak

__all__ = ["peaks_screen"]

_SHOWN = 20


def peaks_screen(peaks: list[NamedPeak], written: str, *, width: int = 104) -> list[Any]:
    """Return the screen of the peaks of a map.

    Parameters
    ----------
    peaks : list of NamedPeak
        From `revinf.map_peaks`.
    written : str
        The file.
    width : int, columns
        Of the terminal.

    Returns
    -------
    list
        Renderables.
    """
    clusters = len({item.peak.cluster.rstrip("abcdefghijklmnopqrstuvwxyz") for item in peaks})
    rows = [("Found", f"{agreement(len(peaks), 'peak')} in {agreement(clusters, 'cluster')}"), ("Written", written)]
    if not peaks:
        rows.insert(1, ("", "no voxel reaches the threshold in a cluster of that extent; try a lower one"))
        return [hanging(rows)]
    listed = [
        [
            item.peak.cluster,
            coordinates(item.peak.xyz),
            f"{item.peak.statistic:.2f}".replace("-", "−"),
            "" if item.peak.cluster_mm3 is None else f"{item.peak.cluster_mm3:,.0f}",
            item.name,
        ]
        for item in peaks[:_SHOWN]
    ]
    header = ["cluster", "peak (mm)", "value", "mm³", "where"]
    drawn = [hanging(rows), plain_table(*fitting(header, listed, width, drop=(3,)), right=(2, 3))]
    if len(peaks) > _SHOWN:
        drawn.append(hanging([("", f"{len(peaks) - _SHOWN} more in the file")]))
    return drawn
