"""What takes two keys to see: names that must exist, keys that need or exclude one another."""

from collections.abc import Iterator, Sequence

from rankdocket.errors import Fault
from rankdocket.study.claims import claim_faults
from rankdocket.study.decision import decision_faults
from rankdocket.study.derivation import circle_faults
from rankdocket.study.form import AssociationForm, DataForm, VariableForm
from rankdocket.study.labels import nearest_label
from rankdocket.study.messages import Message, fault
from rankdocket.study.more_variables import more_variables_faults
from rankdocket.study.parts import Parts, table_of
from rankdocket.study.waivers import waiver_faults
from rankdocket.study.wording import composed, shown, suggestion
from rankdocket.vocabulary import NOT_APPLICABLE


def consistency_faults(parts: Parts) -> list[Fault]:
    """Return every fault between keys that were each read without one."""
    faults: list[Fault] = []
    for name, data in parts.data.items():
        faults.extend(_data_faults(parts, name, data))
    for name, variable in parts.variables.items():
        at = ("variables", name)
        if parts.sound(at, "column"):
            faults.extend(_column_faults(parts, name, variable))
        if parts.sound(at, "scale", "unit", "lowest_to_highest", "other_spellings"):
            faults.extend(_scale_faults(parts, name, variable))
        if parts.sound(at, "lowest_to_highest", "other_spellings", "missing_codes"):
            faults.extend(_label_faults(parts, name, variable))
    for name, association in parts.associations.items():
        if parts.sound(("associations", name), "between"):
            faults.extend(_between_faults(parts, name, association))
            faults.extend(more_variables_faults(parts, name, association))
    faults.extend(circle_faults(parts))
    faults.extend(waiver_faults(parts))
    faults.extend(_rows_faults(parts))
    faults.extend(decision_faults(parts))
    faults.extend(claim_faults(parts))
    faults.extend(_twice(parts, ("report", "readers"), parts.report.readers))
    faults.extend(_twice(parts, ("report", "signatures"), parts.report.signatures))
    faults.extend(_twice(parts, ("report", "distribution"), parts.report.distribution))
    return faults


def _data_faults(parts: Parts, name: str, data: DataForm) -> Iterator[Fault]:
    at = ("data", name)
    if data.thousands_mark == data.decimal_mark and parts.sound(at, "thousands_mark", "decimal_mark"):
        what = f"thousands_mark and decimal_mark are both {shown(data.decimal_mark)}."
        place = parts.value_place("data", name, "thousands_mark")
        remedy = "Write two different marks, or leave thousands_mark out."
        yield fault(place, f"data.{name}.thousands_mark", Message.CONTRADICTION, what, remedy)
    commented = data.comment_mark is not None and data.comment_mark.startswith(data.separator)
    if commented and parts.sound(at, "comment_mark", "separator"):
        place = parts.value_place("data", name, "comment_mark")
        what = f"a comment would begin with the separator {shown(data.separator)}."
        yield fault(place, f"data.{name}.comment_mark", Message.CONTRADICTION, what, "Write another mark.")
    if parts.sound(at, "column_names_in_row", "units_in_row", "first_data_row", "last_data_row"):
        yield from _row_number_faults(parts, name, data)


def _row_number_faults(parts: Parts, name: str, data: DataForm) -> Iterator[Fault]:
    if data.units_in_row == data.column_names_in_row:
        what = f"names and units cannot both stand in row {data.units_in_row}."
        yield fault(
            parts.value_place("data", name, "units_in_row"),
            f"data.{name}.units_in_row",
            Message.ROW_ORDER,
            what,
            "Write the row of the units, or leave the key out.",
        )
    above = max(data.column_names_in_row, data.units_in_row or 0)
    first = above + 1 if data.first_data_row is None else data.first_data_row
    if first <= above:
        yield fault(
            parts.value_place("data", name, "first_data_row"),
            f"data.{name}.first_data_row",
            Message.ROW_ORDER,
            f"data cannot begin in row {first} when names or units stand in row {above}.",
            f"Write {above + 1} or a later row.",
        )
    if data.last_data_row is not None and data.last_data_row < first:
        yield fault(
            parts.value_place("data", name, "last_data_row"),
            f"data.{name}.last_data_row",
            Message.ROW_ORDER,
            f"data cannot end in row {data.last_data_row} when they begin in row {first}.",
            f"Write {first} or a later row.",
        )


def _column_faults(parts: Parts, name: str, variable: VariableForm) -> Iterator[Fault]:
    field = f"variables.{name}.column"
    tables = parts.names("data")
    table = variable.column.table
    if table is not None and table not in tables:
        column = parts.value_place("variables", name, "column", "table")
        what = f"{shown(table)} is not a table of data."
        written = f"{table} / {variable.column.name}"
        near = suggestion(table, tables, "Its tables")
        remedy = f'{near} For a column of that whole name write {{name: "{written}"}}.'
        yield fault(column, field, Message.NAME_UNKNOWN, what, remedy)
    if table is None and len(tables) > 1:
        place = parts.value_place("variables", name, "column")
        what = "the table is not named and data has several."
        remedy = f"Write {tables[0]} / {variable.column.name}, or another table before the slash."
        yield fault(place, field, Message.NEEDED_BY_ANOTHER, what, remedy)


def _scale_faults(parts: Parts, name: str, variable: VariableForm) -> Iterator[Fault]:
    scale = variable.scale
    if scale == "measured" and variable.unit is None:
        what = "unit is missing; a measured variable has one."
        remedy = 'Write unit: mg/L, or unit: "1" for a pure number.'
        yield fault(parts.key_place("variables", name), f"variables.{name}", Message.NEEDED_BY_ANOTHER, what, remedy)
    has_labels = scale in ("ordered", "two-valued")
    if variable.lowest_to_highest and not has_labels:
        place = parts.key_place("variables", name, "lowest_to_highest")
        what = f"the scale {scale} has numbers, not labels."
        remedy = "Leave lowest_to_highest out, or write scale: ordered."
        yield fault(place, f"variables.{name}.lowest_to_highest", Message.DOES_NOT_APPLY, what, remedy)
    if variable.other_spellings and not variable.lowest_to_highest:
        place = parts.key_place("variables", name, "other_spellings")
        what = "other spellings belong to labels, and lowest_to_highest is not written."
        remedy = "Write lowest_to_highest, or leave other_spellings out."
        yield fault(place, f"variables.{name}.other_spellings", Message.DOES_NOT_APPLY, what, remedy)
    labels = len(variable.lowest_to_highest)
    wanted = {"ordered": "two labels or more", "two-valued": "two labels"}
    if (scale == "two-valued" and labels not in (0, 2)) or (scale == "ordered" and labels == 1):
        place = parts.key_place("variables", name, "lowest_to_highest")
        what = f"{labels} labels stand here; the scale {scale} has {wanted[scale]}."
        yield fault(place, f"variables.{name}.lowest_to_highest", Message.WRONG_SHAPE, what, "Write [lowest, highest].")


def _label_faults(parts: Parts, name: str, variable: VariableForm) -> Iterator[Fault]:
    labels = [composed(label) for label in variable.lowest_to_highest]
    yield from _twice(parts, ("variables", name, "lowest_to_highest"), labels)
    field = f"variables.{name}.other_spellings"
    for spelling, label in variable.other_spellings.items() if labels else ():
        place = parts.value_place("variables", name, "other_spellings", spelling)
        if composed(label) not in labels:
            what = f"{shown(label)} is not in lowest_to_highest."
            near = nearest_label(composed(label), labels)
            remedy = f"nearest: {near}." if near is not None else f"Labels: {', '.join(labels)}."
            yield fault(place, field, Message.LABEL_UNKNOWN, what, remedy)
        if composed(spelling) in labels:
            what = f"{shown(spelling)} is itself a label of lowest_to_highest."
            yield fault(place, field, Message.CONTRADICTION, what, "Strike it here or there.")
    yield from _code_faults(parts, name, variable)


def _code_faults(parts: Parts, name: str, variable: VariableForm) -> Iterator[Fault]:
    """Yield a fault for each label, or other spelling of one, that is a code for missing as well."""
    labels = {composed(label) for label in (*variable.lowest_to_highest, *variable.other_spellings)}
    table = table_of(parts, variable) if parts.sound(("variables", name), "column") else None
    codes = {"variables." + name: variable.missing_codes}
    if table is not None and table in parts.data and parts.sound(("data", table), "missing_codes"):
        codes["data." + table] = parts.data[table].missing_codes
    for owner, owned in codes.items():
        for code in owned:
            if composed(code) in labels:
                place = parts.key_place(*owner.split("."), "missing_codes")
                what = f"{shown(code)} is a code for missing here and a label of variables.{name}."
                yield fault(place, f"{owner}.missing_codes", Message.CONTRADICTION, what, "Strike it here or there.")


def _between_faults(parts: Parts, name: str, association: AssociationForm) -> Iterator[Fault]:
    names = parts.names("variables")
    field = f"associations.{name}.between"
    for position, variable in enumerate(association.between):
        if variable not in names:
            place = parts.value_place("associations", name, "between", position)
            what = f"{shown(variable)} is not an entry of variables."
            yield fault(place, field, Message.NAME_UNKNOWN, what, suggestion(variable, names, "Variables"))
    x, y = association.between
    place = parts.value_place("associations", name, "between", 1)
    if x == y:
        yield fault(place, field, Message.SAME_VARIABLE, f"{shown(x)} stands twice.", "Write two variables.")
    known = [v for v in (x, y) if v in parts.variables and parts.sound(("variables", v), "column")]
    forms = [parts.variables[v] for v in known]
    tables = [table for form in forms if (table := table_of(parts, form)) in parts.names("data")]
    columns = [(table_of(parts, form), composed(form.column.name)) for form in forms]
    if x != y and len(columns) == len(tables) == 2 and columns[0] == columns[1]:
        what = f"{x} and {y} both read the column {shown(columns[0][1])} of {columns[0][0]}."
        remedy = "Write two variables of different columns."
        yield fault(place, field, Message.SAME_VARIABLE, what, remedy)
    if len(set(tables)) > 1:
        what = f"{x} stands in table {tables[0]}, {y} in table {tables[1]}."
        remedy = "Write two variables of one table; join the files before the study."
        yield fault(place, field, Message.TWO_TABLES, what, remedy)


def _rows_faults(parts: Parts) -> Iterator[Fault]:
    if parts.rows is None:
        return
    if parts.rows.independent_because is not None and parts.sound(("rows",), "repeated_within", "time_order"):
        for key, answer in (("repeated_within", parts.rows.repeated_within), ("time_order", parts.rows.time_order)):
            if answer not in (None, NOT_APPLICABLE):
                what = f"rows are said to be independent, but {key} names the column {shown(str(answer))}."
                remedy = f"Write {key}: {NOT_APPLICABLE}, or leave independent_because out."
                place = parts.key_place("rows", "independent_because")
                yield fault(place, "rows.independent_because", Message.CONTRADICTION, what, remedy)
    named = {
        "leave_out": [item.where for item in parts.rows.leave_out],
        "suspicious": [item.where for item in parts.rows.suspicious],
    }
    for key, columns in named.items():
        for position, where in enumerate(columns):
            if parts.sound(("rows",), key) and not where:
                place = parts.key_place("rows", key, position, "where")
                what = "no column stands here."
                remedy = 'Write where: {station: "E07"}.'
                yield fault(place, f"rows.{key}.{position + 1}.where", Message.KEY_MISSING, what, remedy)


def _twice(parts: Parts, address: tuple[str, ...], entries: Sequence[str]) -> Iterator[Fault]:
    for position, entry in enumerate(entries):
        if entry in entries[:position]:
            place = parts.value_place(*address, position)
            yield fault(
                place, ".".join(address), Message.ENTRY_TWICE, f"{shown(entry)} stands twice.", "Keep one of them."
            )
