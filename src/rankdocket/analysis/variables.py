"""Each variable alone: what a screening table shows of it."""

from collections import Counter
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction

from rankdocket.analysis.filing import filed
from rankdocket.study.leave_out import rows_left_out
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData, VariableValues


@dataclass(frozen=True, slots=True)
class VariableSummary:
    """One variable among the rows that the plan does not leave out.

    Attributes
    ----------
    n
        Values present.
    missing
        Meaning of a missing code → rows, in the order of the plan’s codes; codes that do not occur count 0.
    distinct, largest_tie, tied_rows
        Distinct values, rows of the largest tie group, rows that share their value with another.
    five
        Smallest, lower quartile, median, upper quartile, largest, as text: numbers for numbers (quartiles
        interpolated between neighbours), labels for ordered labels (the lower of two neighbours).  Empty without
        values.
    levels
        Label → rows, lowest first, for ordered labels; else empty.
    """

    name: str
    n: int
    missing: Mapping[str, int]
    distinct: int
    largest_tie: int
    tied_rows: int
    five: tuple[str, ...]
    levels: Mapping[str, int]


def summarise(variable: VariableValues, spec: StudySpec, data: StudyData) -> VariableSummary:
    """Describe one variable alone."""
    table = data.tables[variable.spec.table]
    left_out = rows_left_out(data.tables, spec.rows.leave_out)[table.spec.name]
    kept = [position for position, row in enumerate(table.row_numbers) if row not in left_out]
    values = sorted(value for position in kept if (value := variable.values[position]) is not None)
    meanings = dict.fromkeys([*table.spec.missing_codes.values(), *variable.spec.missing_codes.values()], 0)
    missing = Counter(kind for position in kept if (kind := variable.missing[position]) is not None)
    sizes = Counter(values)
    return VariableSummary(
        name=variable.spec.name,
        n=len(values),
        missing={meaning: missing[meaning] for meaning in meanings},
        distinct=len(sizes),
        largest_tie=max(sizes.values(), default=0),
        tied_rows=sum(size for size in sizes.values() if size > 1),
        five=_five(values, variable.labels),
        levels={label: sizes[Decimal(rank)] for rank, label in enumerate(variable.labels, start=1)},
    )


def _five(values: list[Decimal], labels: tuple[str, ...]) -> tuple[str, ...]:
    if not values:
        return ()
    points = [Fraction(quarter, 4) * (len(values) - 1) for quarter in range(5)]
    if labels:
        return tuple(labels[int(values[int(point)]) - 1] for point in points)
    return tuple(filed(_between(values, point)) for point in points)


def _between(values: list[Decimal], point: Fraction) -> Fraction:
    lower = int(point)
    if lower == len(values) - 1:
        return Fraction(values[lower])
    step = Fraction(values[lower + 1]) - Fraction(values[lower])
    return Fraction(values[lower]) + (point - lower) * step
