"""Prints what intervals cost on this machine: python tests/benchmarks/intervals.py

Processor seconds, the least of several; they depend on the machine, the ratios travel better.  Nothing here is
asserted, and pytest does not collect it.
"""

import time
import warnings
from collections.abc import Callable
from decimal import Decimal

import numpy as np
from scipy import stats

from rankdocket.stats.interval import IntervalQuestion, Resampling
from rankdocket.stats.intervals import INTERVAL_METHODS, interval_by
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b

RESAMPLES = 9_999
SCALED_RESAMPLES = 999
"""Resamples of scipy where it computes them one by one; its time is scaled to ours, the jackknife not."""

SAMPLES = ((30, False), (30, True), (500, False), (500, True))
TOGETHER = (None, 2**17, 2**20)
"""Values that scipy holds at a time when it is vectorised: everything, and two sizes that were tried."""

LARGE = 100_000


def main() -> None:
    print(f"BCa bootstrap of rho, {RESAMPLES:,} resamples: ours, and others over ours")
    for n, tied in SAMPLES:
        _bootstrap(n, tied=tied)
    print("\nEvery rule, milliseconds")
    for n in (30, 1_000, LARGE):
        _rules(n)


def _bootstrap(n: int, *, tied: bool) -> None:
    x, y = _sample(n, tied=tied)
    ours = _least(5, lambda: interval_by("BCa bootstrap", _question(x, y)))
    one_by_one = _one_by_one(x, y)
    vectorised = {
        f"{name}, {'all' if together is None else f'{together:,} values'} at a time": _vectorised(x, y, works, together)
        for name, works in _statistics().items()
        for together in TOGETHER
    }
    fastest = min(vectorised, key=lambda name: vectorised[name])
    library = min(seconds for name, seconds in vectorised.items() if name.startswith("spearmanrho"))
    ties = "ties" if tied else "no ties"
    print(
        f"  n {n:>3}, {ties:<7} {ours:8.4f} s; scipy with spearmanr one by one {one_by_one:6.2f} s ({SCALED_RESAMPLES} "
        f"scaled), {one_by_one / ours:,.0f} to 1; with spearmanrho vectorised {library:6.3f} s, {library / ours:.1f} to 1; "
        f"fastest vectorised ({fastest}) {vectorised[fastest]:6.3f} s, "
        f"{vectorised[fastest] / ours:.1f} to 1"
    )


def _one_by_one(x: np.ndarray, y: np.ndarray) -> float:
    def statistic(one: np.ndarray, other: np.ndarray) -> float:
        return stats.spearmanr(one, other).statistic

    def run(resamples: int) -> None:
        rng = np.random.default_rng(1)
        stats.bootstrap((x, y), statistic, paired=True, vectorized=False, n_resamples=resamples, method="BCa", rng=rng)

    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        few, many = _least(1, lambda: run(100)), _least(1, lambda: run(100 + SCALED_RESAMPLES))
    return few + (many - few) * (RESAMPLES - 100) / SCALED_RESAMPLES


def _statistics() -> dict[str, Callable[..., np.ndarray]]:
    """Return the vectorised statistics that were tried."""

    def library(one: np.ndarray, other: np.ndarray, axis: int = -1) -> np.ndarray:
        return stats.spearmanrho(one, other, axis=axis).statistic

    def by_ranks(one: np.ndarray, other: np.ndarray, axis: int = -1) -> np.ndarray:
        a, b = (stats.rankdata(values, axis=axis) for values in (one, other))
        a, b = (ranks - (ranks.shape[axis] + 1) / 2 for ranks in (a, b))
        return (a * b).sum(axis=axis) / np.sqrt((a * a).sum(axis=axis) * (b * b).sum(axis=axis))

    return {"spearmanrho": library, "rankdata": by_ranks}


def _vectorised(x: np.ndarray, y: np.ndarray, statistic: Callable[..., np.ndarray], together: int | None) -> float:
    def run() -> None:
        stats.bootstrap(
            (x, y),
            statistic,
            paired=True,
            vectorized=True,
            n_resamples=RESAMPLES,
            method="BCa",
            batch=None if together is None else max(1, together // len(x)),
            rng=np.random.default_rng(1),
        )

    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        return _least(2, run)


def _rules(n: int) -> None:
    for tied in (False, True):
        x, y = _sample(n, tied=tied)
        print(f"  n {n:>7,}, {'ties' if tied else 'no ties'}")
        for method in INTERVAL_METHODS:
            if method.key == "BCa bootstrap":
                continue
            question = _question(x, y, method.coefficients[0])
            seconds = _least(3, lambda m=method, q=question: interval_by(m.key, q))
            print(f"    {method.key:<32} {seconds * 1000:9.2f}")


def _question(x: np.ndarray, y: np.ndarray, coefficient: str = "Spearman rho") -> IntervalQuestion:
    whole = rho if coefficient == "Spearman rho" else tau_b
    plan = Resampling(RESAMPLES, np.random.default_rng(1))
    return IntervalQuestion(whole(x, y), x, y, Decimal("0.95"), "two-sided", plan)


def _sample(n: int, *, tied: bool) -> tuple[np.ndarray, np.ndarray]:
    """Two related variables as codes, without ties or with about five to seven levels."""
    rng = np.random.default_rng(n)
    x = rng.standard_normal(n)
    y = 0.6 * x + 0.8 * rng.standard_normal(n)
    if tied:
        x, y = np.round(x), np.round(y)
    one, other = (np.unique(values, return_inverse=True)[1] for values in (x, y))
    return one, other


def _least(times: int, work: Callable[[], object]) -> float:
    spent = []
    for _ in range(times):
        before = time.process_time()
        work()
        spent.append(time.process_time() - before)
    return min(spent)


if __name__ == "__main__":
    main()
