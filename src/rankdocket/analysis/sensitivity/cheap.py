"""P-values that are cheap enough for a table of many: counted within a small budget, by series, or from few draws."""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from types import MappingProxyType
from typing import Final

from rankdocket.analysis.filing import filed
from rankdocket.analysis.sensitivity.table import RowP
from rankdocket.stats.choose_null import Budget, NullChoice, choose_null, exact_null_of
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.draws import stream
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.null import TailShares
from rankdocket.stats.nulls.monte_carlo import DrawingPlan, DrawnNull, LookQuestion, drawn_null
from rankdocket.stats.nulls.series import series_tails
from rankdocket.stats.ranks import Codes, TieGroups, tie_groups
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.study.spec import StudySpec
from rankdocket.vocabulary import CoefficientName, Direction

DRAWS: Final = 9_999
"""Permutations drawn for one row of the table; they are looked at once."""

RESAMPLES: Final = 1_999
"""Resamples of a bootstrap interval in the table."""

SMALL_BUDGET: Final = Budget(50_000_000, 2**28)
"""What one null of the table may be forecast to cost: a twentieth of a second, 256 MiB."""

NO_SEED: Final = "needs drawn permutations and the plan states no seed"

TOO_MANY: Final = "would need draws from more rows than this table draws from"

MOST_ROWS: Final[Mapping[CoefficientName, int]] = MappingProxyType({"Spearman rho": 2_000, "Kendall tau-b": 500})
"""Rows of which orders are drawn at most: a matter of seconds."""

PLACE: Final = "sensitivity"
"""The part of a stream’s address that keeps the table’s draws apart from those of the tests."""


@dataclass(frozen=True, slots=True)
class Draws:
    """Where the draws of one association’s table come from.

    Attributes
    ----------
    seed
        As the plan states it; ``None`` without one.
    address
        Study and association.
    """

    seed: int | None
    address: tuple[str, ...]

    def stream_of(self, row: str) -> tuple[str, ...]:
        """Return the address of a row’s own stream."""
        return (*self.address, PLACE, row)

    def plan(self, row: str, name: CoefficientName, n: int, number: int = DRAWS) -> DrawingPlan | NoAnswer:
        """Return how a row draws orders, or resamples, of ``n`` rows of the data; or why it does not."""
        if self.seed is None:
            return NoAnswer(NO_SEED)
        if n > MOST_ROWS[name]:
            return NoAnswer(TOO_MANY)
        return DrawingPlan(number, number, stream(self.seed, *self.stream_of(row)))


def draws_of(name: str, spec: StudySpec) -> Draws:
    """Return where the draws of an association’s table come from."""
    return Draws(spec.inference.p_value.seed, (spec.study.number, name))


def coefficient_of(name: CoefficientName, x_codes: Codes, y_codes: Codes) -> Coefficient:
    """Return the coefficient of that name."""
    return rho(x_codes, y_codes) if name == "Spearman rho" else tau_b(x_codes, y_codes)


def cheap_choice(name: CoefficientName, x: TieGroups, y: TieGroups) -> NullChoice:
    """Return the null for rows with these ties within the small budget."""
    return choose_null(name, x, y, "exact when possible", SMALL_BUDGET)


def drawn(name: CoefficientName, rows: tuple[Codes, Codes], observed: int, plan: DrawingPlan) -> DrawnNull:
    """Return the null of a row’s draws, looked at once."""
    # Without levels to be held against, one look is taken.
    question = LookQuestion("two-sided", Decimal("0.95"), ())
    return drawn_null(name, *rows, observed=observed, plan=plan, question=question)


def cheap_p(
    coefficient: Coefficient, rows: tuple[Codes, Codes], direction: Direction, draws: Draws, row: str
) -> RowP | NoAnswer:
    """Return the p-value of a coefficient of these rows.

    Parameters
    ----------
    coefficient
        Defined.
    rows
        Codes of x and of y.
    direction
        Which tail counts.
    draws, row
        Where draws come from, and the row of the table that asks for them.
    """
    x, y = (tie_groups(codes) for codes in rows)
    choice = cheap_choice(coefficient.name, x, y)
    if choice.route == "series":
        tails: TailShares = series_tails(coefficient.n, coefficient.numerator)
        # A share is its twelve digits, as that of a test is.
        return RowP(Fraction(filed(tails.p(direction))), tails.method)
    if choice.route in ("counted beforehand", "whole"):
        counted = exact_null_of(coefficient.name, x, y).tails(coefficient.numerator)
        return RowP(counted.p(direction), counted.method)
    plan = draws.plan(row, coefficient.name, coefficient.n)
    if isinstance(plan, NoAnswer):
        return plan
    found = drawn(coefficient.name, rows, coefficient.numerator, plan).tails
    return RowP(found.p(direction), found.method, found.of, draws.stream_of(row))
