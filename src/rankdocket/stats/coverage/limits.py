"""The limits that each interval rule sets for many samples at once; the tests hold them against the rule itself."""

from collections.abc import Callable
from dataclasses import dataclass
from math import sqrt
from types import MappingProxyType
from typing import Final, TypeAlias

import numpy as np
from scipy.special import stdtrit

from rankdocket.stats.coverage.families import Floats
from rankdocket.stats.coverage.sums import SampleSums
from rankdocket.stats.influence import LEAST_FREEDOM
from rankdocket.stats.intervals import bonett_wright, fieller, fisher, influence_values, jackknife, tau_jackknife
from rankdocket.stats.z_interval import MOST_FREEDOM, normal_quantile
from rankdocket.vocabulary import CoefficientName

Limits: TypeAlias = tuple[Floats, Floats]
Rule: TypeAlias = Callable[[SampleSums, float], Limits]
"""From sums and the probability left beyond each limit to both limits."""


@dataclass(frozen=True, slots=True)
class SimulatedRule:
    """An interval rule as it is simulated.

    Attributes
    ----------
    method
        Key of the rule.
    short
        How the table names it.
    """

    method: str
    short: str
    coefficient: CoefficientName
    limits: Rule


def _back(sums: SampleSums, half: Floats, guard: float = 1) -> Limits:
    centre = np.arctanh(_centre(sums))
    low = np.where(sums.r <= -sums.cap, -1.0, np.tanh(centre - half))
    high = np.where(sums.r >= sums.cap, 1.0, np.tanh(centre + half))
    return np.minimum(low, guard), np.maximum(high, -guard)


def _centre(sums: SampleSums) -> Floats:
    centre: Floats = np.clip(sums.r, -sums.cap, sums.cap)
    return centre


def _t(freedom: Floats, tail: float) -> Floats:
    quantile: Floats = -stdtrit(np.minimum(freedom, MOST_FREEDOM), tail)
    return quantile


def _bonett_wright_variance(r: Floats, n: int) -> Floats:
    return (1 + r * r / 2) / (n - 3)


def _of_jackknife(sums: SampleSums, tail: float) -> Limits:
    n, centre = sums.n, _centre(sums)
    floor = _bonett_wright_variance(centre, n)
    own = np.where(sums.jackknife < 0, _bonett_wright_variance(sums.r, n), sums.jackknife)
    least = normal_quantile(tail) * np.sqrt(floor)
    if n >= jackknife.SMALL_BELOW:
        half = np.clip(_t(sums.freedom, tail) * np.sqrt(own), least, jackknife.MOST_TIMES * least)
        return _back(sums, half, jackknife.guard_of(tail, n))
    larger = np.maximum(n / (n - 2) * sums.influence / (1 - centre**2) ** 2, own)
    weight = jackknife.PRIOR_ROWS / (jackknife.PRIOR_ROWS + n)
    mixed = weight * floor + (1 - weight) * larger
    some = larger > 0
    share = np.where(some, np.minimum(mixed / ((1 - weight) * np.where(some, larger, 1)), MOST_FREEDOM), 1)
    freedom = np.maximum(LEAST_FREEDOM, np.minimum(sums.freedom, MOST_FREEDOM) * share**2)
    half = np.where(some, np.maximum(least, _t(freedom, tail) * np.sqrt(mixed)), least)
    return _back(sums, half, jackknife.guard_of(tail, n))


def _of_influence(sums: SampleSums, tail: float) -> Limits:
    n, centre = sums.n, _centre(sums)
    own = n / (n - 2) * sums.influence / (1 - centre**2) ** 2
    other = _bonett_wright_variance(centre, n)
    stands_in = (own < other) & ((np.abs(sums.r) >= sums.cap) | (sums.influence == 0))
    return _back(sums, float(_t(np.array(n - 2.0), tail)) * np.sqrt(np.where(stands_in, other, own)))


def _of_bonett_wright(sums: SampleSums, tail: float) -> Limits:
    return _back(sums, normal_quantile(tail) * np.sqrt(_bonett_wright_variance(_centre(sums), sums.n)))


def _of_fieller(sums: SampleSums, tail: float) -> Limits:
    return _of_one_variance(sums, tail, fieller.RHO_FACTOR / (sums.n - 3))


def _of_fisher(sums: SampleSums, tail: float) -> Limits:
    return _of_one_variance(sums, tail, 1 / (sums.n - 3))


def _of_fieller_for_tau(sums: SampleSums, tail: float) -> Limits:
    return _of_one_variance(sums, tail, fieller.fieller_tau_variance(sums.n))


def _of_one_variance(sums: SampleSums, tail: float, variance: float) -> Limits:
    return _back(sums, np.full_like(sums.r, normal_quantile(tail) * sqrt(variance)))


def _of_tau_jackknife(sums: SampleSums, tail: float) -> Limits:
    least = normal_quantile(tail) * sqrt(fieller.fieller_tau_variance(sums.n))
    own = np.where(
        sums.jackknife < 0, least, _t(sums.freedom, tail) * np.sqrt(np.where(sums.jackknife < 0, 0, sums.jackknife))
    )
    half = np.clip(own, least, jackknife.MOST_TIMES * least)
    return _back(sums, half, tau_jackknife.tau_guard_of(tail, sums.n))


RULES: Final = MappingProxyType(
    {
        rule.short: rule
        for rule in (
            SimulatedRule(jackknife.KEY, "jackknife", "Spearman rho", _of_jackknife),
            SimulatedRule(bonett_wright.KEY, "bonett-wright", "Spearman rho", _of_bonett_wright),
            SimulatedRule(influence_values.KEY, "influence", "Spearman rho", _of_influence),
            SimulatedRule(fieller.KEY, "fieller", "Spearman rho", _of_fieller),
            SimulatedRule(fisher.KEY, "fisher", "Spearman rho", _of_fisher),
            SimulatedRule(tau_jackknife.KEY, "tau jackknife", "Kendall tau-b", _of_tau_jackknife),
            SimulatedRule(fieller.KEY, "tau fieller", "Kendall tau-b", _of_fieller_for_tau),
        )
    }
)
"""Rules simulated for many samples at once, by their names in the table. The bootstrap is simulated sample by sample."""
