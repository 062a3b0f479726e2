"""The interval of Fieller, Hartley and Pearson on the z scale, for rho and for tau-b, kept for comparison."""

from decimal import Decimal
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval
from rankdocket.stats.z_interval import (
    ZLimits,
    interval_of_variance,
    require_inside,
    tau_tie_cap,
    textbook_limits,
    tie_cap,
    why_none,
)

KEY: Final = "Fieller-Hartley-Pearson"

RHO_FACTOR: Final = 1.06
RHO_FEWEST_ROWS: Final = 4
"""The variance for rho has n − 3 in its denominator (fieller1957)."""

TAU_FACTOR: Final = 0.437
TAU_FEWEST_ROWS: Final = 5
"""The variance for tau-b has n − 4 in its denominator (fieller1957)."""


def fieller_limits(r: float, n: int, *, level: Decimal | str | float) -> ZLimits:
    """Return the textbook interval of Spearman rho tanh(atanh r ∓ z √(1.06/(n − 3))) (fieller1957).

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
    require_inside(r, n, RHO_FEWEST_ROWS)
    return textbook_limits(r, RHO_FACTOR / (n - 3), level)


def fieller_tau_limits(tau: float, n: int, *, level: Decimal | str | float) -> ZLimits:
    """Return the textbook interval of Kendall tau-b tanh(atanh τ ∓ z √(0.437/(n − 4))) (fieller1957).

    Parameters
    ----------
    tau
        Above −1, below 1.
    n
        At least 5.
    level
        Above 0, below 1; two-sided; a float is read as the shortest decimal that means it.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    require_inside(tau, n, TAU_FEWEST_ROWS)
    return textbook_limits(tau, fieller_tau_variance(n), level)


def fieller_tau_variance(n: int) -> float:
    """Return the variance 0.437/(n − 4) of atanh of Kendall tau-b; ``n`` at least 5 (fieller1957)."""
    return TAU_FACTOR / (n - 4)


def fieller(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval with the coefficient capped; a limit beyond the cap is ±1."""
    coefficient = question.coefficient
    of_rho = coefficient.name == "Spearman rho"
    none = why_none(coefficient, RHO_FEWEST_ROWS if of_rho else TAU_FEWEST_ROWS)
    if none is not None:
        return none
    x, y = question.x_codes, question.y_codes
    variance = RHO_FACTOR / (coefficient.n - 3) if of_rho else fieller_tau_variance(coefficient.n)
    cap = tie_cap(x, y) if of_rho else tau_tie_cap(coefficient, x, y)
    return interval_of_variance(question, KEY, cap=cap, variance=variance)


FIELLER: Final = IntervalMethod(
    KEY,
    "Interval of Fieller, Hartley and Pearson, for comparison",
    ("Spearman rho", "Kendall tau-b"),
    fieller,
    Description(
        "For comparison the interval was computed on the inverse hyperbolic tangent scale with the variance of "
        "Fieller, Hartley and Pearson; near perfect order the coefficient was replaced by a cap that the tie steps "
        "set.",
        ("fieller1957",),
    ),
    "From 4 rows for rho, from 5 for tau-b. Made for normal-type dependence with coefficients up to about 0.8 in size, "
    "10 to 50 rows and no ties; for comparison only.",
)
