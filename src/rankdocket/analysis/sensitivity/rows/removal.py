"""The smallest set of rows found whose removal changes the finding."""

from dataclasses import replace
from functools import partial
from typing import Final

import numpy as np
import numpy.typing as npt

from rankdocket.analysis.sensitivity.cheap import cheap_p, coefficient_of
from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.single_rows import changing_rows, threshold_for, without_each
from rankdocket.analysis.sensitivity.subject import NO_FINDING, Subject, ties_without
from rankdocket.analysis.sensitivity.table import SHARE, Lines, Search, TableRow, Verdict
from rankdocket.analysis.sensitivity.threshold import Threshold
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes
from rankdocket.stats.removals import FEWEST_LEFT, NoRemoval, Removal, SearchBounds, smallest_removal
from rankdocket.stats.without_sets import coefficients_without
from rankdocket.vocabulary import FindingWord

KEY: Final = "removal"
LABEL: Final = "the smallest set of rows found whose removal changes the finding"

MOST: Final = 40
ROWS_AND_STEPS: Final = 20_000
"""Rows removed together at most: a fifth, forty, and fewer where there are very many; three are always looked for."""

AMPLE: Final = 20_000
"""Findings asked for while all sets are tried: more than there are sets of three among forty rows."""

LEFT_OPEN: Final = "the set lies so near alpha that the null of the rows that remain leaves it open"


def make(subject: Subject) -> tuple[TableRow, ...]:
    """Return the set, what the rows without it say, and how sure it is that there is no smaller one."""
    threshold = threshold_for(subject)
    found = threshold if isinstance(threshold, NoAnswer) else _search(subject, threshold)
    row = TableRow(KEY, KEY, LABEL, "sensitivity", NO_FINDING)
    match found:
        case NoAnswer(reason):
            return (replace(row, verdict=subject.not_applicable(reason), absent=reason),)
        case NoRemoval():
            return (replace(row, verdict=Verdict("no"), search=Search(found.tried, found.most_rows, None)),)
        case Removal():
            return (_found(subject, row, found),)


def most_removed(n: int) -> int:
    """Return how many of ``n`` rows are removed together at most."""
    return max(3, min(n // SHARE, MOST, ROWS_AND_STEPS // n))


def _search(subject: Subject, threshold: Threshold) -> Removal | NoRemoval | NoAnswer:
    each = without_each(subject)
    if isinstance(each, NoAnswer):
        return each
    singles = changing_rows(subject, each)
    if isinstance(singles, NoAnswer) or subject.decision is None:
        return singles if isinstance(singles, NoAnswer) else NoAnswer(LEFT_OPEN)
    before, n = subject.decision.finding, subject.coefficient.n
    finding = partial(_finding, threshold)
    if singles:
        left = (np.delete(subject.x, singles[0]), np.delete(subject.y, singles[0]))
        return Removal((singles[0],), before, finding(*left), "exhaustive", 0)
    bounds = SearchBounds(most_removed(n), AMPLE)
    candidates = partial(_candidates, subject, threshold, before)
    return smallest_removal(subject.x, subject.y, finding, bounds, candidates)


def _finding(threshold: Threshold, x: Codes, y: Codes) -> FindingWord:
    return threshold.finding(coefficient_of(threshold.name, x, y), ties_without(x, y, ()))


def _candidates(subject: Subject, threshold: Threshold, before: FindingWord, sets: Codes) -> npt.NDArray[np.bool_]:
    """Return the sets that may change the finding; single rows were looked at before."""
    if sets.shape[1] == 1:
        return np.zeros(len(sets), dtype=np.bool_)
    without = coefficients_without(threshold.name, subject.x, subject.y, sets)
    return threshold.may_differ(without, subject.coefficient.n - sets.shape[1], before)


def _found(subject: Subject, row: TableRow, found: Removal) -> TableRow:
    """Return the row of a set, held once more against the null of the rows that remain."""
    lines = tuple(subject.lines[place] for place in found.rows)
    x, y = np.delete(subject.x, found.rows), np.delete(subject.y, found.rows)
    most = max(len(lines), min(most_removed(subject.coefficient.n), subject.coefficient.n - FEWEST_LEFT))
    row = replace(row, rows=Lines(lines), search=Search(found.tried, most, found.how_sure))
    coefficient = coefficient_of(subject.coefficient.name, x, y)
    if not coefficient.is_defined:
        return replace(row, verdict=Verdict("yes", "not estimable"), absent="a variable no longer varies")
    p = cheap_p(coefficient, (x, y), subject.direction, subject.draws, KEY)
    made = subject.with_p(row, coefficient, p)
    return replace(made, verdict=Verdict("not applicable", reason=LEFT_OPEN)) if made.verdict.change == "no" else made


ROW: Final = RowRule(KEY, make)
