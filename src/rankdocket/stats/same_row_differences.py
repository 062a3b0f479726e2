"""Whether two coefficients of the same rows differ: with one variable in common, or with none.

The tests were made for product-moment correlations; with ranks they are approximate, near normal-type dependence.
"""

from dataclasses import dataclass
from decimal import Decimal
from math import atanh, sqrt
from typing import Final

import numpy as np
from scipy.special import stdtr

from rankdocket.references import Description
from rankdocket.stats.differences import difference_limits, limits_of
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.z_scale import EstimateVariance, ZTest, estimate_factor, obstacle, require_coefficients

ONE_SHARED: Final = Description(
    "Two coefficients of the same rows that had one variable in common were compared by the z of Meng, Rosenthal and "
    "Rubin, which was made for product-moment correlations and is approximate for ranks; the interval for their "
    "difference was put together from the intervals of the two, with {k} over the complete rows less three as the "
    "variance on the inverse hyperbolic tangent scale, and from the correlation between them.",
    ("meng1992", "steiger1980", "zou2007"),
)
NONE_SHARED: Final = Description(
    "Two coefficients of the same rows that had no variable in common were compared by the z of Dunn and Clark with "
    "the average of the two in its variance, as Steiger proposed, which was made for product-moment correlations and "
    "is approximate for ranks; the interval for their difference was put together from the intervals of the two, with "
    "{k} over the complete rows less three as the variance on the inverse hyperbolic tangent scale, and from the "
    "correlation between them.",
    ("dunn1969", "steiger1980", "zou2007"),
)

ROUNDING: Final = 1e-12
"""What the rounding of coefficients may add to the smallest eigenvalue or the determinant of their matrix."""

IMPOSSIBLE: Final = "no rows can have these coefficients together"
SAME_BY_CONSTRUCTION: Final = "the variables that set the two coefficients apart hold the same or the reverse ranks"


@dataclass(frozen=True, slots=True)
class OneShared:
    """The three coefficients of variables 1, 2 and 3; r12 and r13 are compared."""

    r12: float
    r13: float
    r23: float


@dataclass(frozen=True, slots=True)
class NoneShared:
    """The six coefficients of variables j, k, h and m; jk and hm are compared."""

    jk: float
    hm: float
    jh: float
    jm: float
    kh: float
    km: float


@dataclass(frozen=True, slots=True)
class OneSharedDifference:
    """How r12 and r13 differ.

    Attributes
    ----------
    difference
        r12 − r13, −2 to 2.
    t_williams, df_williams, p_williams
        The T₂ of Williams (williams1959, in the form of steiger1980), n − 3 degrees of freedom, two-sided p.
    steiger
        The z with averaged coefficients, formula 14 of steiger1980.
    meng
        The z of meng1992.
    correlation
        Between the two coefficients as they vary from sample to sample (steiger1980).
    low, high
        Interval for the difference (zou2007), −2 to 2.
    """

    difference: float
    t_williams: float
    df_williams: int
    p_williams: float
    steiger: ZTest
    meng: ZTest
    correlation: float
    low: float
    high: float


@dataclass(frozen=True, slots=True)
class NoneSharedDifference:
    """How the coefficients jk and hm differ.

    Attributes
    ----------
    difference
        jk − hm, −2 to 2.
    dunn_clark
        The z of dunn1969, at the coefficients as they are.
    steiger
        The same with the average of the two compared, steiger1980.
    correlation
        Between the two coefficients as they vary from sample to sample (dunn1969).
    low, high
        Interval for the difference (zou2007), −2 to 2.
    """

    difference: float
    dunn_clark: ZTest
    steiger: ZTest
    correlation: float
    low: float
    high: float


def difference_one_variable_shared(
    given: OneShared, n: int, *, variance: EstimateVariance, level: Decimal | str | float
) -> OneSharedDifference | NoAnswer:
    """Return how r12 and r13 of the same ``n`` rows differ, or why that cannot be said.

    Parameters
    ----------
    given, n
        The coefficients and the complete rows, the same for all variables.
    variance
        Of the two intervals from which that of the difference is made.
    level
        Above 0, below 1; of the interval.

    Raises
    ------
    ValueError
        If a coefficient or the level is out of its range.
    """
    r12, r13, r23 = given.r12, given.r13, given.r23
    reason = obstacle(r12, n) or obstacle(r13, n)
    if reason is not None:
        return NoAnswer(reason)
    if obstacle(r23, n) is not None:
        return NoAnswer(SAME_BY_CONSTRUCTION)
    determinant = 1 - r12 * r12 - r13 * r13 - r23 * r23 + 2 * r12 * r13 * r23
    if determinant < -ROUNDING:
        return NoAnswer(IMPOSSIBLE)
    mean = (r12 + r13) / 2
    scale = 2 * (n - 1) / (n - 3) * max(0.0, determinant) + mean * mean * (1 - r23) ** 3
    t = (r12 - r13) * sqrt((n - 1) * (1 + r23) / scale)
    gap = atanh(r12) - atanh(r13)
    averaged = _correlation_one_shared(OneShared(mean, mean, r23))
    square = (r12 * r12 + r13 * r13) / 2
    f = min(1.0, (1 - r23) / (2 * (1 - square)))
    spread = 2 * (1 - r23) * (1 - f * square) / (1 - square)
    correlation = _correlation_one_shared(given)
    first, second = (limits_of(r, estimate_factor(variance, r) / (n - 3), level) for r in (r12, r13))
    low, high = difference_limits(first, second, correlation=correlation)
    return OneSharedDifference(
        r12 - r13,
        t,
        n - 3,
        2 * float(stdtr(n - 3, -abs(t))),
        ZTest(gap * sqrt((n - 3) / (2 - 2 * averaged))),
        ZTest(gap * sqrt((n - 3) / spread)),
        correlation,
        low,
        high,
    )


def difference_no_variable_shared(
    given: NoneShared, n: int, *, variance: EstimateVariance, level: Decimal | str | float
) -> NoneSharedDifference | NoAnswer:
    """Return how the coefficients jk and hm of the same ``n`` rows differ, or why that cannot be said.

    Parameters, exceptions and the interval are those of :func:`difference_one_variable_shared`.
    """
    require_coefficients(given.jh, given.jm, given.kh, given.km)
    reason = obstacle(given.jk, n) or obstacle(given.hm, n)
    if reason is not None:
        return NoAnswer(reason)
    if float(np.linalg.eigvalsh(_matrix(given)).min()) < -ROUNDING:
        return NoAnswer(IMPOSSIBLE)
    mean = (given.jk + given.hm) / 2
    correlation = _correlation_none_shared(given, given.jk, given.hm)
    averaged = _correlation_none_shared(given, mean, mean)
    if max(correlation, averaged) >= 1 - ROUNDING:
        return NoAnswer(SAME_BY_CONSTRUCTION)
    gap = atanh(given.jk) - atanh(given.hm)
    first, second = (limits_of(r, estimate_factor(variance, r) / (n - 3), level) for r in (given.jk, given.hm))
    low, high = difference_limits(first, second, correlation=correlation)
    return NoneSharedDifference(
        given.jk - given.hm,
        ZTest(gap * sqrt((n - 3) / (2 - 2 * correlation))),
        ZTest(gap * sqrt((n - 3) / (2 - 2 * averaged))),
        correlation,
        low,
        high,
    )


def _correlation_one_shared(given: OneShared) -> float:
    """Return the correlation of r12 and r13 in large normal samples (steiger1980, formula 3)."""
    r12, r13, r23 = given.r12, given.r13, given.r23
    product = r23 * (1 - r12 * r12 - r13 * r13) - r12 * r13 * (1 - r12 * r12 - r13 * r13 - r23 * r23) / 2
    return product / ((1 - r12 * r12) * (1 - r13 * r13))


def _correlation_none_shared(given: NoneShared, jk: float, hm: float) -> float:
    """Return the correlation of two coefficients in large normal samples, at ``jk`` and ``hm`` (dunn1969)."""
    jh, jm, kh, km = given.jh, given.jm, given.kh, given.km
    product = (
        jk * hm * (jh * jh + jm * jm + kh * kh + km * km) / 2
        + jh * km
        + jm * kh
        - (jk * jh * jm + jk * kh * km + jh * kh * hm + jm * km * hm)
    )
    return product / ((1 - jk * jk) * (1 - hm * hm))


def _matrix(given: NoneShared) -> list[list[float]]:
    return [
        [1.0, given.jk, given.jh, given.jm],
        [given.jk, 1.0, given.kh, given.km],
        [given.jh, given.kh, 1.0, given.hm],
        [given.jm, given.km, given.hm, 1.0],
    ]
