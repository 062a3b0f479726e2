"""Variables from their columns: every cell a value or a declared kind of missing, or a fault that says which is not."""

from collections import Counter
from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal

from rankdocket.errors import Fault, InputError
from rankdocket.study.cells import plain_digits, read_number
from rankdocket.study.derivation import origin_faults
from rankdocket.study.groups import group_faults
from rankdocket.study.labels import nearest_label
from rankdocket.study.messages import Message, fault, in_file_order
from rankdocket.study.spec import StudySpec, VariableSpec
from rankdocket.study.table import Table, VariableValues
from rankdocket.study.tables import cells_of, column_fault
from rankdocket.study.units import unit_faults
from rankdocket.study.unreadable import Cell, Column, codes_line, unreadable_faults
from rankdocket.study.wording import MOST_LISTED, composed, first_rows, shown
from rankdocket.vocabulary import NOT_APPLICABLE


@dataclass(frozen=True, slots=True)
class _Reading:
    """The values of the cells that are not missing, in order, or the faults that prevent them."""

    values: tuple[Decimal, ...]
    respelled: Mapping[str, int] = field(default_factory=dict)
    faults: tuple[Fault, ...] = ()


def read_variables(spec: StudySpec, tables: Mapping[str, Table]) -> dict[str, VariableValues]:
    """Read every variable of the spec, and see that the columns named under ``rows`` are there.

    Parameters
    ----------
    spec
        The spec.
    tables
        Its tables by name.

    Raises
    ------
    InputError
        With every fault of all variables.
    """
    values: dict[str, VariableValues] = {}
    faults = [*_rows_faults(spec, tables), *origin_faults(spec, tables), *group_faults(spec, tables)]
    for name, variable in spec.variables.items():
        try:
            values[name] = read_variable(tables[variable.table], variable)
        except InputError as error:
            faults.extend(error.faults)
    if faults:
        raise InputError(in_file_order(faults))
    return values


def read_variable(table: Table, spec: VariableSpec) -> VariableValues:
    """Read one variable of a table.

    Cells and codes are compared without blanks around them, in Unicode normal form C, capital letters as they
    are.  A code of the column alone goes before one of its table.

    Raises
    ------
    InputError
        With every fault of the column.
    """
    cells = cells_of(table, spec.column)
    if cells is None:
        raise InputError((column_fault(table, spec.column, spec.place, f"variables.{spec.name}.column"),))
    written = {**table.spec.missing_codes, **spec.missing_codes}
    codes = {composed(code): meaning for code, meaning in written.items()}
    meanings = {cell: codes.get(composed(cell)) for cell in set(cells)}
    missing = tuple(meanings[cell] for cell in cells)
    rows = zip(table.row_numbers, cells, strict=True)
    column = Column(table, spec.column, tuple(Cell(row, cell) for row, cell in rows if meanings[cell] is None))
    has_labels = spec.scale == "ordered" or bool(spec.lowest_to_highest)
    reading = _labels(column, spec) if has_labels else _numbers(column, spec)
    faults = [*unit_faults(table, spec), *reading.faults]
    if faults:
        raise InputError(in_file_order(faults))
    values = iter(reading.values)
    return VariableValues(
        spec=spec,
        values=tuple(next(values) if meaning is None else None for meaning in missing),
        missing=missing,
        literals=cells,
        labels=spec.lowest_to_highest if has_labels else (),
        respelled=reading.respelled,
    )


def _rows_faults(spec: StudySpec, tables: Mapping[str, Table]) -> list[Fault]:
    """Return a fault for each column of ``rows`` that a table with associations does not have."""
    used = {spec.variables[association.x].table: None for association in spec.associations.values()}
    answers = (("repeated_within", spec.rows.repeated_within), ("time_order", spec.rows.time_order))
    return [
        column_fault(tables[name], answer, spec.rows.place, f"rows.{key}")
        for name in used
        for key, answer in answers
        if answer is not None and answer != NOT_APPLICABLE and cells_of(tables[name], answer) is None
    ]


def _numbers(column: Column, spec: VariableSpec) -> _Reading:
    numbers = {text: read_number(text, column.form) for text in {cell.text for cell in column.cells}}
    if spec.scale == "two-valued" and None in numbers.values():
        return _Reading((), faults=(_order_fault(column, spec),))
    faults = unreadable_faults(column, numbers)
    values = tuple(number for cell in column.cells if (number := numbers[cell.text]) is not None)
    if faults:
        return _Reading((), faults=tuple(faults))
    if spec.scale == "count":
        faults = _count_faults(column, values)
    if spec.scale == "two-valued":
        faults = _two_valued_faults(column, values)
    return _Reading(values, faults=tuple(faults))


def _count_faults(column: Column, values: tuple[Decimal, ...]) -> list[Fault]:
    cells = zip(column.cells, values, strict=True)
    odd = [cell for cell, value in cells if value < 0 or value != value.to_integral_value()]
    if not odd:
        return []
    first = odd[0]
    what = f"found {shown(first.text)}. A count is a whole number from 0; {first_rows([cell.row for cell in odd])}."
    line = codes_line(column.table, list(dict.fromkeys(cell.text.strip() for cell in odd)))
    remedy = f"Write scale: measured if the column is no count; or, if these mean missing, write: {line}"
    return [fault(column.place(first), column.field(first), Message.NOT_A_COUNT, what, remedy)]


def _two_valued_faults(column: Column, values: tuple[Decimal, ...]) -> list[Fault]:
    distinct = list(dict.fromkeys(values))
    if len(distinct) <= 2:
        return []
    third = next(cell for cell, value in zip(column.cells, values, strict=True) if value == distinct[2])
    counts = Counter(values)
    listed = ", ".join(f"{plain_digits(value)} in {counts[value]}" for value in distinct[:MOST_LISTED])
    what = f"{shown(third.text)} is a third value; a two-valued column has two. Rows by value: {listed}."
    line = codes_line(column.table, [third.text.strip()])
    remedy = f"Write another scale; or, if {shown(third.text)} means missing, write: {line}"
    return [fault(column.place(third), column.field(third), Message.MORE_THAN_TWO, what, remedy)]


def _labels(column: Column, spec: VariableSpec) -> _Reading:
    if not spec.lowest_to_highest:
        return _Reading((), faults=(_order_fault(column, spec),))
    labels = [composed(label) for label in spec.lowest_to_highest]
    ranks = {label: Decimal(position) for position, label in enumerate(labels, start=1)}
    spellings = {composed(spelling): composed(label) for spelling, label in spec.other_spellings.items()}
    texts = {cell.text: composed(cell.text) for cell in column.cells}
    unknown: dict[str, list[Cell]] = {}
    for cell in column.cells:
        if texts[cell.text] not in ranks and texts[cell.text] not in spellings:
            unknown.setdefault(texts[cell.text], []).append(cell)
    if unknown:
        known = [*labels, *spellings]
        return _Reading((), faults=tuple(_label_fault(column, cells, known) for cells in unknown.values()))
    counts = Counter(texts[cell.text] for cell in column.cells)
    return _Reading(
        values=tuple(ranks[spellings.get(texts[cell.text], texts[cell.text])] for cell in column.cells),
        respelled={spelling: counts[composed(spelling)] for spelling in spec.other_spellings},
    )


def _label_fault(column: Column, cells: list[Cell], labels: list[str]) -> Fault:
    first = cells[0]
    near = nearest_label(composed(first.text), labels)
    hint = f" (nearest: {shown(near)})" if near is not None else ""
    rows = first_rows([cell.row for cell in cells])
    what = f"{shown(first.text)} is not in lowest_to_highest{hint}; {rows}."
    remedy = "Write it under other_spellings with the label it means"
    target = shown(near) if near is not None else "its label"
    remedy = f"{remedy}: {{{shown(composed(first.text))}: {target}}}, or under missing_codes."
    return fault(column.place(first), column.field(first), Message.LABEL_UNKNOWN, what, remedy)


def _order_fault(column: Column, spec: VariableSpec) -> Fault:
    found = list(dict.fromkeys(composed(cell.text) for cell in column.cells))
    listed = ", ".join(shown(label) for label in found[:MOST_LISTED])
    more = f" and {len(found) - MOST_LISTED} more" if len(found) > MOST_LISTED else ""
    what = f"the scale is {spec.scale} but no order is given. Labels found, as they come: {listed}{more}."
    remedy = "Write lowest_to_highest: [lowest, …, highest]. Alphabetical order is never used."
    return fault(spec.place, f"variables.{spec.name}", Message.ORDER_MISSING, what, remedy)
