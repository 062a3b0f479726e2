"""Whether two coefficients of different rows differ, and by how much."""

from dataclasses import dataclass
from decimal import Decimal
from math import atanh, sqrt
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.z_interval import textbook_limits
from rankdocket.stats.z_scale import EstimateVariance, ZTest, estimate_factor, obstacle
from rankdocket.vocabulary import Direction

TWO_GROUPS: Final = Description(
    "Coefficients of two groups of different rows were compared on the inverse hyperbolic tangent scale, where the "
    "variance of each was taken as {k} over its complete rows less three; the interval for their difference was put "
    "together from the intervals of the two. Both are approximate and hold near normal-type dependence.",
    ("fieller1961", "zou2007"),
)


@dataclass(frozen=True, slots=True)
class GroupCoefficient:
    """The coefficient of one group, −1 to 1, and its complete rows."""

    r: float
    n: int


@dataclass(frozen=True, slots=True)
class Limits:
    """A coefficient with the two limits of its interval, all −1 to 1."""

    r: float
    low: float
    high: float


@dataclass(frozen=True, slots=True)
class GroupDifference:
    """How two coefficients of different rows differ.

    Attributes
    ----------
    difference
        The first coefficient less the second, −2 to 2.
    test
        Of the null hypothesis that the two are equal.
    low, high
        Interval for the difference, −2 to 2.
    """

    difference: float
    test: ZTest
    low: float
    high: float

    def p(self, direction: Direction) -> float:
        """Return the approximate p-value of equality, 0 to 1; "greater" means that the first is greater."""
        return self.test.p(direction)


def difference_two_groups(
    first: GroupCoefficient, second: GroupCoefficient, *, variance: EstimateVariance, level: Decimal | str | float
) -> GroupDifference | NoAnswer:
    """Return how the coefficients of two groups with no row in common differ, or why that cannot be said.

    z = (atanh r₁ − atanh r₂)/√(k₁/(n₁ − 3) + k₂/(n₂ − 3)) (fieller1961 with k = 1.06); the interval is that of
    :func:`difference_limits` (zou2007), its parts from the same k.

    Parameters
    ----------
    first, second
        The groups.
    variance
        Of both, in the test and in the interval.
    level
        Above 0, below 1; of the interval.

    Raises
    ------
    ValueError
        If a coefficient or the level is out of its range.
    """
    for place, group in (("first", first), ("second", second)):
        reason = obstacle(group.r, group.n)
        if reason is not None:
            return NoAnswer(f"in the {place} group {reason}")
    variances = [estimate_factor(variance, group.r) / (group.n - 3) for group in (first, second)]
    parts = [limits_of(group.r, square, level) for group, square in zip((first, second), variances, strict=True)]
    low, high = difference_limits(parts[0], parts[1], correlation=0.0)
    return GroupDifference(
        first.r - second.r, ZTest((atanh(first.r) - atanh(second.r)) / sqrt(sum(variances))), low, high
    )


def limits_of(r: float, variance: float, level: Decimal | str | float) -> Limits:
    """Return a coefficient with its textbook interval, from the ``variance`` of its inverse hyperbolic tangent."""
    textbook = textbook_limits(r, variance, level)
    return Limits(r, textbook.low, textbook.high)


def difference_limits(first: Limits, second: Limits, *, correlation: float) -> tuple[float, float]:
    """Return limits for the first coefficient less the second, from an interval of each (zou2007).

    The intervals may be of any kind, at the level that the difference shall have.

    Parameters
    ----------
    first, second
        The coefficients with their limits.
    correlation
        Between the two coefficients as they vary from sample to sample, −1 to 1; 0 for different rows.
    """
    difference = first.r - second.r
    down = _joined(first.r - first.low, second.high - second.r, correlation)
    up = _joined(first.high - first.r, second.r - second.low, correlation)
    return difference - down, difference + up


def _joined(one: float, other: float, correlation: float) -> float:
    return sqrt(max(0.0, one * one + other * other - 2 * correlation * one * other))
