"""What a report says of the simulated coverage of its intervals."""

from dataclasses import replace
from decimal import Decimal
from random import Random

import numpy as np

from analysis.invented import Invented, association
from rankdocket.analysis.results import Analysis, Estimate
from rankdocket.document.model import FieldList
from rankdocket.document.prose import text_of
from rankdocket.stats.coverage.lookup import CoverageQuestion, SimulatedCoverage, simulated_coverage
from rankdocket.stats.interval import Interval, IntervalQuestion
from rankdocket.stats.intervals import interval_by
from rankdocket.vocabulary import Direction
from writing.reports import Told, told


def study(n: int, levels: int | None = None, inference: str = "alpha: 0.05", sign: str = "either") -> Analysis:
    """Return the analysis of two columns that lean the same way, in a few even levels or without ties."""
    source = Random(20261202)
    u = [source.gauss(0, 1) for _ in range(n)]
    v = [value + 0.05 * source.gauss(0, 1) for value in u]
    columns = {name: " ".join(_graded(values, levels)) for name, values in (("u", u), ("v", v))}
    return Invented(columns=columns, associations={"A1": association(sign=sign)}, inference=inference).analysed()


def _graded(values: list[float], levels: int | None) -> list[str]:
    if levels is None:
        return [f"{value + 10:.9f}" for value in values]
    order = sorted(values)
    return [str(levels * order.index(value) // len(values)) for value in values]


def by(analysis: Analysis, method: str, direction: Direction = "two-sided") -> Told:
    """Return the report with the interval of A1 made by another rule."""
    result = analysis.results["A1"]
    assert isinstance(result.estimate, Estimate)
    codes = [
        [row.x_doubled_rank for row in result.screened.rows],
        [row.y_doubled_rank for row in result.screened.rows],
    ]
    x, y = (np.array(ranks, dtype=np.int64) for ranks in codes)
    level = analysis.spec.inference.confidence_level
    interval = interval_by(method, IntervalQuestion(result.estimate.coefficient, x, y, level, direction))
    assert isinstance(interval, Interval)
    return told(replace(analysis, results={"A1": replace(result, interval=interval)}))


def line(report: Told) -> str:
    block = report.block("numbers-A1")
    assert isinstance(block, FieldList)
    return next(text_of(words) for name, words in block.rows if name == "Simulated coverage")


def answer(report: Told) -> SimulatedCoverage:
    result = report.analysis.results["A1"]
    assert isinstance(result.interval, Interval)
    assert isinstance(result.estimate, Estimate)
    coefficient = result.estimate.coefficient
    found = simulated_coverage(
        CoverageQuestion(
            result.interval.method,
            coefficient.name,
            result.interval.level,
            "two-sided",
            coefficient.n,
            Decimal(coefficient.decimal_text()),
            result.screened.x_ties,
            result.screened.y_ties,
        )
    )
    assert isinstance(found, SimulatedCoverage)
    return found


def test_the_line_names_the_row_and_the_lowest() -> None:
    """Share, samples, rows, coefficient, ties and dependence; then the lowest and its family in plain words."""
    report = by(study(20), "Bonett-Wright")
    found = answer(report)
    share, lowest = (f"{float(100 * row.coverage):.1f}%" for row in (found.nearest, found.lowest))
    assert line(report) == (
        f"{share} of 6,000 samples at n\u00a0=\u00a020, rho\u00a00.950, no ties or small tie groups, normal-type dependence; "
        f"lowest at that n: {lowest} ({found.lowest.family.words})"
    )


def test_an_interval_wider_than_needed_says_so_and_is_no_caveat() -> None:
    """The guarded jackknife near perfect order in 20 rows covers more than 97 %."""
    report = by(study(20), "jackknife on z, guarded")
    assert answer(report).nearest.coverage > Decimal("0.97")
    assert "(wider than needed here)" in line(report)
    assert report.caveats()["low_coverage"] == []


def test_low_coverage_is_a_caveat_that_names_the_association() -> None:
    """Bonett-Wright near perfect order in three levels and a hundred rows covers far below 93 %."""
    report = by(study(100, levels=3), "Bonett-Wright")
    found = answer(report)
    assert found.nearest.family.key == "three levels"
    assert found.nearest.coverage < Decimal("0.93")
    (words,) = report.caveats()["low_coverage"]
    assert f"A1 {float(100 * found.nearest.coverage):.1f}%" in words
    assert "its level of 95% says" in words
    assert "wider than needed" not in line(report)


def test_what_is_not_simulated_is_said_and_is_no_caveat() -> None:
    """At a level that was not simulated, and for a bound."""
    other = told(study(20, inference="alpha: 0.05, confidence_level: 0.975"))
    assert line(other) == "coverage not simulated at this level"
    bound = by(study(20), "Bonett-Wright", "greater")
    assert line(bound) == "coverage not simulated at this level: bounds on one side were not simulated"
    for report in (other, bound):
        assert report.caveats()["low_coverage"] == []
        assert "held that coefficient" not in report.text()


def test_the_methods_text_says_what_simulated_coverage_is() -> None:
    """Where a line of it is printed."""
    assert "in which an interval by the same rule and at the same level held that coefficient" in told(study(20)).text()
