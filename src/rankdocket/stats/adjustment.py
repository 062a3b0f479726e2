"""What a rule is that adjusts the p-values of several tests, and the step-up scheme that some of them share."""

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal, TypeAlias

from rankdocket.references import Description

AdjustmentName: TypeAlias = Literal[
    "Holm", "Hochberg", "Bonferroni", "Benjamini-Hochberg", "Benjamini-Yekutieli", "none"
]
"""Every rule that needs nothing but the p-values of a family."""

ErrorRate: TypeAlias = Literal["any false finding", "share of false findings", "each test alone"]
"""What alpha bounds: the chance of any false finding, the expected share of false ones, or each test’s own error."""


@dataclass(frozen=True, slots=True)
class AdjustmentRule:
    """A rule: p-values of the whole family in, adjusted p-values in the same order out.

    An association without a p-value stays in the family and enters as 1.  An adjusted p-value never falls when any
    p-value of the family rises, so that bounds of p-values adjusted together bound the adjusted ones.

    Attributes
    ----------
    factors
        Size of the family, 1 or more → by how much the smallest, second smallest, … p-value is multiplied; never rising.
        The largest one is what p meets beside tests that all fail; an adjusted p is never below the smallest times p.
    error_rate
        What the rule keeps at or below alpha.
    describe
        What was done, which error it keeps at or below alpha, and under which dependence of the p-values.
    """

    key: AdjustmentName
    label: str
    function: Callable[[tuple[Fraction, ...]], tuple[Fraction, ...]]
    factors: Callable[[int], tuple[Fraction, ...]]
    error_rate: ErrorRate
    describe: Description


def down_to_one(family: int) -> tuple[Fraction, ...]:
    """Return the number of hypotheses not yet decided: the family’s size first, 1 last."""
    return tuple(Fraction(family - smaller) for smaller in range(family))


def step_up(p_values: tuple[Fraction, ...], factors: tuple[Fraction, ...]) -> tuple[Fraction, ...]:
    """Return, for the j-th smallest p-value, the smallest product of factor and p from the j-th up, at most 1.

    Parameters
    ----------
    p_values
        Each 0 to 1.
    factors
        The factor of the smallest p-value first; as many as there are p-values.
    """
    order = sorted(range(len(p_values)), key=lambda place: p_values[place])
    adjusted = [Fraction(1)] * len(p_values)
    smallest = Fraction(1)
    for place, factor in zip(reversed(order), reversed(factors), strict=True):
        smallest = min(smallest, factor * p_values[place])
        adjusted[place] = smallest
    return tuple(adjusted)
