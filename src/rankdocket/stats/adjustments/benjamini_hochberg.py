"""The step-up adjustment of Benjamini and Hochberg."""

from fractions import Fraction
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.adjustment import AdjustmentRule, step_up


def benjamini_hochberg(p_values: tuple[Fraction, ...]) -> tuple[Fraction, ...]:
    """Return, for the j-th smallest of m p-values, the smallest of m p / i of those from it up (benjamini1995)."""
    return step_up(p_values, shared_factors(len(p_values)))


def shared_factors(family: int) -> tuple[Fraction, ...]:
    """Return the family’s size over 1, 2, …, itself."""
    return tuple(Fraction(family, place) for place in range(1, family + 1))


BENJAMINI_HOCHBERG: Final = AdjustmentRule(
    "Benjamini-Hochberg",
    "Benjamini-Hochberg",
    benjamini_hochberg,
    shared_factors,
    "share of false findings",
    Description(
        "The p-values of the {family} associations of the family were adjusted by the step-up rule of Benjamini and "
        "Hochberg. It keeps the expected share of false findings among the findings (the false discovery rate) at or below alpha, and not the "
        "chance of any false finding, if the p-values that belong to true nulls are independent of one another and of "
        "the rest, or all p-values depend positively on each of them (positive regression dependence).",
        ("benjamini1995", "benjamini2001"),
    ),
)
