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
    from rankdocket.stats.chatterjee import chatterjee_xi as chatterjee_xi
    from rankdocket.stats.differences import GroupCoefficient as GroupCoefficient
    from rankdocket.stats.differences import difference_two_groups as difference_two_groups
    from rankdocket.stats.equivalence import minimum_effect as minimum_effect
    from rankdocket.stats.equivalence import tost_z as tost_z
    from rankdocket.stats.equivalence import value_test as value_test
    from rankdocket.stats.intervals.bonett_wright import bonett_wright_limits as bonett_wright_limits
    from rankdocket.stats.intervals.fieller import fieller_limits as fieller_limits
    from rankdocket.stats.intervals.fisher import fisher_limits as fisher_limits
    from rankdocket.stats.partial import partial_spearman as partial_spearman
    from rankdocket.stats.same_row_differences import NoneShared as NoneShared
    from rankdocket.stats.same_row_differences import OneShared as OneShared
    from rankdocket.stats.same_row_differences import difference_no_variable_shared as difference_no_variable_shared
    from rankdocket.stats.same_row_differences import difference_one_variable_shared as difference_one_variable_shared
    from rankdocket.stats.sample_size import PlannedTest as PlannedTest
    from rankdocket.stats.sample_size import sample_size as sample_size
    from rankdocket.stats.sequence_tests import runs_test_median as runs_test_median
    from rankdocket.stats.sequence_tests import von_neumann as von_neumann
    from rankdocket.stats.shapiro_wilk import shapiro_wilk as shapiro_wilk
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
        "GroupCoefficient": "rankdocket.stats.differences",
        "NoneShared": "rankdocket.stats.same_row_differences",
        "OneShared": "rankdocket.stats.same_row_differences",
        "PlannedTest": "rankdocket.stats.sample_size",
        "adjusted": "rankdocket.stats.adjustments",
        "associate": "rankdocket.analysis.arrays",
        "bonett_wright_limits": "rankdocket.stats.intervals.bonett_wright",
        "chatterjee_xi": "rankdocket.stats.chatterjee",
        "critical_value": "rankdocket.stats.tables",
        "critical_value_approximate": "rankdocket.stats.tables",
        "critical_value_large_sample": "rankdocket.stats.tables",
        "difference_no_variable_shared": "rankdocket.stats.same_row_differences",
        "difference_one_variable_shared": "rankdocket.stats.same_row_differences",
        "difference_two_groups": "rankdocket.stats.differences",
        "fieller_limits": "rankdocket.stats.intervals.fieller",
        "fisher_limits": "rankdocket.stats.intervals.fisher",
        "issue": "rankdocket.workflow.issue",
        "minimum_effect": "rankdocket.stats.equivalence",
        "null_counts": "rankdocket.stats.tables",
        "partial_spearman": "rankdocket.stats.partial",
        "report": "rankdocket.workflow.report",
        "runs_test_median": "rankdocket.stats.sequence_tests",
        "sample_size": "rankdocket.stats.sample_size",
        "screen": "rankdocket.workflow.screen",
        "shapiro_wilk": "rankdocket.stats.shapiro_wilk",
        "tost_z": "rankdocket.stats.equivalence",
        "value_test": "rankdocket.stats.equivalence",
        "verify": "rankdocket.workflow.verify",
        "von_neumann": "rankdocket.stats.sequence_tests",
    }
)

__all__ = [
    "GroupCoefficient",
    "NoneShared",
    "OneShared",
    "PlannedTest",
    "__version__",
    "adjusted",
    "associate",
    "bonett_wright_limits",
    "chatterjee_xi",
    "critical_value",
    "critical_value_approximate",
    "critical_value_large_sample",
    "difference_no_variable_shared",
    "difference_one_variable_shared",
    "difference_two_groups",
    "fieller_limits",
    "fisher_limits",
    "issue",
    "minimum_effect",
    "null_counts",
    "partial_spearman",
    "report",
    "runs_test_median",
    "sample_size",
    "screen",
    "shapiro_wilk",
    "tost_z",
    "value_test",
    "verify",
    "von_neumann",
]


def __getattr__(name: str) -> object:
    if name == "__version__":
        return version("rankdocket")
    if name in _HOME:
        return getattr(import_module(_HOME[name]), name)
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")


def __dir__() -> list[str]:
    return sorted(__all__)
