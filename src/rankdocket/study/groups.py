"""Groups of rows by the text of a column: which group each row goes to, and what the spec may have got wrong."""

from collections.abc import Mapping
from typing import Final

from rankdocket.errors import Fault
from rankdocket.study.labels import nearest_label
from rankdocket.study.messages import Message, fault
from rankdocket.study.spec import AssociationSpec, StudySpec
from rankdocket.study.table import Table
from rankdocket.study.tables import cells_of, column_fault
from rankdocket.study.wording import MOST_LISTED, composed, shown

MOST_GROUPS: Final = 20
"""A column with more texts is a measurement or a name of each row; a table of its groups would say nothing."""


def group_of_rows(association: AssociationSpec, spec: StudySpec, table: Table) -> tuple[str | None, ...]:
    """Return for each row of the table the text that names its group, ``None`` for a row in no group.

    Texts are compared without blanks around them, in Unicode normal form C. A blank cell is in no group, and neither
    is one that holds a missing code of the table or of a variable of that column.

    Raises
    ------
    ValueError
        If the association has no groups, or the table has not their column.
    """
    cells = None if association.groups is None else cells_of(table, association.groups.column)
    if association.groups is None or cells is None:
        raise ValueError(f"{association.name} has no groups in {table.spec.name}")
    column = composed(association.groups.column)
    codes = {"", *map(composed, table.spec.missing_codes)}
    for variable in spec.variables.values():
        if variable.table == table.spec.name and composed(variable.column) == column:
            codes.update(map(composed, variable.missing_codes))
    return tuple(None if (text := composed(cell)) in codes else text for cell in cells)


def group_faults(spec: StudySpec, tables: Mapping[str, Table]) -> list[Fault]:
    """Return what only the data can show to be wrong with the groups of the associations."""
    faults: list[Fault] = []
    for name, association in spec.associations.items():
        if association.groups is not None:
            table = tables[spec.variables[association.x].table]
            faults.extend(_faults(f"associations.{name}.groups", association, spec, table))
    return faults


def _faults(field: str, association: AssociationSpec, spec: StudySpec, table: Table) -> list[Fault]:
    groups = association.groups
    assert groups is not None
    if cells_of(table, groups.column) is None:
        return [column_fault(table, groups.column, groups.place, f"{field}.column")]
    labels = list(dict.fromkeys(label for label in group_of_rows(association, spec, table) if label is not None))
    listed = ", ".join(shown(label) for label in labels[:MOST_LISTED])
    if len(labels) > MOST_GROUPS:
        what = f"the column {shown(groups.column)} holds {len(labels)} different texts; the first are {listed}."
        remedy = f"Write a column with up to {MOST_GROUPS} groups."
        return [fault(groups.place, f"{field}.column", Message.DOES_NOT_APPLY, what, remedy)]
    faults = []
    for label in groups.compared:
        if composed(label) not in labels:
            near = nearest_label(composed(label), labels)
            remedy = f"nearest: {shown(near)}." if near is not None else f"Groups: {listed}."
            what = f"{shown(label)} is not a text of the column {shown(groups.column)}."
            faults.append(fault(groups.place, f"{field}.compared", Message.LABEL_UNKNOWN, what, remedy))
    return faults
