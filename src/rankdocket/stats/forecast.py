"""What an exact count would cost, told before anything is computed."""

from dataclasses import dataclass
from itertools import accumulate
from math import comb
from typing import Final

from rankdocket.stats.ranks import TieGroups

ROWS_LIMIT: Final = 1_000
"""Most rows for which all n! permutations are counted: above, n! itself could no longer be printed or filed."""

DIGIT_BITS: Final = 30
"""Bits that one digit of a Python integer carries (in DIGIT_BYTES bytes)."""

DIGIT_BYTES: Final = 4


@dataclass(frozen=True, slots=True)
class Forecast:
    """The predicted cost of a null, whole numbers worked out from tie-group sizes alone.

    Attributes
    ----------
    states
        Partial arrangements that are kept apart.
    nanoseconds
        Processor time on one core, from unit costs that were measured once.
    bytes
        Memory at the widest point.
    """

    states: int
    nanoseconds: int
    bytes: int


def distinct_arrangements(groups: TieGroups) -> int:
    """Return in how many distinguishable orders values with these ties can stand: n!/∏t!."""
    sizes = sorted(groups.sizes, reverse=True)
    return _balanced_product([comb(placed, size) for placed, size in zip(accumulate(sizes), sizes, strict=True)])


def _balanced_product(factors: list[int]) -> int:
    """Return the product, halves first: factors of like length multiply far faster than one long with many short."""
    if len(factors) < 2:
        return factors[0] if factors else 1
    middle = len(factors) // 2
    return _balanced_product(factors[:middle]) * _balanced_product(factors[middle:])


def slot_bits(largest_count: int) -> int:
    """Return the width, in whole bytes, of a slot that holds counts up to ``largest_count``."""
    return -(-largest_count.bit_length() // 8) * 8
