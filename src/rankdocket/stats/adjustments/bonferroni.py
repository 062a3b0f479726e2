"""Bonferroni’s adjustment."""

from fractions import Fraction
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.adjustment import AdjustmentRule


def bonferroni(p_values: tuple[Fraction, ...]) -> tuple[Fraction, ...]:
    """Return each of m p-values times m, at most 1 (dunn1961)."""
    return tuple(min(Fraction(1), len(p_values) * p_value) for p_value in p_values)


def equal_factors(family: int) -> tuple[Fraction, ...]:
    """Return the family’s size for every member."""
    return (Fraction(family),) * family


BONFERRONI: Final = AdjustmentRule(
    "Bonferroni",
    "Bonferroni",
    bonferroni,
    equal_factors,
    "any false finding",
    Description(
        "The p-values of the {family} associations of the family were multiplied by their number (Bonferroni), which "
        "keeps the chance of any false finding in the family at or below alpha, however the p-values depend on one "
        "another.",
        ("dunn1961",),
    ),
)
