"""Rank correlation studies from one spec file to a numbered, audit-ready report.

Public names are imported on first use, so that ``import rankdocket`` costs next to nothing.
"""

from importlib import import_module
from importlib.metadata import version
from types import MappingProxyType
from typing import TYPE_CHECKING, Final

if TYPE_CHECKING:
    from rankdocket.analysis.arrays import associate as associate
    from rankdocket.stats.adjustments import adjusted as adjusted
    from rankdocket.stats.intervals.bonett_wright import bonett_wright_limits as bonett_wright_limits
    from rankdocket.stats.tables import critical_value as critical_value
    from rankdocket.stats.tables import critical_value_approximate as critical_value_approximate
    from rankdocket.stats.tables import critical_value_large_sample as critical_value_large_sample
    from rankdocket.stats.tables import null_counts as null_counts
    from rankdocket.workflow.issue import issue as issue
    from rankdocket.workflow.report import report as report
    from rankdocket.workflow.screen import screen as screen
    from rankdocket.workflow.verify import verify as verify

_HOME: Final = MappingProxyType(
    {
        "adjusted": "rankdocket.stats.adjustments",
        "associate": "rankdocket.analysis.arrays",
        "bonett_wright_limits": "rankdocket.stats.intervals.bonett_wright",
        "critical_value": "rankdocket.stats.tables",
        "critical_value_approximate": "rankdocket.stats.tables",
        "critical_value_large_sample": "rankdocket.stats.tables",
        "issue": "rankdocket.workflow.issue",
        "null_counts": "rankdocket.stats.tables",
        "report": "rankdocket.workflow.report",
        "screen": "rankdocket.workflow.screen",
        "verify": "rankdocket.workflow.verify",
    }
)

__all__ = [
    "__version__",
    "adjusted",
    "associate",
    "bonett_wright_limits",
    "critical_value",
    "critical_value_approximate",
    "critical_value_large_sample",
    "issue",
    "null_counts",
    "report",
    "screen",
    "verify",
]


def __getattr__(name: str) -> object:
    if name == "__version__":
        return version("rankdocket")
    if name in _HOME:
        return getattr(import_module(_HOME[name]), name)
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")


def __dir__() -> list[str]:
    return sorted(__all__)
