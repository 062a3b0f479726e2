"""What the interval rules on the inverse hyperbolic tangent scale share: quantiles, caps, the guard, the way back."""

from dataclasses import dataclass
from decimal import Decimal
from itertools import pairwise
from math import atanh, nextafter, sqrt, tanh
from typing import Final

import numpy as np
from scipy.special import ndtri, stdtrit

from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.interval import RESTRAINTS, Interval, IntervalQuestion, NoInterval, Restraint, tail_of_level
from rankdocket.stats.ranks import Codes, doubled_midranks, tie_groups

BELOW_ONE: Final = nextafter(1, 0)
"""The double next to 1: a cap nearer to it would have no finite value on the z scale."""

MOST_FREEDOM: Final = 1e6
"""Degrees of freedom beyond which Student’s t is the normal distribution to every digit that is used."""

LEAST_TAIL: Final = 1e-200
"""Least probability that has a quantile here: beyond, the library’s t quantile turns infinite and changes sign."""

NUMBER_WORDS: Final = ("none", "one", "two", "three", "four", "five")


@dataclass(frozen=True, slots=True)
class ZLimits:
    """A textbook interval tanh(atanh r ∓ z se).

    Attributes
    ----------
    r
        The coefficient.
    se
        Standard error of atanh(r).
    low, high
        Limits on the scale of the coefficient.
    """

    r: float
    se: float
    low: float
    high: float

    @property
    def se_of_r(self) -> float:
        """The standard error carried over to the scale of the coefficient: (1 − r²) se."""
        return (1 - self.r * self.r) * self.se


@dataclass(frozen=True, slots=True)
class ZShape:
    """An interval on the z scale, before it goes back to the scale of the coefficient.

    Attributes
    ----------
    cap
        0 to below 1: a coefficient at or beyond it is replaced by it, and the limit beyond is ±1.
    half
        Half-width on the z scale, above 0.
    guard
        0 to 1: the lower limit does not exceed it, the upper one does not fall below its negative; 1 for none.
    restraints
        What was done to the half-width.
    """

    cap: float
    half: float
    guard: float = 1
    restraints: tuple[Restraint, ...] = ()


def textbook_limits(r: float, variance: float, level: Decimal | str | float) -> ZLimits:
    """Return tanh(atanh r ∓ z √variance).

    Parameters
    ----------
    r
        Above −1, below 1.
    variance
        Of atanh(r), above 0.
    level
        Above 0, below 1; two-sided; a float is read as the shortest decimal that means it.

    Raises
    ------
    ValueError
        If ``level`` is out of its range.
    """
    se = sqrt(variance)
    half = two_sided_quantile(level) * se
    return ZLimits(r, se, tanh(atanh(r) - half), tanh(atanh(r) + half))


def two_sided_quantile(level: Decimal | str | float) -> float:
    """Return the standard normal value that is exceeded in size with probability 1 − ``level``.

    Parameters
    ----------
    level
        Above 0, below 1; a float is read as the shortest decimal that means it.

    Raises
    ------
    ValueError
        If ``level`` is out of its range.
    """
    chosen_level = Decimal(str(level))
    if not 0 < chosen_level < 1:
        raise ValueError(f"level must lie between 0 and 1, not be {level}")
    return normal_quantile(float((1 - chosen_level) / 2))


def require_inside(r: float, n: int, fewest: int) -> None:
    """Refuse a coefficient of ±1 or beyond and fewer than ``fewest`` rows.

    Raises
    ------
    ValueError
        If one of them is given.
    """
    if not -1 < r < 1:
        raise ValueError(f"the coefficient must lie between -1 and 1 and reach neither, not {r}")
    if n < fewest:
        raise ValueError(f"the interval needs at least {fewest} rows, not {n}")


def why_none(coefficient: Coefficient, fewest: int, most: int | None = None) -> NoInterval | None:
    """Return why there can be no interval: the coefficient is undefined, or rows are too few or too many.

    Parameters
    ----------
    coefficient
        What the interval is for.
    fewest
        Rows that the rule needs, at most 5.
    most
        Rows up to which its sums are exact, if there is such a number.
    """
    if not coefficient.is_defined:
        return NoInterval("no interval exists because the coefficient is undefined")
    if coefficient.n < fewest:
        return NoInterval(f"no interval exists for fewer than {NUMBER_WORDS[fewest]} complete rows")
    if most is not None and coefficient.n > most:
        return NoInterval(f"no interval by this rule exists for more than {most} complete rows")
    return None


def tail_of(question: IntervalQuestion) -> float:
    """Return the probability left beyond each limit asked for: half of 1 − level, or all of it for a bound."""
    return max(float(tail_of_level(question.level, question.direction)), LEAST_TAIL)


def normal_quantile(tail: float) -> float:
    """Return the standard normal value exceeded with probability ``tail``."""
    return -float(ndtri(tail))


def t_quantile(freedom: float, tail: float) -> float:
    """Return the value of Student’s t exceeded with probability ``tail``."""
    return -float(stdtrit(min(freedom, MOST_FREEDOM), tail))


def back_from_z(question: IntervalQuestion, key: str, shape: ZShape) -> Interval:
    """Return the interval of ``shape`` on the scale of the coefficient; its end not asked for is ±1."""
    r = question.coefficient.value
    centre = atanh(capped(r, shape.cap))
    low = -1.0 if r <= -shape.cap or question.direction == "less" else tanh(centre - shape.half)
    high = 1.0 if r >= shape.cap or question.direction == "greater" else tanh(centre + shape.half)
    held = {*shape.restraints}
    if abs(r) >= shape.cap:
        held.add("cap")
    if low > shape.guard or high < -shape.guard:
        held.add("guard")
    return Interval(
        min(low, shape.guard),
        max(high, -shape.guard),
        question.level,
        question.direction,
        key,
        tuple(restraint for restraint in RESTRAINTS if restraint in held),
    )


def interval_of_variance(question: IntervalQuestion, key: str, *, cap: float, variance: float) -> Interval:
    """Return the interval of a rule that states a variance on the z scale and uses the normal quantile.

    Parameters
    ----------
    question
        What is asked.
    key
        The rule.
    cap
        0 to below 1: a coefficient at or beyond it is replaced by it, and the limit beyond is ±1.
    variance
        Of the coefficient on the z scale, above 0.
    """
    return back_from_z(question, key, ZShape(cap, normal_quantile(tail_of(question)) * sqrt(variance)))


def capped(r: float, cap: float) -> float:
    """Return ``r``, or ±``cap`` when it lies beyond."""
    return min(max(r, -cap), cap)


def tie_cap(x_codes: Codes, y_codes: Codes) -> float:
    """Return 1 less half of the smallest discordance of rho that these ties could show, 0 to below 1; both must vary.

    One row moved across the widest step between neighbouring midranks of both variables changes the coefficient
    by the product of the steps over the root of the sums of squares.
    """
    steps = _widest_step(x_codes) * _widest_step(y_codes)
    squares = [
        float(np.sum((doubled_midranks(codes) - (len(codes) + 1)).astype(np.float64) ** 2))
        for codes in (x_codes, y_codes)
    ]
    return min(max(0.0, 1 - steps / (2 * sqrt(squares[0]) * sqrt(squares[1]))), BELOW_ONE)


def tau_tie_cap(coefficient: Coefficient, x_codes: Codes, y_codes: Codes) -> float:
    """Return 1 less half of the smallest discordance of tau-b that these ties could show, 0 to below 1.

    Two rows of neighbouring tie groups that change places in one variable lower concordant less discordant pairs by
    the narrower of the two variables’ steps between doubled midranks: by 2 if either has no ties.
    """
    step = min(_widest_step(x_codes), _widest_step(y_codes))
    untied = sqrt(float(coefficient.x_square) * float(coefficient.y_square))
    return min(max(0.0, 1 - step / (2 * untied)), BELOW_ONE)


def untied_cap(n: int) -> float:
    """Return the cap of rho for ``n`` rows without ties, 2 or more: 1 − 6/(n(n² − 1))."""
    return min(max(0.0, 1 - 6 / (n * (n * n - 1))), BELOW_ONE)


def untied_tau_cap(n: int) -> float:
    """Return the cap of tau-b for ``n`` rows without ties, 2 or more: 1 − 2/(n(n − 1))."""
    return min(max(0.0, 1 - 2 / (n * (n - 1))), BELOW_ONE)


def _widest_step(codes: Codes) -> int:
    """Return the widest step between neighbouring doubled midranks: the sum of two neighbouring group sizes."""
    sizes = tie_groups(codes).sizes
    return max(first + second for first, second in pairwise(sizes))
