"""What a rule is that adjusts the p-values of several tests, and the step-up scheme that some of them share."""

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal, TypeAlias

from rankdocket.references import Description

AdjustmentName: TypeAlias = Literal[
    "Holm", "Hochberg", "Bonferroni", "Benjamini-Hochberg", "Benjamini-Yekutieli", "none"
]
"""Every rule there is; the words that a spec may write are among them."""


@dataclass(frozen=True, slots=True)
class AdjustmentRule:
    """A rule: p-values of the whole family in, adjusted p-values in the same order out.

    An association without a p-value stays in the family and enters as 1.

    Attributes
    ----------
    describe
        What was done, which error it keeps at or below alpha, and under which dependence of the p-values.
    """

    key: AdjustmentName
    label: str
    function: Callable[[tuple[Fraction, ...]], tuple[Fraction, ...]]
    describe: Description


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
