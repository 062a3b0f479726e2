"""The interval of Bonett and Wright on the z scale, with a cap that knows the ties."""

from dataclasses import dataclass
from decimal import Decimal
from math import atanh, sqrt, tanh
from typing import Final

import numpy as np
from scipy.special import ndtri

from rankdocket.references import Description
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval
from rankdocket.stats.ranks import Codes, doubled_midranks

KEY: Final = "Bonett-Wright"
FEWEST_ROWS: Final = 4
"""The variance has n − 3 in its denominator (bonett2000)."""


@dataclass(frozen=True, slots=True)
class BonettWright:
    """The textbook form.

    Attributes
    ----------
    se
        Standard error of atanh(r).
    low, high
        Limits on the scale of the coefficient.
    """

    se: float
    low: float
    high: float


def bonett_wright_limits(r: float, n: int, *, level: Decimal | str | float) -> BonettWright:
    """Return the textbook interval tanh(atanh r ∓ z √((1 + r²/2)/(n − 3))) (bonett2000).

    Parameters
    ----------
    r
        Above −1, below 1.
    n
        At least 4.
    level
        Above 0, below 1; two-sided; a float is read as the shortest decimal that means it.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    if not -1 < r < 1:
        raise ValueError(f"the coefficient must lie between -1 and 1 and reach neither, not {r}")
    if n < FEWEST_ROWS:
        raise ValueError(f"the interval needs at least {FEWEST_ROWS} rows, not {n}")
    chosen_level = Decimal(str(level))
    if not 0 < chosen_level < 1:
        raise ValueError(f"level must lie between 0 and 1, not be {level}")
    half = _quantile((1 - chosen_level) / 2) * _standard_error(r, n)
    return BonettWright(_standard_error(r, n), tanh(atanh(r) - half), tanh(atanh(r) + half))


def tie_cap(x_codes: Codes, y_codes: Codes) -> float:
    """Return 1 less half of the smallest discordance that these ties could show, 0 to 1; both must vary.

    One row moved across the widest step between neighbouring midranks of both variables changes the coefficient
    by the product of the steps over the root of the sums of squares.
    """
    x, y = doubled_midranks(x_codes), doubled_midranks(y_codes)
    steps = int(np.diff(np.unique(x)).max()) * int(np.diff(np.unique(y)).max())
    squares = [float(np.sum((ranks - (len(ranks) + 1)).astype(np.float64) ** 2)) for ranks in (x, y)]
    return max(0.0, 1 - steps / (2 * sqrt(squares[0]) * sqrt(squares[1])))


def bonett_wright(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the house form of the interval: the coefficient is capped, and a limit beyond the cap is ±1."""
    coefficient = question.coefficient
    if not coefficient.is_defined:
        return NoInterval("no interval exists because the coefficient is undefined")
    if coefficient.n < FEWEST_ROWS:
        return NoInterval("no interval exists for fewer than four complete rows")
    cap = tie_cap(question.x_codes, question.y_codes)
    r = coefficient.value
    capped = min(max(r, -cap), cap)
    tail = 1 - question.level
    half = _quantile(tail / 2 if question.direction == "two-sided" else tail) * _standard_error(capped, coefficient.n)
    low = -1.0 if r <= -cap or question.direction == "less" else tanh(atanh(capped) - half)
    high = 1.0 if r >= cap or question.direction == "greater" else tanh(atanh(capped) + half)
    return Interval(low, high, question.level, question.direction, KEY, abs(r) >= cap)


def _standard_error(r: float, n: int) -> float:
    return sqrt((1 + r * r / 2) / (n - 3))


def _quantile(tail: Decimal) -> float:
    """Return the standard normal value exceeded with probability ``tail``."""
    return -float(ndtri(float(tail)))


BONETT_WRIGHT: Final = IntervalMethod(
    KEY,
    "Bonett-Wright interval with a cap for near-perfect order",
    ("Spearman rho",),
    bonett_wright,
    Description(
        "The interval was computed on the inverse hyperbolic tangent scale with the variance of Bonett and Wright; a "
        "coefficient nearer to one than a cap, half of the discordance of one row moved across the widest tie steps, "
        "was replaced by that cap, and the limit beyond it was set to one. Its level is approximate.",
        ("bonett2000",),
    ),
)
