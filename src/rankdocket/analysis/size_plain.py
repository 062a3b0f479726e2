"""Tests of size, the p-value that decided, and what the rows could show, as plain data."""

from collections.abc import Mapping
from decimal import Decimal
from fractions import Fraction

from rankdocket.analysis.could_show import CouldShow, could_show
from rankdocket.analysis.deciding import deciding_p, deciding_test
from rankdocket.analysis.filing import filed, filed_beside
from rankdocket.analysis.interval_plain import limits_to_plain
from rankdocket.analysis.results import AssociationAnalysis, CheckOutcome, Screened
from rankdocket.analysis.size_results import SizeAnalysis, SizeTests
from rankdocket.canonical import Plain
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.study.spec import StudySpec


def size_to_plain(result: AssociationAnalysis, alpha: Decimal) -> dict[str, Plain]:
    """Return the key ``size`` of an association; nothing where the plan does not ask."""
    size = result.size
    match size:
        case None:
            return {}
        case NoAnswer(reason):
            return {"size": {"state": "none", "reason": reason}}
        case SizeAnalysis():
            return {
                "size": {
                    "state": "tested",
                    "coefficient": filed(size.coefficient),
                    "is_capped": size.is_capped,
                    **_value(size, alpha),
                    **({} if size.size is None else _tests(size.size, alpha)),
                }
            }


def deciding_to_plain(result: AssociationAnalysis, alpha: Decimal) -> dict[str, Plain]:
    """Return whose p-value decides a finding, and that p-value before it is adjusted."""
    p = deciding_p(result)
    filed_p: dict[str, Plain] = {} if p is None else {"p": filed_beside(p, alpha)}
    return {"by": deciding_test(result.screened.spec), **filed_p}


def null_values_to_plain(spec: StudySpec) -> dict[str, Plain]:
    """Return the key ``null_value``: the null values of the plan by association; nothing where it names none."""
    values: dict[str, Plain] = {
        name: str(association.hypothesis.null_value)
        for name, association in spec.associations.items()
        if association.hypothesis.null_value is not None
    }
    return {"null_value": values} if values else {}


def could_show_to_plain(
    screened: Mapping[str, Screened], outcomes: Mapping[str, tuple[CheckOutcome, ...]], spec: StudySpec
) -> dict[str, Plain]:
    """Return the key ``could_show``: the plan's power and level, and each association under its name."""
    return {
        "could_show": {
            "planned_power": str(spec.inference.planned_power),
            "interval_level": str(spec.inference.confidence_level),
            "rows_of": {
                name: _could_show(could_show(rows, spec, outcomes[name]), spec.inference.alpha)
                for name, rows in screened.items()
            },
        }
    }


def _value(size: SizeAnalysis, alpha: Decimal) -> dict[str, Plain]:
    if size.value is None:
        return {}
    return {
        "value": {
            "null": str(size.value.null),
            "factor": filed(size.value.factor),
            "z": filed(size.value.z),
            "p": filed_beside(size.value.p, alpha),
        }
    }


def _tests(tests: SizeTests, alpha: Decimal) -> dict[str, Plain]:
    return {
        "delta": str(tests.delta),
        "factor": filed(tests.factor),
        "z_upper": filed(tests.z_upper),
        "z_lower": filed(tests.z_lower),
        "p_above": filed_beside(tests.p_above, alpha),
        "p_within": filed_beside(tests.p_within, alpha),
        "level": filed(tests.level),
        "interval_of_equivalence": limits_to_plain(tests.interval),
        "verdict": tests.verdict,
    }


def _could_show(found: CouldShow, alpha: Decimal) -> dict[str, Plain]:
    attainable: dict[str, Plain] = (
        {"reason": found.attainable_p.reason}
        if isinstance(found.attainable_p, NoAnswer)
        else {"value": filed_beside(found.attainable_p, alpha)}
    )
    interest: dict[str, Plain] = (
        {} if found.width_at_interest is None else {"width_at_interest": _answer(found.width_at_interest)}
    )
    by: dict[str, Plain] = {} if isinstance(found.width_at_zero, NoAnswer) else {"width_by": found.width_by}
    return {
        "rows": found.rows,
        "level": filed(found.level),
        "attainable_p": attainable,
        "smallest_rho": _answer(found.smallest_rho),
        **by,
        "width_at_zero": _answer(found.width_at_zero),
        **interest,
    }


def _answer(found: float | Fraction | NoAnswer) -> dict[str, Plain]:
    return {"reason": found.reason} if isinstance(found, NoAnswer) else {"value": filed(found)}
