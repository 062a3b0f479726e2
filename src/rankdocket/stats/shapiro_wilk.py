"""The W of Shapiro and Wilk: how near values come to a normal distribution.

It stands alone because its library is slow to import; no coefficient needs it.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from scipy.stats import shapiro

from rankdocket.references import Description
from rankdocket.stats.exact_values import Given, exact_values
from rankdocket.stats.no_answer import NoAnswer

SHAPIRO_WILK: Final = Description(
    "The W of Shapiro and Wilk was computed by Royston’s approximation; its p-value is approximate.",
    ("shapiro1965", "royston1995"),
)

FEWEST_VALUES: Final = 3
MOST_VALUES: Final = 5000
"""Above it the approximation has not been fitted (royston1995)."""


@dataclass(frozen=True, slots=True)
class NormalityTest:
    """W, above 0 to 1, and the approximate p-value of a normal distribution."""

    w: float
    p_value: float


def shapiro_wilk(values: Sequence[Given]) -> NormalityTest | NoAnswer:
    """Return W and its p-value (shapiro1965, royston1995), or why there is none.

    Raises
    ------
    ValueError
        If a value is not a finite number.
    """
    exact = exact_values(values)
    if not FEWEST_VALUES <= len(exact) <= MOST_VALUES:
        return NoAnswer(f"W is known for {FEWEST_VALUES} to {MOST_VALUES} values")
    column = [float(value) for value in exact]
    if min(column) == max(column):
        return NoAnswer("the values do not vary")
    found = shapiro(column)
    return NormalityTest(float(found.statistic), float(found.pvalue))
