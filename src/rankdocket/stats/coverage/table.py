"""The shipped table of simulated coverage.

``two_sided.csv`` holds a line for each interval rule, level, family of populations, true coefficient and number of rows;
``populations.csv`` the parameter of each population, with the coefficient of a plain random sample of it as a check.
``tests/tooling/make_coverage_table.py`` makes both anew.
"""

import csv
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from functools import cache
from importlib.resources import files
from math import sqrt
from types import MappingProxyType
from typing import Final

from rankdocket.stats.coverage.families import FAMILIES, Family
from rankdocket.stats.intervals import (
    bca_bootstrap,
    bonett_wright,
    fieller,
    fisher,
    influence_values,
    jackknife,
    tau_jackknife,
)
from rankdocket.vocabulary import CoefficientName

TABLE: Final = "two_sided.csv"
POPULATIONS: Final = "populations.csv"

SEED: Final = 250_713
"""First number of every stream from which the samples of the table were drawn."""

COLUMNS: Final = ("rule", "level", "family", "truth", "n", "drawn", "given", "covered", "width")
POPULATION_COLUMNS: Final = ("coefficient", "family", "truth", "parameter", "check")

SHORT_NAMES: Final = MappingProxyType[str, tuple[str, CoefficientName]](
    {
        "jackknife": (jackknife.KEY, "Spearman rho"),
        "bonett-wright": (bonett_wright.KEY, "Spearman rho"),
        "influence": (influence_values.KEY, "Spearman rho"),
        "bca bootstrap": (bca_bootstrap.KEY, "Spearman rho"),
        "fieller": (fieller.KEY, "Spearman rho"),
        "fisher": (fisher.KEY, "Spearman rho"),
        "tau jackknife": (tau_jackknife.KEY, "Kendall tau-b"),
        "tau fieller": (fieller.KEY, "Kendall tau-b"),
    }
)
"""What the table calls a rule → the rule’s key and the coefficient."""


@dataclass(frozen=True, slots=True)
class CoverageRow:
    """A line of the table; all intervals are two-sided.

    Attributes
    ----------
    truth
        The true coefficient of the population.
    n
        Rows of each sample.
    drawn, given, covered
        Samples drawn; those among them that had an interval; intervals that held the true coefficient.
    width
        Mean width of the intervals.
    """

    method: str
    coefficient: CoefficientName
    level: Decimal
    family: Family
    truth: Decimal
    n: int
    drawn: int
    given: int
    covered: int
    width: Decimal

    @property
    def coverage(self) -> Fraction:
        """Intervals that held the true coefficient, as a share of all intervals."""
        return Fraction(self.covered, self.given)

    @property
    def error(self) -> float:
        """Standard error of the coverage by the number of samples (Monte Carlo error)."""
        return sqrt(self.coverage * (1 - self.coverage) / self.given)


@dataclass(frozen=True, slots=True)
class PopulationLine:
    """A line of ``populations.csv``: a family’s parameter, the true coefficient, and that of a large random sample."""

    coefficient: CoefficientName
    family: Family
    truth: float
    parameter: float
    check: float


@cache
def coverage_table() -> tuple[CoverageRow, ...]:
    """Return every line of the table."""
    rows = []
    for line in _lines(TABLE):
        method, coefficient = SHORT_NAMES[line["rule"]]
        rows.append(
            CoverageRow(
                method,
                coefficient,
                Decimal(line["level"]),
                FAMILIES[line["family"]],
                Decimal(line["truth"]),
                int(line["n"]),
                int(line["drawn"]),
                int(line["given"]),
                int(line["covered"]),
                Decimal(line["width"]),
            )
        )
    return tuple(rows)


@cache
def population_lines() -> tuple[PopulationLine, ...]:
    """Return every population that the table rests on."""
    coefficients: dict[str, CoefficientName] = {"Spearman rho": "Spearman rho", "Kendall tau-b": "Kendall tau-b"}
    return tuple(
        PopulationLine(
            coefficients[line["coefficient"]],
            FAMILIES[line["family"]],
            float(line["truth"]),
            float(line["parameter"]),
            float(line["check"]),
        )
        for line in _lines(POPULATIONS)
    )


def _lines(name: str) -> list[dict[str, str]]:
    text = files(__package__).joinpath(name).read_text("utf-8")
    return list(csv.DictReader(text.splitlines()))
