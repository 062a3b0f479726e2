"""The catalogue of interval rules, in the order in which they are preferred."""

from typing import Final

from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval
from rankdocket.stats.intervals.bonett_wright import BONETT_WRIGHT

INTERVAL_METHODS: Final[tuple[IntervalMethod, ...]] = (BONETT_WRIGHT,)
"""Every interval rule; the first that serves a coefficient is used."""


def interval_of(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval by the first rule that serves the coefficient, or why there is none."""
    name = question.coefficient.name
    for method in INTERVAL_METHODS:
        if name in method.coefficients:
            return method.function(question)
    short = {"Spearman rho": "rho", "Kendall tau-b": "tau-b"}[name]
    return NoInterval(f"no interval is offered for {short} yet")
