"""The look into the table: the nearest simulated conditions, and the worst ones at that number of rows."""

from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from types import MappingProxyType
from typing import Final

from rankdocket.stats.coverage.table import CoverageRow, coverage_table
from rankdocket.stats.coverage.tie_pattern import nearest_families
from rankdocket.stats.ranks import TieGroups
from rankdocket.vocabulary import CoefficientName, Direction

IN_WORDS: Final = MappingProxyType({6: "six", 10: "ten", 100: "one hundred", 200: "two hundred"})
"""Fewest and most rows simulated, as they stand in a reason."""


@dataclass(frozen=True, slots=True)
class CoverageQuestion:
    """An interval whose simulated coverage is asked for.

    Attributes
    ----------
    method
        Key of the interval’s rule.
    level
        Above 0, below 1.
    n
        Complete rows.
    value
        The coefficient of the rows, −1 to 1; its sign does not matter.
    x_ties, y_ties
        Tie groups of both variables.
    """

    method: str
    coefficient: CoefficientName
    level: Decimal
    direction: Direction
    n: int
    value: Decimal
    x_ties: TieGroups
    y_ties: TieGroups


@dataclass(frozen=True, slots=True)
class SimulatedCoverage:
    """What the table says.

    Attributes
    ----------
    nearest
        The row of the nearest conditions.
    lowest
        The row of the lowest coverage at the same number of rows, over all families and coefficients.
    """

    nearest: CoverageRow
    lowest: CoverageRow


@dataclass(frozen=True, slots=True)
class NotSimulated:
    """That the table has no row near enough, and why, as words without digits that can stand alone or end a sentence."""

    reason: str


def simulated_coverage(question: CoverageQuestion) -> SimulatedCoverage | NotSimulated:
    """Return the simulated coverage of an interval at the nearest conditions.

    The nearest number of rows is that of the smallest ratio to the observed one; the family that whose ties are nearest
    (:func:`rankdocket.stats.coverage.tie_pattern.nearest_families`); the true coefficient the one nearest to the size of the
    observed one. Of two that are equally near, the row with the lower coverage is taken.
    """
    rows = [
        row for row in coverage_table() if row.method == question.method and row.coefficient == question.coefficient
    ]
    if not rows:
        return NotSimulated("coverage not simulated for this rule")
    if question.direction != "two-sided":
        return NotSimulated("coverage not simulated at this level: bounds on one side were not simulated")
    rows = [row for row in rows if row.level == question.level]
    if not rows:
        return NotSimulated("coverage not simulated at this level")
    sizes = {row.n for row in rows}
    if question.n < min(sizes):
        return NotSimulated(f"coverage not simulated below {IN_WORDS[min(sizes)]} rows")
    if question.n > max(sizes):
        return NotSimulated(f"coverage not simulated above {IN_WORDS[max(sizes)]} rows")
    present = {row.family.key for row in rows}
    families = [key for key in nearest_families(question.x_ties, question.y_ties) if key in present]
    if not families:
        return NotSimulated("coverage not simulated for such ties")
    candidates = [row for row in rows if row.family.key == families[0]]
    nearest = min(candidates, key=lambda row: (*_distance(row, question), row.coverage))
    return SimulatedCoverage(nearest, min((row for row in rows if row.n == nearest.n), key=lambda row: row.coverage))


def _distance(row: CoverageRow, question: CoverageQuestion) -> tuple[Fraction, Decimal]:
    ratio = Fraction(row.n, question.n)
    return max(ratio, 1 / ratio), abs(row.truth - abs(question.value))
