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
    from revinf.evidence.assess import assess
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.choices import Choices
    from revinf.evidence.claim import Claim
    from revinf.literature.building import build_literature
    from revinf.literature.import_options import ImportOptions
    from revinf.literature.literature import Literature
    from revinf.literature.manifest import Description

__all__ = [
    "Assessment",
    "BaseRateTable",
    "Choices",
    "Claim",
    "Description",
    "ImportOptions",
    "Literature",
    "__version__",
    "assess",
    "build_literature",
]

_HOMES = {
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
