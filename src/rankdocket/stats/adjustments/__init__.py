"""The catalogue of adjustments: any false finding first, then shares of false findings, then none."""

from collections.abc import Sequence
from decimal import Decimal
from fractions import Fraction
from typing import Final

from rankdocket.stats.adjustment import AdjustmentName, AdjustmentRule
from rankdocket.stats.adjustments.benjamini_hochberg import BENJAMINI_HOCHBERG
from rankdocket.stats.adjustments.benjamini_yekutieli import BENJAMINI_YEKUTIELI
from rankdocket.stats.adjustments.bonferroni import BONFERRONI
from rankdocket.stats.adjustments.hochberg import HOCHBERG
from rankdocket.stats.adjustments.holm import HOLM
from rankdocket.stats.adjustments.none import NONE

ADJUSTMENTS: Final[tuple[AdjustmentRule, ...]] = (
    HOLM,
    HOCHBERG,
    BONFERRONI,
    BENJAMINI_HOCHBERG,
    BENJAMINI_YEKUTIELI,
    NONE,
)
"""Every adjustment rule; the words that a spec may write stand in the same order among their keys."""


def adjusted(p_values: Sequence[Fraction | Decimal | int | float], *, rule: AdjustmentName) -> tuple[Fraction, ...]:
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
