"""More than two variables as plain data: the keys ``partial``, ``comparison`` and ``subgroups`` of an association."""

from rankdocket.analysis.filing import filed
from rankdocket.analysis.interval_plain import limits_to_plain
from rankdocket.analysis.more_results import (
    VARIANCE,
    Absent,
    Comparison,
    Difference,
    GivenCovariates,
    Group,
    MoreVariables,
    Subgroups,
)
from rankdocket.canonical import Plain
from rankdocket.stats.coefficient import Coefficient


def more_variables_to_plain(more: MoreVariables) -> dict[str, Plain]:
    """Return what the plan asked about more than two variables; nothing where it asked nothing."""
    plain: dict[str, Plain] = {}
    if more.partial is not None:
        plain["partial"] = _partial(more.partial)
    if more.comparison is not None:
        plain["comparison"] = _comparison(more.comparison)
    if more.subgroups is not None:
        plain["subgroups"] = _subgroups(more.subgroups)
    return plain


def _partial(partial: GivenCovariates) -> dict[str, Plain]:
    head: dict[str, Plain] = {"covariates": list(partial.covariates), "n": len(partial.lines)}
    answer = partial.answer
    if isinstance(answer, Absent):
        return {**head, **_absent(answer)}
    return {
        **head,
        "state": "estimated",
        "value": answer.decimal_text(),
        "numerator": str(answer.numerator),
        "x_square": str(answer.x_square),
        "y_square": str(answer.y_square),
        "rho": _coefficient(answer.plain),
        "df": answer.df,
        "test": _absent(partial.p) if isinstance(partial.p, Absent) else {"state": "tested", "p": filed(partial.p)},
    }


def _comparison(comparison: Comparison) -> dict[str, Plain]:
    head: dict[str, Plain] = {
        "with": comparison.other,
        "variables": list(comparison.variables),
        "shared": comparison.shared,
        "n": len(comparison.lines),
    }
    if isinstance(comparison.coefficients, Absent):
        return {**head, **_absent(comparison.coefficients)}
    first, second = comparison.coefficients
    return {
        **head,
        "state": "estimated",
        "first": _coefficient(first),
        "second": _coefficient(second),
        "difference": {"value": filed(first.value - second.value), **_difference(comparison.difference)},
    }


def _subgroups(subgroups: Subgroups) -> dict[str, Plain]:
    plain: dict[str, Plain] = {
        "column": subgroups.column,
        "without_group": sum(label is None for label in subgroups.label_of_line.values()),
        "groups": [_group(group) for group in subgroups.groups],
    }
    comparison = subgroups.comparison
    if comparison is None:
        return plain
    compared: list[Plain] = [subgroups.groups[place].label for place in (comparison.first, comparison.second)]
    value: dict[str, Plain] = {} if isinstance(comparison.value, Absent) else {"value": filed(comparison.value)}
    return {**plain, "difference": {"groups": compared, **value, **_difference(comparison.difference)}}


def _group(group: Group) -> dict[str, Plain]:
    head: dict[str, Plain] = {"label": group.label, "n": group.n}
    if isinstance(group.coefficient, Absent):
        return {**head, **_absent(group.coefficient)}
    return {
        **head,
        "state": "estimated",
        **_coefficient(group.coefficient),
        "interval": limits_to_plain(group.interval),
    }


def _difference(difference: Difference | Absent) -> dict[str, Plain]:
    if isinstance(difference, Absent):
        return _absent(difference)
    return {
        "state": "tested",
        "by": difference.method,
        "variance": VARIANCE,
        "z": filed(difference.z),
        "p": filed(difference.p),
        "low": filed(difference.low),
        "high": filed(difference.high),
    }


def _coefficient(coefficient: Coefficient) -> dict[str, Plain]:
    return {
        "value": coefficient.decimal_text(),
        "numerator": str(coefficient.numerator),
        "x_square": str(coefficient.x_square),
        "y_square": str(coefficient.y_square),
    }


def _absent(absent: Absent) -> dict[str, Plain]:
    return {"state": absent.state, "reason": absent.reason}
