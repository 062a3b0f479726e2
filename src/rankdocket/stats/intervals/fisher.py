"""Fisher’s interval on the z scale: made for the product-moment correlation of normal values, kept for comparison."""

from decimal import Decimal
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval
from rankdocket.stats.z_interval import (
    ZLimits,
    interval_of_variance,
    require_inside,
    textbook_limits,
    tie_cap,
    why_none,
)

KEY: Final = "Fisher z"
FEWEST_ROWS: Final = 4
"""The variance has n − 3 in its denominator (fisher1921)."""


def fisher_limits(r: float, n: int, *, level: Decimal | str | float) -> ZLimits:
    """Return the textbook interval tanh(atanh r ∓ z √(1/(n − 3))) (fisher1921).

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
    return textbook_limits(r, 1 / (n - 3), level)


def fisher(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval with the coefficient capped; a limit beyond the cap is ±1."""
    none = why_none(question.coefficient, FEWEST_ROWS)
    if none is not None:
        return none
    cap = tie_cap(question.x_codes, question.y_codes)
    return interval_of_variance(question, KEY, cap=cap, variance=1 / (question.coefficient.n - 3))


FISHER: Final = IntervalMethod(
    KEY,
    "Fisher’s interval, for comparison",
    ("Spearman rho",),
    fisher,
    Description(
        "For comparison the interval was computed on the inverse hyperbolic tangent scale with Fisher’s variance, "
        "which belongs to the product-moment correlation of normal values; near perfect order the coefficient was "
        "replaced by a cap that the tie steps set.",
        ("fisher1921",),
    ),
    "From 4 rows. Too narrow for Spearman rho even under normal-type dependence; for comparison only.",
)
