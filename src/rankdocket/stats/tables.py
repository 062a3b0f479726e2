"""Exact tables for data without ties: the null of the sum of squared rank differences, and critical values."""

from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from typing import Final

from rankdocket.errors import ComputeError
from rankdocket.stats.choose_null import exact_null_of
from rankdocket.stats.ranks import TieGroups
from rankdocket.stats.rho import short_form
from rankdocket.vocabulary import Sidedness

NMAX_UNTIED: Final = 17
"""Most rows for which the untied null is tabulated: about 2 s on one core."""


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
    """The smallest coefficient that is attainable and has a p-value of alpha or less.

    Attributes
    ----------
    attainable
        False when even perfect order has a larger p-value; the other attributes are then ``None``.
    sum_d2
        Its sum of squared rank differences.
    attained_p
        Its exact p-value.
    """

    attainable: bool
    rho: Fraction | None
    sum_d2: int | None
    attained_p: Fraction | None


def null_counts(n: int) -> NullCounts:
    """Return the exact null of the sum of squared rank differences of ``n`` untied rows (kendall1939).

    Raises
    ------
    ComputeError
        If ``n`` is not between 1 and NMAX_UNTIED.
    """
    if not 1 <= n <= NMAX_UNTIED:
        raise ComputeError(f"The untied null is tabulated for 1 to {NMAX_UNTIED} rows, not for {n}.")
    untied = TieGroups((1,) * n)
    null = exact_null_of("Spearman rho", untied, untied)
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
        If ``n`` is not between 1 and NMAX_UNTIED.
    """
    limit = Fraction(repr(alpha)) if isinstance(alpha, float) else Fraction(alpha)
    table = null_counts(n)
    sides = 1 if sidedness == "one-sided" else 2
    found = CriticalValue(False, None, None, None)
    at_most = 0
    for sum_d2, count in table.counts:
        at_most += count
        p = Fraction(sides * at_most, table.total)
        # From zero on, the two tails overlap and say nothing against independence.
        if p > limit or 6 * sum_d2 >= n**3 - n:
            break
        found = CriticalValue(True, short_form(n, Fraction(sum_d2)), sum_d2, p)
    return found
