"""Groups of rows: the coefficient of each, and how two of them differ; no finding and no p-value for one group."""

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.intervals import interval_as_planned, resample_address
from rankdocket.analysis.more_results import VARIANCE, Absent, Difference, Group, GroupComparison, Subgroups
from rankdocket.analysis.more_rows import NOT_VARYING, TOO_FEW, TableRows, absent_estimate, withheld_test
from rankdocket.analysis.results import AssociationAnalysis
from rankdocket.stats.coefficient import FEWEST_ROWS, Coefficient
from rankdocket.stats.differences import GroupCoefficient, difference_two_groups
from rankdocket.stats.interval import IntervalQuestion, NoInterval
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.study.groups import group_of_rows
from rankdocket.study.spec import StudySpec
from rankdocket.study.wording import composed


def subgroups_of(result: AssociationAnalysis, rows: TableRows, spec: StudySpec) -> Subgroups:
    """Look at each group of rows that the plan makes."""
    association = result.screened.spec
    assert association.groups is not None
    label_of = group_of_rows(association, spec, rows.table)
    compared = tuple(composed(label) for label in association.groups.compared)
    found = dict.fromkeys((*compared, *(label for at in rows.positions if (label := label_of[at]) is not None)))
    groups = tuple(
        _group(result, rows, label, tuple(at for at in rows.positions if label_of[at] == label), spec=spec)
        for label in found
    )
    return Subgroups(
        association.groups.column,
        groups,
        {rows.table.row_numbers[at]: label_of[at] for at in rows.positions},
        _group_comparison(result, groups, spec) if compared else None,
    )


def _group(
    result: AssociationAnalysis, rows: TableRows, label: str, positions: tuple[int, ...], *, spec: StudySpec
) -> Group:
    association, n = result.screened.spec, len(positions)
    absent = absent_estimate((result,))
    if absent is None and n < max(spec.requirements.fewest_complete_rows, FEWEST_ROWS):
        absent = Absent("not estimable", TOO_FEW)
    if absent is not None:
        return Group(label, n, absent, NoInterval(absent.reason))
    x, y = rows.codes(association.x, positions), rows.codes(association.y, positions)
    coefficient = rho(x, y) if association.coefficient == "Spearman rho" else tau_b(x, y)
    if not coefficient.is_defined:
        return Group(label, n, Absent("not estimable", NOT_VARYING), NoInterval(NOT_VARYING))
    withheld = withheld_test((result,))
    if withheld is not None:
        return Group(label, n, coefficient, NoInterval(withheld.reason))
    question = IntervalQuestion(coefficient, x, y, spec.inference.confidence_level, direction_of(result.screened, spec))
    address = resample_address(association.name, spec)
    interval = interval_as_planned(spec, question, (*address, label) if address else ())
    return Group(label, n, coefficient, interval)


def _group_comparison(result: AssociationAnalysis, groups: tuple[Group, ...], spec: StudySpec) -> GroupComparison:
    first, second = groups[0], groups[1]
    for group in (first, second):
        if not isinstance(group.coefficient, Coefficient):
            return GroupComparison(0, 1, group.coefficient, group.coefficient)
    assert isinstance(first.coefficient, Coefficient)
    assert isinstance(second.coefficient, Coefficient)
    r = (first.coefficient.value, second.coefficient.value)
    value = r[0] - r[1]
    withheld = withheld_test((result,))
    if withheld is not None:
        return GroupComparison(0, 1, value, withheld)
    found = difference_two_groups(
        GroupCoefficient(r[0], first.n),
        GroupCoefficient(r[1], second.n),
        variance=VARIANCE,
        level=spec.inference.confidence_level,
    )
    if isinstance(found, NoAnswer):
        return GroupComparison(0, 1, value, Absent("not estimable", found.reason))
    return GroupComparison(
        0, 1, value, Difference("two groups", found.test.z, found.p("two-sided"), found.low, found.high)
    )
