"""The catalogue of what is done otherwise, in the order of the table’s rows."""

from typing import Final

from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.rows import (
    leave_one_out,
    other_coefficient,
    other_intervals,
    product_moment,
    put_back,
    removal,
    studentised,
    suspicious,
)

ROWS: Final[tuple[RowRule, ...]] = (
    other_coefficient.ROW,
    product_moment.ROW,
    studentised.ROW,
    other_intervals.ROW,
    suspicious.ROW,
    put_back.ROW,
    leave_one_out.ROW,
    removal.ROW,
)
"""Every rule."""
