"""How wide the guarded jackknife interval is expected to be, and how many rows a wanted width needs.

It has no formula: its mean width over bivariate normal samples without ties was simulated, and what ships is its ratio
to the textbook width of Bonett and Wright at as many rows.
"""

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from importlib.resources import files
from itertools import pairwise
from types import MappingProxyType
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.interval_width import rows_for_width, width_at
from rankdocket.stats.intervals.jackknife import SMALL_BELOW
from rankdocket.stats.sample_size import FEWEST_ROWS

FACTORS: Final = "guarded_widths.csv"
"""level, rows, rho, factor, samples: made by tests/tooling/make_guarded_widths.py."""

LEVELS: Final = (Decimal("0.90"), Decimal("0.95"), Decimal("0.99"))
"""Two-sided levels that were simulated."""

LARGEST_RHO: Final = 0.95
"""Nearer to 1 the width was not simulated."""

WIDEST: Final = 2.0

GUARDED_WIDTH: Final = Description(
    "The number of rows was planned so that the guarded jackknife interval on the inverse hyperbolic tangent scale has "
    "the width wanted on average, for the rho expected. Its mean width was simulated for variables that follow the "
    "bivariate normal law without ties, as a multiple of the width that the formula of Bonett and Wright gives.",
    ("bonett2000",),
)


@dataclass(frozen=True, slots=True)
class _Grid:
    """The factors of one level: rising rows and rhos, and rows → rho → factor."""

    rows: tuple[int, ...]
    rhos: tuple[float, ...]
    factors: Mapping[tuple[int, float], float]


def guarded_factor(n: int, rho: float, *, level: Decimal) -> float:
    """Return how many times as wide as the textbook interval the guarded one was on average.

    Between the simulated places straight lines are drawn, over rho and over 1/n; above the most rows simulated the
    factor stays, which is a little more than the truth.

    Parameters
    ----------
    n
        Complete rows, at least 4.
    rho
        Of the population, at most 0.95 in size.
    level
        One of :data:`LEVELS`.

    Returns
    -------
    float
        Above 0; above 1 from ten rows on.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    if n < FEWEST_ROWS:
        raise ValueError(f"a plan needs at least {FEWEST_ROWS} rows, not {n}")
    if not abs(rho) <= LARGEST_RHO:
        raise ValueError(f"the width was simulated for rho up to {LARGEST_RHO} in size, not for {rho}")
    grid = _grids().get(level)
    if grid is None:
        raise ValueError(f"the width was not simulated at the level {level}")
    if n >= grid.rows[-1]:
        return _over_rho(grid, grid.rows[-1], abs(rho))
    low, high = next((one, other) for one, other in pairwise(grid.rows) if one <= n < other)
    share = (1 / low - 1 / n) / (1 / low - 1 / high)
    return (1 - share) * _over_rho(grid, low, abs(rho)) + share * _over_rho(grid, high, abs(rho))


def guarded_width_at(n: int, rho: float, *, level: Decimal) -> float:
    """Return the mean width of the guarded interval of ``n`` rows when the population has ``rho``: above 0, at most 2.

    Raises
    ------
    ValueError
        If an argument is out of its range (:func:`guarded_factor`).
    """
    return min(WIDEST, guarded_factor(n, rho, level=level) * width_at(n, rho, level=level))


def rows_for_guarded_width(rho: float, width: float, *, level: Decimal) -> int:
    """Return the fewest rows from which on the guarded interval is on average no wider than ``width``.

    Parameters
    ----------
    rho
        Of the population, at most 0.95 in size.
    width
        Above 0, below 2.
    level
        One of :data:`LEVELS`.

    Raises
    ------
    ValueError
        If an argument is out of its range.
    """
    enough = max(rows_for_width(rho, width, level=level).rows, SMALL_BELOW)
    while guarded_width_at(enough, rho, level=level) > width:
        enough *= 2
    if guarded_width_at(SMALL_BELOW, rho, level=level) <= width:
        # With fewer rows another rule mixes the variances, and the width may jump where the rules meet.
        below = [n for n in range(FEWEST_ROWS, SMALL_BELOW) if guarded_width_at(n, rho, level=level) > width]
        return max(below, default=FEWEST_ROWS - 1) + 1
    too_few = SMALL_BELOW
    while enough - too_few > 1:
        middle = (enough + too_few) // 2
        if guarded_width_at(middle, rho, level=level) > width:
            too_few = middle
        else:
            enough = middle
    return enough


def _over_rho(grid: _Grid, rows: int, rho: float) -> float:
    low, high = next((one, other) for one, other in pairwise(grid.rhos) if one <= rho <= other)
    share = (rho - low) / (high - low)
    return (1 - share) * grid.factors[rows, low] + share * grid.factors[rows, high]


@cache
def _grids() -> Mapping[Decimal, _Grid]:
    text = files(__package__).joinpath(FACTORS).read_text(encoding="utf-8")
    found: dict[Decimal, dict[tuple[int, float], float]] = {level: {} for level in LEVELS}
    for line in csv.DictReader(text.splitlines()):
        found[Decimal(line["level"])][int(line["rows"]), float(line["rho"])] = float(line["factor"])
    return MappingProxyType(
        {
            level: _Grid(
                tuple(sorted({rows for rows, _ in factors})),
                tuple(sorted({rho for _, rho in factors})),
                MappingProxyType(factors),
            )
            for level, factors in found.items()
        }
    )
