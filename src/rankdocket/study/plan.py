"""The plan: the part of a spec that fixes what is computed, as plain data for its digest."""

from decimal import Decimal

from rankdocket.canonical import Plain
from rankdocket.study.cells import plain_digits
from rankdocket.study.kinds import memory_text
from rankdocket.study.spec import (
    AssociationSpec,
    DataSpec,
    InferenceSpec,
    RequirementsSpec,
    RowsSpec,
    StudySpec,
    VariableSpec,
)


def plan_of(spec: StudySpec) -> Plain:
    """Return rows, variables, associations, inference, requirements and the rules by which data are read.

    People, paths, dates of receipt and everything about the report stay outside: they may change without
    changing what is computed.  Decimals are text in their shortest form, so that 0.050 and 0.05 are one plan.
    """
    return {
        "data": {name: _reading(data) for name, data in spec.data.items()},
        "rows": _rows(spec.rows),
        "variables": {name: _variable(variable) for name, variable in spec.variables.items()},
        "associations": {name: _association(association) for name, association in spec.associations.items()},
        "inference": _inference(spec.inference),
        "requirements": _requirements(spec.requirements),
    }


def _reading(data: DataSpec) -> Plain:
    return {
        "separator": data.separator,
        "decimal_mark": data.decimal_mark,
        "thousands_mark": data.thousands_mark,
        "text_encoding": data.text_encoding,
        "comment_mark": data.comment_mark,
        "column_names_in_row": data.column_names_in_row,
        "units_in_row": data.units_in_row,
        "first_data_row": data.first_data_row,
        "last_data_row": data.last_data_row,
        "missing_codes": dict(data.missing_codes),
    }


def _rows(rows: RowsSpec) -> Plain:
    # A plan that calls no row suspicious is the same plan as one from before there was such a key.
    suspicious: dict[str, Plain] = (
        {"suspicious": [{"where": dict(item.where), "reason": item.reason} for item in rows.suspicious]}
        if rows.suspicious
        else {}
    )
    return {
        "one_row_is": rows.one_row_is,
        "repeated_within": rows.repeated_within,
        "time_order": rows.time_order,
        "independent_because": rows.independent_because,
        "leave_out": [{"where": dict(item.where), "reason": item.reason} for item in rows.leave_out],
        **suspicious,
    }


def _variable(variable: VariableSpec) -> Plain:
    return {
        "table": variable.table,
        "column": variable.column,
        "label": variable.label,
        "unit": variable.unit,
        "scale": variable.scale,
        "lowest_to_highest": list(variable.lowest_to_highest),
        "other_spellings": dict(variable.other_spellings),
        "missing_codes": dict(variable.missing_codes),
        # Absent where the spec is silent, so that a plan from before this key keeps its digest.
        **({} if variable.derived_from is None else {"derived_from": list(variable.derived_from)}),
    }


def _association(association: AssociationSpec) -> Plain:
    return {
        "between": [association.x, association.y],
        "question": association.question,
        "role": association.role,
        "hypothesis": {
            "expected_sign": association.hypothesis.expected_sign,
            "smallest_of_interest": _shortest(association.hypothesis.smallest_of_interest),
            "claim": association.hypothesis.claim,
            "null_value": _shortest(association.hypothesis.null_value),
        },
        "coefficient": association.coefficient,
        **_more_variables(association),
        **(
            {"waived": {str(word): reason for word, reason in association.waived.items()}} if association.waived else {}
        ),
    }


def _more_variables(association: AssociationSpec) -> dict[str, Plain]:
    """Return the keys about more than two variables that are used: plans without them keep the digest they had."""
    groups = association.groups
    found: dict[str, Plain] = {
        "covariates": list(association.covariates),
        "compare_with": association.compare_with,
        "groups": None if groups is None else {"column": groups.column, "compared": list(groups.compared)},
    }
    return {key: value for key, value in found.items() if value}


def _inference(inference: InferenceSpec) -> Plain:
    seed = inference.p_value.seed
    return {
        "alpha": _shortest(inference.alpha),
        "sidedness": inference.sidedness,
        "confidence_level": _shortest(inference.confidence_level),
        "planned_power": _shortest(inference.planned_power),
        "interval": {
            "by": inference.interval.by,
            "adjusted": inference.interval.adjusted,
            "resamples": inference.interval.resamples,
        },
        "several_tests": {
            "adjust": inference.several_tests.adjust,
            "among": inference.several_tests.among,
            "reason": inference.several_tests.reason,
        },
        "p_value": {
            "by": inference.p_value.by,
            "permutations": inference.p_value.permutations,
            # A seed may be larger than a JSON number can be everywhere.
            "seed": None if seed is None else str(seed),
            "most_draws": inference.p_value.most_draws,
            "budget": {
                "seconds": _shortest(inference.p_value.budget.seconds),
                "memory": memory_text(inference.p_value.budget.memory),
            },
        },
    }


def _requirements(requirements: RequirementsSpec) -> Plain:
    return {
        "fewest_complete_rows": requirements.fewest_complete_rows,
        "most_missing": _shortest(requirements.most_missing),
        "most_tied": _shortest(requirements.most_tied),
        "if_not_met": requirements.if_not_met,
    }


def _shortest(number: Decimal | None) -> str | None:
    return None if number is None else plain_digits(number)
