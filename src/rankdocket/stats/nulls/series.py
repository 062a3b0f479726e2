"""The null of Spearman rho without ties for more rows than were counted: a series, and a saddlepoint in the far tails.

The Edgeworth series (david1951) runs to n⁻⁵ on the exact cumulants, with the half step and the corrections of the
cumulants that a lattice asks for.  Where it gives less than SWITCH, or its last term still moves it by more than
LAST_TERM in a tail, the saddlepoint of :mod:`rankdocket.stats.nulls.saddlepoint` takes its place: from there on the series
loses its digits and would in the end fall below 0.
"""

from dataclasses import dataclass
from fractions import Fraction
from functools import cache, lru_cache
from math import factorial, pi, sqrt
from sys import float_info
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt
from numpy.polynomial import hermite_e, polynomial
from scipy.special import bernoulli, ndtr

from rankdocket.errors import ComputeError
from rankdocket.stats.null import NullMethod, Share, TailShares
from rankdocket.stats.nulls.cumulants import cumulants
from rankdocket.stats.nulls.saddlepoint import CumulantFunction, lattice_tail, untied_margin
from rankdocket.stats.ranks import Codes
from rankdocket.vocabulary import Sidedness

Reals: TypeAlias = npt.NDArray[np.float64]

LAST_POWER: Final = 5
"""The series runs to this power of 1/n, for which cumulants to order 12 are needed."""

FEWEST_ROWS: Final = 5
"""With fewer rows there are too few values for a series to describe."""

STEP: Final = 4
"""Without ties neighbouring values of rho's numerator lie four apart: half a sum of squares changes by one."""

SWITCH: Final = 1e-5
"""Upper tails that the series puts below this are left to the saddlepoint."""

LAST_TERM: Final = 0.01
"""A last term that moves the series by more than this share, in a tail, leaves it to the saddlepoint as well."""

TAIL: Final = 0.1
"""What counts as a tail for that: in the middle the saddlepoint is the rougher one."""


@dataclass(frozen=True, slots=True)
class ErrorBand:
    """How far a computed tail may be from the true one.

    Attributes
    ----------
    least
        The band holds for computed one-sided tails from here up to the next band.
    relative
        The error over the computed value is at most this.
    """

    least: float
    relative: float


SERIES_BOUNDS: Final = (
    ErrorBand(0.1, 3.1e-6),
    ErrorBand(0.01, 2.3e-5),
    ErrorBand(0.001, 1.8e-4),
    ErrorBand(1e-4, 2.4e-3),
    ErrorBand(0.0, 8e-3),
)
"""Relative errors of the series, rounded up from the largest over every attainable value at n = 26, 27, 28, 29 and 30,
against the exact counts.  Down to 1e-4 they fall with each n from 22 on, so n = 26 decides; below, where the error
changes sign, they do not fall steadily (5.5, 6.0, 5.7, 5.3, 4.8 in a thousand), and the bound was set wider.  For more
rows than were counted the bounds are an extrapolation, not a proof."""

SERIES_ABSOLUTE: Final = 4.2e-7
"""Absolute error of the series for one tail, found in the same way: 4.2, 3.5, 2.9, 2.3, 1.9 in ten million."""

SADDLEPOINT_BOUNDS: Final = (
    ErrorBand(1e-8, 2.7e-2),
    ErrorBand(1e-12, 5.6e-2),
    ErrorBand(1e-16, 0.13),
    ErrorBand(1e-20, 0.33),
    ErrorBand(0.0, 20.0),
)
"""Relative errors of the saddlepoint over the values that the series leaves to it, rounded up from the largest at n = 28, 29
and 30, and at n = 26 and 27 for values below SWITCH (there LAST_TERM hands over some larger ones as well, up to 5e-5, whose
errors are larger); each value was too small.  They fall with n in each band but the last: beside the series at 4.5 standard
deviations the saddlepoint is low by 1.3 in ten thousand at n = 400 and by 2.1 in a hundred thousand at n = 1,000.  In the
last band the end of the null decides, where the approximation of the permanent fails.  Its bound was set above what the
thirteen values nearest to perfect order show for n = 31 to 170 (their counts are polynomials in n that follow from the
shipped ones), where the true tail is up to 3.3 times the computed one, or far below it when there are more rows than nodes.
Down there a value says that the tail is negligible, and little more."""

SADDLEPOINT_ABSOLUTE: Final = 2.7e-7
"""Absolute error of the saddlepoint below SWITCH: what the first band makes of it.  From n = 28 on LAST_TERM hands over nothing
above SWITCH."""

MOST_FACTORIAL: Final = 170
"""The largest number of rows whose n! is a double."""


def series_tails(n: int, observed: int) -> TailShares:
    """Return the tails at a value of rho's numerator for ``n`` rows without ties.

    The method named is the one by which the tail from the observed distance outward was found; the side that holds more
    than half is what the other leaves.

    Parameters
    ----------
    n
        At least FEWEST_ROWS; the stated errors are those of more rows than were counted, and too small for few rows.
    observed
        Numerator; between two attainable values each tail begins at the next one within it.

    Raises
    ------
    ComputeError
        If ``n`` is too small or no order gives a numerator so far from 0.
    """
    largest = _largest(n)
    if abs(observed) > largest:
        raise ComputeError(f"No order of {n} rows has a numerator of {observed}.")
    upward, downward = observed + (largest - observed) % STEP, -observed + (largest + observed) % STEP
    outward = max(upward, downward)
    tail, method = _tail(n, outward)
    if observed == 0:
        two_sided = Share(Fraction(1), Fraction(0))
    else:
        two_sided = Share(min(Fraction(1), 2 * tail.value), 2 * tail.error)
    return TailShares(method, _share(n, upward), _share(n, downward), two_sided)


def series_critical(n: int, alpha: Fraction, sidedness: Sidedness) -> int | None:
    """Return the smallest attainable numerator above 0 whose p-value is ``alpha`` or less, or ``None``.

    Parameters
    ----------
    n
        Rows without ties, at least FEWEST_ROWS.
    alpha
        Above 0, below 1.
    sidedness
        One-sided counts the upper tail, two-sided both.
    """
    limit = alpha if sidedness == "one-sided" else alpha / 2
    largest = _largest(n)
    # Values above 0, counted in steps from perfect agreement.
    reaches, fails = -1, (largest - 1) // STEP + 1
    while fails - reaches > 1:
        middle = (reaches + fails) // 2
        if _tail(n, largest - STEP * middle)[0].value <= limit:
            reaches = middle
        else:
            fails = middle
    return None if reaches < 0 else largest - STEP * reaches


def edgeworth_tail(n: int, numerators: Codes | int, power: int = LAST_POWER) -> Reals:
    """Return the series for P(A ≥ numerator) to ``power`` of 1/n, 1 to 5; far out it may fall below 0.

    Parameters
    ----------
    n
        Rows without ties, at least FEWEST_ROWS.
    numerators
        Attainable values, of any shape.
    power
        Where the series is cut.
    """
    deviation, terms = _series(n)
    # Half a step down is where a smooth curve meets the steps of the lattice.
    z = (np.asarray(numerators, dtype=np.float64) / STEP - 0.5) / deviation
    bent = polynomial.polyval(z, np.sum(terms[:power], axis=0))
    tail: Reals = ndtr(-z) + np.exp(-z * z / 2) / sqrt(2 * pi) * bent
    return tail


def _largest(n: int) -> int:
    if n < FEWEST_ROWS:
        raise ComputeError(f"A series needs at least {FEWEST_ROWS} rows, not {n}.")
    return (n**3 - n) // 3


def _share(n: int, numerator: int) -> Share:
    """Return P(A ≥ numerator); at 0 and below it is what the tail beyond leaves."""
    if numerator > 0:
        return _tail(n, numerator)[0]
    if numerator == -_largest(n):
        return Share(Fraction(1), Fraction(0))
    beyond = _tail(n, STEP - numerator)[0]
    return Share(1 - beyond.value, beyond.error)


@lru_cache(maxsize=1024)
def _tail(n: int, numerator: int) -> tuple[Share, NullMethod]:
    """Return P(A ≥ numerator) for an attainable numerator above 0, and by what it was found."""
    series, shorter = (float(edgeworth_tail(n, numerator, power)) for power in (LAST_POWER, LAST_POWER - 1))
    settled = series >= TAIL or abs(series - shorter) <= LAST_TERM * abs(shorter)
    if series >= SWITCH and settled:
        return _stated(n, min(1.0, series), SERIES_BOUNDS, SERIES_ABSOLUTE), "Edgeworth series"
    untied, square = untied_margin(n), n * n
    saddle = lattice_tail(CumulantFunction(untied, untied), (2 * numerator - STEP) / (2 * square), STEP / square)
    # So far out that it fails, one in n! is as good as anything.
    return _stated(n, saddle or 0.0, SADDLEPOINT_BOUNDS, SADDLEPOINT_ABSOLUTE), "saddlepoint"


def _stated(n: int, value: float, bands: tuple[ErrorBand, ...], absolute: float) -> Share:
    """Return a computed tail with the error that is stated for it."""
    # At least one order of n! reaches every attainable value; a share too small for a double is given as the least one.
    least = max(float_info.min, 1 / factorial(n)) if n <= MOST_FACTORIAL else float_info.min
    share = Fraction(max(value, least))
    relative = next(band.relative for band in bands if value >= band.least)
    return Share(share, min(Fraction(absolute), Fraction(relative) * share))


@cache
def _series(n: int) -> tuple[float, Reals]:
    """Return the standard deviation of half the sum of squares, and the series' terms.

    Returns
    -------
    deviation
        With the lattice's own variance of 1/12.
    terms
        Polynomials in z that stand beside the normal density, one for each power of 1/n, shape (5, 20): coefficients
        from the constant up.
    """
    exact, corrections = cumulants(n), bernoulli(2 * LAST_POWER + 2)
    variance = float(exact[2]) + float(corrections[2]) / 2
    ratios = [
        (float(exact[order]) + float(corrections[order]) / order) / variance ** (order // 2) / factorial(order)
        for order in range(4, 2 * LAST_POWER + 3, 2)
    ]
    # exp(Σ ratio_j h^(2j + 2) / n^j), gathered by the power of 1/n; h^m stands for the m-th derivative.
    gathered = np.zeros((LAST_POWER + 1, 4 * LAST_POWER + 1))
    gathered[0, 0] = 1
    for power in range(1, LAST_POWER + 1):
        for j, ratio in enumerate(ratios[:power], start=1):
            gathered[power, 2 * j + 2 :] += j / power * ratio * gathered[power - j, : -2 * j - 2]
    # The tail of the m-th derivative is the Hermite polynomial of one order less times the density.
    terms = np.zeros((LAST_POWER, 4 * LAST_POWER))
    for power in range(1, LAST_POWER + 1):
        written = hermite_e.herme2poly(gathered[power, 1:])
        terms[power - 1, : len(written)] = written
    return sqrt(variance), terms
