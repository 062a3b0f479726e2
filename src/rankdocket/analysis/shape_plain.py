"""The look at the shape to plain data: the curve that is drawn, and xi with its null where the plan gives a test."""

from decimal import ROUND_HALF_EVEN, Context, Decimal
from fractions import Fraction
from typing import Final

from rankdocket.analysis.filing import filed
from rankdocket.analysis.results import AssociationAnalysis, RankTest
from rankdocket.canonical import Plain
from rankdocket.stats.chatterjee import Xi

DRAWN_DIGITS: Final = 6
"""Digits of the heights of the curve: a picture shows no more."""


def shape_to_plain(result: AssociationAnalysis) -> dict[str, Plain]:
    """Return the shape under its own key; nothing without an estimate."""
    shape = result.shape
    if shape is None:
        return {}
    tested = isinstance(result.test, RankTest)
    hidden: dict[str, Plain] = {} if shape.hidden is None or not tested else {"hidden": shape.hidden}
    return {
        "shape": {
            "trend": shape.trend,
            "steps": shape.steps,
            "steps_drawn": len(shape.curve),
            "curve": {
                "x_from": [f"{step.x_from:f}" for step in shape.curve],
                "x_to": [f"{step.x_to:f}" for step in shape.curve],
                "y": [_drawn(step.y) for step in shape.curve],
            },
            "xi_y_on_x": _xi(shape.y_on_x, tested=tested),
            "xi_x_on_y": _xi(shape.x_on_y, tested=tested),
            **hidden,
        }
    }


def _drawn(height: Fraction) -> str:
    """Return a height of the curve with as many digits as a picture shows."""
    digits = Context(prec=DRAWN_DIGITS, rounding=ROUND_HALF_EVEN)
    return f"{digits.divide(Decimal(height.numerator), Decimal(height.denominator)).normalize():f}"


def _xi(xi: Xi, *, tested: bool) -> dict[str, Plain]:
    """Return xi; its null needs rows that may be exchanged like any test, and stays away with the test."""
    value: dict[str, Plain] = {"value": filed(xi.coefficient), "null_variance": filed(xi.null_variance)}
    if not tested:
        return {"value": value["value"]}
    if xi.spreads is None or xi.p is None:
        return value
    return {**value, "spreads": filed(xi.spreads), "p": filed(xi.p)}
