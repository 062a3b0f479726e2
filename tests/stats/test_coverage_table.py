"""The shipped table of simulated coverage: whole, consistent in itself, and as an earlier simulation found it."""

import csv
from collections import defaultdict
from decimal import Decimal
from math import sqrt
from pathlib import Path

import numpy as np
import pytest

from rankdocket.stats.coverage.families import FAMILIES, NORMAL, Family
from rankdocket.stats.coverage.limits import RULES
from rankdocket.stats.coverage.populations import Population, population_at, random_shocks
from rankdocket.stats.coverage.simulate import (
    BOOTSTRAP_FAMILIES,
    BOOTSTRAP_ROWS,
    BOOTSTRAP_SAMPLES,
    COEFFICIENTS,
    LEVELS,
    MAIN_RULES,
    ROWS,
    Cell,
    samples_of,
    simulate_cell,
    truths_of,
)
from rankdocket.stats.coverage.sums import MOST_ROWS, sums_of
from rankdocket.stats.coverage.table import SHORT_NAMES, CoverageRow, coverage_table, population_lines
from rankdocket.stats.interval import Interval, IntervalQuestion
from rankdocket.stats.intervals import INTERVAL_METHODS, interval_by
from stats.interval_questions import COEFFICIENTS as FUNCTIONS

EARLIER = Path(__file__).resolve().parents[1] / "reference" / "earlier_coverage.csv"
"""Coverage at 0.95 found by the authors of the guarded jackknife in an earlier simulation: another program, other seeds,
the same families. ``samples`` are those in which both variables varied."""

CHECK_POINTS = 2**19


def _short(row: CoverageRow) -> str:
    return next(short for short, named in SHORT_NAMES.items() if named == (row.method, row.coefficient))


def test_every_cell_stands_once() -> None:
    """Rules to rely on at three levels, those for comparison at 0.95, the bootstrap on its smaller grid."""
    wanted = {
        (short, level, family, truth, n)
        for short, rule in RULES.items()
        for level in (LEVELS if short in MAIN_RULES else (Decimal("0.95"),))
        for family in FAMILIES
        for truth in truths_of(family, rule.coefficient)
        for n in ROWS
    } | {
        ("bca bootstrap", Decimal("0.95"), family, truth, n)
        for family in BOOTSTRAP_FAMILIES
        for truth in truths_of(family, "Spearman rho")
        for n in BOOTSTRAP_ROWS
    }
    found = [(_short(row), row.level, row.family.key, float(row.truth), row.n) for row in coverage_table()]
    assert len(found) == len(set(found))
    assert set(found) == wanted


def test_every_rule_of_the_catalogue_is_in_the_table() -> None:
    """A rule that is added must be simulated."""
    simulated = {(row.method, row.coefficient) for row in coverage_table()}
    assert {(method.key, name) for method in INTERVAL_METHODS for name in method.coefficients} == simulated


def test_counts_belong_together() -> None:
    """Covered, given and drawn are ordered; as many are drawn as is said; only samples without variation are lost."""
    for row in coverage_table():
        drawn = BOOTSTRAP_SAMPLES if row.method == "BCa bootstrap" else samples_of(row.n)
        assert 0 < row.covered <= row.given <= row.drawn == drawn
        assert 0 < row.width <= 2
        if row.family.pattern == "no ties or small tie groups" and row.method != "BCa bootstrap":
            assert row.given == row.drawn
        assert row.error <= 0.5 / sqrt(row.given)


def test_a_higher_level_covers_more_and_is_wider() -> None:
    """All levels of a cell look at the same samples."""
    by_cell = defaultdict(list)
    for row in coverage_table():
        by_cell[row.method, row.coefficient, row.family.key, row.truth, row.n].append(row)
    ladders = [sorted(rows, key=lambda row: row.level) for rows in by_cell.values() if len(rows) == len(LEVELS)]
    assert len(ladders) == sum(
        len(truths_of(family, RULES[short].coefficient)) * len(ROWS) for short in MAIN_RULES for family in FAMILIES
    )
    for low, middle, high in ladders:
        assert low.covered <= middle.covered <= high.covered
        assert low.width < middle.width < high.width


def test_coverage_is_as_the_earlier_simulation_found_it() -> None:
    """928 cells of two rules: joint errors apart as often as chance has it, and none by five.

    Chance alone puts 4.6 % of cells beyond two joint errors and one in 1.7 million beyond five.
    """
    ours = {
        (_short(row), row.family.key, row.truth, row.n): row for row in coverage_table() if row.level == Decimal("0.95")
    }
    apart = []
    for line in csv.DictReader(EARLIER.read_text("utf-8").splitlines()):
        row = ours[line["rule"], line["family"], Decimal(line["truth"]), int(line["n"])]
        coverage, samples = float(line["coverage"]), int(line["samples"])
        pooled = (row.covered + coverage * samples) / (row.given + samples)
        error = sqrt(pooled * (1 - pooled) * (1 / row.given + 1 / samples))
        apart.append((float(row.coverage) - coverage) / error)
        assert abs(float(row.width) - float(line["width"])) <= 0.05 * float(line["width"]) + 0.01
    beyond = sum(abs(each) > 2 for each in apart) / len(apart)
    print(f"{len(apart)} cells, {beyond:.1%} beyond two joint errors, largest {max(map(abs, apart)):.2f}")
    assert len(apart) == 928
    assert beyond <= 0.08
    assert max(map(abs, apart)) < 5


def test_a_cell_can_be_made_again() -> None:
    """From the filed parameter and the stated seed the smallest cells come out as shipped."""
    lines = {(line.coefficient, line.family.key, line.truth): line for line in population_lines()}
    for coefficient, family, truth in (("Spearman rho", "five levels", 0.6), ("Kendall tau-b", "heavy tails", 0.8)):
        line = lines[coefficient, family, truth]
        tallies = simulate_cell(
            Cell(Population(line.family, line.coefficient, line.parameter, line.truth), 6), samples_of(6)
        )
        shipped = {
            (_short(row), row.level): row
            for row in coverage_table()
            if (row.coefficient, row.family.key, float(row.truth), row.n) == (coefficient, family, truth, 6)
        }
        assert shipped.keys() == tallies.keys()
        for key, tally in tallies.items():
            assert (tally.given, tally.covered) == (shipped[key].given, shipped[key].covered)
            assert f"{tally.width:.3f}" == str(shipped[key].width)


def test_populations_have_the_coefficient_that_they_are_filed_with() -> None:
    """A plain random sample of half a million rows agrees to four of its errors, which are below 2/√rows."""
    wanted = {
        (coefficient, family, truth)
        for coefficient in COEFFICIENTS
        for family in FAMILIES
        for truth in truths_of(family, coefficient)
    }
    assert {(line.coefficient, line.family.key, line.truth) for line in population_lines()} == wanted
    for line in population_lines():
        assert abs(line.check - line.truth) <= 8 / sqrt(CHECK_POINTS) * (1 - line.truth**2) + 0.001


def test_parameters_come_out_of_the_integration_again() -> None:
    """One of each kind; under normal dependence they follow from closed forms, checked here by their values."""
    filed = {(line.coefficient, line.family.key, line.truth): line.parameter for line in population_lines()}
    for family in ("spread with x", "three levels"):
        again = population_at(FAMILIES[family], "Spearman rho", 0.6)
        assert filed["Spearman rho", family, 0.6] == pytest.approx(again.parameter, abs=1e-6)
    # Pearson 1907: 2 sin(π·0.6/6); Greiner 1909: sin(π·0.6/2).
    assert filed["Spearman rho", NORMAL, 0.6] == pytest.approx(0.618034, abs=1e-6)
    assert filed["Kendall tau-b", NORMAL, 0.6] == pytest.approx(0.809017, abs=1e-6)


def test_heavy_tails_keep_tau_of_the_normal_and_clayton_has_its_own() -> None:
    """Elliptical dependence: tau = (2/π) asin of the parameter; Clayton’s: tau = θ/(θ + 2)."""
    for line in population_lines():
        if line.coefficient == "Kendall tau-b" and line.truth:
            if line.family.key == "heavy tails":
                assert 2 / np.pi * np.arcsin(line.parameter) == pytest.approx(line.truth, abs=0.001)
            if line.family.key == "agreeing below":
                assert line.parameter / (line.parameter + 2) == pytest.approx(line.truth, abs=0.001)


def test_a_population_that_does_not_exist_is_refused() -> None:
    """With one row of ten in gross error no order is perfect."""
    with pytest.raises(ValueError, match="no population of the family"):
        population_at(FAMILIES["gross errors"], "Spearman rho", 0.95)


def test_samples_too_long_for_exact_sums_are_refused() -> None:
    """Single precision holds the sums of up to two hundred rows."""
    values = np.arange(MOST_ROWS + 1.0)[np.newaxis, :]
    with pytest.raises(ValueError, match="at most"):
        sums_of("Spearman rho", values, values)


@pytest.mark.parametrize("short", RULES)
@pytest.mark.parametrize("n", [6, 9, 10, 25])
def test_many_samples_at_once_have_the_limits_of_the_rule(short: str, n: int) -> None:
    """Every family, without association and near perfect order, at three levels."""
    rule = RULES[short]
    for family in FAMILIES.values():
        for parameter in (0.0, _strong(family)):
            x, y = family.build(random_shocks((4, n), np.random.default_rng([n, 3])), parameter)
            vary = (np.ptp(x, axis=1) > 0) & (np.ptp(y, axis=1) > 0)
            sums = sums_of(rule.coefficient, x, y)
            for level in LEVELS:
                low, high = rule.limits(sums, float((1 - level) / 2))
                found = [_limits(short, one, other, level) for one, other in zip(x[vary], y[vary], strict=True)]
                assert np.column_stack((low, high)) == pytest.approx(np.array(found), abs=1e-11)


def _strong(family: Family) -> float:
    return 0.98 if family.largest < 1 else family.largest / 10


def _limits(short: str, x: np.ndarray, y: np.ndarray, level: Decimal) -> tuple[float, float]:
    rule = RULES[short]
    codes = [np.unique(values, return_inverse=True)[1] for values in (x, y)]
    question = IntervalQuestion(FUNCTIONS[rule.coefficient](*codes), *codes, level, "two-sided")
    found = interval_by(rule.method, question)
    assert isinstance(found, Interval)
    return found.low, found.high
