"""How many rows an interval of a wanted width needs before the data are there."""

from decimal import Decimal
from math import atanh, cosh, log, sqrt
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.intervals.bonett_wright import bonett_wright_factor, bonett_wright_limits
from rankdocket.stats.sample_size import RowsNeeded
from rankdocket.stats.z_interval import two_sided_quantile

INTERVAL_WIDTH: Final = Description(
    "The number of rows was planned so that the interval of Bonett and Wright is no wider than wanted when the "
    "coefficient comes out at the rho expected; it varies with the coefficient that is found.",
    ("bonett2000",),
)


def width_at(n: int, rho: float, *, level: Decimal | str | float) -> float:
    """Return the width of the textbook two-sided interval when ``n`` rows give the coefficient ``rho`` (bonett2000).

    The mean width over samples is near it and not equal to it.

    Parameters
    ----------
    n
        Complete rows, at least 4.
    rho
        Above −1, below 1.
    level
        Above 0, below 1.

    Returns
    -------
    float
        Above 0, below 2.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    limits = bonett_wright_limits(rho, n, level=level)
    return limits.high - limits.low


def rows_for_width(rho: float, width: float, *, level: Decimal | str | float) -> RowsNeeded:
    """Return the rows with which the textbook two-sided interval at ``rho`` has ``width`` (bonett2000).

    With h half of the width on the scale of a = atanh(rho), the width is 2 sinh 2h / (cosh 2a + cosh 2h), which is a
    quadratic equation in exp(2h).

    Parameters
    ----------
    rho
        Above −1, below 1.
    width
        Above 0, below 2.
    level
        Above 0, below 1; a float is read as the shortest decimal that means it.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    if not -1 < rho < 1:
        raise ValueError(f"rho must lie between -1 and 1 and reach neither, not be {rho}")
    if not 0 < width < 2:
        raise ValueError(f"the width must lie between 0 and 2 and reach neither, not be {width}")
    z = two_sided_quantile(level)
    spread = width * cosh(2 * atanh(rho))
    half = log((spread + sqrt(spread * spread + 4 - width * width)) / (2 - width)) / 2
    return RowsNeeded(3 + (z / half) ** 2 * bonett_wright_factor(rho))
