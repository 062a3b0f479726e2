"""What an exact count would cost, told before anything is computed."""

from dataclasses import dataclass
from itertools import accumulate
from math import comb
from typing import Final

from rankdocket.stats.ranks import TieGroups

ROWS_LIMIT: Final = 1_000
"""Most rows for which all n! permutations are counted: above, n! itself could no longer be printed or filed."""

STATES_LIMIT: Final = 2_000_000
"""More states than this are not forecast in detail: their mere list would exceed any budget."""

DIGIT_BITS: Final = 30
"""Bits that one digit of a Python integer carries (in DIGIT_BYTES bytes)."""

DIGIT_BYTES: Final = 4

STEP_OPERATIONS: Final = 400
"""What one step of a walk costs beside its additions, in operations (measured, see budgets in choose_null)."""


@dataclass(frozen=True, slots=True)
class Forecast:
    """The predicted cost of an exact count.

    Attributes
    ----------
    states
        Partial arrangements that are kept apart.
    operations
        Additions of digits, fixed costs included.
    bytes
        Memory at the widest point.
    """

    states: int
    operations: int
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


def count_states(groups: TieGroups) -> int | None:
    """Return ∏(t + 1), the ways to have used a part of each tie group; ``None`` above STATES_LIMIT."""
    states = 1
    for size in groups.sizes:
        states *= size + 1
        if states > STATES_LIMIT:
            return None
    return states


def fewer_states_first(x: TieGroups, y: TieGroups) -> tuple[TieGroups, TieGroups]:
    """Return the two variables, first the one whose values leave fewer states when they are dealt."""
    x_states, y_states = count_states(x), count_states(y)
    if x_states is None or (y_states is not None and y_states < x_states):
        return y, x
    return x, y


def states_by_members(groups: TieGroups) -> tuple[int, ...]:
    """Return, for 0 … n members used in all, how many states have that many."""
    layers = [1]
    for size in groups.sizes:
        wider = [0] * (len(layers) + size)
        for used, count in enumerate(layers):
            for more in range(size + 1):
                wider[used + more] += count
        layers = wider
    return tuple(layers)


def slot_bits(largest_count: int) -> int:
    """Return the width, in whole bytes, of a slot that holds counts up to ``largest_count``."""
    return -(-largest_count.bit_length() // 8) * 8
