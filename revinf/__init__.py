"""revinf: how much does activity in a place say about the process that a paper claims?

A reverse-inference sanity checker for activation claims, on base rates that you bring or build. Public
names are loaded on first use, so that `import revinf` costs nothing.

>>> from revinf import BaseRateTable, Claim, assess
>>> from revinf.knowledge import table_path
>>> table = BaseRateTable.read(table_path("published_frequencies"))
>>> assess(Claim(term="language", region="Broca's area"), table).counts.term_active
166
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

from revinf.knowledge import VERSION as __version__

if TYPE_CHECKING:
    from revinf.base_rates.table import BaseRateTable
    from revinf.calibration.calibrate import calibrate
    from revinf.calibration.summaries import Calibration
    from revinf.evidence.asked_region import AskedRegion
    from revinf.evidence.assess import assess
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.audit import Audit, audit
    from revinf.evidence.brain_map import BrainMap
    from revinf.evidence.choices import Choices
    from revinf.evidence.claim import Claim
    from revinf.evidence.claims_table import claims_from_frame, read_claims
    from revinf.evidence.comparison import Comparison, compare
    from revinf.evidence.map_peaks import map_peaks
    from revinf.evidence.map_term import map_term
    from revinf.evidence.map_terms import TermHits, hits_of_terms, map_terms
    from revinf.evidence.profile import Profile, profile
    from revinf.evidence.settle import settle
    from revinf.evidence.settlement import Settlement
    from revinf.evidence.source_choice import choose_source
    from revinf.literature.building import build_literature
    from revinf.literature.import_options import ImportOptions
    from revinf.literature.leaving_out import leave_out
    from revinf.literature.literature import Literature
    from revinf.literature.manifest import Description
    from revinf.manuscript.found import Scan
    from revinf.manuscript.reading import read_document
    from revinf.manuscript.scanning import scan
    from revinf.reports.audit_folder import write_audit_folder
    from revinf.reports.html_report import write_html

__all__ = [
    "AskedRegion",
    "Assessment",
    "Audit",
    "BaseRateTable",
    "BrainMap",
    "Calibration",
    "Choices",
    "Claim",
    "Comparison",
    "Description",
    "ImportOptions",
    "Literature",
    "Profile",
    "Scan",
    "Settlement",
    "TermHits",
    "__version__",
    "assess",
    "audit",
    "build_literature",
    "calibrate",
    "choose_source",
    "claims_from_frame",
    "compare",
    "hits_of_terms",
    "leave_out",
    "map_peaks",
    "map_term",
    "map_terms",
    "profile",
    "read_claims",
    "read_document",
    "scan",
    "settle",
    "write_audit_folder",
    "write_html",
]

_HOMES = {
    "BrainMap": "revinf.evidence.brain_map",
    "Comparison": "revinf.evidence.comparison",
    "compare": "revinf.evidence.comparison",
    "map_term": "revinf.evidence.map_term",
    "map_terms": "revinf.evidence.map_terms",
    "hits_of_terms": "revinf.evidence.map_terms",
    "TermHits": "revinf.evidence.map_terms",
    "Calibration": "revinf.calibration.summaries",
    "Settlement": "revinf.evidence.settlement",
    "calibrate": "revinf.calibration.calibrate",
    "leave_out": "revinf.literature.leaving_out",
    "settle": "revinf.evidence.settle",
    "AskedRegion": "revinf.evidence.asked_region",
    "Audit": "revinf.evidence.audit",
    "Profile": "revinf.evidence.profile",
    "audit": "revinf.evidence.audit",
    "choose_source": "revinf.evidence.source_choice",
    "claims_from_frame": "revinf.evidence.claims_table",
    "profile": "revinf.evidence.profile",
    "Scan": "revinf.manuscript.found",
    "map_peaks": "revinf.evidence.map_peaks",
    "read_document": "revinf.manuscript.reading",
    "scan": "revinf.manuscript.scanning",
    "read_claims": "revinf.evidence.claims_table",
    "write_audit_folder": "revinf.reports.audit_folder",
    "write_html": "revinf.reports.html_report",
    "Assessment": "revinf.evidence.assessment",
    "BaseRateTable": "revinf.base_rates.table",
    "Choices": "revinf.evidence.choices",
    "Claim": "revinf.evidence.claim",
    "Description": "revinf.literature.manifest",
    "ImportOptions": "revinf.literature.import_options",
    "Literature": "revinf.literature.literature",
    "assess": "revinf.evidence.assess",
    "build_literature": "revinf.literature.building",
}


def __getattr__(name: str) -> object:
    if name in _HOMES:
        return getattr(import_module(_HOMES[name]), name)
    raise AttributeError(f"module 'revinf' has no attribute {name!r}")


def __dir__() -> list[str]:
    return sorted(__all__)
