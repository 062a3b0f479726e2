"""Counts per score, packed into one large integer: each slot of so many bits holds the count of one score.

Adding two packed rows is one addition, raising every score is one shift, and no count can overflow as long as
the whole of all counts fits in a slot.
"""

from dataclasses import dataclass
from math import factorial
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.stats.forecast import slot_bits
from rankdocket.stats.ranks import TieGroups

Packed: TypeAlias = tuple[int, int]
"""(low, slots): the lowest score, and the counts from it upwards."""

WORD_BYTES: Final = 8


def merged(left: Packed, right: Packed, bits: int) -> Packed:
    """Return the sum of two rows of counts."""
    low_left, slots_left = left
    low_right, slots_right = right
    if low_left <= low_right:
        return low_left, slots_left + (slots_right << (low_right - low_left) * bits)
    return low_right, slots_right + (slots_left << (low_left - low_right) * bits)


def summed(rows: list[Packed], bits: int) -> Packed:
    """Return the sum of rows of counts: neighbours first, so that short rows are added to short ones."""
    level = sorted(rows)
    while len(level) > 1:
        pairs = zip(level[::2], level[1::2], strict=False)
        rest = level[-1:] if len(level) % 2 else []
        level = [merged(left, right, bits) for left, right in pairs] + rest
    return level[0] if level else (0, 0)


def unpacked(row: Packed, bits: int) -> dict[int, int]:
    """Return score → count, counts above 0 only; ``bits`` is a multiple of 8."""
    low, slots = row
    counts = counts_of(slots, bits, -(-slots.bit_length() // bits))
    return {low + place: count for place, count in enumerate(counts) if count}


def counts_of(slots: int, bits: int, length: int) -> list[int]:
    """Return the counts in the first ``length`` slots; ``bits`` is a multiple of 8."""
    table = _bytes_of(slots, bits, length)
    words = -(-table.shape[1] // WORD_BYTES)
    padded = np.zeros((length, words * WORD_BYTES), dtype=np.uint8)
    padded[:, : table.shape[1]] = table
    columns = padded.view("<u8").T.tolist()
    counts: list[int] = columns[-1]
    for column in reversed(columns[:-1]):
        counts = [high << 64 | low for high, low in zip(counts, column, strict=True)]
    return counts


@dataclass(frozen=True, slots=True)
class Relay:
    """How slots are laid out anew.

    Attributes
    ----------
    bits, into
        Width of a slot before and after, multiples of 8; never narrower after.
    apart
        Distance of the slots after, with empty slots between them.
    """

    bits: int
    into: int
    apart: int

    @property
    def is_needed(self) -> bool:
        """Whether anything changes."""
        return self.bits != self.into or self.apart != 1

    def laid(self, slots: int, length: int) -> int:
        """Return the first ``length`` slots laid out anew."""
        if length == 1 or not self.is_needed:
            return slots
        table = _bytes_of(slots, self.bits, length)
        wider = np.zeros((length, self.apart * self.into // 8), dtype=np.uint8)
        wider[:, : table.shape[1]] = table
        return int.from_bytes(wider.tobytes(), "little")


def _bytes_of(slots: int, bits: int, length: int) -> npt.NDArray[np.uint8]:
    size = bits // 8
    return np.frombuffer(slots.to_bytes(length * size, "little"), dtype=np.uint8).reshape(length, size)


def slot_widths(dealt: TieGroups, start: int, upto: int) -> list[int]:
    """Return the bits of a slot after ``start`` … ``upto`` rows: enough for each, and seldom changed."""
    widths: list[int] = []
    for taken in range(start, upto + 1):
        most = most_arrangements(dealt, taken)
        fits = widths and most < 1 << widths[-1]
        # A quarter more than is needed now, for the next few layers.
        widths.append(widths[-1] if fits else slot_bits(1 << most.bit_length() * 5 // 4))
    return widths


def most_arrangements(dealt: TieGroups, taken: int) -> int:
    """Return the most distinct arrangements that one state of ``taken`` dealt members has: shares as equal as can be."""
    arrangements, left = factorial(taken), taken
    for groups, size in zip(range(dealt.distinct, 0, -1), sorted(dealt.sizes), strict=True):
        share = min(size, left // groups)
        arrangements //= factorial(share)
        left -= share
    return arrangements
