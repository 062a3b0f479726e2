"""The shape of an association beside its coefficient: the nearest monotone step curve, and Chatterjee’s xi both ways."""

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from itertools import pairwise
from typing import Final

from rankdocket.stats.chatterjee import Xi, xi_of_codes
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.hidden_shape import has_hidden_shape
from rankdocket.stats.isotonic import Step, Trend, isotonic_fit, monotone_fit
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes
from rankdocket.stats.rho import rho

MOST_STEPS: Final = 100
"""Steps of a curve that is filed and drawn; of more, neighbours are merged, which no eye sees at the size of a plot."""


@dataclass(frozen=True, slots=True)
class CurveStep:
    """A level stretch of the curve: the values of x at which it begins and ends, and the mean of y over its rows."""

    x_from: Decimal
    x_to: Decimal
    y: Fraction


@dataclass(frozen=True, slots=True)
class Shape:
    """A look at the shape; no finding rests on it.

    Attributes
    ----------
    trend
        Which way the curve goes: as the coefficient does, and where that is 0, whichever way lies nearer to the rows.
    steps
        Steps of the fitted curve.
    curve
        The curve as drawn, at most :data:`MOST_STEPS` steps.
    y_on_x, x_on_y
        Chatterjee’s xi of either variable on the other.
    hidden
        Which xi is clearly above 0 while rho is near 0: "y on x", "x on y", or ``None``.
    """

    trend: Trend
    steps: int
    curve: tuple[CurveStep, ...]
    y_on_x: Xi
    x_on_y: Xi
    hidden: str | None

    def xi(self, way: str) -> Xi:
        """Return xi of "y on x" or of "x on y"."""
        return self.y_on_x if way == "y on x" else self.x_on_y


def shape_of(observed: Coefficient, codes: tuple[Codes, Codes], values: Sequence[tuple[Decimal, Decimal]]) -> Shape:
    """Return the shape of rows whose coefficient exists.

    Parameters
    ----------
    observed
        Their coefficient.
    codes
        Order of x and of y, each of shape (n,).
    values
        The n pairs as the raw plot shows them: numbers, places, or the positions of labels in their declared order.

    Raises
    ------
    ValueError
        If the rows have no coefficient.
    """
    x, y = codes
    steps, trend = _fitted(observed, x, [pair[1] for pair in values])
    at = dict(zip(x.tolist(), (pair[0] for pair in values), strict=True))
    curve = tuple(CurveStep(at[step.first], at[step.last], step.value) for step in _thinned(steps))
    y_on_x, x_on_y = _answered(xi_of_codes(x, y)), _answered(xi_of_codes(y, x))
    of_ranks = observed if observed.name == "Spearman rho" else rho(x, y)
    ways = {"y on x": y_on_x, "x on y": x_on_y}
    hidden = [way for way, xi in ways.items() if has_hidden_shape(of_ranks, xi)]
    clearest = max(hidden, key=lambda way: ways[way].spreads or 0.0, default=None)
    return Shape(trend, len(steps), curve, y_on_x, x_on_y, clearest)


def _fitted(observed: Coefficient, x: Codes, y: list[Decimal]) -> tuple[tuple[Step, ...], Trend]:
    if observed.numerator == 0:
        fit = monotone_fit(x, y)
    else:
        fit = isotonic_fit(x, y, trend="rising" if observed.numerator > 0 else "falling")
    if isinstance(fit, NoAnswer):
        raise ValueError(fit.reason)
    return fit.steps, fit.trend


def _answered(xi: Xi | NoAnswer) -> Xi:
    if isinstance(xi, NoAnswer):
        raise ValueError(xi.reason)
    return xi


def _thinned(steps: tuple[Step, ...]) -> tuple[Step, ...]:
    """Return at most so many steps as are drawn, neighbours merged into their weighted mean."""
    groups = min(len(steps), MOST_STEPS)
    edges = [place * len(steps) // groups for place in range(groups + 1)]
    return tuple(_merged(steps[low:high]) for low, high in pairwise(edges))


def _merged(steps: tuple[Step, ...]) -> Step:
    weight = sum((step.weight for step in steps), Fraction(0))
    total = sum((step.weight * step.value for step in steps), Fraction(0))
    return Step(steps[0].first, steps[-1].last, weight, total / weight)
