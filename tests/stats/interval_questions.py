"""Questions for interval rules, put by key."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from decimal import Decimal

import numpy as np

from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.interval import Interval, IntervalQuestion, NoInterval, Resampling
from rankdocket.stats.intervals import interval_by
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.vocabulary import CoefficientName, Direction

JACKKNIFE, TAU_JACKKNIFE, BONETT = "jackknife on z, guarded", "tau-b jackknife on z, guarded", "Bonett-Wright"
COEFFICIENTS: dict[CoefficientName, Callable[..., Coefficient]] = {"Spearman rho": rho, "Kendall tau-b": tau_b}

Y12 = [3, 1, 2, 6, 5, 4, 9, 12, 7, 8, 10, 11]


@dataclass(frozen=True)
class Asked:
    """How an interval is asked for."""

    level: str = "0.95"
    direction: Direction = "two-sided"
    coefficient: CoefficientName = "Spearman rho"


def by(key: str, x: Sequence[int], y: Sequence[int], asked: Asked = Asked()) -> Interval | NoInterval:
    codes = np.array(x), np.array(y)
    coefficient = COEFFICIENTS[asked.coefficient](*codes)
    plan = Resampling(400, np.random.default_rng(1))
    return interval_by(key, IntervalQuestion(coefficient, *codes, Decimal(asked.level), asked.direction, plan))


def given(key: str, x: Sequence[int], y: Sequence[int], asked: Asked = Asked()) -> Interval:
    found = by(key, x, y, asked)
    assert isinstance(found, Interval)
    return found
