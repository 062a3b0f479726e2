"""What a rule is that adjusts the p-values of several tests."""

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction

from rankdocket.references import Description
from rankdocket.vocabulary import Adjustment


@dataclass(frozen=True, slots=True)
class AdjustmentRule:
    """A rule: p-values of the whole family in, adjusted p-values in the same order out.

    An association without a p-value stays in the family and enters as 1.
    """

    key: Adjustment
    label: str
    function: Callable[[tuple[Fraction, ...]], tuple[Fraction, ...]]
    describe: Description
