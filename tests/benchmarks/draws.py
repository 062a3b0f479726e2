"""Prints what drawn and counted nulls cost on this machine: python tests/benchmarks/draws.py

Processor seconds, the least of three; they depend on the machine, the ratios travel better.  Nothing here is asserted,
and pytest does not collect it.
"""

import time
from collections.abc import Callable
from decimal import Decimal

import numpy as np
from scipy import stats

from rankdocket.stats.draws import stream
from rankdocket.stats.nulls.monte_carlo import DrawingPlan, LookQuestion, drawn_null
from rankdocket.stats.nulls.tau_exact import forecast_tau, tau_null
from rankdocket.stats.ranks import TieGroups

REPEATS = 3
ROWS = (30, 100, 1_000)
TOGETHER = 2**17
"""Values that scipy holds at a time: its fastest of the powers of two that were tried."""

NO_LEVELS = LookQuestion("two-sided", Decimal("0.95"), ())

UNTIED = (30, 60, 100, 200, 400, 600, 700)
ONE_TIED = ((30, 30), (50, 50), (100, 100), (200, 200), (5,) * 20, (2,) * 50, (10,) * 20)
BOTH_TIED = (
    ((20, 20, 20), (30, 30)),
    ((10,) * 4, (8,) * 5),
    ((1,) * 8 + (2,) * 5, (1,) * 6 + (3,) * 4),
    ((2,) * 10, (1,) * 18 + (2,)),
    ((1,) * 28 + (2,), (10, 10, 10)),
    ((5,) * 6, (6,) * 5),
    ((100, 100), (50,) * 4),
    ((200, 200), (100, 100, 200)),
    ((3,) * 7, (7,) * 3),
    ((1,) * 58 + (2,), (20, 20, 20)),
    ((1, 2, 3, 4, 5), (2, 2, 2, 2, 7)),
    ((2,) * 9, (2,) * 9),
    ((500, 500), (400, 600)),
)


def main() -> None:
    print("Drawn permutations a second")
    print(f"  {'':<16} {'n':>5} {'ours':>11} {'same statistic, vectorised':>28} {'library coefficient':>22}")
    for rows in ROWS:
        _draws_of_rho(rows)
    for rows in ROWS:
        _draws_of_tau(rows)
    print("\nExact nulls of tau-b: seconds taken, and forecast over taken")
    for n in UNTIED:
        _counted(f"no ties, n = {n}", TieGroups((1,) * n), TieGroups((1,) * n))
    for sizes in ONE_TIED:
        _counted(f"one tied: {_told(sizes)}", TieGroups((1,) * sum(sizes)), TieGroups(sizes))
    for x, y in BOTH_TIED:
        _counted(f"both tied: {_told(x)} and {_told(y)}", TieGroups(x), TieGroups(y))


def _draws_of_rho(rows: int) -> None:
    x, y = _sample(rows)
    x_ranks, y_ranks = (stats.rankdata(values) - (rows + 1) / 2 for values in (x, y))
    draws = max(10_000, 6_000_000 // rows)

    def sums(permuted: np.ndarray, axis: int = -1) -> np.ndarray:
        return (permuted * y_ranks).sum(axis=axis)

    def coefficient(permuted: np.ndarray) -> float:
        return stats.spearmanr(permuted, y).statistic

    ours = _rate(draws, lambda: drawn_null("Spearman rho", x, y, observed=0, plan=_plan(draws), question=NO_LEVELS))
    same = _rate(draws, lambda: _permutation_test(x_ranks, sums, draws, is_vectorised=True))
    other = _rate(1_000, lambda: _permutation_test(x, coefficient, 1_000, is_vectorised=False))
    _line("Spearman rho", rows, (ours, same, other))


def _draws_of_tau(rows: int) -> None:
    x, y = _sample(rows)
    draws = max(2_000, 1_000_000 // rows)

    def coefficient(permuted: np.ndarray) -> float:
        return stats.kendalltau(permuted, y, method="asymptotic").statistic

    ours = _rate(draws, lambda: drawn_null("Kendall tau-b", x, y, observed=0, plan=_plan(draws), question=NO_LEVELS))
    other = _rate(1_000, lambda: _permutation_test(x, coefficient, 1_000, is_vectorised=False))
    _line("Kendall tau-b", rows, (ours, None, other))


def _sample(rows: int) -> tuple[np.ndarray, np.ndarray]:
    """Two variables with a few ties, as codes."""
    rng = np.random.default_rng(rows)
    return rng.integers(0, 4 * rows, rows), rng.integers(0, 4 * rows, rows)


def _plan(draws: int) -> DrawingPlan:
    return DrawingPlan(draws, draws, stream(1, "benchmark"))


def _permutation_test(values: np.ndarray, statistic: Callable[..., object], draws: int, *, is_vectorised: bool) -> None:
    stats.permutation_test(
        (values,),
        statistic,
        permutation_type="pairings",
        n_resamples=draws,
        vectorized=is_vectorised,
        batch=max(1, TOGETHER // len(values)),
        rng=np.random.default_rng(1),
    )


def _line(name: str, rows: int, rates: tuple[float, float | None, float]) -> None:
    ours, same, other = rates
    beside = "" if same is None else f"{same:>15,.0f}, 1 to {ours / same:.1f}"
    print(f"  {name:<16} {rows:>5} {ours:>11,.0f} {beside:>28} {f'{other:,.0f}, 1 to {ours / other:,.0f}':>22}")


def _counted(what: str, x: TieGroups, y: TieGroups) -> None:
    forecast = forecast_tau(x, y)
    taken = _least(lambda: tau_null(x, y))
    print(f"  {what:<66} {taken:9.4f} s {forecast.nanoseconds / taken / 1e9:6.2f}")


def _told(sizes: tuple[int, ...]) -> str:
    """Return tie groups in short: 28×1 + 1×2."""
    distinct = sorted(set(sizes))
    return " + ".join(f"{sizes.count(size)}×{size}" for size in distinct)


def _rate(number: int, work: Callable[[], object]) -> float:
    return number / _least(work)


def _least(work: Callable[[], object]) -> float:
    spent = []
    for _ in range(REPEATS):
        before = time.process_time()
        work()
        spent.append(time.process_time() - before)
    return min(spent)


if __name__ == "__main__":
    main()
