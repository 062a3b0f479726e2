"""The simulated coverage of an association’s interval, and what is to be said of it."""

from decimal import Decimal
from fractions import Fraction
from typing import Final, Literal

from rankdocket.analysis.results import AssociationAnalysis, Estimate
from rankdocket.stats.coverage.lookup import CoverageQuestion, NotSimulated, SimulatedCoverage, simulated_coverage
from rankdocket.stats.interval import Interval

MOST_MISSES: Final = Fraction(7, 5)
"""From more than so many times the misses that the level allows, at 0.95 from below 93 %, the coverage is a caveat."""

FEWEST_MISSES: Final = Fraction(3, 5)
"""With less than this share of the misses that the level allows, at 0.95 above 97 %, the interval is wider than needed."""


def coverage_of(result: AssociationAnalysis) -> SimulatedCoverage | NotSimulated | None:
    """Return the simulated coverage of the association’s interval; ``None`` where it has none."""
    if not isinstance(result.interval, Interval) or not isinstance(result.estimate, Estimate):
        return None
    coefficient, interval, screened = result.estimate.coefficient, result.interval, result.screened
    return simulated_coverage(
        CoverageQuestion(
            interval.method,
            coefficient.name,
            interval.level,
            interval.direction,
            coefficient.n,
            Decimal(coefficient.decimal_text()),
            screened.x_ties,
            screened.y_ties,
        )
    )


def judged(coverage: SimulatedCoverage) -> Literal["too low", "near", "wide"]:
    """Return whether the coverage at the nearest conditions is too low, near its level or more than needed."""
    misses, allowed = 1 - coverage.nearest.coverage, 1 - Fraction(coverage.nearest.level)
    if misses > MOST_MISSES * allowed:
        return "too low"
    return "wide" if misses < FEWEST_MISSES * allowed else "near"
