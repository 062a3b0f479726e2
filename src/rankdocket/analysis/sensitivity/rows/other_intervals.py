"""The other interval rules for the coefficient: whether zero lies in them as it lies in the printed one."""

from typing import Final

import numpy as np

from rankdocket.analysis.sensitivity.cheap import RESAMPLES
from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.subject import Subject
from rankdocket.analysis.sensitivity.table import TableRow, Verdict
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval, Resampling
from rankdocket.stats.intervals import INTERVAL_METHODS
from rankdocket.stats.intervals.bca_bootstrap import KEY as BOOTSTRAP
from rankdocket.stats.no_answer import NoAnswer

KEY: Final = "interval"

NOT_PRINTED: Final = "there is no interval to hold it against"


def make(subject: Subject) -> tuple[TableRow, ...]:
    """Return one row for each rule that serves the coefficient and did not make the printed interval."""
    printed = subject.interval.method if isinstance(subject.interval, Interval) else None
    return tuple(
        _row(subject, method)
        for method in INTERVAL_METHODS
        if subject.coefficient.name in method.coefficients and method.key != printed
    )


def _row(subject: Subject, method: IntervalMethod) -> TableRow:
    key = f"{KEY}-{method.key.lower().replace(',', '').replace(' ', '-')}"
    found = _interval(subject, method, key)
    if isinstance(found, NoInterval):
        verdict = subject.not_applicable(found.reason)
        return TableRow(key, KEY, method.label, "sensitivity", verdict, subject.coefficient, absent=found.reason)
    verdict = _verdict(subject, found)
    return TableRow(key, KEY, method.label, "sensitivity", verdict, subject.coefficient, interval=found)


def _interval(subject: Subject, method: IntervalMethod, key: str) -> Interval | NoInterval:
    resampling = None
    if method.key == BOOTSTRAP:
        plan = subject.draws.plan(key, "Spearman rho", subject.coefficient.n, RESAMPLES)
        if isinstance(plan, NoAnswer):
            return NoInterval(plan.reason)
        resampling = Resampling(plan.permutations, plan.generator)
    printed = subject.interval
    level = printed.level if isinstance(printed, Interval) else subject.spec.inference.confidence_level
    # As for a printed one, no digit and no resample depends on the order in which the rows came.
    order = np.lexsort((subject.y, subject.x))
    x, y = subject.x[order], subject.y[order]
    return method.function(IntervalQuestion(subject.coefficient, x, y, level, subject.direction, resampling))


def _verdict(subject: Subject, found: Interval) -> Verdict:
    """Return whether zero lies on the other side of the interval's limits than it does in the printed one."""
    if subject.decision is None:
        return subject.undecided
    printed = subject.interval
    if not isinstance(printed, Interval):
        return Verdict("not applicable", reason=NOT_PRINTED)
    inside, inside_printed = _holds_zero(found), _holds_zero(printed)
    if inside == inside_printed:
        return Verdict("no", reason="zero lies inside both" if inside else "zero lies outside both")
    return Verdict("yes", reason="zero lies inside this one alone" if inside else "zero lies outside this one alone")


def _holds_zero(interval: Interval) -> bool:
    return interval.low <= 0 <= interval.high


ROW: Final = RowRule(KEY, make)
