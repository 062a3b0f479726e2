"""How far an association built into two variables reaches, by example: three quantities that have nothing in common.

The figures come from the simulation in ``tests/stats/test_built_in.py``.
"""

from dataclasses import dataclass
from decimal import Decimal
from typing import Final


@dataclass(frozen=True, slots=True)
class BuiltInExample:
    """Mean rho, two decimals, of ``rows`` rows."""

    rows: int
    mean_rho: Decimal


ROWS: Final = 100

SPREAD: Final = Decimal("0.2")
"""Standard deviation over mean of all three quantities that make the two ratios."""

SHARED_DENOMINATOR: Final = BuiltInExample(ROWS, Decimal("0.48"))
"""x/z against y/z (pearson1897), x, y and z normal with the same mean and the same spread."""

CHANGE_AGAINST_BASELINE: Final = BuiltInExample(ROWS, Decimal("-0.68"))
"""y − x against x (oldham1962), x and y normal with the same variance."""
