"""What every row of a sensitivity table is made from: one association, its rows, and the rule that decides it."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import partial
from typing import Final

import numpy as np

from rankdocket.analysis.decide import DecisionRule
from rankdocket.analysis.results import CompleteRow, Screened
from rankdocket.analysis.sensitivity.cheap import Draws, cheap_p, coefficient_of
from rankdocket.analysis.sensitivity.table import Lines, RowP, TableRow, Verdict
from rankdocket.analysis.sensitivity.threshold import Threshold, Ties
from rankdocket.stats.coefficient import FEWEST_ROWS, Coefficient
from rankdocket.stats.interval import Interval, NoInterval
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes, tie_groups
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData
from rankdocket.vocabulary import Direction, FindingWord

NO_FINDING: Final = Verdict("no finding")

NONE_LEFT: Final = "these rows allow no coefficient"


@dataclass(frozen=True, slots=True, eq=False)
class Decision:
    """How the finding of an association came about, and where it would change.

    Attributes
    ----------
    rule
        The rule of the plan, other p-values of the family held fixed.
    finding
        The finding.
    threshold
        Made when a row first needs it.
    """

    rule: DecisionRule
    finding: FindingWord
    threshold: Callable[[], Threshold | NoAnswer]


@dataclass(frozen=True, slots=True, eq=False)
class Subject:
    """One association for its table.

    Attributes
    ----------
    x, y
        Codes of the complete rows.
    decision
        ``None`` where the plan states no finding, or decides by more than p-values.
    undecided
        What is said instead of a verdict where there is no decision.
    """

    spec: StudySpec
    data: StudyData
    screened: Screened
    x: Codes
    y: Codes
    coefficient: Coefficient
    interval: Interval | NoInterval
    direction: Direction
    draws: Draws
    decision: Decision | None
    undecided: Verdict = NO_FINDING

    @property
    def lines(self) -> tuple[int, ...]:
        """Lines of the complete rows in their file."""
        return tuple(row.row for row in self.screened.rows)

    def verdict(self, p: Fraction, *, positive: bool) -> Verdict:
        """Return whether the finding would change at this p-value of a coefficient above 0, or not."""
        if self.decision is None:
            return self.undecided
        found = self.decision.rule.word(p, positive=positive)
        return Verdict("no" if found == self.decision.finding else "yes", found)

    def not_applicable(self, reason: str) -> Verdict:
        """Return that the question does not apply; no finding stays no finding."""
        return self.undecided if self.decision is None else Verdict("not applicable", reason=reason)

    def with_p(self, row: TableRow, coefficient: Coefficient, p: RowP | NoAnswer) -> TableRow:
        """Return a row of a coefficient with its p-value and its verdict."""
        if isinstance(p, NoAnswer):
            return replace(row, value=coefficient, verdict=self.not_applicable(p.reason), absent=p.reason)
        return replace(row, value=coefficient, verdict=self.verdict(p.p, positive=coefficient.numerator > 0), p=p)

    def of_rows(self, key: str, kind: str, label: str, rows: tuple[CompleteRow, ...], changed: Lines) -> TableRow:
        """Return the row of the same coefficient from other rows of the data."""
        x, y = (
            np.array([getattr(row, side) for row in rows], dtype=np.int64)
            for side in ("x_doubled_rank", "y_doubled_rank")
        )
        found = coefficient_of(self.coefficient.name, x, y)
        if not found.is_defined or found.n < FEWEST_ROWS:
            verdict = self.not_applicable(NONE_LEFT)
            return TableRow(key, kind, label, "sensitivity", verdict, absent=NONE_LEFT, rows=changed)
        empty = TableRow(key, kind, label, "sensitivity", NO_FINDING, rows=changed)
        return self.with_p(empty, found, cheap_p(found, (x, y), self.direction, self.draws, key))


def ties_without(x: Codes, y: Codes, rows: tuple[int, ...]) -> Callable[[], Ties]:
    """Return a way to the tie groups of the rows that remain."""
    return partial(_ties_without, x, y, rows)


def _ties_without(x: Codes, y: Codes, rows: tuple[int, ...]) -> Ties:
    return tie_groups(np.delete(x, rows)), tie_groups(np.delete(y, rows))
