"""Hochberg’s step-up adjustment."""

from fractions import Fraction
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.adjustment import AdjustmentRule, down_to_one, step_up


def hochberg(p_values: tuple[Fraction, ...]) -> tuple[Fraction, ...]:
    """Return, for the j-th smallest of m p-values, the smallest of (m − i + 1) p of those from it up (hochberg1988)."""
    return step_up(p_values, down_to_one(len(p_values)))


HOCHBERG: Final = AdjustmentRule(
    "Hochberg",
    "Hochberg",
    hochberg,
    down_to_one,
    "any false finding",
    Description(
        "The p-values of the {family} associations of the family were adjusted by Hochberg’s step-up rule, which keeps "
        "the chance of any false finding in the family at or below alpha if the p-values that belong to true nulls are "
        "independent of one another or depend on one another positively, in the sense that the inequality of Simes "
        "needs; under other dependence that chance can be larger.",
        ("hochberg1988", "simes1986", "sarkar1998"),
    ),
)
