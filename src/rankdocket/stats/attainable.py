"""What these ties allow: the range of the coefficient, and the smallest p-value that any data could give."""

from collections import Counter
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from math import factorial, prod
from typing import Final

from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.forecast import ROWS_LIMIT, distinct_arrangements
from rankdocket.stats.null import TailCounts
from rankdocket.stats.ranks import Codes, TieGroups
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.vocabulary import CoefficientName, Direction

ANSWERS_KEPT: Final = 64
"""Answers remembered: check, screening and analysis of one association ask for the same one."""


@dataclass(frozen=True, slots=True)
class AttainableRange:
    """The coefficients of the most opposed and of the most parallel arrangement of the same values."""

    lowest: Coefficient
    highest: Coefficient


def attainable_range(name: CoefficientName, x: TieGroups, y: TieGroups) -> AttainableRange:
    """Return between which coefficients data with these tie groups must lie; both undefined for a constant."""
    x_codes, y_codes = x.codes(), y.codes()
    return AttainableRange(_coefficient(name, x_codes, y_codes[::-1]), _coefficient(name, x_codes, y_codes))


@lru_cache(maxsize=ANSWERS_KEPT)
def smallest_attainable_p(name: CoefficientName, x: TieGroups, y: TieGroups, direction: Direction) -> Fraction:
    """Return the smallest exact p-value that data with these tie groups can give, above 0 to 1.

    Exactly one cross-table of the values gives the largest numerator, and one the smallest; ∏t! of x times ∏t!
    of y over ∏n! of the table’s cells permutations lead to it.
    """
    parallel, opposed = _share_of(x, x.codes(), y.codes()), _share_of(x, x.codes(), y.codes()[::-1])
    match direction:
        case "greater":
            return parallel
        case "less":
            return opposed
        case "two-sided":
            limits = attainable_range(name, x, y)
            high, low = limits.highest.numerator, -limits.lowest.numerator
            if high == low:
                return min(Fraction(1), parallel + opposed)
            return parallel if high > low else opposed


def tails_at_limit(x: TieGroups, y: TieGroups, observed: Coefficient) -> TailCounts | None:
    """Return the exact tails in closed form when the data lie at a limit of the attainable range, else ``None``.

    No enumeration is needed there.  Between the limits the tails are not known in closed form; nor is the
    two-sided one at the limit nearer to zero.  Above ROWS_LIMIT rows the answer is ``None``.
    """
    if x.n > ROWS_LIMIT:
        return None
    limits = attainable_range(observed.name, x, y)
    high, low = limits.highest.numerator, limits.lowest.numerator
    if (
        x.is_constant
        or y.is_constant
        or observed.numerator not in (high, low)
        or abs(observed.numerator) < max(high, -low)
    ):
        return None
    of = factorial(x.n)
    parallel = (of * _share_of(x, x.codes(), y.codes())).numerator
    opposed = (of * _share_of(x, x.codes(), y.codes()[::-1])).numerator
    two_sided = parallel * (high == abs(observed.numerator)) + opposed * (-low == abs(observed.numerator))
    greater, less = (parallel, of) if observed.numerator == high else (of, opposed)
    has_ties = x.has_ties or y.has_ties
    return TailCounts("exact, conditional on the ties" if has_ties else "exact, no ties", greater, less, two_sided, of)


def _coefficient(name: CoefficientName, x_codes: Codes, y_codes: Codes) -> Coefficient:
    match name:
        case "Spearman rho":
            return rho(x_codes, y_codes)
        case "Kendall tau-b":
            return tau_b(x_codes, y_codes)


def _share_of(x: TieGroups, x_codes: Codes, y_codes: Codes) -> Fraction:
    """Return the share of the n! permutations of y that give the cross-table of the arrays as they stand.

    It is ∏ over the tie groups of y of t!/∏n! of its cells, over n!/∏t! of x.
    """
    cells: dict[int, list[int]] = {}
    for (_, y), count in Counter(zip(x_codes.tolist(), y_codes.tolist(), strict=True)).items():
        cells.setdefault(y, []).append(count)
    ways = prod(distinct_arrangements(TieGroups(tuple(column))) for column in cells.values())
    return Fraction(ways, distinct_arrangements(x))
