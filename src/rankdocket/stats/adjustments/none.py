"""No adjustment: each p-value stands for its own question."""

from fractions import Fraction
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.adjustment import AdjustmentRule


def unadjusted(p_values: tuple[Fraction, ...]) -> tuple[Fraction, ...]:
    """Return the p-values as they are."""
    return p_values


def no_factors(family: int) -> tuple[Fraction, ...]:
    """Return 1 for every member."""
    return (Fraction(1),) * family


NONE: Final = AdjustmentRule(
    "none",
    "none",
    unadjusted,
    no_factors,
    "each test alone",
    Description("The p-values were not adjusted for the number of associations."),
)
