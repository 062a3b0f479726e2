"""Counts per score, packed into one large integer: slot k of ``bits`` bits holds the count of score ``low + k``.

Adding two packed rows is one addition, raising every score is one shift, and no count can overflow as long as
the whole of all arrangements fits in a slot.
"""

from typing import TypeAlias

Packed: TypeAlias = tuple[int, int]
"""(low, slots): the lowest score, and the counts from it upwards."""


def merged(left: Packed, right: Packed, bits: int) -> Packed:
    """Return the sum of two rows of counts."""
    low_left, slots_left = left
    low_right, slots_right = right
    if low_left <= low_right:
        return low_left, slots_left + (slots_right << (low_right - low_left) * bits)
    return low_right, slots_right + (slots_left << (low_left - low_right) * bits)


def unpacked(row: Packed, bits: int) -> dict[int, int]:
    """Return score → count, counts above 0 only; ``bits`` is a multiple of 8."""
    low, slots = row
    size = bits // 8
    length = -(-slots.bit_length() // bits)
    data = slots.to_bytes(length * size, "little")
    counts = (int.from_bytes(data[place * size : (place + 1) * size], "little") for place in range(length))
    return {low + place: count for place, count in enumerate(counts) if count}
