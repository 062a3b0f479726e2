"""A spec written out with every default, as YAML that no reader can take in another way."""

import re
from collections.abc import Mapping, Sequence
from decimal import Decimal
from typing import Final, TypeAlias

from rankdocket import vocabulary
from rankdocket.study.form import ENCODINGS, NAME_PATTERN, TAB_WORD, TRAP_WORDS
from rankdocket.study.kinds import memory_text
from rankdocket.study.spec import (
    AssociationSpec,
    DataSpec,
    InferenceSpec,
    Person,
    ReportSpec,
    RequirementsSpec,
    RowsSpec,
    StudySection,
    StudySpec,
    VariableSpec,
)

_Value: TypeAlias = "str | int | Decimal | Mapping[str, _Value] | Sequence[_Value] | None"

_PLAIN_WORDS: Final = frozenset(
    (
        *vocabulary.SCALES,
        *vocabulary.ROLES,
        *vocabulary.EXPECTED_SIGNS,
        *vocabulary.CLAIMS,
        *vocabulary.COEFFICIENTS,
        *vocabulary.SIDEDNESS,
        *vocabulary.ADJUSTMENTS,
        *vocabulary.FAMILIES,
        *vocabulary.INTERVAL_BY,
        *vocabulary.INTERVAL_ADJUSTMENTS,
        *vocabulary.P_BY,
        *vocabulary.IF_NOT_MET,
        *vocabulary.READERS,
        *vocabulary.SIGNATURES,
        *vocabulary.NUMBER_STYLES,
        *ENCODINGS,
        vocabulary.NOT_APPLICABLE,
        TAB_WORD,
    )
)
"""Words of closed lists: the only texts written without quotes."""

_ESCAPES: Final = {'"': '\\"', "\\": "\\\\", "\n": "\\n", "\t": "\\t"}


def spec_as_used(spec: StudySpec) -> str:
    """Return the spec as YAML text in which every default is written.

    :func:`rankdocket.study.reader.read_spec` reads it back to an equal spec, places aside.
    """
    sections: dict[str, _Value] = {
        "study": _study(spec.study),
        "data": {name: _data(data) for name, data in spec.data.items()},
        "rows": _rows(spec.rows),
        "variables": {name: _variable(variable) for name, variable in spec.variables.items()},
        "associations": {name: _association(association) for name, association in spec.associations.items()},
        "inference": _inference(spec.inference),
        "requirements": _requirements(spec.requirements),
        "report": _report(spec.report),
    }
    return "\n".join("".join(f"{line}\n" for line in _lines({name: part})) for name, part in sections.items())


def _person(person: Person | None) -> _Value:
    return None if person is None else {"name": person.name, "role": person.role}


def _study(study: StudySection) -> _Value:
    return {
        "number": study.number,
        "title": study.title,
        "client": study.client,
        "question": study.question,
        "population": study.population,
        "rows_were_fixed_by": study.rows_were_fixed_by,
        "prepared_by": _person(study.prepared_by),
        "checked_by": _person(study.checked_by),
        "released_by": _person(study.released_by),
    }


def _data(data: DataSpec) -> _Value:
    return {
        "file": data.file,
        "separator": TAB_WORD if data.separator == "\t" else data.separator,
        "decimal_mark": data.decimal_mark,
        "thousands_mark": data.thousands_mark,
        "text_encoding": data.text_encoding,
        "comment_mark": data.comment_mark,
        "column_names_in_row": data.column_names_in_row,
        "units_in_row": data.units_in_row,
        "first_data_row": data.first_data_row,
        "last_data_row": data.last_data_row,
        "missing_codes": data.missing_codes,
        "received_on": data.received_on,
        "received_from": data.received_from,
    }


def _rows(rows: RowsSpec) -> _Value:
    return {
        "one_row_is": rows.one_row_is,
        "repeated_within": rows.repeated_within,
        "time_order": rows.time_order,
        "independent_because": rows.independent_because,
        "leave_out": [{"where": item.where, "reason": item.reason} for item in rows.leave_out],
        "suspicious": [{"where": item.where, "reason": item.reason} for item in rows.suspicious],
    }


def _variable(variable: VariableSpec) -> _Value:
    return {
        "column": {"table": variable.table, "name": variable.column},
        "label": variable.label,
        "unit": variable.unit,
        "scale": variable.scale,
        "lowest_to_highest": variable.lowest_to_highest,
        "other_spellings": variable.other_spellings,
        "missing_codes": variable.missing_codes,
        "derived_from": variable.derived_from,
    }


def _association(association: AssociationSpec) -> _Value:
    return {
        "between": [association.x, association.y],
        "question": association.question,
        "role": association.role,
        "hypothesis": {
            "expected_sign": association.hypothesis.expected_sign,
            "smallest_of_interest": association.hypothesis.smallest_of_interest,
            "claim": association.hypothesis.claim,
            "null_value": association.hypothesis.null_value,
        },
        "coefficient": association.coefficient,
        "covariates": association.covariates or None,
        "compare_with": association.compare_with,
        "groups": _groups(association),
        "waived": {str(word): reason for word, reason in association.waived.items()},
    }


def _groups(association: AssociationSpec) -> _Value:
    groups = association.groups
    return None if groups is None else {"column": groups.column, "compared": groups.compared or None}


def _inference(inference: InferenceSpec) -> _Value:
    several, p_value = inference.several_tests, inference.p_value
    return {
        "alpha": inference.alpha,
        "sidedness": inference.sidedness,
        "confidence_level": inference.confidence_level,
        "planned_power": inference.planned_power,
        "interval": {
            "by": inference.interval.by,
            "adjusted": inference.interval.adjusted,
            "resamples": inference.interval.resamples,
        },
        "several_tests": {"adjust": several.adjust, "among": several.among, "reason": several.reason},
        "p_value": {
            "by": p_value.by,
            "permutations": p_value.permutations,
            "most_draws": p_value.most_draws,
            "seed": p_value.seed,
            "budget": {"seconds": p_value.budget.seconds, "memory": memory_text(p_value.budget.memory)},
        },
    }


def _requirements(requirements: RequirementsSpec) -> _Value:
    return {
        "fewest_complete_rows": requirements.fewest_complete_rows,
        "most_missing": requirements.most_missing,
        "most_tied": requirements.most_tied,
        "if_not_met": requirements.if_not_met,
    }


def _report(report: ReportSpec) -> _Value:
    return {
        "readers": report.readers,
        "decimals": {"coefficient": report.coefficient_decimals, "p_value": report.p_value_decimals},
        "number_style": report.number_style,
        "marking": report.marking,
        "distribution": report.distribution,
        "signatures": report.signatures,
    }


def _lines(part: Mapping[str, _Value], indent: str = "") -> list[str]:
    """Return the lines of a mapping; a key without a value is left out, as in a spec."""
    lines: list[str] = []
    for key, value in part.items():
        head = f"{indent}{_key(key)}:"
        if value is None:
            continue
        if isinstance(value, Mapping) and value:
            lines += [head, *_lines(value, indent + "  ")]
        elif isinstance(value, Sequence) and not isinstance(value, str) and any(isinstance(v, Mapping) for v in value):
            lines.append(head)
            for item in value:
                assert isinstance(item, Mapping)
                first, *others = _lines(item, indent + "    ")
                lines += [f"{indent}  - {first.lstrip(' ')}", *others]
        else:
            lines.append(f"{head} {_inline(value)}")
    return lines


def _inline(value: _Value) -> str:
    if isinstance(value, str):
        return value if value in _PLAIN_WORDS else _quoted(value)
    if isinstance(value, Mapping):
        return "{}"
    if isinstance(value, Sequence):
        return f"[{', '.join(_inline(item) for item in value)}]"
    return str(value)


def _key(key: str) -> str:
    plain = re.fullmatch(NAME_PATTERN, key) is not None and key.lower() not in TRAP_WORDS
    return key if plain else _quoted(key)


def _quoted(text: str) -> str:
    """Return ``text`` in double quotes; whatever cannot be seen is written by its code point."""
    return '"' + "".join(_ESCAPES.get(c, c if c.isprintable() else _code_point(c)) for c in text) + '"'


def _code_point(character: str) -> str:
    number = ord(character)
    return f"\\u{number:04X}" if number <= 0xFFFF else f"\\U{number:08X}"
