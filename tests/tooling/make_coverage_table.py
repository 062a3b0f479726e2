"""Makes the shipped table of simulated coverage anew, in about ten minutes of one processor:

    python tests/tooling/make_coverage_table.py

It solves the populations, checks each by a plain random sample, simulates every cell from its own stream, says what it
does as it goes, and writes ``populations.csv`` and ``two_sided.csv`` below src/rankdocket/stats/coverage/. The same seed and
the same numpy give the same bytes.
"""

import time
from pathlib import Path

import numpy as np

CHECK_POINTS = 2**19
"""Rows of the plain random sample that checks a population."""


def main() -> None:
    from rankdocket.stats.coverage import simulate, table
    from rankdocket.stats.coverage.families import FAMILIES
    from rankdocket.stats.coverage.populations import integrated, population_at, random_shocks

    folder = Path(table.__file__).parent
    shocks = random_shocks(CHECK_POINTS, np.random.default_rng([simulate.SEED, 1]))
    populations, lines = [], []
    for coefficient in simulate.COEFFICIENTS:
        for family in FAMILIES.values():
            for truth in simulate.truths_of(family.key, coefficient):
                population = population_at(family, coefficient, truth)
                check = integrated(family, coefficient, population.parameter, shocks)
                _say(
                    f"{coefficient} {truth} for {family.words}: parameter {population.parameter:.6f}, check {check:.5f}"
                )
                populations.append(population)
                lines.append((coefficient, family.key, f"{truth}", f"{population.parameter:.8f}", f"{check:.5f}"))
    _write(folder / table.POPULATIONS, table.POPULATION_COLUMNS, lines)
    # The samples come from the parameters as they are written, so that the file alone makes them again.
    written = tuple(
        type(population)(population.family, population.coefficient, float(line[3]), population.truth)
        for population, line in zip(populations, lines, strict=True)
    )
    rows = [
        (
            short,
            f"{level}",
            cell.population.family.key,
            f"{cell.population.truth}",
            f"{cell.n}",
            f"{tally.drawn}",
            f"{tally.given}",
            f"{tally.covered}",
            f"{tally.width:.3f}",
        )
        for short, level, cell, tally in simulate.simulate_all(written, _say)
    ]
    order = list(table.SHORT_NAMES)
    rows.sort(key=lambda row: (order.index(row[0]), row[1]))
    _write(folder / table.TABLE, table.COLUMNS, rows)
    _say(f"{len(rows)} lines written")


def _say(text: str) -> None:
    print(f"{time.process_time():7.1f} s  {text}", flush=True)


def _write(path: Path, columns: tuple[str, ...], rows: list[tuple[str, ...]]) -> None:
    path.write_text("\n".join(",".join(row) for row in (columns, *rows)) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
