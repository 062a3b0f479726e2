"""The cells beyond x and y on which a partial coefficient, a comparison or groups of rows rest, for the record copy."""

from collections.abc import Iterator
from typing import Final

from rankdocket.analysis.filing import filed_value
from rankdocket.analysis.more_results import Subgroups
from rankdocket.analysis.results import Analysis
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import Table
from rankdocket.study.tables import cells_of

MORE_ROWS: Final = "more_rows.csv"
MORE_ROWS_HEAD: Final = ("association", "used_for", "row", "variable", "cell", "value")

Line = tuple[str, str, str, str, str, str]


def asks_for_more_rows(spec: StudySpec) -> bool:
    """Say whether an association of the plan asks about more than its two variables."""
    return any(
        association.covariates or association.compare_with or association.groups
        for association in spec.associations.values()
    )


def more_rows(analysis: Analysis) -> tuple[Line, ...]:
    """Return one line a row and further variable, or the cell that names a group.

    The rows of one association and one use are exactly those that were used; x and y of the same lines stand in
    rows.csv. The value of a group is its name, empty for a row in no group.
    """
    lines: list[Line] = []
    for name, more in analysis.more.items():
        association = analysis.spec.associations[name]
        if more.partial is not None:
            lines += _cells(analysis, (name, "partial"), more.partial.lines, more.partial.covariates)
        if more.comparison is not None:
            others = tuple(v for v in more.comparison.variables if v not in (association.x, association.y))
            lines += _cells(analysis, (name, "comparison"), more.comparison.lines, others)
        if more.subgroups is not None:
            table = analysis.data.tables[analysis.spec.variables[association.x].table]
            lines += _groups(name, more.subgroups, table)
    return tuple(lines)


def _cells(
    analysis: Analysis, head: tuple[str, str], lines: tuple[int, ...], variables: tuple[str, ...]
) -> Iterator[Line]:
    for variable in variables:
        read = analysis.data.variables[variable]
        place = _places(analysis.data.tables[read.spec.table])
        for line in lines:
            value = read.values[place[line]]
            assert value is not None
            yield (*head, str(line), variable, read.literals[place[line]], filed_value(value))


def _groups(name: str, subgroups: Subgroups, table: Table) -> Iterator[Line]:
    cells, place = cells_of(table, subgroups.column), _places(table)
    assert cells is not None
    for line, label in subgroups.label_of_line.items():
        yield (name, "groups", str(line), subgroups.column, cells[place[line]], label or "")


def _places(table: Table) -> dict[int, int]:
    return {line: position for position, line in enumerate(table.row_numbers)}
