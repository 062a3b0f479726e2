"""From which coefficient on the finding is "shown": a bound on integers, found once for each pattern of ties.

The rule of the plan falls from shown to not shown as p rises, whatever the adjustment; so each null has a least extreme
numerator that it still shows.  Thousands of subsets of the rows are then compared with such bounds and get no p each.
"""

from collections.abc import Callable
from dataclasses import dataclass, field
from fractions import Fraction
from itertools import accumulate
from math import sqrt
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.analysis.decide import DecisionRule
from rankdocket.analysis.filing import filed
from rankdocket.analysis.sensitivity.cheap import Draws, cheap_choice, drawn
from rankdocket.stats.choose_null import NullChoice, exact_null_of
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.influence import WithoutEach
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.nulls.series import STEP, series_tails
from rankdocket.stats.outline import NullOutline, outline_of
from rankdocket.stats.ranks import Codes, TieGroups, tie_groups
from rankdocket.vocabulary import CoefficientName, Direction, FindingWord

NEAR: Final = 0.05
"""A standardised coefficient that lies nearer to the bound of all rows than this share gets the null of its own rows."""

MOST_FORECAST: Final = 500_000_000
"""Nanoseconds that the nulls of single subsets may be forecast to cost together, for one association."""

MOST_OWN_ROWS: Final = 200
"""With more rows and ties no null is cheap, and none is forecast."""

NOT_OWN: Final = "its null would cost more than the table spends"

Shows: TypeAlias = Callable[[Fraction], bool]
Ties: TypeAlias = tuple[TieGroups, TieGroups]


@dataclass(frozen=True, slots=True, eq=False)
class Threshold:
    """Where the finding of one association changes.

    Attributes
    ----------
    rule, direction
        What decides, and the tail that counts.
    bound
        The standardised coefficient, without sign, from which on all rows together would show it; infinite when none
        would.
    """

    rule: DecisionRule
    name: CoefficientName
    direction: Direction
    bound: float
    _of_ties: dict[Ties | int, int | NoAnswer | None] = field(default_factory=dict)
    _spent: list[int] = field(default_factory=lambda: [0])

    def finding(self, coefficient: Coefficient, ties: Callable[[], Ties]) -> FindingWord:
        """Return the finding of rows with this coefficient; their ties are asked for near the bound only."""
        if not coefficient.is_defined:
            return "not estimable"
        size = self._outward(coefficient.numerator)
        shown = size > 0 and self._is_shown(coefficient, size, ties)
        return self._word(coefficient.numerator, shown=shown)

    def may_differ(self, without: WithoutEach, n: int, before: FindingWord) -> npt.NDArray[np.bool_]:
        """Return for each coefficient, of ``n`` rows, whether its finding may differ from ``before``.

        The others are defined, clear of the bound, and on the side of ``before``.
        """
        square = without.x_square.astype(np.float64) * without.y_square.astype(np.float64)
        z = without.numerator / np.sqrt(np.maximum(square, 1.0)) * sqrt(scale_of(self.name, n))
        outward = np.abs(z) if self.direction == "two-sided" else z if self.direction == "greater" else -z
        shown, not_shown = outward > self.bound * (1 + NEAR), outward < self.bound * (1 - NEAR)
        settled = (
            (not_shown & (before == "not shown"))
            | (shown & (z > 0) & (before == self._word(1, shown=True)))
            | (shown & (z < 0) & (before == self._word(-1, shown=True)))
        )
        differ: npt.NDArray[np.bool_] = ~(settled & without.is_defined) | self._is_tiny(n)
        return differ

    def _is_tiny(self, n: int) -> bool:
        """Return whether so few rows are left that the bound of more rows says little about them."""
        return n < FEWEST_SCALED

    def _word(self, numerator: int, *, shown: bool) -> FindingWord:
        return self.rule.word(Fraction(0), positive=numerator > 0) if shown else "not shown"

    def _outward(self, numerator: int) -> int:
        """Return how far a numerator lies in the direction of the test."""
        return {"two-sided": abs(numerator), "greater": numerator, "less": -numerator}[self.direction]

    def _is_shown(self, coefficient: Coefficient, size: int, ties: Callable[[], Ties]) -> bool:
        n = coefficient.n
        z = size / sqrt(coefficient.x_square * coefficient.y_square) * sqrt(scale_of(self.name, n))
        if abs(z / self.bound - 1) > NEAR and not self._is_tiny(n):
            return z > self.bound
        if is_untied(coefficient):
            key: Ties | int = n
        elif n > MOST_OWN_ROWS:
            return z >= self.bound
        else:
            key = ties()
        if key not in self._of_ties:
            groups = (TieGroups((1,) * n),) * 2 if isinstance(key, int) else key
            choice = cheap_choice(self.name, *groups)
            cost = 0 if choice.forecast is None else choice.forecast.nanoseconds
            has_own = choice.route in OWN_NULLS and self._spent[0] + cost <= MOST_FORECAST
            self._spent[0] += cost if has_own else 0
            self._of_ties[key] = (
                own_bound(self._shows, self.name, self.direction, choice, groups) if has_own else NoAnswer(NOT_OWN)
            )
        own = self._of_ties[key]
        if isinstance(own, NoAnswer):
            return z >= self.bound
        return own is not None and size >= own

    def _shows(self, p: Fraction) -> bool:
        return shows(self.rule, p)


FEWEST_SCALED: Final = 10
"""Below so many rows the steps of the null are so coarse that a bound is not carried over from other rows."""

OWN_NULLS: Final = ("counted beforehand", "whole", "series")
"""Ways to a null that subsets may have of their own."""


def is_untied(coefficient: Coefficient) -> bool:
    """Return whether neither variable of a coefficient had ties."""
    n = coefficient.n
    most = (n**3 - n) // 3 if coefficient.name == "Spearman rho" else n * (n - 1) // 2
    return coefficient.x_square == coefficient.y_square == most


def shows(rule: DecisionRule, p: Fraction) -> bool:
    """Return whether the plan calls an association with this p-value shown, on either side."""
    return rule.word(p, positive=True) != "not shown"


def scale_of(name: CoefficientName, n: int) -> float:
    """Return one over the variance of the coefficient under its null without ties; ``n`` at least 2.

    With ties the variance of rho is the same; that of tau-b is near it, and subsets share it with all rows.
    """
    return n - 1 if name == "Spearman rho" else 9 * n * (n - 1) / (2 * (2 * n + 5))


def threshold_of(
    rule: DecisionRule, rows: tuple[Codes, Codes], observed: Coefficient, direction: Direction, draws: Draws
) -> Threshold | NoAnswer:
    """Return where the finding changes, from the null of all rows: counted, by series, or drawn."""
    ties = (tie_groups(rows[0]), tie_groups(rows[1]))
    choice = cheap_choice(observed.name, *ties)

    def shown(p: Fraction) -> bool:
        return shows(rule, p)

    if choice.route in OWN_NULLS:
        least = own_bound(shown, observed.name, direction, choice, ties)
    else:
        plan = draws.plan("all rows", observed.name, observed.n)
        if isinstance(plan, NoAnswer):
            return plan
        found = drawn(observed.name, rows, observed.numerator, plan)
        outline = NullOutline("drawn permutations", found.statistics, tuple(found.hits.tolist()), found.tails.of)
        least = least_shown(outline, direction, shown)
    root = sqrt(observed.x_square * observed.y_square)
    bound = float("inf") if least is None else least / root * sqrt(scale_of(observed.name, observed.n))
    return Threshold(rule, observed.name, direction, bound)


def own_bound(shown: Shows, name: CoefficientName, direction: Direction, choice: NullChoice, ties: Ties) -> int | None:
    """Return the least numerator outward that rows with these ties show; ``None`` if they show none."""
    if choice.route == "series":
        return _least_of_series(ties[0].n, direction, shown)
    return least_shown(outline_of(exact_null_of(name, *ties)), direction, shown)


def least_shown(outline: NullOutline, direction: Direction, shown: Shows) -> int | None:
    """Return the least numerator outward whose p-value is shown; ``None`` if there is none above 0."""
    weights: dict[int, int] = {}
    for statistic, weight in zip(outline.statistics.tolist(), outline.weights, strict=True):
        size = {"two-sided": abs(statistic), "greater": statistic, "less": -statistic}[direction]
        weights[size] = weights.get(size, 0) + int(weight)
    sizes = sorted(weights, reverse=True)
    sums = list(accumulate(weights[size] for size in sizes))
    place = _last_shown(len(sizes), lambda at: shown(outline.p(sums[at])))
    return None if place is None or sizes[place] <= 0 else sizes[place]


def _least_of_series(n: int, direction: Direction, shown: Shows) -> int | None:
    largest = (n**3 - n) // 3
    tail: Direction = "two-sided" if direction == "two-sided" else "greater"
    place = _last_shown(
        (largest - 1) // STEP + 1,
        lambda at: shown(Fraction(filed(series_tails(n, largest - STEP * at).p(tail)))),
    )
    return None if place is None else largest - STEP * place


def _last_shown(length: int, is_shown_at: Callable[[int], bool]) -> int | None:
    """Return the last of ``length`` places, from the outermost in, that is shown; the shown ones come first."""
    reaches, fails = -1, length
    while fails - reaches > 1:
        middle = (reaches + fails) // 2
        if is_shown_at(middle):
            reaches = middle
        else:
            fails = middle
    return None if reaches < 0 else reaches
