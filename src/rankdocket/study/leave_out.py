"""The rows that the plan leaves out or calls suspicious, by number, each with its reason."""

from collections.abc import Mapping, Sequence

from rankdocket.errors import Fault, InputError
from rankdocket.study.messages import Message, fault, in_file_order
from rankdocket.study.spec import LeaveOutSpec
from rankdocket.study.table import Table
from rankdocket.study.tables import cells_of, column_fault
from rankdocket.study.wording import composed, shown


def matching_rows(table: Table, leave_out: Sequence[LeaveOutSpec]) -> dict[int, str]:
    """Return row number → reason for the rows of ``table`` that are left out.

    A row is left out when all columns of ``where`` hold the given text, blanks around both dropped.  A row that
    several entries leave out has their reasons joined by "; ".

    Raises
    ------
    InputError
        If a column does not exist, or an entry matches no row.
    """
    return rows_left_out({table.spec.name: table}, leave_out)[table.spec.name]


def rows_left_out(tables: Mapping[str, Table], leave_out: Sequence[LeaveOutSpec]) -> dict[str, dict[int, str]]:
    """Return the same for several tables: an entry concerns every table that has all its columns.

    Raises
    ------
    InputError
        If no table has the columns of an entry, or an entry matches no row of any table.
    """
    return _named_rows(tables, leave_out, "rows.leave_out")


def suspicious_rows(tables: Mapping[str, Table], suspicious: Sequence[LeaveOutSpec]) -> dict[str, dict[int, str]]:
    """Return table → row number → reason for the rows that the plan calls suspicious.

    Raises
    ------
    InputError
        If no table has the columns of an entry, or an entry matches no row of any table.
    """
    return _named_rows(tables, suspicious, "rows.suspicious")


def _named_rows(tables: Mapping[str, Table], entries: Sequence[LeaveOutSpec], key: str) -> dict[str, dict[int, str]]:
    rows: dict[str, dict[int, str]] = {name: {} for name in tables}
    faults: list[Fault] = []
    for position, item in enumerate(entries, start=1):
        field = f"{key}.{position}"
        concerned = [table for table in tables.values() if all(cells_of(table, c) is not None for c in item.where)]
        if not concerned:
            faults.extend(_column_faults(tables, item, field))
            continue
        matched = False
        for table in concerned:
            for row in _matches(table, item):
                matched = True
                reasons = rows[table.spec.name]
                reasons[row] = f"{reasons[row]}; {item.reason}" if row in reasons else item.reason
        if not matched:
            asked = ", ".join(f"{column} {shown(text)}" for column, text in item.where.items())
            remedy = "Write the cells as they stand in the file, or strike the entry."
            faults.append(fault(item.place, field, Message.NO_ROW_MATCHED, f"no row has {asked}.", remedy))
    if faults:
        raise InputError(in_file_order(faults))
    return rows


def _matches(table: Table, item: LeaveOutSpec) -> list[int]:
    wanted = [(cells_of(table, column), composed(text)) for column, text in item.where.items()]
    return [
        number
        for position, number in enumerate(table.row_numbers)
        if all(cells is not None and composed(cells[position]) == text for cells, text in wanted)
    ]


def _column_faults(tables: Mapping[str, Table], item: LeaveOutSpec, field: str) -> list[Fault]:
    """Return what is missing in the table that has most of the columns."""
    nearest = max(tables.values(), key=lambda table: sum(cells_of(table, c) is not None for c in item.where))
    return [
        column_fault(nearest, column, item.place, f"{field}.where")
        for column in item.where
        if cells_of(nearest, column) is None
    ]
