"""Which null is used, and why: complete enumeration as long as its forecast stays within the budgets."""

from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from rankdocket.canonical import LARGEST_INTEGER
from rankdocket.errors import ComputeError
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.forecast import ROWS_LIMIT, Forecast
from rankdocket.stats.null import ExactNull, NullMethod, TailCounts
from rankdocket.stats.nulls.monte_carlo import Draws, drawn_tails
from rankdocket.stats.nulls.rho_exact import forecast_rho, rho_null
from rankdocket.stats.nulls.tau_exact import forecast_tau, tau_null
from rankdocket.stats.ranks import Codes, TieGroups, tie_groups
from rankdocket.vocabulary import CoefficientName, PBy

OPERATIONS_BUDGET: Final = 3_000_000_000
"""Operations of an exact count: 2 to 3 s, at the 0.7 to 1.2 ns each that were measured for rho on one core."""

BYTES_BUDGET: Final = 256 * 2**20
"""Memory of an exact count."""

NULLS_KEPT: Final = 16
"""Nulls remembered: the tails and the figure of one association need the same one."""


@dataclass(frozen=True, slots=True)
class NullChoice:
    """The null chosen for one association.

    Attributes
    ----------
    reason
        One sentence for the report, without numbers.
    forecast
        The cost of the exact count, in numbers below 2**53; ``None`` when it was too large to forecast in detail.
    """

    method: NullMethod
    reason: str
    forecast: Forecast | None

    @property
    def needs_draws(self) -> bool:
        """Whether permutations must be drawn."""
        return self.method == "drawn permutations"


def choose_null(name: CoefficientName, x: TieGroups, y: TieGroups, by: PBy) -> NullChoice:
    """Return the null for variables with these tie groups; the answer depends on no clock and no machine."""
    forecast = _forecast(name, x, y)
    if by == "permutation":
        return NullChoice("drawn permutations", "The spec asked for drawn permutations.", forecast)
    if forecast is None:
        return NullChoice(
            "drawn permutations",
            "A complete count was not attempted: it was too large even to be forecast in detail.",
            forecast,
        )
    if forecast.operations > OPERATIONS_BUDGET or forecast.bytes > BYTES_BUDGET:
        return NullChoice(
            "drawn permutations",
            "A complete count was not attempted: its forecast exceeded the program’s limits of time and memory.",
            forecast,
        )
    return NullChoice(
        "exact, conditional on the ties" if x.has_ties or y.has_ties else "exact, no ties",
        "A complete count was made: its forecast lay within the program’s limits of time and memory.",
        forecast,
    )


@lru_cache(maxsize=NULLS_KEPT)
def exact_null_of(name: CoefficientName, x: TieGroups, y: TieGroups) -> ExactNull:
    """Return the exact null for variables with these tie groups, whatever it costs: ask :func:`choose_null` first."""
    match name:
        case "Spearman rho":
            return rho_null(x, y)
        case "Kendall tau-b":
            return tau_null(x, y)


def count_tails(
    choice: NullChoice, x_codes: Codes, y_codes: Codes, *, observed: Coefficient, draws: Draws | None
) -> TailCounts:
    """Return the tails of the chosen null at the observed coefficient.

    Raises
    ------
    ComputeError
        If permutations must be drawn and ``draws`` is ``None``.
    """
    if choice.needs_draws:
        if draws is None:
            raise ComputeError("The p-value needs drawn permutations, and none were provided for.")
        return drawn_tails(observed.name, x_codes, y_codes, observed=observed.numerator, draws=draws)
    return exact_null_of(observed.name, tie_groups(x_codes), tie_groups(y_codes)).tails(observed.numerator)


def _forecast(name: CoefficientName, x: TieGroups, y: TieGroups) -> Forecast | None:
    if x.n > ROWS_LIMIT:
        return None
    match name:
        case "Spearman rho":
            forecast = forecast_rho(x, y)
        case "Kendall tau-b":
            forecast = forecast_tau(x, y)
    if forecast is None or max(forecast.operations, forecast.bytes) > LARGEST_INTEGER:
        return None
    return forecast
