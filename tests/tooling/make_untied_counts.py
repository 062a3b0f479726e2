"""Counts the orders of untied rows anew and holds them against those that come with the program:

    python tests/tooling/make_untied_counts.py 20

A dynamic programme that shares no line and no idea with the folded permanent behind the shipped counts: the lower half of the
rows is dealt every set of columns, the upper half what is left, and the two are multiplied.  It reaches n = 20 in
seconds.  Above that it grows by four with each row; the shipped counts for n = 21 to 30 came from the permanent alone,
and the tests hold them against sums, moments and polynomials.
"""

import sys
from itertools import combinations
from math import factorial

import numpy as np

NARROW, WIDE = 4, 8
"""Bytes of a slot: 10! goes into the narrow one, 20! into the wide one."""

MOST_ROWS = 20


def main() -> None:
    from rankdocket.stats.nulls.untied import counts_by_half_sum

    agree = True
    for n in range(3, int(sys.argv[1]) + 1):
        same = counted(n) == counts_by_half_sum(n)
        agree = agree and same
        print(n, "agrees" if same else "DIFFERS", flush=True)
    sys.exit(0 if agree else 1)


def counted(n: int) -> tuple[int, ...]:
    """Return the orders of ``n`` rows, 2 to 20, by half the sum of squared rank differences, from 0 up."""
    if not 2 <= n <= MOST_ROWS:
        raise ValueError(f"this programme counts 2 to {MOST_ROWS} rows, not {n}")
    low = n // 2
    dealt = _dealt(n, n - low)
    total, everything = 0, frozenset(range(n))
    for columns in combinations(range(n), low):
        rest = tuple(sorted(everything.difference(columns)))
        times = 1
        if n % 2 == 0:
            # Turning rows and columns round keeps the sum of products and exchanges the two halves.
            turned = tuple(n - 1 - column for column in reversed(rest))
            if turned < columns:
                continue
            times = 1 if turned == columns else 2
        (lower, lower_start), (upper, upper_start) = _moved(dealt, columns), _moved(dealt, rest)
        start = lower_start + upper_start + low * sum(rest)
        total += times * lower * upper << 8 * WIDE * start
    # Perfect order has the largest sum of products; each step down is one step up of half the sum of squares.
    top = sum(row * row for row in range(n))
    held = np.frombuffer(total.to_bytes(WIDE * (top + 1), "little"), dtype="<u8").tolist()
    span = (n**3 - n) // 6
    return tuple(held[top - half_sum] for half_sum in range(span + 1))


def _dealt(n: int, most: int) -> dict[tuple[int, ...], tuple[int, int]]:
    """Return, for sets of columns that begin with 0, the orders by the sum of row times column: wide slots, and where they begin.

    Rows are counted from 0; only sets of ``most`` columns and of the other half's size are kept.
    """
    layer: dict[tuple[int, ...], tuple[int, int]] = {(0,): (1, 0)}
    kept = {}
    for size in range(1, most + 1):
        if size > 1:
            layer = {
                columns: _one_more_row(layer, columns)
                for columns in ((0, *others) for others in combinations(range(1, n), size - 1))
            }
        if size in (n - most, most):
            kept.update({columns: (_widened(packed), start) for columns, (packed, start) in layer.items()})
    return kept


def _one_more_row(layer: dict[tuple[int, ...], tuple[int, int]], columns: tuple[int, ...]) -> tuple[int, int]:
    """Deal the last row each of the columns in turn."""
    row = len(columns) - 1
    parts = []
    for place, column in enumerate(columns):
        packed, start = _moved(layer, columns[:place] + columns[place + 1 :])
        parts.append((packed, start + row * column))
    first = min(start for _, start in parts)
    return sum(packed << 8 * NARROW * (start - first) for packed, start in parts), first


def _moved(held: dict[tuple[int, ...], tuple[int, int]], columns: tuple[int, ...]) -> tuple[int, int]:
    """Return what is held for columns that need not begin with 0: moving them all moves every sum alike."""
    by = columns[0]
    packed, start = held[tuple(column - by for column in columns) if by else columns]
    return packed, start + by * len(columns) * (len(columns) - 1) // 2


def _widened(packed: int) -> int:
    slots = -(-packed.bit_length() // (8 * NARROW))
    narrow = np.frombuffer(packed.to_bytes(NARROW * slots, "little"), dtype="<u4")
    return int.from_bytes(narrow.astype("<u8").tobytes(), "little")


if __name__ == "__main__":
    assert factorial(MOST_ROWS // 2) < 2 ** (8 * NARROW)
    assert factorial(MOST_ROWS) < 2 ** (8 * WIDE)
    main()
