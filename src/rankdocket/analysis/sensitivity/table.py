"""What a sensitivity table is: rows that say what another method, or other rows of the data, would have given."""

from dataclasses import dataclass
from fractions import Fraction
from typing import Final, Literal, TypeAlias

from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.interval import Interval
from rankdocket.stats.null import NullMethod
from rankdocket.stats.product_moment import ProductMoment
from rankdocket.stats.removals import EXHAUSTIVE_ROWS, HowSure
from rankdocket.vocabulary import FindingWord

Standing: TypeAlias = Literal["sensitivity", "supplementary"]
"""sensitivity: the same quantity under other assumptions or from other rows; supplementary: another quantity."""

Change: TypeAlias = Literal["yes", "no", "no finding", "not applicable"]
"""Whether the finding would be another one: no finding is stated for the association, or the row decides none."""


SHARE: Final = 5
"""A set of rows that is more than one in so many is not called small."""


@dataclass(frozen=True, slots=True)
class RowP:
    """The p-value of a row.

    Attributes
    ----------
    p
        Above 0 to 1.
    method
        Where it comes from.
    draws
        Permutations drawn; ``None`` where none were.
    stream
        The address of their random stream; empty without draws.
    """

    p: Fraction
    method: NullMethod
    draws: int | None = None
    stream: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Verdict:
    """Whether the finding would change, and what it would then be.

    Attributes
    ----------
    change
        The answer.
    finding
        The finding that the row would have led to, where it would have led to one.
    reason
        Why the question does not apply, or what the answer rests on; may be empty.
    """

    change: Change
    finding: FindingWord | None = None
    reason: str = ""


@dataclass(frozen=True, slots=True)
class Lines:
    """Rows of the file that a row of the table is about: their lines, and how the plan calls them."""

    lines: tuple[int, ...]
    reason: str | None = None


@dataclass(frozen=True, slots=True)
class Ends:
    """The lowest and the highest coefficient without one row, the lines of these rows, and what else was counted.

    Attributes
    ----------
    changing
        How many rows would each change the finding if it were left out; ``None`` where that was not found out.
    """

    low: Coefficient
    high: Coefficient
    low_line: int
    high_line: int
    changing: int | None


@dataclass(frozen=True, slots=True)
class Search:
    """How a set of rows was looked for.

    Attributes
    ----------
    tried
        All sets up to this size were tried.
    most
        Sets up to this size were looked for at all.
    how_sure
        Of a set that was found; ``None`` without one.
    """

    tried: int
    most: int
    how_sure: HowSure | None


@dataclass(frozen=True, slots=True)
class TableRow:
    """One row of the table.

    Attributes
    ----------
    key
        Unique in its table.
    kind
        Key of the rule that made it.
    label
        What was done, as a phrase without numbers.
    value
        The coefficient of the row, where it has one.
    p, interval
        What stands beside the value, one of them or neither.
    absent
        Why value, p or interval are missing, as the end of a sentence; ``None`` where nothing is.
    rows
        The rows of the file that were left out or put back.
    ends, search
        Of a row that leaves out each row in turn; of one that looks for a set of rows.
    """

    key: str
    kind: str
    label: str
    standing: Standing
    verdict: Verdict
    value: Coefficient | ProductMoment | None = None
    p: RowP | None = None
    interval: Interval | None = None
    absent: str | None = None
    rows: Lines | None = None
    ends: Ends | None = None
    search: Search | None = None


def _are_few(lines: tuple[int, ...], left: Coefficient | ProductMoment | None) -> bool:
    """Return whether a set of rows is few enough for a caveat; ``left`` is the coefficient of those that remain."""
    remain = left.n if isinstance(left, Coefficient) else 0
    return 1 < len(lines) <= EXHAUSTIVE_ROWS and SHARE * len(lines) <= remain + len(lines)


@dataclass(frozen=True, slots=True)
class SensitivityTable:
    """The table of one association; ``finding`` is the one that its rows are held against, if any is stated."""

    rows: tuple[TableRow, ...]
    finding: FindingWord | None

    @property
    def changing(self) -> tuple[TableRow, ...]:
        """The sensitivity rows that would change the finding and are worth a caveat.

        Every finding hangs on some set of rows; a set counts while it is so small that all sets of its size could
        have been tried, and no more than a fifth of the rows; one of a single row is counted where each row was left
        out in turn.
        """
        return tuple(
            row
            for row in self.rows
            if row.standing == "sensitivity"
            and row.verdict.change == "yes"
            and (row.search is None or row.rows is None or _are_few(row.rows.lines, row.value))
        )

    @property
    def asked(self) -> tuple[TableRow, ...]:
        """The sensitivity rows that say yes or no, beside the search for rows to remove: some set changes any finding."""
        return tuple(
            row
            for row in self.rows
            if row.standing == "sensitivity" and row.verdict.change in ("yes", "no") and row.search is None
        )

    @property
    def answering_yes(self) -> tuple[TableRow, ...]:
        """Those of the rows asked that would change the finding."""
        return tuple(row for row in self.asked if row.verdict.change == "yes")


@dataclass(frozen=True, slots=True)
class NoTable:
    """That an association has no table, and why, as the end of a sentence without its full stop."""

    reason: str
