"""Parameters at which the true coefficient of a family is a given value, by integration over evenly spread points.

The true value of rho is the correlation of mid-distribution functions, to which rho of ever more rows tends; that of
tau-b is the value to which tau-b tends.
"""

from dataclasses import dataclass
from functools import lru_cache
from math import pi, sin
from typing import Final

import numpy as np
from scipy.optimize import brentq
from scipy.special import ndtri

from rankdocket.stats.coverage.families import NORMAL, Family, Floats, Shocks
from rankdocket.stats.ranks import Codes
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.vocabulary import CoefficientName

POINTS: Final = 2**16
"""Points of the integration."""

BASES: Final = (2, 3, 5)
"""Bases in which the numbers of the points are written and mirrored at the point, one a coordinate."""

NEAR: Final = 1e-7
"""How near to its target a parameter is brought."""


@dataclass(frozen=True, slots=True)
class Population:
    """A member of a family.

    Attributes
    ----------
    parameter
        What the family’s build takes.
    truth
        The coefficient of the population.
    """

    family: Family
    coefficient: CoefficientName
    parameter: float
    truth: float


def population_at(family: Family, coefficient: CoefficientName, truth: float) -> Population:
    """Return the member of ``family`` whose ``coefficient`` is ``truth``.

    Under normal dependence rho is (6/π) asin(parameter/2) and tau-b (2/π) asin(parameter), which needs no integration.

    Raises
    ------
    ValueError
        If no member of the family has that coefficient.
    """
    if truth == 0:
        return Population(family, coefficient, 0.0, 0.0)
    if family.key == NORMAL:
        parameter = 2 * sin(pi * truth / 6) if coefficient == "Spearman rho" else sin(pi * truth / 2)
        return Population(family, coefficient, parameter, truth)
    shocks = even_shocks()
    if integrated(family, coefficient, family.largest, shocks) < truth:
        raise ValueError(f"no population of the family {family.key!r} has a {coefficient} of {truth}")
    parameter = brentq(
        lambda tried: integrated(family, coefficient, tried, shocks) - truth, 0.0, family.largest, xtol=NEAR, rtol=NEAR
    )
    return Population(family, coefficient, float(parameter), truth)


def integrated(family: Family, coefficient: CoefficientName, parameter: float, shocks: Shocks) -> float:
    """Return the coefficient of the values that ``shocks`` give, which tends to the true one with their number."""
    x, y = (_codes(values) for values in family.build(shocks, parameter))
    return (rho if coefficient == "Spearman rho" else tau_b)(x, y).value


@lru_cache(maxsize=1)
def even_shocks() -> Shocks:
    """Return shocks at the first points of Halton’s sequence, which fill a cube evenly (halton1960)."""
    first, second, third = (_mirrored(np.arange(1, POINTS + 1), base) for base in BASES)
    return Shocks(ndtri(first), ndtri(second), third)


def random_shocks(shape: int | tuple[int, int], generator: np.random.Generator) -> Shocks:
    """Return shocks drawn at random."""
    return Shocks(generator.standard_normal(shape), generator.standard_normal(shape), generator.random(shape))


def _codes(values: Floats) -> Codes:
    codes: Codes = np.unique(values, return_inverse=True)[1].astype(np.int64)
    return codes


def _mirrored(numbers: Codes, base: int) -> Floats:
    """Return each number with its digits in ``base`` mirrored at the point: 6 = 110 in base 2 gives 0.011."""
    mirrored, place = np.zeros(len(numbers)), 1.0
    while numbers.any():
        numbers, digits = np.divmod(numbers, base)
        place /= base
        mirrored += place * digits
    return mirrored
