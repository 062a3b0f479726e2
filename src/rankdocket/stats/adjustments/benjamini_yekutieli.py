"""The step-up adjustment of Benjamini and Yekutieli."""

from fractions import Fraction
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.adjustment import AdjustmentRule, step_up


def benjamini_yekutieli(p_values: tuple[Fraction, ...]) -> tuple[Fraction, ...]:
    """Return, for the j-th smallest of m p-values, the smallest of m c p / i of those from it up (benjamini2001).

    c is the sum 1 + 1/2 + … + 1/m.
    """
    return step_up(p_values, harmonic_factors(len(p_values)))


def harmonic_factors(family: int) -> tuple[Fraction, ...]:
    """Return the family’s size times c over 1, 2, …, itself."""
    harmonic = sum((Fraction(1, place) for place in range(1, family + 1)), Fraction(0))
    return tuple(harmonic * Fraction(family, place) for place in range(1, family + 1))


BENJAMINI_YEKUTIELI: Final = AdjustmentRule(
    "Benjamini-Yekutieli",
    "Benjamini-Yekutieli",
    benjamini_yekutieli,
    harmonic_factors,
    "share of false findings",
    Description(
        "The p-values of the {family} associations of the family were adjusted by the step-up rule of Benjamini and "
        "Yekutieli, which keeps the expected share of false findings among the findings (the false discovery rate) at or below alpha, and not the "
        "chance of any false finding, however the p-values depend on one another.",
        ("benjamini2001",),
    ),
)
