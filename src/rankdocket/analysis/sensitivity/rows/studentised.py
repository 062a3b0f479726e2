"""The permutation test studentised by influence values: of rho = 0 where variables may depend in other ways."""

from typing import Final

from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.subject import NO_FINDING, Subject
from rankdocket.analysis.sensitivity.table import RowP, TableRow
from rankdocket.stats.all_orders import MOST_ENUMERATED
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.studentised import StudentisedTest, studentised_of_all_orders, studentised_test

KEY: Final = "studentised"
LABEL: Final = "studentised permutation test that rho is zero, any other dependence allowed"

RHO_ONLY: Final = "the test is one of rho"


def make(subject: Subject) -> tuple[TableRow, ...]:
    """Return the same coefficient with the other test."""
    found = _test(subject)
    row = TableRow(KEY, KEY, LABEL, "sensitivity", NO_FINDING)
    if isinstance(found, NoAnswer):
        return (subject.with_p(row, subject.coefficient, found),)
    tails = found.tails
    p = RowP(tails.p(subject.direction), tails.method)
    if tails.method == "drawn permutations":
        p = RowP(p.p, tails.method, tails.of, subject.draws.stream_of(KEY))
    return (subject.with_p(row, subject.coefficient, p),)


def _test(subject: Subject) -> StudentisedTest | NoAnswer:
    if subject.coefficient.name != "Spearman rho":
        return NoAnswer(RHO_ONLY)
    if subject.coefficient.n <= MOST_ENUMERATED:
        return studentised_of_all_orders(subject.x, subject.y)
    plan = subject.draws.plan(KEY, "Spearman rho", subject.coefficient.n)
    if isinstance(plan, NoAnswer):
        return plan
    return studentised_test(subject.x, subject.y, draws=plan.permutations, generator=plan.generator)


ROW: Final = RowRule(KEY, make)
