"""How often the intervals cover the true value in fresh simulated samples, beside the table that comes with the program."""

from decimal import Decimal
from functools import cache
from math import sqrt

import numpy as np
import pytest

from rankdocket.stats.coverage.families import FAMILIES
from rankdocket.stats.coverage.populations import Population
from rankdocket.stats.coverage.simulate import Cell, Tally, draw, simulate_bootstrap, simulate_cell, stream_of
from rankdocket.stats.coverage.table import SEED, SHORT_NAMES, CoverageRow, coverage_table, population_lines
from rankdocket.stats.interval import Interval, IntervalQuestion
from rankdocket.stats.intervals import interval_by
from rankdocket.stats.rho import rho
from rankdocket.vocabulary import CoefficientName

pytestmark = [pytest.mark.simulation, pytest.mark.slow]

ROWS, RHOS = (10, 20, 50, 100), (0.0, 0.3, 0.6, 0.8)
SAMPLES = 2_000
FRESH = SEED + 1
"""No stream of these tests is one of the table’s."""

LEVEL = Decimal("0.95")
BEYOND_TWO, BEYOND_ALL = 3, 3.5
"""Of sixteen cells of one truth each lies beyond two joint errors with probability 0.046: more than three of them do so in
six of a thousand simulations, and one lies beyond 3.5 in seven of a thousand."""


def _cell(coefficient: CoefficientName, family: str, truth: float, n: int) -> Cell:
    line = next(
        line
        for line in population_lines()
        if (line.coefficient, line.family.key, line.truth) == (coefficient, family, truth)
    )
    return Cell(Population(line.family, coefficient, line.parameter, truth), n)


@cache
def _shipped() -> dict[tuple[str, str, float, int], CoverageRow]:
    shorts = {named: short for short, named in SHORT_NAMES.items()}
    return {
        (shorts[row.method, row.coefficient], row.family.key, float(row.truth), row.n): row
        for row in coverage_table()
        if row.level == LEVEL
    }


def _by_the_rules(cell: Cell) -> dict[str, Tally]:
    """Put every sample of a cell through the rules themselves, one by one."""
    intervals: dict[str, list[Interval]] = {"jackknife": [], "bonett-wright": []}
    for values in zip(*draw(cell, SAMPLES, stream_of(cell, FRESH)), strict=True):
        x, y = (np.unique(column, return_inverse=True)[1] for column in values)
        question = IntervalQuestion(rho(x, y), x, y, LEVEL, "two-sided")
        for short, found in intervals.items():
            interval = interval_by(SHORT_NAMES[short][0], question)
            assert isinstance(interval, Interval)
            found.append(interval)
    truth = cell.population.truth
    return {
        short: Tally(
            SAMPLES,
            len(found),
            sum(interval.low <= truth <= interval.high for interval in found),
            sum(interval.high - interval.low for interval in found) / len(found),
        )
        for short, found in intervals.items()
    }


def _error(coverage: float, samples: int) -> float:
    return sqrt(coverage * (1 - coverage) / samples)


def _coverage(tally: Tally) -> float:
    return tally.covered / tally.given


def _apart(tally: Tally, row: CoverageRow) -> float:
    """Return how many joint errors a fresh coverage and that of the table lie apart."""
    pooled = (tally.covered + row.covered) / (tally.given + row.given)
    return (_coverage(tally) - float(row.coverage)) / sqrt(pooled * (1 - pooled) * (1 / tally.given + 1 / row.given))


def _say(short: str, cell: Cell, tally: Tally, row: CoverageRow) -> None:
    print(
        f"{cell.population.family.words}: n {cell.n:>3} {cell.population.coefficient} {cell.population.truth} {short}: "
        f"{_coverage(tally):.4f} (table {float(row.coverage):.4f}), width {tally.width:.3f} (table {row.width})"
    )


def test_coverage_under_normal_dependence() -> None:
    """The guarded jackknife covers at least 95 % less two errors and as often as the table says; Bonett-Wright 93 to 97 %.

    Joint errors apart from the table: at most three of the sixteen cells beyond two, none beyond 3.5. With this seed,
    the first one tried, one cell lies beyond two: n = 10 and rho 0.8, by 2.4, at coverages of 99.80 and 99.35 %.
    """
    apart = []
    for n in ROWS:
        for truth in RHOS:
            cell = _cell("Spearman rho", "normal", truth, n)
            tallies = _by_the_rules(cell)
            for short, tally in tallies.items():
                _say(short, cell, tally, _shipped()[short, "normal", truth, n])
                assert tally.given == SAMPLES
            assert _coverage(tallies["jackknife"]) >= 0.95 - 2 * _error(0.95, SAMPLES)
            assert 0.93 <= _coverage(tallies["bonett-wright"]) <= 0.97
            assert tallies["jackknife"].width >= tallies["bonett-wright"].width
            apart.append(_apart(tallies["jackknife"], _shipped()["jackknife", "normal", truth, n]))
    print("joint errors apart:", " ".join(f"{each:.2f}" for each in apart))
    assert sum(abs(each) > 2 for each in apart) <= BEYOND_TWO
    assert max(map(abs, apart)) <= BEYOND_ALL


def test_coverage_with_ties() -> None:
    """Five levels, and three rows in ten tied at one end: what it is, by the table and by fresh samples.

    The guarded jackknife covers at least 93 % less two errors and no less often than Bonett-Wright.
    """
    apart = []
    for family in ("five levels", "thirty below"):
        for n in ROWS:
            for truth in RHOS:
                cell = _cell("Spearman rho", family, truth, n)
                tallies = {
                    short: tally
                    for (short, level), tally in simulate_cell(cell, SAMPLES, FRESH).items()
                    if level == LEVEL
                }
                for short in ("jackknife", "bonett-wright"):
                    _say(short, cell, tallies[short], _shipped()[short, family, truth, n])
                assert _coverage(tallies["jackknife"]) >= 0.93 - 2 * _error(0.93, SAMPLES)
                assert tallies["jackknife"].covered >= tallies["bonett-wright"].covered
                apart.append(_apart(tallies["jackknife"], _shipped()["jackknife", family, truth, n]))
    assert max(map(abs, apart)) <= BEYOND_ALL


def test_coverage_of_tau_b() -> None:
    """Under normal dependence the guarded jackknife for tau-b covers at least 95 % less two errors, as the table says."""
    apart = []
    for n in ROWS:
        for truth in RHOS:
            cell = _cell("Kendall tau-b", "normal", truth, n)
            tally = simulate_cell(cell, SAMPLES, FRESH)["tau jackknife", LEVEL]
            row = _shipped()["tau jackknife", "normal", truth, n]
            _say("tau jackknife", cell, tally, row)
            assert _coverage(tally) >= 0.95 - 2 * _error(0.95, SAMPLES)
            apart.append(_apart(tally, row))
    assert max(map(abs, apart)) <= BEYOND_ALL


def test_coverage_of_the_bootstrap() -> None:
    """Four cells of the smaller grid, as the table says."""
    for family in ("normal", "five levels"):
        for n in (10, 20):
            cell = _cell("Spearman rho", family, 0.6, n)
            tally = simulate_bootstrap(cell, seed=FRESH)
            row = _shipped()["bca bootstrap", family, 0.6, n]
            _say("bca bootstrap", cell, tally, row)
            assert abs(_apart(tally, row)) <= BEYOND_ALL


def test_every_family_of_the_table_can_be_made_again() -> None:
    """At ten rows, by fresh samples: no cell of any family and rule lies beyond 4.5 joint errors from the table.

    With fewer than a thousand cells chance alone does so in less than one of a hundred simulations.
    """
    apart = []
    for line in population_lines():
        cell = Cell(Population(FAMILIES[line.family.key], line.coefficient, line.parameter, line.truth), 10)
        for (short, level), tally in simulate_cell(cell, SAMPLES, FRESH).items():
            if level == LEVEL:
                apart.append(_apart(tally, _shipped()[short, line.family.key, line.truth, 10]))
    print(f"{len(apart)} cells, beyond two joint errors: {sum(abs(each) > 2 for each in apart) / len(apart):.1%}")
    assert max(map(abs, apart)) <= 4.5
