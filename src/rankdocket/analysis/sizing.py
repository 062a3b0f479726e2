"""How many rows a study needs, before there are any: what is asked, and everything that is answered."""

from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from math import ceil
from typing import Final, TypeAlias

from rankdocket.stats.guarded_width import LARGEST_RHO, guarded_factor, guarded_width_at, rows_for_guarded_width
from rankdocket.stats.interval_width import rows_for_width, width_at
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.sample_size import (
    FEWEST_ROWS,
    PlannedTest,
    RowsNeeded,
    SampleSize,
    power_at,
    sample_size,
    smallest_rho,
)
from rankdocket.stats.tied_target import rho_under_ties
from rankdocket.vocabulary import Sidedness

FORMULA_FROM: Final = (
    (Fraction(5, 100), 8),
    (Fraction(25, 1000), 12),
    (Fraction(4, 1000), 20),
    (Fraction(1, 1000), 36),
)
"""One tail of the level, and the rows from which the exact test had the power asked for within fifteen thousandths.

Simulated for the bivariate normal law without ties, rho 0.50 to 0.99, power 0.80 and 0.90.  With fewer rows the exact
null has too coarse steps and too long tails for a normal law.
"""

FORMULA_FROM_BEYOND: Final = 60
"""The same for smaller tails."""

LEAST_PLANNED: Final = 0.0001
"""A rho smaller than this in size would need a thousand million rows; no plan is made for it."""

POWERS: Final = (Decimal("0.80"), Decimal("0.90"), Decimal("0.95"))
"""Powers that the table shows beside the one asked for."""

MOST_STEP: Final = Decimal("0.10")
"""Distance of neighbouring targets in the table; less where the target itself is small."""

BESIDE: Final = 2
"""Neighbouring targets on either side."""

POINTS: Final = 81
"""Places at which a curve is computed."""

NEARLY_ALL: Final = 0.99
"""The curve of the power goes on until it reaches this."""

Shares: TypeAlias = tuple[Decimal, ...]


@dataclass(frozen=True, slots=True)
class Circumstances:
    """What is expected of the rows, whatever is asked.

    Attributes
    ----------
    first, second
        How often each distinct value of a variable is expected, in order of value; ``None`` for one without ties.
    missing
        Share of the rows collected that will lack a value, 0 to below 1.
    level
        Of the interval.
    """

    first: Shares | None
    second: Shares | None
    missing: Decimal
    level: Decimal

    @property
    def has_ties(self) -> bool:
        """Whether ties are expected in either variable."""
        return self.first is not None or self.second is not None

    def left_of(self, rho: Decimal) -> float:
        """Return what the expected ties leave of ``rho``; without ties it stays as it is."""
        return rho_under_ties(float(rho), self.first, self.second) if self.has_ties else float(rho)

    def collected(self, rows: int) -> int:
        """Return the rows to collect so that on average ``rows`` complete ones remain."""
        return ceil(rows / (1 - Fraction(self.missing)))


@dataclass(frozen=True, slots=True)
class ShowQuestion:
    """How many rows it takes to show ``rho`` with probability ``power``."""

    rho: Decimal
    power: Decimal
    alpha: Decimal
    sidedness: Sidedness
    questions: int
    rows: Circumstances

    @property
    def planned(self) -> PlannedTest:
        """How each question will be decided."""
        return PlannedTest(self.alpha, self.sidedness, self.questions)


@dataclass(frozen=True, slots=True)
class MeasureQuestion:
    """How many rows it takes for an interval of ``width``, if ``rho`` is what the population has."""

    rho: Decimal
    width: Decimal
    rows: Circumstances


@dataclass(frozen=True, slots=True)
class Line:
    """One target of the table: its rho, what the ties leave of it, and the rows for each column."""

    rho: Decimal
    left: float
    needed: tuple[int | NoAnswer, ...]


@dataclass(frozen=True, slots=True)
class Curve:
    """Values by number of rows for one rho, or of one rule."""

    rho: Decimal
    points: tuple[tuple[int, float], ...]


@dataclass(frozen=True, slots=True)
class ShowAnswer:
    """Rows needed to show a rho.

    Attributes
    ----------
    left
        What the expected ties leave of the rho aimed at.
    needed
        By every form of the formula.
    power, smallest
        With the rows needed: the power for the rho aimed at, and the smallest rho found with the power asked for.
    width
        Mean width of the interval with these rows, or why it is not known.
    powers
        Columns of the table.
    curves
        Power by number of rows, the rho aimed at first, then its neighbours.
    """

    question: ShowQuestion
    left: float
    needed: SampleSize
    power: float | NoAnswer
    smallest: float | NoAnswer
    width: float | NoAnswer
    powers: tuple[Decimal, ...]
    lines: tuple[Line, ...]
    curves: tuple[Curve, ...]

    @property
    def rows(self) -> int:
        """Complete rows to plan for."""
        return _planned_rows(self.needed)

    @property
    def is_overstated(self) -> bool:
        """Whether the rows are so few that the formula may state more power than the exact test has."""
        return self.rows < self.formula_from

    @property
    def formula_from(self) -> int:
        """Rows from which the exact test was found to have the power asked for."""
        tail = self.question.planned.tail
        return next((rows for least, rows in FORMULA_FROM if tail >= least), FORMULA_FROM_BEYOND)

    @property
    def has_overstated_lines(self) -> bool:
        """Whether the table names so few rows anywhere."""
        return any(isinstance(rows, int) and rows < self.formula_from for line in self.lines for rows in line.needed)


@dataclass(frozen=True, slots=True)
class MeasureAnswer:
    """Rows needed for an interval of a width.

    Attributes
    ----------
    left
        What the expected ties leave of the rho expected.
    rows
        Complete rows to plan for.
    width, factor
        With these rows: the mean width, and how many times the textbook width that is.
    textbook
        Rows that the textbook interval needs.
    widths
        Columns of the table.
    curves
        Mean width by number of rows, then the textbook width.
    """

    question: MeasureQuestion
    left: float
    rows: int
    width: float
    factor: float
    textbook: RowsNeeded
    widths: tuple[Decimal, ...]
    lines: tuple[Line, ...]
    curves: tuple[Curve, Curve]


SizeQuestion: TypeAlias = ShowQuestion | MeasureQuestion
SizeAnswer: TypeAlias = ShowAnswer | MeasureAnswer


def size(question: SizeQuestion) -> SizeAnswer | NoAnswer:
    """Return how many rows are needed, or why no plan can be made for the rho that the expected ties leave.

    Raises
    ------
    ValueError
        If a part of the question is out of its range.
    """
    left = question.rows.left_of(question.rho)
    match question:
        case ShowQuestion():
            if abs(left) < LEAST_PLANNED:
                return NoAnswer("the expected ties leave next to nothing of rho")
            return _show(question, left)
        case MeasureQuestion():
            if abs(left) > LARGEST_RHO:
                return NoAnswer("the width was not simulated so near to perfect order")
            return _measure(question, left)


def _show(question: ShowQuestion, left: float) -> ShowAnswer:
    planned, rows_of = question.planned, question.rows
    needed = sample_size(left, float(question.power), planned)
    powers = tuple(sorted({*POWERS, question.power}))
    targets = _around(question.rho, MOST_STEP, Decimal(1))
    lines = []
    for rho in targets:
        here = rows_of.left_of(rho)
        lines.append(Line(rho, here, tuple(_rows_to_show(here, power, planned) for power in powers)))
    rows = _planned_rows(needed)
    last = max(sample_size(left, NEARLY_ALL, planned).rows, rows + 1)
    first = max(FEWEST_ROWS, planned.fewest_rows)
    beside = targets.index(question.rho)
    shown = (question.rho, *targets[max(0, beside - 1) : beside], *targets[beside + 1 : beside + 2])
    return ShowAnswer(
        question,
        left,
        needed,
        power_at(rows, left, planned),
        smallest_rho(rows, float(question.power), planned),
        _width(rows, left, rows_of.level),
        powers,
        tuple(lines),
        tuple(_power_curve(rho, rows_of.left_of(rho), planned, _places(first, last)) for rho in shown),
    )


def _measure(question: MeasureQuestion, left: float) -> MeasureAnswer:
    rows_of, level = question.rows, question.rows.level
    rows = rows_for_guarded_width(left, float(question.width), level=level)
    widths = _around(question.width, MOST_STEP, Decimal(2))
    lines = []
    for rho in _expected(question.rho):
        here = rows_of.left_of(rho)
        lines.append(Line(rho, here, tuple(_rows_to_measure(here, width, level) for width in widths)))
    places = _places(max(FEWEST_ROWS, rows // 3), 2 * rows)
    return MeasureAnswer(
        question,
        left,
        rows,
        guarded_width_at(rows, left, level=level),
        guarded_factor(rows, left, level=level),
        rows_for_width(left, float(question.width), level=level),
        widths,
        tuple(lines),
        (
            Curve(question.rho, tuple((n, guarded_width_at(n, left, level=level)) for n in places)),
            Curve(question.rho, tuple((n, width_at(n, left, level=level)) for n in places)),
        ),
    )


def _rows_to_show(left: float, power: Decimal, planned: PlannedTest) -> int | NoAnswer:
    if abs(left) < LEAST_PLANNED:
        return NoAnswer("the expected ties leave next to nothing of this rho")
    return _planned_rows(sample_size(left, float(power), planned))


def _planned_rows(needed: SampleSize) -> int:
    """Return the rows of the formula, but no fewer than have an interval."""
    return max(needed.rows, FEWEST_ROWS)


def _rows_to_measure(left: float, width: Decimal, level: Decimal) -> int | NoAnswer:
    if abs(left) > LARGEST_RHO:
        return NoAnswer("the width was not simulated so near to perfect order")
    return rows_for_guarded_width(left, float(width), level=level)


def _width(rows: int, left: float, level: Decimal) -> float | NoAnswer:
    if abs(left) > LARGEST_RHO:
        return NoAnswer("the width was not simulated so near to perfect order")
    return guarded_width_at(rows, left, level=level)


def _power_curve(rho: Decimal, left: float, planned: PlannedTest, places: tuple[int, ...]) -> Curve:
    found = ((n, power_at(n, left, planned)) for n in places)
    return Curve(rho, tuple((n, power) for n, power in found if not isinstance(power, NoAnswer)))


def _around(value: Decimal, most: Decimal, end: Decimal) -> tuple[Decimal, ...]:
    """Return up to two neighbours on either side of a value above or below 0, all with its sign and inside ``end``."""
    step = most
    while step > abs(value) / (BESIDE + 1):
        step /= 2
    # Halves of a tenth have ever more digits; a step of one, two or five units reads better.
    unit = Decimal(1).scaleb(step.adjusted())
    step = next(unit * times for times in (5, 2, 1) if unit * times <= step)
    neighbours = (value + step * i for i in range(-BESIDE, BESIDE + 1))
    return tuple(each for each in neighbours if abs(each) < end)


def _expected(rho: Decimal) -> tuple[Decimal, ...]:
    """Return a rho expected and its neighbours, none on the other side of 0."""
    neighbours = (rho + MOST_STEP * i for i in range(-BESIDE, BESIDE + 1))
    return tuple(each for each in neighbours if each * rho >= 0 and abs(each) < 1 and (rho or each >= 0))


def _places(first: int, last: int) -> tuple[int, ...]:
    """Return at most 81 numbers of rows from first to last, evenly spread."""
    steps = POINTS - 1
    return tuple(sorted({first + (last - first) * i // steps for i in range(steps + 1)}))
