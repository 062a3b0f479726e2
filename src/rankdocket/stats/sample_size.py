"""How many rows a test of rho needs before the data are there: rows, power, and the smallest rho within reach.

All formulas live on the scale of atanh(rho).  Rows for a power are

    n = 3 + ((z_alpha √v0 + z_power √v1) / atanh(rho))²

where v0 and v1 are n − 3 times the variance without association and at rho; the forms differ in v0 and v1 alone.  None
of this says anything about data that are there: an interval does.
"""

from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from math import atanh, ceil, factorial, sqrt, tanh
from typing import Final

from scipy.special import ndtr, ndtri

from rankdocket.references import Description
from rankdocket.stats.intervals.bonett_wright import bonett_wright_factor
from rankdocket.stats.intervals.fieller import RHO_FACTOR
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.vocabulary import Sidedness

FEWEST_ROWS: Final = 4
"""The variance has n − 3 in its denominator."""

LEAST_POWER: Final = 0.5
"""A study planned to miss more often than to find is not planned for; below it the formulas turn over."""

SURELY_ENOUGH_HALVINGS: Final = 200
"""More than the bits of a double, whatever the interval."""

SAMPLE_SIZE: Final = Description(
    "The number of rows was planned for rho on the inverse hyperbolic tangent scale, with the variance that holds "
    "without association at the critical value and the variance of Bonett and Wright at the rho aimed at; alpha was "
    "divided by the number of questions. The formula is approximate; it was held against simulated power for "
    "variables that follow the bivariate normal law.",
    ("bonett2000",),
)


@dataclass(frozen=True, slots=True)
class PlannedTest:
    """How one question among several will be decided.

    Attributes
    ----------
    alpha
        Above 0, at most one half; a float is read as the shortest decimal that means it.
    sidedness
        One-sided counts on the side of the rho aimed at.
    questions
        Associations decided together, 1 or more: each is planned at alpha over their number (dunn1961), which is safe
        for every step-down or step-up rule that keeps the chance of any false finding.

    Raises
    ------
    ValueError
        If an attribute is out of its range.
    """

    alpha: Decimal | Fraction | float
    sidedness: Sidedness = "two-sided"
    questions: int = 1

    def __post_init__(self) -> None:
        if not 0 < Fraction(str(self.alpha)) <= Fraction(1, 2):
            raise ValueError(f"alpha must lie above 0 and be at most one half, not be {self.alpha}")
        if self.questions < 1:
            raise ValueError(f"at least one question is decided, not {self.questions}")

    @property
    def tail(self) -> Fraction:
        """The share of alpha that one tail of one question gets."""
        return Fraction(str(self.alpha)) / self.questions / self._sides

    @property
    def z(self) -> float:
        """The standard normal value exceeded with probability ``tail``."""
        return -float(ndtri(float(self.tail)))

    @property
    def fewest_rows(self) -> int:
        """The fewest rows with which perfect order without ties has a p-value small enough, by exact counts."""
        n = 2
        while Fraction(1, factorial(n)) > self.tail:
            n += 1
        return n

    @property
    def _sides(self) -> int:
        return 1 if self.sidedness == "one-sided" else 2


@dataclass(frozen=True, slots=True)
class RowsNeeded:
    """What a formula asks for.

    Attributes
    ----------
    raw
        As the formula gives it, above 3.
    """

    raw: float

    @property
    def rows(self) -> int:
        """Rounded up."""
        return ceil(self.raw)


@dataclass(frozen=True, slots=True)
class SampleSize:
    """Rows needed for a test of rho.

    Attributes
    ----------
    two_variances
        v0 = 1, v1 = 1 + rho²/2: the form that ``rows`` rests on.
    bonett_wright
        v0 = v1 = 1 + rho²/2 (bonett2000); a little more than needed.
    fieller
        v0 = v1 = 1.06 (fieller1957), for comparison with printed tables.
    fisher
        v0 = v1 = 1, the form for the product-moment correlation (fisher1921), for comparison with printed tables.
    fewest_attainable
        Rows below which no order of the data, however perfect, has a p-value small enough; without ties.
    """

    two_variances: RowsNeeded
    bonett_wright: RowsNeeded
    fieller: RowsNeeded
    fisher: RowsNeeded
    fewest_attainable: int

    @property
    def rows(self) -> int:
        """Complete rows to plan for."""
        return max(self.two_variances.rows, self.fewest_attainable)


def sample_size(rho: float, power: float, planned: PlannedTest) -> SampleSize:
    """Return the complete rows with which a test finds ``rho``, on its own side of 0, with probability ``power``.

    Simulated for the bivariate normal law without ties, the power at ``two_variances.rows`` was, but for the error of
    simulation, never below the one asked for and at most five hundredths above: rho from 0.2 to 0.8, alpha 0.05
    two-sided, power 0.8 and 0.9.

    Parameters
    ----------
    rho
        The coefficient that the population has, as it will be computed, ties and all (``rho_under_ties`` tells how
        much of it expected ties leave): above −1, below 1, not 0.
    power
        At least one half, below 1.
    planned
        How the question will be decided.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    _check_rho(rho)
    _check_power(power)
    z, z_power, variance = planned.z, float(ndtri(power)), bonett_wright_factor(rho)

    def needed(v0: float, v1: float) -> RowsNeeded:
        return RowsNeeded(3 + ((z * sqrt(v0) + z_power * sqrt(v1)) / atanh(rho)) ** 2)

    return SampleSize(
        two_variances=needed(1, variance),
        bonett_wright=needed(variance, variance),
        fieller=needed(RHO_FACTOR, RHO_FACTOR),
        fisher=needed(1, 1),
        fewest_attainable=planned.fewest_rows,
    )


def power_at(n: int, rho: float, planned: PlannedTest) -> float | NoAnswer:
    """Return the probability, above 0, below 1, that a test with ``n`` rows finds ``rho`` on its own side of 0.

    The two-variances form of ``sample_size`` solved for the power.  ``rho`` is a value planned with: put in the
    coefficient of data that are there, and the result repeats their p-value in other words.

    Parameters
    ----------
    n
        Complete rows, at least 4.
    rho
        Above −1, below 1, not 0.
    planned
        How the question will be decided.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    _check_rows(n)
    _check_rho(rho)
    if n < planned.fewest_rows:
        return NoAnswer(_UNATTAINABLE)
    return float(ndtr((abs(atanh(rho)) * sqrt(n - 3) - planned.z) / sqrt(bonett_wright_factor(rho))))


def smallest_rho(n: int, power: float, planned: PlannedTest) -> float | NoAnswer:
    """Return the smallest rho above 0 that a test with ``n`` rows finds with probability ``power``.

    The two-variances form of ``sample_size`` solved for rho; by symmetry the same holds below 0.

    Parameters
    ----------
    n
        Complete rows, at least 4.
    power
        At least one half, below 1.
    planned
        How the question will be decided.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    _check_rows(n)
    _check_power(power)
    if n < planned.fewest_rows:
        return NoAnswer(_UNATTAINABLE)
    z, z_power, root = planned.z, float(ndtri(power)), sqrt(n - 3)
    # The variance lies between 1 and 1.5, and with it the solution.
    low, high = (z + z_power) / root, (z + z_power * sqrt(bonett_wright_factor(1))) / root
    for _ in range(SURELY_ENOUGH_HALVINGS):
        middle = (low + high) / 2
        if middle in (low, high):
            break
        if middle * root < z + z_power * sqrt(bonett_wright_factor(tanh(middle))):
            low = middle
        else:
            high = middle
    return tanh(high)


_UNATTAINABLE: Final = "even perfect order could not reach the level with so few rows"


def _check_rho(rho: float) -> None:
    if not 0 < abs(rho) < 1:
        raise ValueError(f"rho must lie between -1 and 1, reach neither and not be 0, not be {rho}")


def _check_power(power: float) -> None:
    if not LEAST_POWER <= power < 1:
        raise ValueError(f"power must be at least one half and below 1, not {power}")


def _check_rows(n: int) -> None:
    if n < FEWEST_ROWS:
        raise ValueError(f"a plan needs at least {FEWEST_ROWS} rows, not {n}")
