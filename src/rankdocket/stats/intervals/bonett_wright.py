"""The interval of Bonett and Wright on the z scale, with a cap that knows the ties."""

from decimal import Decimal
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval
from rankdocket.stats.z_interval import (
    ZLimits,
    capped,
    interval_of_variance,
    require_inside,
    textbook_limits,
    tie_cap,
    why_none,
)

KEY: Final = "Bonett-Wright"
FEWEST_ROWS: Final = 4
"""The variance has n − 3 in its denominator (bonett2000)."""


def bonett_wright_limits(r: float, n: int, *, level: Decimal | str | float) -> ZLimits:
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
    require_inside(r, n, FEWEST_ROWS)
    return textbook_limits(r, bonett_wright_variance(r, n), level)


def bonett_wright_variance(r: float, n: int) -> float:
    """Return the variance (1 + r²/2)/(n − 3) of atanh of Spearman rho; ``n`` at least 4 (bonett2000)."""
    return bonett_wright_factor(r) / (n - 3)


def bonett_wright_factor(r: float) -> float:
    """Return n − 3 times the variance of atanh of Spearman rho: 1 + r²/2 (bonett2000)."""
    return 1 + r * r / 2


def bonett_wright(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the house form of the interval: the coefficient is capped, and a limit beyond the cap is ±1."""
    none = why_none(question.coefficient, FEWEST_ROWS)
    if none is not None:
        return none
    cap = tie_cap(question.x_codes, question.y_codes)
    r = capped(question.coefficient.value, cap)
    return interval_of_variance(question, KEY, cap=cap, variance=bonett_wright_variance(r, question.coefficient.n))


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
    "From 4 rows. Near its level for normal-type dependence from 10 rows; below it, at every number of rows, when the "
    "spread of one variable changes with the other, and near perfect order with few distinct values.",
)
