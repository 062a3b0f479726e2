"""The simulation behind the shipped table: seeded streams, one a cell, so that any cell can be made again alone."""

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from decimal import Decimal
from typing import Final

import numpy as np

from rankdocket.stats.coverage.families import (
    FAMILIES,
    FIVE_LEVELS,
    GROSS_ERRORS,
    HEAVY_TAILS,
    NORMAL,
    ONE_IN_LEVELS,
    SPREAD_AT_BOTH_ENDS,
    THIRTY_BELOW,
    Floats,
)
from rankdocket.stats.coverage.limits import RULES
from rankdocket.stats.coverage.populations import Population, random_shocks
from rankdocket.stats.coverage.sums import sums_of
from rankdocket.stats.coverage.table import SEED
from rankdocket.stats.interval import Interval, IntervalQuestion, Resampling
from rankdocket.stats.intervals.bca_bootstrap import bca_bootstrap
from rankdocket.stats.rho import rho
from rankdocket.vocabulary import CoefficientName

ROWS: Final = (6, 8, 10, 12, 15, 20, 30, 50, 100, 200)
LEVELS: Final = (Decimal("0.9"), Decimal("0.95"), Decimal("0.99"))

BOOTSTRAP: Final = "bca bootstrap"
"""The bootstrap’s name in the table."""

BOOTSTRAP_ROWS: Final = (10, 20, 50, 100)
BOOTSTRAP_FAMILIES: Final = (NORMAL, HEAVY_TAILS, SPREAD_AT_BOTH_ENDS, FIVE_LEVELS, THIRTY_BELOW)
BOOTSTRAP_LEVEL: Final = Decimal("0.95")
BOOTSTRAP_SAMPLES: Final = 400
RESAMPLES: Final = 999
"""The bootstrap is simulated on a smaller grid: each of its samples costs as much as a hundred of the others."""

MAIN_RULES: Final = ("jackknife", "bonett-wright", "tau jackknife")
"""Rules simulated at every level; the others, kept for comparison, at 0.95 alone."""

COEFFICIENTS: Final[tuple[CoefficientName, ...]] = ("Spearman rho", "Kendall tau-b")


@dataclass(frozen=True, slots=True)
class Tally:
    """What became of the samples of a cell.

    Attributes
    ----------
    drawn
        Samples drawn.
    given
        Those that had an interval: in the others a variable did not vary, or the rule gives none.
    covered
        Intervals that held the true value.
    width
        Mean width of the intervals.
    """

    drawn: int
    given: int
    covered: int
    width: float


@dataclass(frozen=True, slots=True)
class Cell:
    """A population and the rows of its samples."""

    population: Population
    n: int


def truths_of(family_key: str, coefficient: CoefficientName) -> tuple[float, ...]:
    """Return the true coefficients at which samples of a family are drawn.

    The family of gross errors is simulated at nearly perfect order alone, and tau-b of a variable in five levels with one without ties
    stays below 0.87.
    """
    if family_key == GROSS_ERRORS:
        return (0.7983,) if coefficient == "Spearman rho" else (0.78,)
    if family_key == ONE_IN_LEVELS and coefficient == "Kendall tau-b":
        return (0.0, 0.3, 0.6, 0.8)
    return (0.0, 0.3, 0.6, 0.8, 0.95)


def samples_of(n: int) -> int:
    """Return how many samples of ``n`` rows are drawn for a cell of the shipped table."""
    return 6_000 if n <= 30 else 4_000


def stream_of(cell: Cell, seed: int) -> np.random.Generator:
    """Return the stream of a cell: no two cells share one, and none depends on another."""
    population = cell.population
    return np.random.default_rng(
        [
            seed,
            COEFFICIENTS.index(population.coefficient),
            list(FAMILIES).index(population.family.key),
            cell.n,
            int(10_000 * Decimal(str(population.truth))),
        ]
    )


def draw(cell: Cell, samples: int, generator: np.random.Generator) -> tuple[Floats, Floats]:
    """Return x and y of as many samples, each of shape (samples, n)."""
    return cell.population.family.build(random_shocks((samples, cell.n), generator), cell.population.parameter)


def simulate_cell(cell: Cell, samples: int, seed: int = SEED) -> dict[tuple[str, Decimal], Tally]:
    """Return the tallies of every rule for the cell’s coefficient, by the rule’s name in the table and the level."""
    population = cell.population
    sums = sums_of(population.coefficient, *draw(cell, samples, stream_of(cell, seed)))
    tallies = {}
    for short, rule in RULES.items():
        if rule.coefficient != population.coefficient:
            continue
        for level in LEVELS if short in MAIN_RULES else (BOOTSTRAP_LEVEL,):
            low, high = rule.limits(sums, float((1 - level) / 2))
            covered = np.count_nonzero((low <= population.truth) & (population.truth <= high))
            tallies[short, level] = Tally(samples, len(low), int(covered), float(np.mean(high - low)))
    return tallies


def simulate_bootstrap(cell: Cell, samples: int = BOOTSTRAP_SAMPLES, seed: int = SEED) -> Tally:
    """Return the tally of the bootstrap rule, sample by sample through the rule itself."""
    generator = stream_of(cell, seed)
    truth = cell.population.truth
    widths, covered = [], 0
    for x, y in zip(*draw(cell, samples, generator), strict=True):
        x_codes, y_codes = (np.unique(values, return_inverse=True)[1].astype(np.int64) for values in (x, y))
        question = IntervalQuestion(
            rho(x_codes, y_codes),
            x_codes,
            y_codes,
            BOOTSTRAP_LEVEL,
            "two-sided",
            Resampling(RESAMPLES, generator),
        )
        found = bca_bootstrap(question)
        if isinstance(found, Interval):
            widths.append(found.high - found.low)
            covered += found.low <= truth <= found.high
    return Tally(samples, len(widths), covered, float(np.mean(widths)))


def simulate_all(
    populations: tuple[Population, ...], progress: Callable[[str], None], seed: int = SEED
) -> Iterator[tuple[str, Decimal, Cell, Tally]]:
    """Yield every row of the table: the rule’s name in it, the level, the cell and the tally."""
    for population in populations:
        progress(f"{population.coefficient} {population.truth}: {population.family.words}")
        for n in ROWS:
            cell = Cell(population, n)
            for (short, level), tally in simulate_cell(cell, samples_of(n), seed).items():
                yield short, level, cell, tally
            if (
                population.coefficient == "Spearman rho"
                and population.family.key in BOOTSTRAP_FAMILIES
                and n in BOOTSTRAP_ROWS
            ):
                yield BOOTSTRAP, BOOTSTRAP_LEVEL, cell, simulate_bootstrap(cell, seed=seed)
