"""The catalogue of adjustments, in the order of the vocabulary."""

from collections.abc import Sequence
from decimal import Decimal
from fractions import Fraction
from typing import Final

from rankdocket.stats.adjustment import AdjustmentRule
from rankdocket.stats.adjustments.holm import HOLM
from rankdocket.stats.adjustments.none import NONE
from rankdocket.vocabulary import Adjustment

ADJUSTMENTS: Final[tuple[AdjustmentRule, ...]] = (HOLM, NONE)
"""Every adjustment rule."""


def adjusted(p_values: Sequence[Fraction | Decimal | int | float], *, rule: Adjustment) -> tuple[Fraction, ...]:
    """Return adjusted p-values, exactly, in the order given; a float is taken at its exact value.

    Raises
    ------
    ValueError
        If a p-value does not lie between 0 and 1, or there is no such rule.
    """
    chosen = next((candidate for candidate in ADJUSTMENTS if candidate.key == rule), None)
    if chosen is None:
        raise ValueError(f"{rule!r} is no adjustment; write one of: {', '.join(each.key for each in ADJUSTMENTS)}")
    for position, p_value in enumerate(p_values):
        if not 0 <= p_value <= 1:
            raise ValueError(f"the p-value at position {position} is {p_value}, not between 0 and 1")
    return chosen.function(tuple(Fraction(p_value) for p_value in p_values))
