"""With the rows put back that the plan leaves out: those of each reason, then all of them."""

from dataclasses import replace
from typing import Final

from rankdocket.analysis.screen import screen_association
from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.subject import Subject
from rankdocket.analysis.sensitivity.table import Lines, TableRow
from rankdocket.study.spec import LeaveOutSpec

KEY: Final = "put-back"
OF_A_REASON: Final = "with rows put back that the plan leaves out"
ALL: Final = "with all rows put back that the plan leaves out"

LACKING: Final = "none of these rows has both values, or another reason of the plan leaves them out as well"


def make(subject: Subject) -> tuple[TableRow, ...]:
    """Return a row for each reason that concerns the association’s table, and one for all where there are several."""
    if not subject.screened.flow.left_out:
        return ()
    reasons = tuple(dict.fromkeys(entry.reason for entry in _entries(subject)))
    made = [_with(subject, f"{KEY}-{place}", reason) for place, reason in enumerate(reasons, start=1)]
    if len(reasons) > 1:
        made.append(_with(subject, f"{KEY}-all", None))
    return tuple(made)


def _entries(subject: Subject) -> tuple[LeaveOutSpec, ...]:
    """Return the plan’s entries that leave rows out of the association’s table."""
    table = subject.data.tables[subject.spec.variables[subject.screened.spec.x].table]
    return tuple(
        entry for entry in subject.spec.rows.leave_out if all(column in table.columns for column in entry.where)
    )


def _with(subject: Subject, key: str, reason: str | None) -> TableRow:
    """Return the row with those of one reason put back, or with all of them."""
    rows = subject.spec.rows
    still = tuple(entry for entry in rows.leave_out if reason is not None and entry.reason != reason)
    fewer = replace(rows, leave_out=still)
    screened = screen_association(subject.screened.spec, replace(subject.spec, rows=fewer), subject.data)
    used = set(subject.lines)
    back = Lines(tuple(row.row for row in screened.rows if row.row not in used), reason)
    label = OF_A_REASON if reason is not None else ALL
    if not back.lines:
        return TableRow(key, KEY, label, "sensitivity", subject.not_applicable(LACKING), absent=LACKING, rows=back)
    return subject.of_rows(key, KEY, label, screened.rows, back)


ROW: Final = RowRule(KEY, make)
