"""Which rows of a table an association can use: complete rows first, ranks second.

Nothing joint is computed here, so everything this module returns may be shown before the plan is locked.
"""

from collections.abc import Mapping
from decimal import Decimal

from rankdocket.analysis.results import CompleteRow, LeftOutRow, RowFlow, Screened
from rankdocket.stats.ranks import dense_codes, doubled_midranks, tie_groups
from rankdocket.study.leave_out import rows_left_out, suspicious_rows
from rankdocket.study.spec import AssociationSpec, StudySpec
from rankdocket.study.table import StudyData, VariableValues


def screen_association(association: AssociationSpec, spec: StudySpec, data: StudyData) -> Screened:
    """Select the complete rows of an association, then rank each variable among them."""
    x, y = data.variables[association.x], data.variables[association.y]
    table = data.tables[x.spec.table]
    left_out = rows_left_out(data.tables, spec.rows.leave_out)[table.spec.name]
    kept = [position for position, row in enumerate(table.row_numbers) if row not in left_out]
    complete = [position for position in kept if x.values[position] is not None and y.values[position] is not None]
    without_x = sum(x.values[position] is None and y.values[position] is not None for position in kept)
    without_y = sum(y.values[position] is None and x.values[position] is not None for position in kept)
    flow = RowFlow(
        read=len(table.row_numbers),
        left_out=tuple(LeftOutRow(row, reason) for row, reason in sorted(left_out.items())),
        missing_x=without_x,
        missing_y=without_y,
        missing_both=len(kept) - len(complete) - without_x - without_y,
        complete=len(complete),
    )
    x_values, y_values = _present(x, complete), _present(y, complete)
    x_codes, y_codes = dense_codes(x_values), dense_codes(y_values)
    rows = tuple(
        CompleteRow(
            row=table.row_numbers[position],
            x_literal=x.literals[position],
            y_literal=y.literals[position],
            x=x_value,
            y=y_value,
            x_doubled_rank=int(x_rank),
            y_doubled_rank=int(y_rank),
        )
        for position, x_value, y_value, x_rank, y_rank in zip(
            complete, x_values, y_values, doubled_midranks(x_codes), doubled_midranks(y_codes), strict=True
        )
    )
    suspicious = tuple(
        LeftOutRow(row, reason)
        for row, reason in sorted(suspicious_rows(data.tables, spec.rows.suspicious)[table.spec.name].items())
        if row not in left_out
    )
    return Screened(association, flow, rows, tie_groups(x_codes), tie_groups(y_codes), suspicious)


def screen_all(spec: StudySpec, data: StudyData) -> Mapping[str, Screened]:
    """Screen every association of the plan, in plan order."""
    return {name: screen_association(association, spec, data) for name, association in spec.associations.items()}


def _present(variable: VariableValues, positions: list[int]) -> tuple[Decimal, ...]:
    return tuple(value for position in positions if (value := variable.values[position]) is not None)
