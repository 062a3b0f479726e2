"""The product-moment correlation of the values themselves, in integers, and its permutation test (pitman1937)."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from math import factorial, gcd, lcm
from typing import Final

import numpy as np
import numpy.typing as npt

from rankdocket.references import Description
from rankdocket.stats.all_orders import MOST_ENUMERATED, all_orders, enumerated_method
from rankdocket.stats.coefficient import FILED_DIGITS, root_ratio_text
from rankdocket.stats.exact_values import equally_long
from rankdocket.stats.matrix_product import product
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.null import TailCounts
from rankdocket.stats.nulls.monte_carlo import DrawingPlan, drawn_orders
from rankdocket.stats.ranks import Codes, dense_codes

Floats = npt.NDArray[np.float64]

PRODUCT_MOMENT: Final = Description(
    "The product-moment coefficient of the values was held against all orders in which the values of one variable can "
    "stand beside those of the other: every one of them to {enumerated} rows, {draws} drawn orders above; sums were "
    "compared as integers.",
    ("pitman1937", "phipson2010"),
)

ROUNDING: Final = 2.0**-52
"""Twice the largest relative error of one rounding."""


@dataclass(frozen=True, slots=True)
class ProductMoment:
    """A product-moment correlation: ``numerator / sqrt(x_square * y_square)``.

    Attributes
    ----------
    x, y
        The values less their mean, in a unit in which they are whole numbers.
    """

    x: tuple[int, ...]
    y: tuple[int, ...]

    @property
    def numerator(self) -> int:
        """The sum of products."""
        return sum(a * b for a, b in zip(self.x, self.y, strict=True))

    @property
    def square(self) -> int:
        """The product of both sums of squares, above 0."""
        return sum(a * a for a in self.x) * sum(b * b for b in self.y)

    @property
    def decimal_text(self) -> str:
        """The coefficient with twelve significant digits, half to even, from the integers."""
        return root_ratio_text(Fraction(self.numerator), Fraction(self.square), FILED_DIGITS)


def product_moment(x: Sequence[Decimal], y: Sequence[Decimal]) -> ProductMoment | NoAnswer:
    """Return the product-moment correlation of exact decimals, or why there is none.

    Raises
    ------
    ValueError
        If the columns differ in length.
    """
    equally_long(x, y)
    if min(len(set(x)), len(set(y))) < 2:
        return NoAnswer("a variable does not vary")
    return ProductMoment(_centred(x), _centred(y))


def product_moment_tails(observed: ProductMoment, drawing: DrawingPlan | NoAnswer) -> TailCounts | NoAnswer:
    """Return the permutations at least as extreme: counted one and all to MOST_ENUMERATED rows, drawn above.

    Parameters
    ----------
    observed
        The coefficient.
    drawing
        How orders are drawn, one look, or why they are not; not looked at where all are counted.
    """
    n = len(observed.x)
    if n <= MOST_ENUMERATED:
        ties = min(len(set(observed.x)), len(set(observed.y))) < n
        return _counted(observed, iter((all_orders(n),)), factorial(n), ties=ties)
    if isinstance(drawing, NoAnswer):
        return drawing
    drawn = (keys.astype(np.int64) for keys in drawn_orders(np.arange(n, dtype=np.int64), drawing.generator))
    tails = _counted(observed, drawn, drawing.permutations, ties=False)
    return TailCounts("drawn permutations", tails.greater, tails.less, tails.two_sided, tails.of)


def _centred(values: Sequence[Decimal]) -> tuple[int, ...]:
    """Return n·value − sum in the smallest unit that makes all of them whole."""
    fractions = [Fraction(value) for value in values]
    unit = lcm(*(fraction.denominator for fraction in fractions))
    whole = [int(fraction * unit) for fraction in fractions]
    off = [len(whole) * value - sum(whole) for value in whole]
    step = gcd(*off)
    return tuple(value // step for value in off)


def _counted(observed: ProductMoment, blocks: Iterator[Codes], number: int, *, ties: bool) -> TailCounts:
    """Return how many of the first ``number`` orders are at least as extreme."""
    # Sorted by both, so that the orders meet the same pairs whatever order the rows of the file have.
    rows = np.lexsort((dense_codes(observed.y), dense_codes(observed.x))).tolist()
    fixed = _Fixed.of([observed.x[row] for row in rows], [observed.y[row] for row in rows], observed.numerator)
    greater = less = two_sided = 0
    missing = number
    for orders in blocks:
        above, below, apart = fixed.compared(orders[:missing])
        greater, less, two_sided = greater + above, less + below, two_sided + apart
        missing -= len(orders[:missing])
        if missing == 0:
            break
    return TailCounts(enumerated_method(has_ties=ties), greater, less, two_sided, number)


@dataclass(frozen=True, slots=True, eq=False)
class _Fixed:
    """What no permutation changes: whole values, the same as doubles of one in size at most, and the observed sum.

    Attributes
    ----------
    near
        Sums in doubles that lie nearer to each other than this are compared in whole numbers.
    """

    x: list[int]
    y: list[int]
    x_shares: Floats
    y_shares: Floats
    observed: int
    observed_share: float
    near: float

    @classmethod
    def of(cls, x: list[int], y: list[int], observed: int) -> "_Fixed":
        x_most, y_most = (max(abs(value) for value in column) for column in (x, y))
        x_shares, y_shares = (
            np.array([float(Fraction(value, most)) for value in column]) for column, most in ((x, x_most), (y, y_most))
        )
        bound = float(np.sqrt(np.sum(x_shares**2) * np.sum(y_shares**2)))
        near = 2 * (len(x) + 3) * ROUNDING * bound
        return cls(x, y, x_shares, y_shares, observed, float(Fraction(observed, x_most * y_most)), near)

    def compared(self, orders: Codes) -> tuple[int, int, int]:
        """Return how many orders give a sum at least as large, at most as large, at least as far from 0."""
        sums = product(self.y_shares[orders], self.x_shares)
        own, size = self.observed_share, abs(self.observed_share)
        unsure = np.minimum(np.abs(sums - own), np.abs(np.abs(sums) - size)) <= self.near
        exact = [sum(a * self.y[b] for a, b in zip(self.x, order, strict=True)) for order in orders[unsure].tolist()]
        sure = sums[~unsure]
        return (
            int(np.count_nonzero(sure > own)) + sum(value >= self.observed for value in exact),
            int(np.count_nonzero(sure < own)) + sum(value <= self.observed for value in exact),
            int(np.count_nonzero(np.abs(sure) > size)) + sum(abs(value) >= abs(self.observed) for value in exact),
        )
