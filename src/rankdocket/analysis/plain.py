"""Analysis to plain data: what analysis.json holds, and the addresses that every printed number points to.

Whole numbers below 2**53 are JSON numbers, larger ones and every exact value are text; a value that is not
whole is filed with 12 significant digits (:mod:`rankdocket.analysis.filing`).  An absent value has no key, or the
key ``reason`` beside a ``state``; nothing is ever NaN, and only the count of a p-value that is no count is null.
"""

from collections import Counter
from decimal import Decimal
from fractions import Fraction
from typing import Final

from rankdocket.analysis.adjustment_plain import adjustment_to_plain, member_to_plain
from rankdocket.analysis.built_in_plain import built_in_to_plain
from rankdocket.analysis.filing import exact_decimal, filed, filed_beside, half
from rankdocket.analysis.interval_plain import interval_plan_to_plain, intervals_to_plain
from rankdocket.analysis.more_variables_plain import more_variables_to_plain
from rankdocket.analysis.null_plain import null_to_plain, rank_test_to_plain, series_to_plain
from rankdocket.analysis.results import (
    Analysis,
    AssociationAnalysis,
    CheckOutcome,
    Estimate,
    Finding,
    NotEstimable,
    RankTest,
    Screened,
    Withheld,
)
from rankdocket.analysis.sensitivity_plain import sensitivity_rules_to_plain, sensitivity_to_plain
from rankdocket.analysis.shape_plain import shape_to_plain
from rankdocket.analysis.size_plain import (
    could_show_to_plain,
    deciding_to_plain,
    null_values_to_plain,
    size_to_plain,
)
from rankdocket.analysis.variables import VariableSummary, summarise
from rankdocket.canonical import Plain
from rankdocket.stats.nulls.monte_carlo import look_ends
from rankdocket.stats.ranks import TieGroups
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData, Table

SCHEMA: Final = "urn:rankdocket:analysis:1"


def analysis_to_plain(analysis: Analysis) -> dict[str, Plain]:
    """Return the whole analysis as plain data."""
    words = Counter[str](finding.word or "no finding" for finding in analysis.findings.values())
    return {
        **data_to_plain(analysis.spec, analysis.data),
        "schema": SCHEMA,
        "inference": {
            **_inference(analysis.spec),
            "family": list(analysis.family),
            "family_size": len(analysis.family),
            **adjustment_to_plain(analysis),
            "interval": interval_plan_to_plain(analysis),
        },
        "associations": {
            name: {
                **_association(result, analysis.findings[name], analysis.spec),
                **more_variables_to_plain(analysis.more[name]),
                **sensitivity_to_plain(analysis.sensitivity.get(name), analysis.spec.inference.alpha),
            }
            for name, result in analysis.results.items()
        },
        **series_to_plain(tuple(analysis.results.values())),
        **built_in_to_plain(tuple(analysis.results.values())),
        **could_show_to_plain(
            {name: result.screened for name, result in analysis.results.items()},
            {name: result.checks for name, result in analysis.results.items()},
            analysis.spec,
        ),
        **sensitivity_rules_to_plain(analysis),
        "tally": {
            "associations": len(analysis.results),
            "findings": dict(words),
            "estimates": sum(isinstance(result.estimate, Estimate) for result in analysis.results.values()),
            "tests": sum(isinstance(result.test, RankTest) for result in analysis.results.values()),
        },
    }


def data_to_plain(spec: StudySpec, data: StudyData) -> dict[str, Plain]:
    """Return what is known before anything joint is computed: the study, its tables, each variable alone."""
    return {
        "study": {"number": spec.study.number, "title": spec.study.title},
        "requirements": {
            "fewest_complete_rows": spec.requirements.fewest_complete_rows,
            "most_missing": str(spec.requirements.most_missing),
            "most_tied": str(spec.requirements.most_tied),
            "if_not_met": spec.requirements.if_not_met,
        },
        "tables": {name: _table(table) for name, table in data.tables.items()},
        "variables": {name: _variable(summarise(variable, spec, data)) for name, variable in data.variables.items()},
    }


def screened_to_plain(screened: Screened, outcomes: tuple[CheckOutcome, ...]) -> dict[str, Plain]:
    """Return an association’s rows and checks: the part of its analysis that shows nothing joint."""
    flow = screened.flow
    suspicious: dict[str, Plain] = (
        {"suspicious_lines": [row.row for row in screened.suspicious]} if screened.suspicious else {}
    )
    return {
        "x": screened.spec.x,
        "y": screened.spec.y,
        "rows": {
            "read": flow.read,
            "left_out": len(flow.left_out),
            "left_out_lines": [left.row for left in flow.left_out],
            "missing_x": flow.missing_x,
            "missing_y": flow.missing_y,
            "missing_both": flow.missing_both,
            "complete": flow.complete,
            **suspicious,
        },
        "ties_x": _ties(screened.x_ties),
        "ties_y": _ties(screened.y_ties),
        "checks": {outcome.key: _check(outcome) for outcome in outcomes},
    }


def _inference(spec: StudySpec) -> dict[str, Plain]:
    inference = spec.inference
    smallest = {
        name: str(association.hypothesis.smallest_of_interest)
        for name, association in spec.associations.items()
        if association.hypothesis.smallest_of_interest is not None
    }
    seed: dict[str, Plain] = {} if inference.p_value.seed is None else {"seed": str(inference.p_value.seed)}
    return {
        **null_values_to_plain(spec),
        "alpha": str(inference.alpha),
        "sidedness": inference.sidedness,
        "confidence_level": str(inference.confidence_level),
        "planned_power": str(inference.planned_power),
        "adjust": inference.several_tests.adjust,
        "among": inference.several_tests.among,
        "p_by": inference.p_value.by,
        "permutations": inference.p_value.permutations,
        "most_draws": inference.p_value.most_draws,
        "looks": len(look_ends(inference.p_value.permutations, inference.p_value.most_draws)),
        "budget": {
            "seconds": str(inference.p_value.budget.seconds),
            "memory": str(inference.p_value.budget.memory),
        },
        "smallest_of_interest": smallest,
        **seed,
    }


def _table(table: Table) -> dict[str, Plain]:
    received = {"received_on": table.spec.received_on, "received_from": table.spec.received_from}
    return {
        "file": table.source.path,
        "size": table.source.size,
        "digest": table.source.digest,
        "values_digest": table.source.values_digest,
        "rows": len(table.row_numbers),
        "columns": list(table.columns),
        "lines": list(table.row_numbers),
        **{key: value for key, value in received.items() if value is not None},
    }


def _variable(summary: VariableSummary) -> dict[str, Plain]:
    names = ("smallest", "lower_quartile", "median", "upper_quartile", "largest")
    return {
        "n": summary.n,
        "missing": [{"meaning": meaning, "rows": rows} for meaning, rows in summary.missing.items()],
        "missing_total": sum(summary.missing.values()),
        "distinct": summary.distinct,
        "largest_tie": summary.largest_tie,
        "tied_rows": summary.tied_rows,
        "levels": [{"label": label, "rows": rows} for label, rows in summary.levels.items()],
        **dict(zip(names, summary.five, strict=False)),
    }


def _ties(ties: TieGroups) -> dict[str, Plain]:
    share: dict[str, Plain] = {"share": f"{ties.tied_rows}/{ties.n}"} if ties.n else {}
    return {
        "distinct": ties.distinct,
        "groups": ties.groups,
        "largest": ties.largest,
        "tied_rows": ties.tied_rows,
        "cube_sum": str(ties.cube_sum),
        "sizes": [size for size in ties.sizes if size > 1],
        **share,
    }


def _check(outcome: CheckOutcome) -> dict[str, Plain]:
    limit: dict[str, Plain] = {} if outcome.limit is None else {"limit": outcome.limit.exact}
    found: dict[str, Plain] = {} if outcome.found is None else {"found": outcome.found.exact}
    waived: dict[str, Plain] = {} if outcome.waived is None else {"waived": outcome.waived}
    return {
        "state": outcome.state,
        "reason": outcome.reason,
        "withholds": outcome.withholds,
        **limit,
        **found,
        **waived,
    }


def _association(result: AssociationAnalysis, finding: Finding, spec: StudySpec) -> dict[str, Plain]:
    alpha, adjusted = spec.inference.alpha, spec.inference.interval.adjusted
    smallest: dict[str, Plain] = {}
    if result.smallest_attainable_p is not None:
        smallest = {"smallest_attainable_p": filed_beside(result.smallest_attainable_p, alpha)}
    return {
        **screened_to_plain(result.screened, result.checks),
        "coefficient": result.screened.spec.coefficient,
        "estimate": _estimate(result),
        "test": _test(result, alpha),
        **_null(result, alpha),
        **intervals_to_plain(result, adjusted),
        "comparisons": _comparisons(result, alpha),
        **shape_to_plain(result),
        **size_to_plain(result, alpha),
        "finding": {**_finding(finding, alpha), **deciding_to_plain(result, alpha)},
        "worksheet": _worksheet(result.screened),
        **smallest,
    }


def _estimate(result: AssociationAnalysis) -> dict[str, Plain]:
    estimate = result.estimate
    match estimate:
        case NotEstimable(reason):
            return {"state": "not estimable", "reason": reason}
        case Withheld(reason):
            return {"state": "withheld", "reason": reason}
        case Estimate():
            coefficient = estimate.coefficient
            plain: dict[str, Plain] = {
                "state": "estimated",
                "n": coefficient.n,
                "value": coefficient.decimal_text(),
                "numerator": str(coefficient.numerator),
                "x_square": str(coefficient.x_square),
                "y_square": str(coefficient.y_square),
            }
            if estimate.corrected is not None and estimate.squared_differences is not None:
                plain["squared_differences"] = exact_decimal(estimate.squared_differences)
                plain["x_term"] = exact_decimal(estimate.corrected.x_term)
                plain["y_term"] = exact_decimal(estimate.corrected.y_term)
                plain["corrected_form"] = estimate.corrected.decimal_text
            return plain


def _test(result: AssociationAnalysis, alpha: Decimal) -> dict[str, Plain]:
    test = result.test
    match test:
        case NotEstimable(reason):
            return {"state": "not estimable", "reason": reason}
        case Withheld(reason):
            return {"state": "withheld", "reason": reason}
        case RankTest():
            return rank_test_to_plain(test, alpha)


def _null(result: AssociationAnalysis, alpha: Decimal) -> dict[str, Plain]:
    if not isinstance(result.test, RankTest) or not isinstance(result.estimate, Estimate):
        return {}
    return {"null": null_to_plain(result.test, result.estimate.coefficient, alpha)}


def _comparisons(result: AssociationAnalysis, alpha: Decimal) -> dict[str, Plain]:
    plain: dict[str, Plain] = {}
    comparisons = result.comparisons
    if comparisons.t_value_p is not None:
        plain["t_value_p"] = filed(comparisons.t_value_p)
    if comparisons.pearson is not None:
        plain["pearson"] = filed(comparisons.pearson)
    if comparisons.doubled_p is not None:
        plain["doubled_p"] = filed_beside(comparisons.doubled_p, alpha)
    if isinstance(result.estimate, Estimate) and result.estimate.short_form is not None:
        plain["short_form"] = filed(result.estimate.short_form)
    return plain


def _finding(finding: Finding, alpha: Decimal) -> dict[str, Plain]:
    plain: dict[str, Plain] = {"word": finding.word or "no finding", "basis": finding.basis}
    if finding.p_adjusted is not None:
        plain["p_adjusted"] = filed_beside(finding.p_adjusted, alpha)
    return plain | member_to_plain(finding.max_t, finding.p_adjusted)


def _worksheet(screened: Screened) -> dict[str, Plain]:
    differences = [row.x_doubled_rank - row.y_doubled_rank for row in screened.rows]
    return {
        "row": [row.row for row in screened.rows],
        "x": [row.x_literal for row in screened.rows],
        "y": [row.y_literal for row in screened.rows],
        "rank_x": [half(row.x_doubled_rank) for row in screened.rows],
        "rank_y": [half(row.y_doubled_rank) for row in screened.rows],
        "difference": [half(difference) for difference in differences],
        "squared": [exact_decimal(Fraction(difference * difference, 4)) for difference in differences],
    }
