"""Tables for data without ties: the null of the sum of squared rank differences, and critical values."""

from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from math import ceil
from typing import Final

from rankdocket.errors import ComputeError
from rankdocket.stats.critical import LargeSample, large_sample_value
from rankdocket.stats.null import NullMethod
from rankdocket.stats.nulls.series import STEP, series_critical, series_tails
from rankdocket.stats.nulls.untied import reach, untied_null
from rankdocket.stats.rho import short_form
from rankdocket.vocabulary import SIDEDNESS, Direction, Sidedness

EXACT: Final[NullMethod] = "exact, no ties"

FEWEST_CRITICAL: Final = 3
"""With fewer rows no coefficient but 1 and −1 exists, and half of all orders give each."""


@dataclass(frozen=True, slots=True)
class NullCounts:
    """The null of the sum of squared rank differences.

    Attributes
    ----------
    total
        n!.
    counts
        (sum of squared differences, permutations that give it), increasing; sums that do not occur are left out.
    """

    n: int
    total: int
    counts: tuple[tuple[int, int], ...]


@dataclass(frozen=True, slots=True)
class CriticalValue:
    """A critical value by the counts where they reach, by a series above.

    Attributes
    ----------
    attainable
        False when even perfect order has a larger p-value; ``rho``, ``numerator``, ``sum_d2`` and ``attained_p`` are then
        ``None``.
    rho
        The smallest attainable coefficient whose p-value is alpha or less.
    numerator
        Of rho over (n³ − n)/3: the sum of products of doubled centred ranks.
    sum_d2
        Its sum of squared rank differences.
    attained_p
        Its p-value; exact when ``method`` is "exact, no ties".
    method
        Where the p-value comes from.
    error
        The true p-value lies within ``attained_p`` ± ``error`` and may so exceed alpha; 0 when it is exact.
    """

    attainable: bool
    rho: Fraction | None
    numerator: int | None
    sum_d2: int | None
    attained_p: Fraction | None
    method: NullMethod
    error: Fraction = Fraction(0)


def null_counts(n: int) -> NullCounts:
    """Return the exact null of the sum of squared rank differences of ``n`` untied rows (kendall1939).

    Raises
    ------
    ComputeError
        If ``n`` is not between 1 and the largest number of rows whose counts come with the program.
    """
    null = untied_null(n)
    square = (n**3 - n) // 3
    # The numerator is the sum of products of doubled centred ranks: half the square less twice the sum wanted.
    sums = ((square - statistic) // 2 for statistic in reversed(null.statistics.tolist()))
    return NullCounts(n, null.of, tuple(zip(sums, reversed(null.counts), strict=True)))


def critical_value(n: int, alpha: Decimal | Fraction | float, *, sidedness: Sidedness) -> CriticalValue:
    """Return the smallest attainable rho whose exact p-value is ``alpha`` or less, without ties.

    Parameters
    ----------
    n
        Rows.
    alpha
        Above 0, below 1; a float is read as the shortest decimal that means it (0.05 is one twentieth).
    sidedness
        One-sided counts the upper tail, two-sided both.

    Raises
    ------
    ComputeError
        If ``n`` is not between 1 and the largest number of rows whose counts come with the program, or ``alpha`` or
        ``sidedness`` is none.
    """
    limit = _as_written(alpha)
    table = null_counts(n)
    sides = 1 if _direction(sidedness) == "greater" else 2
    found = CriticalValue(False, None, None, None, None, EXACT)
    at_most = 0
    for sum_d2, count in table.counts:
        at_most += count
        p = Fraction(sides * at_most, table.total)
        # From zero on, the two tails overlap and say nothing against independence.
        if p > limit or 6 * sum_d2 >= n**3 - n:
            break
        numerator = (n**3 - n) // 3 - 2 * sum_d2
        found = CriticalValue(True, short_form(n, Fraction(sum_d2)), numerator, sum_d2, p, EXACT)
    return found


def critical_value_approximate(n: int, alpha: Decimal | Fraction | float, *, sidedness: Sidedness) -> CriticalValue:
    """Return the critical value of rho without ties for any number of rows: exact as far as the counts reach.

    Above them the Edgeworth series stands in, and the saddlepoint for p-values below one in a hundred thousand.

    Parameters
    ----------
    n
        Rows, at least 3.
    alpha
        Above 0, below 1; a float is read as the shortest decimal that means it.
    sidedness
        One-sided counts the upper tail, two-sided both.

    Raises
    ------
    ComputeError
        If ``n`` is too small, or ``alpha`` or ``sidedness`` is none.
    """
    _at_least_three(n)
    direction, largest = _direction(sidedness), (n**3 - n) // 3
    if n <= reach():
        return critical_value(n, alpha, sidedness=sidedness)
    found = series_critical(n, _as_written(alpha), sidedness)
    if found is None:
        return CriticalValue(False, None, None, None, None, series_tails(n, largest).method)
    tails = series_tails(n, found)
    share = tails.share(direction)
    return CriticalValue(
        True, Fraction(found, largest), found, (largest - found) // 2, share.value, tails.method, share.error
    )


def critical_value_large_sample(n: int, alpha: Decimal | Fraction | float, *, sidedness: Sidedness) -> LargeSample:
    """Return the large-sample rule z/√(n − 1) with its true size without ties.

    The size is exact as far as the counts reach and comes from the series above; it is 0 where z/√(n − 1) exceeds 1.

    Parameters
    ----------
    n
        Rows, at least 3.
    alpha
        Above 0, below 1; a float is read as the shortest decimal that means it.
    sidedness
        One-sided counts the upper tail, two-sided both.

    Raises
    ------
    ComputeError
        If ``n`` is too small, or ``alpha`` or ``sidedness`` is none.
    """
    _at_least_three(n)
    direction = _direction(sidedness)
    z, value = large_sample_value(n, _as_written(alpha), direction)
    largest = (n**3 - n) // 3
    steps_down = (largest - ceil(Fraction(value) * largest)) // STEP
    if steps_down < 0:
        return LargeSample(z, value, Fraction(0))
    return LargeSample(z, value, _p(n, largest - STEP * steps_down, direction))


def _p(n: int, numerator: int, direction: Direction) -> Fraction:
    if n <= reach():
        return untied_null(n).tails(numerator).p(direction)
    return series_tails(n, numerator).p(direction)


def _direction(sidedness: Sidedness) -> Direction:
    if sidedness not in SIDEDNESS:
        raise ComputeError(f"sidedness must be one of {', '.join(SIDEDNESS)}, not {sidedness!r}.")
    return "greater" if sidedness == "one-sided" else "two-sided"


def _at_least_three(n: int) -> None:
    if n < FEWEST_CRITICAL:
        raise ComputeError(f"A critical value needs at least {FEWEST_CRITICAL} rows, not {n}.")


def _as_written(alpha: Decimal | Fraction | float) -> Fraction:
    try:
        level = Fraction(repr(alpha)) if isinstance(alpha, float) else Fraction(alpha)
    except (ValueError, OverflowError):
        level = Fraction(0)
    if not 0 < level < 1:
        raise ComputeError(f"alpha must lie between 0 and 1, not be {alpha}.")
    return level
