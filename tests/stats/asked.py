"""A null asked in one call, as the engine asks it."""

from decimal import Decimal
from fractions import Fraction

import numpy as np

from rankdocket.stats.choose_null import DEFAULT_BUDGET, choose_null
from rankdocket.stats.null_result import NullQuestion, NullResult, null_result
from rankdocket.stats.nulls.monte_carlo import DrawingPlan
from rankdocket.stats.nulls.tied_forecast import forecast_rho, forecast_tails
from rankdocket.stats.ranks import Codes, TieGroups, tie_groups
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.vocabulary import CoefficientName, Direction, PBy

ALPHA = Fraction(1, 20)


def only_doubles(x: TieGroups, y: TieGroups) -> Decimal:
    """Return seconds of a budget that holds the tails of rho in doubles and nothing in whole numbers."""
    ends = forecast_tails(x, y, "doubles").nanoseconds, forecast_tails(x, y, "whole numbers").nanoseconds
    assert ends[0] < ends[1] < forecast_rho(x, y).nanoseconds
    return Decimal(sum(ends) // 2).scaleb(-9)


def answer_of(
    x: Codes | list[int],
    y: Codes | list[int],
    name: CoefficientName = "Spearman rho",
    *,
    drawing: DrawingPlan | None = None,
    direction: Direction = "two-sided",
) -> NullResult:
    """Return what the null says of the data: exact when possible, or drawn when a plan of drawing is given."""
    x_codes, y_codes = np.asarray(x, dtype=np.int64), np.asarray(y, dtype=np.int64)
    by: PBy = "exact when possible" if drawing is None else "permutation"
    observed = {"Spearman rho": rho, "Kendall tau-b": tau_b}[name](x_codes, y_codes)
    choice = choose_null(name, tie_groups(x_codes), tie_groups(y_codes), by)
    question = NullQuestion(observed, direction, ALPHA, (ALPHA,), Decimal("0.95"))
    return null_result(choice, (x_codes, y_codes), question, DEFAULT_BUDGET, drawing)
