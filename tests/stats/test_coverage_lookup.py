"""Which row of the table of simulated coverage an interval gets, and why it gets none."""

from dataclasses import replace
from decimal import Decimal

import pytest

from rankdocket.stats.coverage.lookup import CoverageQuestion, NotSimulated, SimulatedCoverage, simulated_coverage
from rankdocket.stats.coverage.table import coverage_table
from rankdocket.stats.coverage.tie_pattern import nearest_families, tie_pattern
from rankdocket.stats.ranks import TieGroups

UNTIED = TieGroups((1,) * 20)
FIVE = TieGroups((2, 4, 8, 4, 2))
SKEWED = TieGroups((11, 4, 2, 2, 1))
THREE = TieGroups((10, 6, 4))
LOW_END = TieGroups((6, *(1,) * 14))
HIGH_END = TieGroups((*(1,) * 14, 6))
MOSTLY_LOW = TieGroups((12, *(1,) * 8))
ONE_PAIR = TieGroups((2, *(1,) * 18))
PAIRS_INSIDE = TieGroups((1, 2, 1, 2, 1, 1, 2, *(1,) * 10))

ASKED = CoverageQuestion(
    "Bonett-Wright", "Spearman rho", Decimal("0.95"), "two-sided", 20, Decimal("0.58"), UNTIED, UNTIED
)


def answered(question: CoverageQuestion) -> SimulatedCoverage:
    found = simulated_coverage(question)
    assert isinstance(found, SimulatedCoverage)
    return found


def why_not(question: CoverageQuestion) -> str:
    found = simulated_coverage(question)
    assert isinstance(found, NotSimulated)
    return found.reason


@pytest.mark.parametrize(
    ("x", "y", "pattern", "family"),
    [
        (UNTIED, UNTIED, "no ties or small tie groups", "normal"),
        (ONE_PAIR, UNTIED, "no ties or small tie groups", "normal"),
        (PAIRS_INSIDE, UNTIED, "no ties or small tie groups", "normal"),
        (FIVE, FIVE, "few levels in both variables", "five levels"),
        (SKEWED, FIVE, "few levels in both variables", "five skewed levels"),
        (FIVE, THREE, "few levels in both variables", "three levels"),
        (FIVE, UNTIED, "few levels in one variable", "one in levels"),
        (LOW_END, FIVE, "few levels in one variable", "one in levels"),
        (LOW_END, LOW_END, "tied at one end", "thirty below"),
        (UNTIED, HIGH_END, "tied at one end", "thirty below"),
        (LOW_END, MOSTLY_LOW, "tied at one end", "sixty below"),
    ],
)
def test_patterns_are_told_from_tie_groups(x: TieGroups, y: TieGroups, pattern: str, family: str) -> None:
    """Which variable is which does not matter."""
    assert tie_pattern(x, y) == tie_pattern(y, x) == pattern
    assert nearest_families(x, y)[0] == nearest_families(y, x)[0] == family


def test_the_nearest_row_is_found() -> None:
    """Rows by ratio, the coefficient by distance and without its sign, the family by its ties."""
    row = answered(ASKED).nearest
    assert (row.n, row.truth, row.family.key) == (20, Decimal("0.6"), "normal")
    assert answered(replace(ASKED, value=Decimal("-0.58"))) == answered(ASKED)
    # 24 is nearer to 20 by ratio (1.2) than to 30 (1.25); 25 is not.
    assert answered(replace(ASKED, n=24)).nearest.n == 20
    assert answered(replace(ASKED, n=25)).nearest.n == 30
    assert answered(replace(ASKED, x_ties=FIVE, y_ties=FIVE, value=Decimal(1))).nearest.family.key == "five levels"


def test_of_two_equally_near_the_lower_coverage_is_taken() -> None:
    """Rho 0.7 lies half-way between 0.6 and 0.8."""
    middle = answered(replace(ASKED, value=Decimal("0.7"))).nearest
    sides = [answered(replace(ASKED, value=Decimal(value))).nearest for value in ("0.69", "0.71")]
    assert {row.truth for row in sides} == {Decimal("0.6"), Decimal("0.8")}
    assert middle.coverage == min(row.coverage for row in sides)


def test_the_lowest_is_over_all_families_at_that_number_of_rows() -> None:
    """For Bonett-Wright at 20 rows it is far below the nearest."""
    found = answered(ASKED)
    same = [
        row
        for row in coverage_table()
        if (row.method, row.level, row.n) == ("Bonett-Wright", Decimal("0.95"), found.nearest.n)
    ]
    assert found.lowest.coverage == min(row.coverage for row in same) < found.nearest.coverage
    assert len({row.family.key for row in same}) == 12


def test_tau_b_has_rows_of_its_own() -> None:
    """Fieller, Hartley and Pearson serve both coefficients; each gets its own rows."""
    tau = replace(ASKED, method="Fieller-Hartley-Pearson", coefficient="Kendall tau-b")
    rho = replace(tau, coefficient="Spearman rho")
    assert answered(tau).nearest.coefficient == "Kendall tau-b"
    assert answered(rho).nearest.coefficient == "Spearman rho"


@pytest.mark.parametrize("level", ["0.9", "0.90", "0.99"])
def test_three_levels_are_simulated_however_written(level: str) -> None:
    """0.90 and 0.9 are one level."""
    assert answered(replace(ASKED, level=Decimal(level))).nearest.level == Decimal(level)


def test_what_is_not_simulated_says_so() -> None:
    """A level, a side, a number of rows, a rule that the table does not have."""
    assert why_not(replace(ASKED, level=Decimal("0.975"))) == "coverage not simulated at this level"
    assert why_not(replace(ASKED, direction="greater")).startswith(
        "coverage not simulated at this level: bounds on one"
    )
    assert why_not(replace(ASKED, n=5)) == "coverage not simulated below six rows"
    assert why_not(replace(ASKED, n=201)) == "coverage not simulated above two hundred rows"
    assert why_not(replace(ASKED, method="a rule to come")) == "coverage not simulated for this rule"
    bootstrap = replace(ASKED, method="BCa bootstrap")
    assert why_not(replace(bootstrap, n=9)) == "coverage not simulated below ten rows"
    assert why_not(replace(bootstrap, n=101)) == "coverage not simulated above one hundred rows"
    assert why_not(replace(bootstrap, x_ties=FIVE)) == "coverage not simulated for such ties"
