"""Each row left out in turn: how far the coefficient moves, and how many rows the finding hangs on one by one."""

from typing import Final

from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.single_rows import changing_rows, without_each
from rankdocket.analysis.sensitivity.subject import Subject
from rankdocket.analysis.sensitivity.table import Ends, TableRow, Verdict
from rankdocket.stats.no_answer import NoAnswer

KEY: Final = "leave-one-out"
LABEL: Final = "each row left out in turn"


def make(subject: Subject) -> tuple[TableRow, ...]:
    """Return the range of the coefficient and whether one row less would change the finding."""
    found = without_each(subject)
    if isinstance(found, NoAnswer):
        verdict = subject.not_applicable(found.reason)
        return (TableRow(KEY, KEY, LABEL, "sensitivity", verdict, absent=found.reason),)
    changing = changing_rows(subject, found)
    lines, low, high = subject.lines, found.lowest, found.highest
    ends = Ends(
        low.coefficient,
        high.coefficient,
        lines[low.row],
        lines[high.row],
        None if isinstance(changing, NoAnswer) else len(changing),
    )
    if isinstance(changing, NoAnswer):
        verdict = subject.not_applicable(changing.reason)
    else:
        verdict = Verdict("yes" if changing else "no")
    return (TableRow(KEY, KEY, LABEL, "sensitivity", verdict, ends=ends),)


ROW: Final = RowRule(KEY, make)
