"""Chatterjee’s xi: how far one variable is a function of the other, of whatever shape; with its permutation null.

Where rows are tied in x their order is open.  The coefficient is defined with a random order (chatterjee2021); here it is
averaged over all orders, so that it needs no draw, and its null is the one of that average.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise
from math import sqrt
from typing import Final

import numpy as np
from scipy.special import ndtr

from rankdocket.references import Description
from rankdocket.stats.exact_values import Given, equally_long, exact_codes
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes, exact_dot, tie_groups

XI: Final = Description(
    "Chatterjee’s xi of the second variable on the first, and of the first on the second, was computed as a diagnostic "
    "of shape, without a finding; rows tied in the variable that gives the order entered as the average over all their "
    "orders.",
    ("chatterjee2021",),
)

XI_NULL: Final = Description(
    "Its null variance is exact, given the ties; its p-value is approximate, from the normal distribution.",
    ("mantel1967",),
)

FEWEST_ROWS: Final = 3
"""With two rows xi is 0 whatever they are."""


@dataclass(frozen=True, slots=True)
class Xi:
    """Chatterjee’s xi of y on x.

    Attributes
    ----------
    n
        Complete rows.
    coefficient
        About −1/2 to 1: near 0 when the rows are unrelated, towards 1 when y is a function of x.
    null_variance
        Its variance over all orders of y against x, given the ties; the mean is exactly 0.
    """

    n: int
    coefficient: Fraction
    null_variance: Fraction

    @property
    def value(self) -> float:
        """The coefficient as a double."""
        return float(self.coefficient)

    @property
    def spreads(self) -> float | None:
        """The coefficient in null standard deviations; ``None`` when the null has only one value."""
        return None if self.null_variance == 0 else self.value / sqrt(self.null_variance)

    @property
    def p(self) -> float | None:
        """The approximate p-value of the upper tail; ``None`` when the null has only one value."""
        return None if self.spreads is None else float(ndtr(-self.spreads))


def chatterjee_xi(x: Sequence[Given], y: Sequence[Given]) -> Xi | NoAnswer:
    """Return Chatterjee’s xi of y on x for two sequences of numbers; see :func:`xi_of_codes`.

    Raises
    ------
    ValueError
        If the sequences differ in length, or hold anything but finite numbers.
    """
    return xi_of_codes(exact_codes(x), exact_codes(y))


def xi_of_codes(x_codes: Codes, y_codes: Codes) -> Xi | NoAnswer:
    """Return 1 − n Σ|rᵢ₊₁ − rᵢ|/(2 Σ lᵢ(n − lᵢ)) with rows in the order of x (chatterjee2021), or why there is none.

    r counts the rows with y no larger, l those with y no smaller.  n log n steps, in integers and fractions.

    Raises
    ------
    ValueError
        If the columns differ in length.
    """
    n = equally_long(x_codes, y_codes)
    if n < FEWEST_ROWS:
        return NoAnswer("the coefficient needs three or more complete rows")
    for name, codes in (("first", x_codes), ("second", y_codes)):
        if tie_groups(codes).is_constant:
            return NoAnswer(f"the {name} variable does not vary")
    _, place, sizes = np.unique(y_codes, return_inverse=True, return_counts=True)
    upto = np.cumsum(sizes, dtype=np.int64)
    r = upto[place.reshape(-1)]
    no_smaller = n - upto + sizes
    scale = 2 * exact_dot(no_smaller * (n - no_smaller), sizes)
    groups = tie_groups(x_codes).sizes
    path = _mean_path(r[np.argsort(x_codes, kind="stable")], groups)
    variance = _path_variance(np.sort(r), groups)
    return Xi(n, 1 - n * path / scale, variance * Fraction(n, scale) ** 2)


def _mean_path(r: Codes, sizes: tuple[int, ...]) -> Fraction:
    """Return the sum of |steps| along ``r``, averaged over all orders within stretches of the given sizes."""
    if max(sizes) == 1:
        return Fraction(int(np.abs(np.diff(r)).sum()))
    stretches = np.split(r, np.cumsum(sizes)[:-1])
    within = [_gaps(stretch) for stretch in stretches]
    path = sum((Fraction(2 * gaps, len(stretch)) for gaps, stretch in zip(within, stretches, strict=True)), Fraction(0))
    neighbours = zip(pairwise(stretches), pairwise(within), strict=True)
    for (one, other), (one_within, other_within) in neighbours:
        across = _gaps(np.concatenate((one, other))) - one_within - other_within
        path += Fraction(across, len(one) * len(other))
    return path


def _gaps(values: Codes) -> int:
    """Return the sum of |a − b| over all pairs of values."""
    n = len(values)
    return exact_dot(2 * np.arange(n, dtype=np.int64) - (n - 1), np.sort(values))


def _path_variance(r: Codes, sizes: tuple[int, ...]) -> Fraction:
    """Return the variance of the averaged path over all orders of the sorted ``r`` (mantel1967).

    The path is the sum over ordered pairs of places of a weight times a distance; its square is sorted by whether two
    pairs are the same one, share one place, or none.
    """
    n = len(r)
    distances = _distance_sums(r)
    weights = _weight_sums(sizes)
    kinds = [
        Fraction(0) if n < places else coefficient * weight * distance / _orders(n, places)
        for coefficient, places, weight, distance in zip(
            (2, 4, 1), (2, 3, 4), _by_shared_places(*weights), _by_shared_places(*distances), strict=True
        )
    ]
    return sum(kinds, Fraction(0)) - (weights[0] * distances[0] / _orders(n, 2)) ** 2


def _by_shared_places(whole: Fraction, squares: Fraction, rows: Fraction) -> tuple[Fraction, Fraction, Fraction]:
    """Return the sums of products over pairs of pairs: the same one, one place shared, none shared."""
    return squares, rows - squares, whole**2 - 4 * rows + 2 * squares


def _distance_sums(r: Codes) -> tuple[Fraction, Fraction, Fraction]:
    """Return sum, sum of squares and sum of squared row sums of the distances |rᵢ − rⱼ| of sorted values."""
    n = len(r)
    place = np.arange(n, dtype=np.int64)
    before = np.concatenate(([0], np.cumsum(r, dtype=np.int64)[:-1]))
    rows = r * (2 * place - n) - 2 * before + int(r.sum())
    squares = 2 * n * exact_dot(r, r) - 2 * int(r.sum()) ** 2
    # A row sum may be as large as n², and its square, summed, too large for an int64 from some thousand rows on.
    return Fraction(int(rows.sum())), Fraction(squares), Fraction(sum(row * row for row in rows.tolist()))


def _weight_sums(sizes: tuple[int, ...]) -> tuple[Fraction, Fraction, Fraction]:
    """Return the same sums of the weights: half of the chance that two rows are neighbours in the order of x."""
    squares = sum((Fraction(size - 1, size) for size in sizes), Fraction(0))
    squares += sum((Fraction(1, 2 * one * other) for one, other in pairwise(sizes)), Fraction(0))
    last = len(sizes) - 1
    rows = sum(
        (Fraction((2 * (size - 1) + (place > 0) + (place < last)) ** 2, 4 * size) for place, size in enumerate(sizes)),
        Fraction(0),
    )
    return Fraction(sum(sizes) - 1), squares, rows


def _orders(n: int, places: int) -> int:
    """Return n(n − 1)… with as many factors as ``places``."""
    product = 1
    for taken in range(places):
        product *= n - taken
    return product
