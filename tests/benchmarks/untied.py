"""Prints what the counts for untied rows and the series above them cost: python tests/benchmarks/untied.py

Processor milliseconds, the least of three, each in a process of its own unless said otherwise.  Nothing here is
asserted, and pytest does not collect it.
"""

import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from time import process_time

ROOT = Path(__file__).resolve().parents[2]
REPEATS = 3

START = """
import sys, time
sys.path.insert(0, {source!r})
import numpy, scipy.special, rankdocket.stats.null
before = time.process_time()
from rankdocket.stats.nulls.untied import reach, untied_null
untied_null({n} or reach())
print(1000 * (time.process_time() - before))
"""


def main() -> None:
    sys.path.insert(0, str(ROOT / "src"))
    from rankdocket.stats.nulls.series import series_critical, series_tails
    from rankdocket.stats.nulls.untied import reach, untied_null

    print("Counts: first use, reading and laying out included, numpy imported before")
    for n in (3, 20, 0):
        print(f"  n = {n or reach():<6} {_first_use(n):8.2f} ms")
    null = untied_null(reach())
    print(f"  tails of one value at n = {reach()}: {_least(lambda: null.tails(4)):.2f} ms")

    print("Series: one value (in this process, its n seen for the first time), then a critical value at 1 in 100")
    from fractions import Fraction

    for n in (reach() + 1, 100, 1_000, 20_000):
        largest = (n**3 - n) // 3
        for deviations in (2, 5):
            numerator = largest - 4 * (int(largest * (1 - deviations / (n - 1) ** 0.5)) // 4)
            before = process_time()
            method = series_tails(n, numerator).method
            print(f"  n = {n:<6} {1000 * (process_time() - before):8.2f} ms  {deviations} deviations, {method}")
        before = process_time()
        series_critical(n, Fraction(1, 100), "two-sided")
        print(f"  n = {n:<6} {1000 * (process_time() - before):8.2f} ms  critical value")


def _first_use(n: int) -> float:
    words = [sys.executable, "-c", START.format(source=str(ROOT / "src"), n=n)]
    return min(float(subprocess.run(words, capture_output=True, check=True, text=True).stdout) for _ in range(REPEATS))


def _least(ask: Callable[[], object]) -> float:
    spent = []
    for _ in range(REPEATS):
        before = process_time()
        ask()
        spent.append(1000 * (process_time() - before))
    return min(spent)


if __name__ == "__main__":
    main()
