"""Simulates how much wider the guarded jackknife interval is, on average, than the textbook form of Bonett and Wright:

    python tests/tooling/make_guarded_widths.py src/rankdocket/stats/guarded_widths.csv

Bivariate normal samples without ties.  Each line is the mean width over its samples, divided by the width of the
textbook interval at the population's rho with as many rows.  Every cell has a stream of its own, so that a single one
can be made again.
"""

import sys
from collections.abc import Iterator
from decimal import Decimal
from math import pi, sin, sqrt
from pathlib import Path

import numpy as np

from rankdocket.stats.interval import Interval, IntervalQuestion
from rankdocket.stats.interval_width import width_at
from rankdocket.stats.intervals import interval_by
from rankdocket.stats.intervals.jackknife import KEY
from rankdocket.stats.rho import rho as rho_of

SEED = 8_127
LEVELS = ("0.90", "0.95", "0.99")
ROWS = (4, 5, 6, 7, 8, 9, 10, 12, 15, 20, 30, 50, 100, 200, 500, 1_000)
RHOS = ("0", "0.2", "0.4", "0.5", "0.6", "0.7", "0.8", "0.9", "0.95")
SAMPLES, SAMPLES_OF_MANY, MANY = 2_000, 500, 500


def main() -> None:
    lines = ["level,rows,rho,factor,samples"]
    for rows in ROWS:
        for rho in RHOS:
            samples = SAMPLES if rows < MANY else SAMPLES_OF_MANY
            factors = factors_of(rows, rho, samples, SEED)
            lines += [f"{level},{rows},{rho},{factor:.4f},{samples}" for level, factor in factors.items()]
        print(rows, flush=True)
    Path(sys.argv[1]).write_text("\n".join(lines) + "\n", encoding="utf-8")


def factors_of(rows: int, rho: str, samples: int, seed: int) -> dict[str, float]:
    """Return level → mean width over that of the textbook interval."""
    sums = dict.fromkeys(LEVELS, 0.0)
    for x, y in _samples(rows, float(rho), samples, np.random.default_rng([seed, rows, int(100 * Decimal(rho))])):
        coefficient = rho_of(x, y)
        for level in LEVELS:
            found = interval_by(KEY, IntervalQuestion(coefficient, x, y, Decimal(level), "two-sided"))
            assert isinstance(found, Interval)
            sums[level] += found.high - found.low
    return {level: total / samples / width_at(rows, float(rho), level=level) for level, total in sums.items()}


def _samples(rows: int, rho: float, samples: int, rng: np.random.Generator) -> Iterator[tuple[np.ndarray, np.ndarray]]:
    correlation = 2 * sin(pi * rho / 6)
    for _ in range(samples):
        x = rng.standard_normal(rows)
        y = correlation * x + sqrt(1 - correlation**2) * rng.standard_normal(rows)
        yield np.argsort(np.argsort(x)), np.argsort(np.argsort(y))


if __name__ == "__main__":
    main()
