"""Forecasts: told from tie-group sizes alone, and true of what is then done."""

import tracemalloc
from collections.abc import Callable

import pytest

from rankdocket.stats.forecast import Forecast
from rankdocket.stats.nulls.rho_exact import rho_null
from rankdocket.stats.nulls.tied_cost import cheaper_deal, usual_limit
from rankdocket.stats.nulls.tied_doubles import rho_shares, rho_tails_doubles
from rankdocket.stats.nulls.tied_forecast import forecast_rho, forecast_shares, forecast_tails
from rankdocket.stats.nulls.tied_integers import rho_tails_integers
from rankdocket.stats.nulls.tied_meeting import Question
from rankdocket.stats.nulls.tied_plan import first_layer, moves, sides
from rankdocket.stats.ranks import TieGroups

PATTERNS = (
    ((2, *[1] * 11), (1,) * 13),
    ((5, 6, 4), (1,) * 15),
    ((17, 25, 18), (20, 24, 16)),
    ((14, 7, 9, 10), (12, 8, 9, 11)),
    ((7, 5, 6, 5, 7), (4, 8, 6, 7, 5)),
    ((2,) * 8, (2,) * 8),
    ((20, 5, 3, 1, 1), (22, 4, 2, 2)),
    ((40, 60), (10, 20, 30, 15, 25)),
)


def _usual(x: TieGroups, y: TieGroups) -> int:
    plan = cheaper_deal(x, y)
    return usual_limit(plan) * plan.unit


@pytest.mark.parametrize(("x", "y"), PATTERNS)
def test_the_states_of_a_tail_are_those_that_the_walks_meet(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """Within a fifth for the tail looked at; the other tail of a skewed null is told to be as large."""
    groups = TieGroups(x), TieGroups(y)
    met, runs = 0, Question(*groups, _usual(*groups)).runs()
    run = runs[0]
    for side, upto in zip(sides(run.plan), (run.meet, run.plan.rows.n - run.meet), strict=True):
        layer, _ = first_layer(run.plan, side, min(upto, side.sizes[0]), run.limit)
        met += len(layer.codes) + sum(len(move.to.codes) for move in moves(run.plan, side, layer, upto, run.limit))
    forecast = forecast_tails(*groups, "doubles")
    assert len(runs) * met / 1.2 < forecast.states < len(runs) * met * 1.2


@pytest.mark.parametrize(("x", "y"), PATTERNS)
@pytest.mark.parametrize("what", ["whole numbers", "doubles", "whole null", "shares"])
def test_memory_stays_near_its_forecast(x: tuple[int, ...], y: tuple[int, ...], what: str) -> None:
    """Never above twice what was told, nor below a fifth of it where it is more than a few MiB."""
    groups = TieGroups(x), TieGroups(y)
    forecasts: dict[str, tuple[Forecast, Callable[[], object]]] = {
        "whole numbers": (
            forecast_tails(*groups, "whole numbers"),
            lambda: rho_tails_integers(*groups, _usual(*groups)),
        ),
        "doubles": (forecast_tails(*groups, "doubles"), lambda: rho_tails_doubles(*groups, _usual(*groups))),
        "whole null": (forecast_rho(*groups), lambda: rho_null(*groups)),
        "shares": (forecast_shares(*groups), lambda: rho_shares(*groups)),
    }
    forecast, work = forecasts[what]
    tracemalloc.start()
    work()
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    assert peak < 2 * forecast.bytes
    assert forecast.bytes < max(5 * peak, 2**22)


def test_a_forecast_is_whole_numbers_however_large() -> None:
    """1,000 untied rows: 2**1000 states, told in full and not cut off."""
    untied = TieGroups((1,) * 1_000)
    for forecast in (
        forecast_rho(untied, untied),
        forecast_shares(untied, untied),
        forecast_tails(untied, untied, "doubles"),
        forecast_tails(untied, untied, "whole numbers"),
    ):
        assert forecast.states == 2**1_000
        assert all(isinstance(part, int) for part in (forecast.states, forecast.nanoseconds, forecast.bytes))
        assert forecast.nanoseconds > forecast.states
        assert forecast.bytes > forecast.states


def test_more_of_the_same_costs_more() -> None:
    """One more untied row, one more class, a larger class: each raises every part of every forecast."""
    steps = (
        [((2, *[1] * (n - 2)), (1,) * n) for n in (10, 12, 14, 16, 18)],
        [((m, m, m), (m, m, m)) for m in (10, 20, 40, 80)],
        [((24 // c,) * c, (24 // c,) * c) for c in (2, 3, 4, 6)],
    )
    for step in steps:
        for forecast in (
            forecast_rho,
            forecast_shares,
            lambda x, y: forecast_tails(x, y, "doubles"),
            lambda x, y: forecast_tails(x, y, "whole numbers"),
        ):
            told = [forecast(TieGroups(x), TieGroups(y)) for x, y in step]
            assert [one.nanoseconds for one in told] == sorted(one.nanoseconds for one in told)
            assert [one.states for one in told] == sorted(one.states for one in told)
            assert told[-1].bytes > told[0].bytes


def test_a_forecast_looks_at_both_sides_of_a_skewed_null() -> None:
    """Where the ties of neither variable mirror themselves, two tails are counted."""
    skewed = forecast_tails(TieGroups((9, 4, 2)), TieGroups((8, 5, 2)), "whole numbers")
    mirrored = forecast_tails(TieGroups((9, 4, 2)), TieGroups((5, 5, 5)), "whole numbers")
    assert skewed.nanoseconds > mirrored.nanoseconds
