"""The other rank coefficient, with the permutation test that belongs to it."""

from typing import Final

from rankdocket.analysis.sensitivity.cheap import cheap_p, coefficient_of
from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.subject import NO_FINDING, Subject
from rankdocket.analysis.sensitivity.table import TableRow
from rankdocket.vocabulary import CoefficientName

KEY: Final = "other-coefficient"


def make(subject: Subject) -> tuple[TableRow, ...]:
    """Return tau-b where the plan asks for rho, and rho where it asks for tau-b: another quantity."""
    own = subject.coefficient.name
    other: CoefficientName = "Kendall tau-b" if own == "Spearman rho" else "Spearman rho"
    found = coefficient_of(other, subject.x, subject.y)
    row = TableRow(KEY, KEY, f"{other} in place of {own}", "supplementary", NO_FINDING)
    return (subject.with_p(row, found, cheap_p(found, (subject.x, subject.y), subject.direction, subject.draws, KEY)),)


ROW: Final = RowRule(KEY, make)
