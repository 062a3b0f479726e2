"""Prints what the nulls of rho with ties cost on this machine beside their forecasts: python tests/benchmarks/tied.py

Times are processor seconds, the least of up to three runs; a ratio is measured over forecast.  Nothing here is
asserted, and pytest does not collect it.
"""

import sys
import time
import tracemalloc
from collections.abc import Callable, Iterator
from pathlib import Path

import numpy as np

sys.path.insert(0, str(Path(__file__).resolve().parents[2] / "src"))

from rankdocket.stats.forecast import Forecast
from rankdocket.stats.nulls.rho_exact import rho_null
from rankdocket.stats.nulls.tied_cost import cheaper_deal, usual_limit
from rankdocket.stats.nulls.tied_doubles import rho_shares, rho_tails_doubles
from rankdocket.stats.nulls.tied_forecast import forecast_rho, forecast_shares, forecast_tails
from rankdocket.stats.nulls.tied_integers import rho_tails_integers
from rankdocket.stats.nulls.tied_meeting import is_symmetric
from rankdocket.stats.ranks import TieGroups

Ask = Callable[[TieGroups, TieGroups], Forecast]

RUN_BELOW = 4.0
"""Forecast seconds above which a null is not run here."""

KINDS: dict[str, Ask] = {
    "tails, whole numbers": lambda x, y: forecast_tails(x, y, "whole numbers"),
    "tails, doubles": lambda x, y: forecast_tails(x, y, "doubles"),
    "whole, whole numbers": forecast_rho,
    "whole, doubles": forecast_shares,
}


def untied(n: int) -> TieGroups:
    return TieGroups((1,) * n)


def one_tie(n: int) -> TieGroups:
    return TieGroups((2, *[1] * (n - 2)))


def drawn(generator: np.random.Generator, classes: int, n: int) -> TieGroups:
    """Return unequal classes as they come by chance."""
    _, sizes = np.unique(generator.integers(0, classes, n), return_counts=True)
    return TieGroups(tuple(sizes.tolist()))


def both_drawn(classes: int, n: int) -> tuple[TieGroups, TieGroups]:
    generator = np.random.default_rng(7)
    return drawn(generator, classes, n), drawn(generator, classes, n)


def patterns() -> Iterator[tuple[str, TieGroups, TieGroups]]:
    for n in range(12, 18):
        yield f"one tie, untied, {n}", one_tie(n), untied(n)
    yield "one tie, untied, 18", one_tie(18), untied(18)
    for n in (30, 60):
        yield f"3 classes, untied, {n}", both_drawn(3, n)[0], untied(n)
    for classes, n in ((3, 60), (3, 100), (4, 40), (4, 60), (5, 30), (5, 40), (7, 25)):
        yield f"{classes}x{classes}, {n}", *both_drawn(classes, n)
    yield "5x5 equal, 60", TieGroups((12,) * 5), TieGroups((12,) * 5)
    yield "zero-heavy, 40", TieGroups((25, 6, 4, 3, 1, 1)), TieGroups((28, 5, 3, 2, 1, 1))
    yield "zero-heavy, 100", TieGroups((70, 12, 8, 6, 4)), TieGroups((80, 10, 6, 4))
    yield "all pairs tied, 20", TieGroups((2,) * 10), TieGroups((2,) * 10)
    yield "binary, untied, 200", TieGroups((90, 110)), untied(200)
    yield "binary, binary, 1000", TieGroups((400, 600)), TieGroups((300, 700))
    yield "binary, 5 classes, 100", TieGroups((40, 60)), TieGroups((10, 20, 30, 15, 25))


def main() -> None:
    print("seconds (s), measured over forecast seconds (r) and bytes (b); in brackets a forecast that was not run")
    print(f"{'':<24}{'tails':>6}" + "".join(f"{kind:>24}" for kind in KINDS))
    for name, x, y in patterns():
        print(f"{name:<24}{1 if is_symmetric(x, y) else 2:>6}" + "".join(_cells(x, y)), flush=True)
    print("\nThe largest n whose forecast lies within a budget (forecasts only)")
    for label, family in (
        ("one tie, untied", lambda n: (one_tie(n), untied(n))),
        ("3 classes, untied", lambda n: (both_drawn(3, n)[0], untied(n))),
        ("5 classes, untied", lambda n: (both_drawn(5, n)[0], untied(n))),
        ("3x3", lambda n: both_drawn(3, n)),
        ("4x4", lambda n: both_drawn(4, n)),
        ("5x5", lambda n: both_drawn(5, n)),
        ("7x7", lambda n: both_drawn(7, n)),
    ):
        for kind, ask in KINDS.items():
            reached = [_boundary(ask, family, seconds) for seconds in (1, 10, 60)]
            print(
                f"  {label:<20}{kind:<24}" + "".join(f"{n:>5} ({size >> 20:>5} MiB)" for n, size in reached), flush=True
            )


def _cells(x: TieGroups, y: TieGroups) -> Iterator[str]:
    plan = cheaper_deal(x, y)
    observed = usual_limit(plan) * plan.unit
    work = (
        lambda: rho_tails_integers(x, y, observed),
        lambda: rho_tails_doubles(x, y, observed),
        lambda: rho_null(x, y),
        lambda: rho_shares(x, y),
    )
    for ask, run in zip(KINDS.values(), work, strict=True):
        forecast = ask(x, y)
        told = forecast.nanoseconds / 1e9
        if told > RUN_BELOW:
            yield f"{f'({told:.1f} s)':>24}"
            continue
        seconds = _seconds(run)
        bytes_ratio = f"{_peak(run) / forecast.bytes:5.2f}b" if seconds < 1 else ""
        yield f"{seconds:>10.3f}s {seconds / told:5.2f}r {bytes_ratio:>6}"


def _seconds(run: Callable[[], object]) -> float:
    least = float("inf")
    for _ in range(3):
        before = time.process_time()
        run()
        least = min(least, time.process_time() - before)
        if least > 1:
            break
    return least


def _peak(run: Callable[[], object]) -> int:
    tracemalloc.start()
    run()
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    return peak


def _boundary(ask: Ask, family: Callable[[int], tuple[TieGroups, TieGroups]], seconds: int) -> tuple[int, int]:
    """Return the largest n within the budget, sought upwards in steps of about a twelfth, and its bytes."""
    n, reached = 8, (8, 0)
    while n <= 1_000:
        forecast = ask(*family(n))
        if forecast.nanoseconds > seconds * 10**9:
            break
        reached = n, forecast.bytes
        n += max(1, n // 12)
    return reached


if __name__ == "__main__":
    main()
