"""Which null is used, and why: tables first, complete counts within the budget, series and draws beyond it."""

from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from typing import Final, Literal, TypeAlias

from rankdocket.stats.forecast import ROWS_LIMIT, Forecast
from rankdocket.stats.null import ExactNull, NullMethod
from rankdocket.stats.nulls.rho_exact import rho_null
from rankdocket.stats.nulls.tau_exact import forecast_tau, tau_null
from rankdocket.stats.nulls.tied_forecast import forecast_rho, forecast_shares, forecast_tails
from rankdocket.stats.nulls.untied import reach, untied_null
from rankdocket.stats.ranks import TieGroups
from rankdocket.vocabulary import CoefficientName, PBy

NULLS_KEPT: Final = 2
"""Nulls remembered, each of them up to the budget's memory: neighbouring associations often share their ties."""

Route: TypeAlias = Literal["counted beforehand", "whole", "tails, whole numbers", "tails, doubles", "series", "draws"]
"""How a null is got, from the surest to the one with the largest error."""

NANOSECONDS: Final = 10**9

WITHIN: Final = "A complete count was made: its forecast lay within the budget."
ONLY_TAILS: Final = (
    "The orderings at least as extreme as the data were counted: the forecast of that lay within the budget, that of the "
    "whole null beyond it."
)
ONLY_DOUBLES: Final = (
    "The orderings at least as extreme as the data were summed up in floating-point numbers: the forecast of that lay "
    "within the budget, that of a count in whole numbers beyond it."
)
BEYOND: Final = "A complete count was not attempted: its forecast exceeded the budget."
TOO_MANY_ROWS: Final = "A complete count was not attempted: there are more rows than are counted one and all."
"""Why a null was chosen, as the report says it."""


@dataclass(frozen=True, slots=True)
class Budget:
    """What a null may be forecast to cost: processor time and memory, both above 0."""

    nanoseconds: int
    bytes: int

    def less(self, spent: Forecast | None) -> "Budget":
        """Return the time that is left after a forecast has been spent; memory is free again."""
        return self if spent is None else Budget(self.nanoseconds - spent.nanoseconds, self.bytes)

    def holds(self, forecast: Forecast) -> bool:
        """Return whether a forecast stays within the budget."""
        return forecast.nanoseconds <= self.nanoseconds and forecast.bytes <= self.bytes


DEFAULT_BUDGET: Final = Budget(10 * NANOSECONDS, 2**30)
"""Ten seconds and 1 GiB: a report with a handful of associations stays a matter of a minute."""


@dataclass(frozen=True, slots=True)
class NullChoice:
    """The null chosen for one association.

    Attributes
    ----------
    route
        How it is got.
    method
        What is said of its p-values; a series may still hand a small p-value to the saddlepoint.
    reason
        One sentence for the report, without numbers.
    forecast
        The cost of the way taken; ``None`` where nothing needed to be forecast.
    exceeded
        The cost of the cheapest surer way that was not taken because it exceeded the budget; ``None`` if none did.
    """

    route: Route
    method: NullMethod
    reason: str
    forecast: Forecast | None
    exceeded: Forecast | None = None

    @property
    def needs_draws(self) -> bool:
        """Whether permutations must be drawn."""
        return self.route == "draws"


@lru_cache(maxsize=256)
def choose_null(
    name: CoefficientName, x: TieGroups, y: TieGroups, by: PBy, budget: Budget = DEFAULT_BUDGET
) -> NullChoice:
    """Return the null for variables with these tie groups; the answer depends on no clock and no machine."""
    if by == "permutation":
        return NullChoice("draws", "drawn permutations", "The spec asked for drawn permutations.", None)
    if name == "Spearman rho" and not x.has_ties and not y.has_ties:
        return _choose_untied(x.n)
    if x.n > ROWS_LIMIT:
        # Not even forecast: the number of all orderings could no longer be printed or filed.
        return NullChoice("draws", "drawn permutations", TOO_MANY_ROWS, None)
    return _choose(name, x, y, budget)


@lru_cache(maxsize=NULLS_KEPT)
def exact_null_of(name: CoefficientName, x: TieGroups, y: TieGroups) -> ExactNull:
    """Return the exact null for variables with these tie groups, whatever it costs: ask :func:`choose_null` first."""
    match name:
        case "Spearman rho":
            return rho_null(x, y) if x.has_ties or y.has_ties or x.n > reach() else untied_null(x.n)
        case "Kendall tau-b":
            return tau_null(x, y)


def _choose_untied(n: int) -> NullChoice:
    if n <= reach():
        return NullChoice(
            "counted beforehand",
            "exact, no ties",
            "All orderings of so many rows were counted beforehand; the counts come with the program.",
            None,
        )
    return NullChoice(
        "series",
        "Edgeworth series",
        "There are no ties and more rows than the counts that come with the program reach; an approximation with a stated "
        "error takes their place.",
        None,
    )


def _choose(name: CoefficientName, x: TieGroups, y: TieGroups, budget: Budget) -> NullChoice:
    """Return the first way, the surest first, whose forecast stays within the budget; draws if none does."""
    exceeded: list[Forecast] = []
    for route, forecast in _ways(name, x, y):
        if not budget.holds(forecast):
            exceeded.append(forecast)
        elif route == "tails, doubles":
            return NullChoice(route, "exact algorithm, 12 digits", ONLY_DOUBLES, forecast, _cheapest(exceeded))
        else:
            method: NullMethod = "exact, conditional on the ties" if x.has_ties or y.has_ties else "exact, no ties"
            reason = WITHIN if route == "whole" else ONLY_TAILS
            return NullChoice(route, method, reason, forecast, _cheapest(exceeded))
    return NullChoice("draws", "drawn permutations", BEYOND, None, _cheapest(exceeded))


def _ways(name: CoefficientName, x: TieGroups, y: TieGroups) -> Iterator[tuple[Route, Forecast]]:
    """Yield the exact ways with what each would cost, the surest first."""
    match name:
        case "Spearman rho":
            yield "whole", forecast_rho(x, y)
            yield "tails, whole numbers", forecast_tails(x, y, "whole numbers")
            yield "tails, doubles", forecast_tails(x, y, "doubles")
        case "Kendall tau-b":
            yield "whole", forecast_tau(x, y)


def _cheapest(forecasts: list[Forecast]) -> Forecast | None:
    return min(forecasts, key=lambda forecast: forecast.nanoseconds, default=None)


def shares_within(x: TieGroups, y: TieGroups, budget: Budget) -> bool:
    """Return whether rho's whole null in doubles stays within the budget, for critical values and picture."""
    return budget.holds(forecast_shares(x, y))
