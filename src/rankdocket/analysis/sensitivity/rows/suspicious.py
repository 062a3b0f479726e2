"""Without the rows that the plan calls suspicious: each alone, then all of them."""

from typing import Final

from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.subject import Subject
from rankdocket.analysis.sensitivity.table import Lines, TableRow

KEY: Final = "suspicious"
ALONE: Final = "without a row that the plan calls suspicious"
TOGETHER: Final = "without all rows that the plan calls suspicious"


def make(subject: Subject) -> tuple[TableRow, ...]:
    """Return a row for each suspicious row that is complete, and one for all of them where there are several."""
    used = set(subject.lines)
    suspicious = tuple(row for row in subject.screened.suspicious if row.row in used)
    made = [
        _without(subject, f"{KEY}-{place}", ALONE, Lines((row.row,), row.reason))
        for place, row in enumerate(suspicious, start=1)
    ]
    if len(suspicious) > 1:
        made.append(_without(subject, f"{KEY}-all", TOGETHER, Lines(tuple(row.row for row in suspicious))))
    return tuple(made)


def _without(subject: Subject, key: str, label: str, lines: Lines) -> TableRow:
    left = tuple(row for row in subject.screened.rows if row.row not in lines.lines)
    return subject.of_rows(key, KEY, label, left, lines)


ROW: Final = RowRule(KEY, make)
