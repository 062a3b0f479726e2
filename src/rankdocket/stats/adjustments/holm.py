"""Holm’s step-down adjustment."""

from fractions import Fraction
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.adjustment import AdjustmentRule, down_to_one


def holm(p_values: tuple[Fraction, ...]) -> tuple[Fraction, ...]:
    """Return, for the j-th smallest of m p-values, the largest of (m − i + 1) p of those up to it (holm1979)."""
    family = len(p_values)
    order = sorted(range(family), key=lambda place: p_values[place])
    adjusted = [Fraction(1)] * family
    largest = Fraction(0)
    for factor, place in zip(down_to_one(family), order, strict=True):
        largest = max(largest, min(Fraction(1), factor * p_values[place]))
        adjusted[place] = largest
    return tuple(adjusted)


HOLM: Final = AdjustmentRule(
    "Holm",
    "Holm",
    holm,
    down_to_one,
    "any false finding",
    Description(
        "The p-values of the {family} associations of the family were adjusted by Holm’s step-down rule, which keeps "
        "the chance of any false finding in the family at or below alpha.",
        ("holm1979",),
    ),
)
