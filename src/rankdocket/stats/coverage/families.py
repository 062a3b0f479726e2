"""The families of populations from which samples are simulated, and the pattern of ties that each of them shows."""

from collections.abc import Callable
from dataclasses import dataclass
from math import sqrt
from types import MappingProxyType
from typing import Final, Literal, TypeAlias

import numpy as np
import numpy.typing as npt
from scipy.special import gammaincinv, ndtr, ndtri

Floats: TypeAlias = npt.NDArray[np.float64]

TiePattern: TypeAlias = Literal[
    "no ties or small tie groups", "few levels in one variable", "few levels in both variables", "tied at one end"
]
"""What tie groups look like, as :func:`rankdocket.stats.coverage.tie_pattern.tie_pattern` tells them apart."""

FIVE_EVEN: Final = (0.1, 0.2, 0.4, 0.2, 0.1)
FIVE_SKEWED: Final = (0.55, 0.2, 0.12, 0.08, 0.05)
THREE: Final = (0.5, 0.3, 0.2)
"""Shares of the levels into which a normal variable is cut, from the lowest up."""

ERROR_SHARE: Final = 0.1
ERROR_SPREAD: Final = 3.0
"""Share of rows with gross errors, and how many times as widely as the others both variables of such a row spread."""

TAIL_FREEDOM: Final = 3
"""Degrees of freedom of the heavy-tailed family."""


@dataclass(frozen=True, slots=True, eq=False)
class Shocks:
    """What a population is made from, three arrays of one shape.

    Attributes
    ----------
    first, second
        Standard normal.
    third
        Even between 0 and 1.
    """

    first: Floats
    second: Floats
    third: Floats


Build: TypeAlias = Callable[[Shocks, float], tuple[Floats, Floats]]
"""From shocks and the family’s parameter to values of x and y."""


@dataclass(frozen=True, slots=True)
class Family:
    """A family of populations with one parameter that sets the association, 0 for none unless said otherwise.

    Attributes
    ----------
    key
        How tables name it.
    words
        How a report names it, as "samples with …" would go on.
    largest
        Parameter at which the association is nearly perfect, or as large as the family has it.
    """

    key: str
    words: str
    pattern: TiePattern
    largest: float
    build: Build


def _normal(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
    return shocks.first, parameter * shocks.first + sqrt(1 - parameter**2) * shocks.second


def _heavy_tails(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
    x, y = _normal(shocks, parameter)
    # Both variables of a row share the divisor, a chi-squared variable over its degrees of freedom.
    spread = np.sqrt(2 * gammaincinv(TAIL_FREEDOM / 2, shocks.third) / TAIL_FREEDOM)
    return x / spread, y / spread


def _agreeing_below(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
    if parameter == 0:
        return shocks.first, shocks.second
    x, share = (np.log(ndtr(shock)) for shock in (shocks.first, shocks.second))
    bracket = np.log(np.expm1(-parameter / (1 + parameter) * share)) - parameter * x
    return x, -np.logaddexp(0, bracket) / parameter


def _spread_at_both_ends(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
    return shocks.first, parameter * shocks.first + (0.2 + np.abs(shocks.first) ** 1.5) * shocks.second


def _spread_with_x(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
    return shocks.first, parameter * shocks.first + np.exp(0.8 * shocks.first) * shocks.second


def _gross_errors(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
    x, y = _normal(shocks, parameter)
    wrong = shocks.third < ERROR_SHARE
    return np.where(wrong, ERROR_SPREAD * x, x), np.where(wrong, ERROR_SPREAD * shocks.second, y)


def _cut(values: Floats, shares: tuple[float, ...]) -> Floats:
    return np.searchsorted(ndtri(np.cumsum(shares)[:-1]), values).astype(np.float64)


def _levels(shares: tuple[float, ...]) -> Build:
    def build(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
        x, y = _normal(shocks, parameter)
        return _cut(x, shares), _cut(y, shares)

    return build


def _one_in_levels(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
    x, y = _normal(shocks, parameter)
    return _cut(x, FIVE_EVEN), y


def _tied_below(share: float) -> Build:
    limit = float(ndtri(share))

    def build(shocks: Shocks, parameter: float) -> tuple[Floats, Floats]:
        x, y = _normal(shocks, parameter)
        return np.maximum(x, limit), np.maximum(y, limit)

    return build


NORMAL: Final = "normal"
HEAVY_TAILS: Final = "heavy tails"
AGREEING_BELOW: Final = "agreeing below"
SPREAD_AT_BOTH_ENDS: Final = "spread at both ends"
SPREAD_WITH_X: Final = "spread with x"
GROSS_ERRORS: Final = "gross errors"
THREE_LEVELS: Final = "three levels"
FIVE_LEVELS: Final = "five levels"
FIVE_SKEWED_LEVELS: Final = "five skewed levels"
ONE_IN_LEVELS: Final = "one in levels"
THIRTY_BELOW: Final = "thirty below"
SIXTY_BELOW: Final = "sixty below"

FAMILIES: Final = MappingProxyType(
    {
        family.key: family
        for family in (
            Family(NORMAL, "normal-type dependence", "no ties or small tie groups", 0.99999, _normal),
            Family(
                HEAVY_TAILS,
                "outlying rows in both variables at once",
                "no ties or small tie groups",
                0.99999,
                _heavy_tails,
            ),
            Family(
                AGREEING_BELOW,
                "closer agreement among low values",
                "no ties or small tie groups",
                200.0,
                _agreeing_below,
            ),
            Family(
                SPREAD_AT_BOTH_ENDS,
                "spread grows towards both ends of x",
                "no ties or small tie groups",
                400.0,
                _spread_at_both_ends,
            ),
            Family(SPREAD_WITH_X, "spread grows with x", "no ties or small tie groups", 400.0, _spread_with_x),
            Family(
                GROSS_ERRORS,
                "nearly perfect order with gross errors in one row of ten",
                "no ties or small tie groups",
                0.99999,
                _gross_errors,
            ),
            Family(
                THREE_LEVELS,
                "both variables in three levels",
                "few levels in both variables",
                0.999999,
                _levels(THREE),
            ),
            Family(
                FIVE_LEVELS,
                "both variables in five levels",
                "few levels in both variables",
                0.999999,
                _levels(FIVE_EVEN),
            ),
            Family(
                FIVE_SKEWED_LEVELS,
                "both variables in five levels, most rows in the lowest",
                "few levels in both variables",
                0.999999,
                _levels(FIVE_SKEWED),
            ),
            Family(
                ONE_IN_LEVELS, "one variable in five levels", "few levels in one variable", 0.999999, _one_in_levels
            ),
            Family(
                THIRTY_BELOW,
                "three rows in ten tied at one end of both variables",
                "tied at one end",
                0.999999,
                _tied_below(0.3),
            ),
            Family(
                SIXTY_BELOW,
                "six rows in ten tied at one end of both variables",
                "tied at one end",
                0.999999,
                _tied_below(0.6),
            ),
        )
    }
)
"""Every family, by key. Margins do not matter to ranks, so that lognormal values, for one, are those of ``normal``.

The families are those of an earlier simulation of the rules by their authors; parameters and seeds are our own.
"""
