"""The product-moment coefficient of the values, with its own permutation test."""

from typing import Final

from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.subject import Subject
from rankdocket.analysis.sensitivity.table import RowP, TableRow
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.product_moment import product_moment, product_moment_tails

KEY: Final = "product-moment"
LABEL: Final = "product-moment coefficient of the values (Pearson), with its own permutation test"

WITHOUT_DISTANCES: Final = "labels and places have no distances"


def make(subject: Subject) -> tuple[TableRow, ...]:
    """Return the coefficient of the values where both variables are numbers: another quantity."""
    association, variables = subject.screened.spec, subject.spec.variables
    rows = subject.screened.rows
    if {variables[association.x].scale, variables[association.y].scale} & {"ordered", "already ranked"}:
        return (_without(subject, WITHOUT_DISTANCES),)
    found = product_moment([row.x for row in rows], [row.y for row in rows])
    if isinstance(found, NoAnswer):
        return (_without(subject, found.reason),)
    plan = subject.draws.plan(KEY, "Spearman rho", len(rows))
    tails = product_moment_tails(found, plan)
    if isinstance(tails, NoAnswer):
        return (
            TableRow(
                KEY, KEY, LABEL, "supplementary", subject.not_applicable(tails.reason), found, absent=tails.reason
            ),
        )
    p = tails.p(subject.direction)
    drawn = not tails.is_exact
    return (
        TableRow(
            KEY,
            KEY,
            LABEL,
            "supplementary",
            subject.verdict(p, positive=found.numerator > 0),
            found,
            RowP(p, tails.method, tails.of if drawn else None, subject.draws.stream_of(KEY) if drawn else ()),
        ),
    )


def _without(subject: Subject, reason: str) -> TableRow:
    return TableRow(KEY, KEY, LABEL, "supplementary", subject.not_applicable(reason), absent=reason)


ROW: Final = RowRule(KEY, make)
