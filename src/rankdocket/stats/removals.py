"""How few rows a finding hangs on: the smallest set found whose removal changes it.

The idea is that of walsh2014 for tables of two by two; its use for a rank correlation is an extension of ours.
"""

from collections.abc import Callable, Hashable, Iterable
from dataclasses import dataclass
from itertools import chain, combinations
from math import comb
from typing import Final, Literal, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.references import Description
from rankdocket.stats.exact_values import equally_long
from rankdocket.stats.leave_one_out import leave_one_out
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes

REMOVALS: Final = Description(
    "Sets of rows whose removal changes the finding were looked for: all sets as far as {exhaustive} rows, and beyond by "
    "leaving out, again and again, the row that moves rho most. The idea comes from tables of two by two; its use here is "
    "an extension.",
    ("walsh2014",),
)

Finding: TypeAlias = Callable[[Codes, Codes], Hashable]
"""What is concluded from the rows that are there."""

Candidates: TypeAlias = Callable[[Codes], npt.NDArray[np.bool_]]
"""Which sets of rows, shape (sets, size), may change the finding; the others are known not to.  Shape (sets,)."""

HowSure: TypeAlias = Literal["exhaustive", "upper bound"]
"""Whether no smaller set exists, or a smaller one may exist."""

EXHAUSTIVE_ROWS: Final = 3
EXHAUSTIVE_N: Final = 40
"""All sets of two and three rows are tried up to so many complete rows: 10 660 sets."""

FEWEST_LEFT: Final = 4
"""Rows that the search leaves at least: below, no coefficient is worth a finding."""


@dataclass(frozen=True, slots=True)
class SearchBounds:
    """How far to look.

    Attributes
    ----------
    most_rows
        Rows removed together at most, 1 or more.
    most_findings
        How many findings may be asked for while all sets are tried, 0 or more; a size that would need more is not
        begun.
    """

    most_rows: int
    most_findings: int


@dataclass(frozen=True, slots=True)
class Removal:
    """A set of rows whose removal changes the finding.

    Attributes
    ----------
    rows
        Places among the complete rows, from 0, increasing.
    before, after
        The finding with and without them.
    how_sure
        "exhaustive" when all smaller sets were tried and changed nothing.
    tried
        Size up to which all sets were tried.
    """

    rows: tuple[int, ...]
    before: Hashable
    after: Hashable
    how_sure: HowSure
    tried: int


@dataclass(frozen=True, slots=True)
class NoRemoval:
    """That no set was found.

    Attributes
    ----------
    before
        The finding with all rows.
    tried
        Size up to which all sets were tried; larger ones were looked for step by step only.
    most_rows
        Size up to which sets were looked for at all.
    """

    before: Hashable
    tried: int
    most_rows: int


def smallest_removal(
    x_codes: Codes, y_codes: Codes, finding: Finding, bounds: SearchBounds, candidates: Candidates | None = None
) -> Removal | NoRemoval | NoAnswer:
    """Return the smallest set of rows found whose removal changes the finding.

    All single rows are tried; with at most EXHAUSTIVE_N complete rows also all sets of two and of three; each as far as
    the bounds allow.  Beyond, the row that lowers rho most is left out again and again until the finding changes, and so
    is the row that raises it most; of the two sets the smaller one is kept, less the rows it does not need.  Where
    ``candidates`` are told, the finding is asked for them only while all sets are tried.

    Raises
    ------
    ValueError
        If the columns differ in length, or the bounds are out of their range.
    """
    if bounds.most_rows < 1 or bounds.most_findings < 0:
        raise ValueError("bounds must allow one row and no less than no finding")
    n = equally_long(x_codes, y_codes)
    most_rows = min(bounds.most_rows, n - FEWEST_LEFT)
    if most_rows < 1:
        return NoAnswer(f"the search leaves {FEWEST_LEFT} rows or more, and there are only {n}")
    search = _Search(x_codes, y_codes, finding)
    before = finding(x_codes, y_codes)
    tried = 0
    for size in _sizes_to_try(n, most_rows, bounds.most_findings):
        for rows in _sets(n, size, candidates):
            after = search.without(rows)
            if after != before:
                return Removal(rows, before, after, "exhaustive", size - 1)
        tried = size
    if tried == most_rows:
        return NoRemoval(before, tried, most_rows)
    paths = (search.path(before, most_rows, "lowest"), search.path(before, most_rows, "highest"))
    needed = [search.needed(before, rows) for rows in paths if rows is not None]
    if not needed:
        return NoRemoval(before, tried, most_rows)
    rows = min(needed, key=lambda found: (len(found), found))
    how_sure: HowSure = "exhaustive" if len(rows) == tried + 1 else "upper bound"
    return Removal(rows, before, search.without(rows), how_sure, tried)


def single_rows_that_change(x_codes: Codes, y_codes: Codes, finding: Finding) -> tuple[int, ...]:
    """Return the rows each of which changes the finding when it alone is left out.

    Raises
    ------
    ValueError
        If the columns differ in length.
    """
    n = equally_long(x_codes, y_codes)
    search, before = _Search(x_codes, y_codes, finding), finding(x_codes, y_codes)
    return tuple(row for row in range(n) if search.without((row,)) != before)


def _sizes_to_try(n: int, most_rows: int, most_findings: int) -> Iterable[int]:
    """Yield the sizes of which all sets are tried."""
    largest = EXHAUSTIVE_ROWS if n <= EXHAUSTIVE_N else 1
    left = most_findings
    for size in range(1, min(largest, most_rows) + 1):
        left -= comb(n, size)
        if left < 0:
            return
        yield size


def _sets(n: int, size: int, candidates: Candidates | None) -> Iterable[tuple[int, ...]]:
    """Return all sets of so many rows that may change the finding, in lexical order."""
    every = combinations(range(n), size)
    if candidates is None:
        return every
    sets = np.fromiter(chain.from_iterable(every), dtype=np.int64).reshape(-1, size)
    return (tuple(rows) for rows in sets[candidates(sets)].tolist())


@dataclass(frozen=True, slots=True, eq=False)
class _Search:
    x_codes: Codes
    y_codes: Codes
    finding: Finding

    def without(self, rows: tuple[int, ...]) -> Hashable:
        """Return the finding of the rows that remain."""
        return self.finding(np.delete(self.x_codes, rows), np.delete(self.y_codes, rows))

    def path(self, before: Hashable, most_rows: int, goal: Literal["lowest", "highest"]) -> tuple[int, ...] | None:
        """Return the rows left out one after the other until the finding changes; ``None`` if it never does."""
        left = np.arange(len(self.x_codes), dtype=np.int64)
        removed: tuple[int, ...] = ()
        while len(removed) < most_rows:
            found = leave_one_out(self.x_codes[left], self.y_codes[left])
            if isinstance(found, NoAnswer):
                return None
            place = found.lowest.row if goal == "lowest" else found.highest.row
            removed = (*removed, int(left[place]))
            left = np.delete(left, place)
            if self.without(removed) != before:
                return removed
        return None

    def needed(self, before: Hashable, rows: tuple[int, ...]) -> tuple[int, ...]:
        """Return the rows less those that may come back while the finding stays changed, the first removed first."""
        kept = rows
        for row in rows:
            fewer = tuple(other for other in kept if other != row)
            if fewer and self.without(fewer) != before:
                kept = fewer
        return tuple(sorted(kept))
