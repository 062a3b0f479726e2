"""The catalogue of interval rules: for each coefficient those to rely on first, then those kept for comparison."""

from dataclasses import replace
from types import MappingProxyType
from typing import Final

import numpy as np

from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval
from rankdocket.stats.intervals.bca_bootstrap import BCA_BOOTSTRAP
from rankdocket.stats.intervals.bonett_wright import BONETT_WRIGHT
from rankdocket.stats.intervals.fieller import FIELLER
from rankdocket.stats.intervals.fisher import FISHER
from rankdocket.stats.intervals.influence_values import INFLUENCE_VALUES
from rankdocket.stats.intervals.jackknife import JACKKNIFE
from rankdocket.stats.intervals.tau_jackknife import TAU_JACKKNIFE
from rankdocket.vocabulary import CoefficientName, IntervalBy

INTERVAL_METHODS: Final[tuple[IntervalMethod, ...]] = (
    JACKKNIFE,
    BONETT_WRIGHT,
    INFLUENCE_VALUES,
    BCA_BOOTSTRAP,
    FIELLER,
    FISHER,
    TAU_JACKKNIFE,
)
"""Every interval rule."""

USUAL: Final[IntervalBy] = "guarded jackknife"
"""The rule of :func:`interval_of`, in the word of a plan."""

_PLANNED: Final = MappingProxyType[IntervalBy, tuple[IntervalMethod, ...]](
    {
        "guarded jackknife": (JACKKNIFE, TAU_JACKKNIFE),
        "Bonett-Wright": (BONETT_WRIGHT,),
        "influence values": (INFLUENCE_VALUES,),
        "BCa bootstrap": (BCA_BOOTSTRAP,),
        "Fieller-Hartley-Pearson": (FIELLER,),
        "Fisher z": (FISHER,),
    }
)
"""Word of a plan → the rules that it stands for, one a coefficient at most."""


def interval_of(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval by the usual rule for the coefficient, or why there is none."""
    return planned_interval(USUAL, question)


def planned_interval(by: IntervalBy, question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval by the rule that a plan names, or why there is none; no other rule stands in for it.

    Rows are put in order first: no digit, and no resample, depends on the order in which they came.
    """
    name = question.coefficient.name
    method = planned_method(by, name)
    if method is None:
        return NoInterval(f"the plan asks for {by}, which makes no interval for {_short(name)}")
    order = np.lexsort((question.y_codes, question.x_codes))
    return method.function(replace(question, x_codes=question.x_codes[order], y_codes=question.y_codes[order]))


def planned_method(by: IntervalBy, name: CoefficientName) -> IntervalMethod | None:
    """Return the rule that a plan’s word means for a coefficient; ``None`` where there is none."""
    return next((method for method in _PLANNED[by] if name in method.coefficients), None)


def interval_by(method_key: str, question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval by the rule of that key, or why there is none.

    Raises
    ------
    ValueError
        If there is no such rule.
    """
    method = next((candidate for candidate in INTERVAL_METHODS if candidate.key == method_key), None)
    if method is None:
        keys = ", ".join(each.key for each in INTERVAL_METHODS)
        raise ValueError(f"{method_key!r} is no interval rule; write one of: {keys}")
    name = question.coefficient.name
    if name not in method.coefficients:
        return NoInterval(f"the rule {method.key} makes no interval for {_short(name)}")
    return method.function(question)


def _short(name: CoefficientName) -> str:
    return {"Spearman rho": "rho", "Kendall tau-b": "tau-b"}[name]
