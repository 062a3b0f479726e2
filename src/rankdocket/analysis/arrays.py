"""The answer for people who have two sequences and no spec: :func:`associate`."""

from collections.abc import Iterable
from dataclasses import dataclass
from decimal import Decimal, InvalidOperation
from fractions import Fraction
from functools import lru_cache
from math import ceil, isfinite
from typing import Final, TypeAlias

import numpy as np

from rankdocket.stats.attainable import tails_at_limit
from rankdocket.stats.choose_null import NANOSECONDS, Budget, NullChoice, choose_null
from rankdocket.stats.coefficient import FEWEST_ROWS, Coefficient
from rankdocket.stats.comparisons import pearson_r, t_value_p
from rankdocket.stats.draws import stream
from rankdocket.stats.interval import Interval, IntervalQuestion, NoInterval
from rankdocket.stats.intervals import interval_of
from rankdocket.stats.null import TailCounts, Tails
from rankdocket.stats.null_result import NullQuestion, NullResult, null_result
from rankdocket.stats.nulls.monte_carlo import DrawingPlan
from rankdocket.stats.ranks import Codes, TieGroups, dense_codes, tie_groups
from rankdocket.stats.rho import rho, short_form, squared_differences
from rankdocket.stats.tau import tau_b

Exact: TypeAlias = int | Fraction | Decimal

MOST_SECONDS: Final = Decimal(10**9)
MOST_BYTES: Final = Decimal(2**60)
"""A larger budget is none."""

TAILS_KEPT: Final = 8
"""Results whose tails are remembered."""


@dataclass(frozen=True, slots=True)
class ArrayAssociation:
    """How two sequences are associated.

    Attributes
    ----------
    n_rows, n
        Positions given; positions at which both values are present.
    reason
        Why there is no coefficient, as a sentence; ``None`` when there is one.
    coefficient
        Spearman rho as integers.
    tau
        Kendall tau-b as integers.
    x_codes, y_codes
        The complete values as codes in their order.
    pearson_r
        Product-moment correlation of the values, for comparison; ``None`` when undefined.
    level, permutations, most_draws, seed
        As asked.
    budget
        What an exact null may be forecast to cost; ``None`` when the one asked for was not positive, and then there
        is no p-value.
    """

    n_rows: int
    n: int
    reason: str | None
    coefficient: Coefficient
    tau: Coefficient
    x_codes: tuple[int, ...]
    y_codes: tuple[int, ...]
    pearson_r: float | None
    level: Decimal
    permutations: int
    most_draws: int
    seed: int | None
    budget: Budget | None

    @property
    def rho(self) -> float | None:
        """Spearman rho as the nearest double."""
        return None if self.reason else self.coefficient.value

    @property
    def rho_text(self) -> str | None:
        """Spearman rho with twelve significant digits, half to even."""
        return None if self.reason else self.coefficient.decimal_text()

    @property
    def tau_b(self) -> float | None:
        """Kendall tau-b as the nearest double."""
        return None if self.reason else self.tau.value

    @property
    def x_has_ties(self) -> bool:
        """Whether two complete rows share a value of x."""
        return self._x_groups.has_ties

    @property
    def y_has_ties(self) -> bool:
        """Whether two complete rows share a value of y."""
        return self._y_groups.has_ties

    @property
    def sum_squared_differences(self) -> Fraction:
        """Sum of squared differences between the midranks."""
        return squared_differences(_array(self.x_codes), _array(self.y_codes))

    @property
    def short_form(self) -> Fraction | None:
        """The formula that is rho only without ties, for comparison."""
        return None if self.reason else short_form(self.n, self.sum_squared_differences)

    @property
    def p_t(self) -> float | None:
        """Two-sided p-value of the t approximation, for comparison."""
        return None if self.reason else t_value_p(self.coefficient, "two-sided")

    @property
    def null_reason(self) -> str | None:
        """Why there is no p-value, as a sentence; ``None`` when there is one."""
        if self.reason:
            return self.reason
        if self.budget is None:
            return "The budget of the null is not positive."
        choice = self.null_choice
        if choice is not None and choice.needs_draws and self.seed is None and _at_limit(self) is None:
            return "The p-value needs drawn permutations, and no seed was given."
        return None

    @property
    def exact(self) -> TailCounts | None:
        """Exact tails of rho; ``None`` when there is no p-value or a complete count is beyond the budget."""
        return None if self.null_reason else _exact_tails(self)

    @property
    def null_choice(self) -> NullChoice | None:
        """Which null would be used, and why; data at a limit of the attainable range need none."""
        if self.reason or self.budget is None:
            return None
        return choose_null("Spearman rho", self._x_groups, self._y_groups, "exact when possible", self.budget)

    @property
    def null(self) -> NullResult | None:
        """Tails, critical values at 1 − ``level`` and what belongs to them; ``None`` without a p-value.

        ``None`` as well where the p-value of data at a limit of the attainable range is known without the null, and
        drawing the null would need a seed.
        """
        choice = self.null_choice
        if self.null_reason or choice is None or (choice.needs_draws and self.seed is None):
            return None
        return _null(self)

    @property
    def tails(self) -> Tails | None:
        """The tails of rho, from the surest null within the budget; ``None`` without a p-value."""
        if self.null_reason:
            return None
        null = None if self.exact else self.null
        return self.exact if null is None else null.tails

    @property
    def p(self) -> Fraction | None:
        """Two-sided p-value from :attr:`tails`."""
        tails = self.tails
        return None if tails is None else tails.p("two-sided")

    @property
    def interval(self) -> Interval | NoInterval:
        """Two-sided interval for rho at ``level``, or why there is none."""
        return interval_of(
            IntervalQuestion(self.coefficient, _array(self.x_codes), _array(self.y_codes), self.level, "two-sided")
        )

    @property
    def _x_groups(self) -> TieGroups:
        return tie_groups(_array(self.x_codes))

    @property
    def _y_groups(self) -> TieGroups:
        return tie_groups(_array(self.y_codes))


def associate(  # noqa: PLR0913 - options of a public function, given by name
    x: Iterable[object],
    y: Iterable[object],
    *,
    level: Decimal | str | float = 0.95,
    permutations: int = 20_000,
    most_draws: int | None = None,
    seed: int | None = None,
    budget_seconds: Decimal | float = 10,
    budget_memory: int = 2**30,
) -> ArrayAssociation:
    """Return how two sequences of numbers are associated by rank.

    Rows with a missing value (``None`` or not-a-number) are left out first, ranks are taken second.  Values are
    ordered by their exact worth: a float by its binary value, a ``Decimal`` by its decimal one.

    Parameters
    ----------
    x, y
        Lists, arrays, series: numbers in the same order of rows.
    level
        Of the interval, above 0, below 1; a float is read as the shortest decimal that means it.
    permutations, most_draws, seed
        For a null that has to be drawn: draws to begin with, ceiling of draws while their error leaves the side of
        1 − ``level`` open (no more than ``permutations`` by default), start of the random stream; without a seed
        nothing is drawn, and a p-value that would need it is not given.
    budget_seconds, budget_memory
        Processor seconds and bytes that an exact null may be forecast to take; where they are not above 0 there is
        no p-value, and ``null_reason`` says so.

    Raises
    ------
    ValueError
        If the lengths differ, a value is infinite, or another option is out of range or no number.
    TypeError
        If a value is no number, or a count of draws or a seed no whole number.
    """
    chosen_level = _decimal(level, "level")
    if chosen_level.is_nan() or not 0 < chosen_level < 1:
        raise ValueError(f"level must lie between 0 and 1, not be {level}")
    for name, number in (("permutations", permutations), ("most_draws", most_draws), ("seed", seed)):
        if number is not None and not isinstance(number, int):
            raise TypeError(f"{name} must be a whole number, not {number!r}")
    if permutations < 1 or (seed is not None and seed < 0) or (most_draws is not None and most_draws < permutations):
        raise ValueError("permutations must be at least 1, most_draws no fewer, and seed at least 0")
    left, right = _numbers(x, "x"), _numbers(y, "y")
    if len(left) != len(right):
        raise ValueError(f"x has {len(left)} values and y has {len(right)}")
    rows = [(a, b) for a, b in zip(left, right, strict=True) if a is not None and b is not None]
    x_values, y_values = [a for a, _ in rows], [b for _, b in rows]
    x_codes, y_codes = dense_codes(x_values), dense_codes(y_values)
    coefficient = rho(x_codes, y_codes)
    return ArrayAssociation(
        n_rows=len(left),
        n=len(rows),
        reason=_reason(coefficient),
        coefficient=coefficient,
        tau=tau_b(x_codes, y_codes),
        x_codes=tuple(x_codes.tolist()),
        y_codes=tuple(y_codes.tolist()),
        pearson_r=pearson_r(np.array(x_values, dtype=np.float64), np.array(y_values, dtype=np.float64)),
        level=chosen_level,
        permutations=permutations,
        most_draws=permutations if most_draws is None else most_draws,
        seed=seed,
        budget=_budget(budget_seconds, budget_memory),
    )


def _budget(seconds: Decimal | float, memory: int) -> Budget | None:
    """Return the budget, or ``None`` when there is nothing to spend."""
    time, room = _decimal(seconds, "budget_seconds"), _decimal(memory, "budget_memory")
    if time.is_nan() or room.is_nan() or time <= 0 or room <= 0:
        return None
    return Budget(ceil(min(time, MOST_SECONDS) * NANOSECONDS), ceil(min(room, MOST_BYTES)))


def _decimal(value: object, name: str) -> Decimal:
    try:
        return Decimal(str(value))
    except InvalidOperation:
        raise ValueError(f"{name} must be a number, not {value!r}") from None


def _at_limit(result: ArrayAssociation) -> TailCounts | None:
    x, y = (tie_groups(_array(codes)) for codes in (result.x_codes, result.y_codes))
    return tails_at_limit(x, y, result.coefficient)


@lru_cache(maxsize=TAILS_KEPT)
def _exact_tails(result: ArrayAssociation) -> TailCounts | None:
    at_limit = _at_limit(result)
    if at_limit is not None:
        return at_limit
    choice = result.null_choice
    if choice is None or choice.route in ("draws", "series", "tails, doubles"):
        return None
    null = _null(result)
    return null.tails if isinstance(null.tails, TailCounts) else None


@lru_cache(maxsize=TAILS_KEPT)
def _null(result: ArrayAssociation) -> NullResult:
    choice, budget = result.null_choice, result.budget
    assert choice is not None
    assert budget is not None
    alpha = 1 - Fraction(result.level)
    drawing = None
    if result.seed is not None:
        drawing = DrawingPlan(result.permutations, result.most_draws, stream(result.seed, "arrays", "rho", "null"))
    return null_result(
        choice,
        (_array(result.x_codes), _array(result.y_codes)),
        NullQuestion(result.coefficient, "two-sided", alpha, (alpha,), result.level),
        budget,
        drawing,
    )


def _reason(coefficient: Coefficient) -> str | None:
    if coefficient.n < FEWEST_ROWS:
        return "There are fewer than three complete rows."
    if coefficient.x_square == 0 and coefficient.y_square == 0:
        return "Neither variable varies among the complete rows."
    if coefficient.x_square == 0:
        return "The first variable does not vary among the complete rows."
    if coefficient.y_square == 0:
        return "The second variable does not vary among the complete rows."
    return None


def _array(codes: tuple[int, ...]) -> Codes:
    return np.asarray(codes, dtype=np.int64)


def _numbers(values: Iterable[object], name: str) -> list[Exact | None]:
    return [_number(value, f"the value at position {position} of {name}") for position, value in enumerate(values)]


def _number(value: object, where: str) -> Exact | None:
    """Return a number at its exact worth, ``None`` for a missing one."""
    plain = value.item() if isinstance(value, np.generic) else value
    if plain is None or _differs_from_itself(plain):
        return None
    if isinstance(plain, (int, Fraction)):
        return int(plain) if isinstance(plain, int) else plain
    if isinstance(plain, (Decimal, float)):
        if not (plain.is_finite() if isinstance(plain, Decimal) else isfinite(plain)):
            raise ValueError(f"{where} is infinite")
        return plain if isinstance(plain, Decimal) else Fraction(plain)
    raise TypeError(f"{where} is {plain!r}, not a number")


def _differs_from_itself(value: object) -> bool:
    """Whether it is not-a-number; a missing-value mark that refuses to say counts as such."""
    try:
        return bool(value != value)  # noqa: PLR0124
    except TypeError:
        return True
