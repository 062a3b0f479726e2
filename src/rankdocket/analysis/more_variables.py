"""More than two variables: a partial rank correlation, two associations on the same rows, groups of rows.

All of it is supplementary: no finding rests on it and none of it enters a family. An estimate shares the fate of the
association’s estimate, p-values and intervals that of its test.
"""

from collections.abc import Mapping

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.more_results import VARIANCE, Absent, Comparison, Difference, GivenCovariates, MoreVariables
from rankdocket.analysis.more_rows import NOT_VARYING, TableRows, no_estimate, no_inference
from rankdocket.analysis.results import AssociationAnalysis
from rankdocket.analysis.subgroups import subgroups_of
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.partial import partial_rho
from rankdocket.stats.ranks import Codes
from rankdocket.stats.rho import rho
from rankdocket.stats.same_row_differences import (
    NoneShared,
    OneShared,
    difference_no_variable_shared,
    difference_one_variable_shared,
)
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData


def examine_more_variables(
    name: str, results: Mapping[str, AssociationAnalysis], spec: StudySpec, data: StudyData
) -> MoreVariables:
    """Do what the plan asks about more than the two variables of an association."""
    result, association = results[name], results[name].screened.spec
    if not (association.covariates or association.compare_with or association.groups):
        return MoreVariables(None, None, None)
    rows = TableRows.of(result.screened, data)
    other = None if association.compare_with is None else results[association.compare_with]
    return MoreVariables(
        _partial(result, rows, spec) if association.covariates else None,
        _comparison(result, other, rows, spec) if other is not None else None,
        subgroups_of(result, rows, spec) if association.groups is not None else None,
    )


def _partial(result: AssociationAnalysis, rows: TableRows, spec: StudySpec) -> GivenCovariates:
    association = result.screened.spec
    positions = rows.complete_for(association.covariates)
    lines = rows.lines(positions)
    absent = no_estimate((result,), len(positions), spec)
    if absent is not None:
        return GivenCovariates(association.covariates, lines, absent, absent)
    x, y, *held = [
        rows.codes(variable, positions) for variable in (association.x, association.y, *association.covariates)
    ]
    answer = partial_rho(x, y, tuple(held))
    if isinstance(answer, NoAnswer):
        none = Absent("not estimable", answer.reason)
        return GivenCovariates(association.covariates, lines, none, none)
    withheld = no_inference((result,), len(positions), spec)
    p = answer.p(direction_of(result.screened, spec)) if withheld is None else withheld
    return GivenCovariates(association.covariates, lines, answer, p)


def _comparison(
    result: AssociationAnalysis, other: AssociationAnalysis, rows: TableRows, spec: StudySpec
) -> Comparison:
    first, second = result.screened.spec, other.screened.spec
    variables = tuple(dict.fromkeys((first.x, first.y, second.x, second.y)))
    positions = rows.complete_for(variables)
    lines = rows.lines(positions)
    absent = no_estimate((result, other), len(positions), spec)
    if absent is not None:
        return Comparison(second.name, variables, lines, absent, absent)
    codes = {variable: rows.codes(variable, positions) for variable in variables}
    if any(int(column.max()) == 0 for column in codes.values()):
        none = Absent("not estimable", NOT_VARYING)
        return Comparison(second.name, variables, lines, none, none)
    coefficients = (rho(codes[first.x], codes[first.y]), rho(codes[second.x], codes[second.y]))
    difference: Difference | Absent | None = no_inference((result, other), len(positions), spec)
    if difference is None:
        difference = _same_row_difference((first.x, first.y), (second.x, second.y), codes, spec)
    return Comparison(second.name, variables, lines, coefficients, difference)


def _same_row_difference(
    one: tuple[str, str], other: tuple[str, str], codes: Mapping[str, Codes], spec: StudySpec
) -> Difference | Absent:
    def between(left: str, right: str) -> float:
        return rho(codes[left], codes[right]).value

    n, level = len(codes[one[0]]), spec.inference.confidence_level
    shared = [variable for variable in one if variable in other]
    if shared:
        own, others = (next(each for each in two if each != shared[0]) for two in (one, other))
        given = OneShared(between(*one), between(*other), between(own, others))
        found = difference_one_variable_shared(given, n, variance=VARIANCE, level=level)
        if isinstance(found, NoAnswer):
            return Absent("not estimable", found.reason)
        return Difference("one variable shared", found.meng.z, found.meng.p("two-sided"), found.low, found.high)
    (j, k), (h, m) = one, other
    six = NoneShared(between(j, k), between(h, m), between(j, h), between(j, m), between(k, h), between(k, m))
    apart = difference_no_variable_shared(six, n, variance=VARIANCE, level=level)
    if isinstance(apart, NoAnswer):
        return Absent("not estimable", apart.reason)
    return Difference("no variable shared", apart.steiger.z, apart.steiger.p("two-sided"), apart.low, apart.high)
