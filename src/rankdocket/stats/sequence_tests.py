"""Whether values in their order look like a random sequence: runs about the median, and successive differences."""

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise
from math import sqrt
from statistics import median
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.exact_values import Given, exact_codes, exact_values
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import doubled_midranks
from rankdocket.stats.z_scale import ZTest

RUNS: Final = Description(
    "Runs of values above and below the median were counted in the order of the rows; values equal to the median were "
    "left out. The p-value is approximate, from the normal distribution.",
    ("wald1940",),
)
SUCCESSIVE: Final = Description(
    "The sum of squared differences of successive values was set against the sum of squares about their mean, for the "
    "values and for their midranks. The p-value is that of the midranks, approximate, from the normal distribution.",
    ("neumann1941", "bartels1982"),
)

FEWEST_SUCCESSIVE: Final = 3
"""With two values the ratio of midranks is always 2: it does not vary."""


@dataclass(frozen=True, slots=True)
class RunsTest:
    """Runs about the median.

    Attributes
    ----------
    above, below
        Values above, below the median; those equal to it are left out.
    runs
        Longest stretches of values on one side.
    test
        Runs less their mean in random order, over their standard deviation; more runs than that give a positive z.
    corrected
        The same with the distance from the mean, taken without its sign, lessened by one half, to 0 at least.
    """

    above: int
    below: int
    runs: int
    test: ZTest
    corrected: ZTest


@dataclass(frozen=True, slots=True)
class SuccessiveDifferences:
    """The ratio of successive differences.

    Attributes
    ----------
    ratio
        Σ(xᵢ₊₁ − xᵢ)²/Σ(xᵢ − mean)² of the values (neumann1941): about 2 in random order, less where neighbours are alike.
    rank_ratio
        The same of the midranks (bartels1982).
    test
        Of the ratio of midranks; "less" asks for neighbours that are alike, as in a trend.
    """

    ratio: Fraction
    rank_ratio: Fraction
    test: ZTest


def runs_test_median(values: Sequence[Given]) -> RunsTest | NoAnswer:
    """Return the test of runs about the median (wald1940), or why there is none.

    Raises
    ------
    ValueError
        If a value is not a finite number.
    """
    exact = exact_values(values)
    if not exact:
        return NoAnswer("there are no values")
    middle = median(exact)
    sides = [value > middle for value in exact if value != middle]
    above = sum(sides)
    below = len(sides) - above
    if above == 0 or below == 0:
        return NoAnswer("no values lie on one side of the median")
    whole, twice = len(sides), 2 * above * below
    variance = Fraction(twice * (twice - whole), whole**2 * (whole - 1))
    if variance == 0:
        return NoAnswer("two values that differ always make two runs")
    runs = 1 + sum(one != other for one, other in pairwise(sides))
    excess = runs - (1 + Fraction(twice, whole))
    spread = sqrt(variance)
    corrected = max(Fraction(0), abs(excess) - Fraction(1, 2))
    return RunsTest(above, below, runs, ZTest(float(excess) / spread), ZTest(float(corrected) / spread))


def von_neumann(values: Sequence[Given]) -> SuccessiveDifferences | NoAnswer:
    """Return the ratio of successive differences of values and midranks (neumann1941, bartels1982), or why not.

    z = (ratio − 2)/√(4(n − 2)(5n² − 2n − 9)/(5n(n + 1)(n − 1)²)), the variance being that without ties.

    Raises
    ------
    ValueError
        If a value is not a finite number.
    """
    exact = exact_values(values)
    n = len(exact)
    if n < FEWEST_SUCCESSIVE:
        return NoAnswer("the ratio needs three or more values")
    if len(set(exact)) == 1:
        return NoAnswer("the values do not vary")
    rank_ratio = _ratio(tuple(Fraction(rank) for rank in doubled_midranks(exact_codes(values)).tolist()))
    variance = Fraction(4 * (n - 2) * (5 * n * n - 2 * n - 9), 5 * n * (n + 1) * (n - 1) ** 2)
    return SuccessiveDifferences(_ratio(exact), rank_ratio, ZTest(float(rank_ratio - 2) / sqrt(variance)))


def _ratio(values: tuple[Fraction, ...]) -> Fraction:
    differences = sum(((other - one) ** 2 for one, other in pairwise(values)), Fraction(0))
    squares = sum((value**2 for value in values), Fraction(0)) - sum(values, Fraction(0)) ** 2 / len(values)
    return differences / squares
