"""The exact null of Spearman rho without ties, from counts that come with the program (kendall1939).

``spearman_counts.npz`` holds, for each n from 3 up, how many of the n! orders give each value of s, half the sum of
squared rank differences, from 0 to the middle of its range; the null is symmetric, so the other half is its mirror.

How they were made.  The counts are the coefficients of the permanent of the matrix of powers x^(i·j).  Centred ranks come
in pairs of opposite sign, which folds the sum over signs for the permanent to a quarter of its length.  The folded sum
was taken at roots of unity modulo primes just under 2^50, as many as the largest count needs (one to n = 19, two above);
the symmetry halves the number of roots.  Fourier inversion and the Chinese remainder theorem give the integers.

How they were checked.  For n = 3 to 9 all n! orders were listed.  Two dynamic programmes over used ranks, written
apart from each other and from the permanent, gave the same counts for n = 4 to 16 and 18 to 20.  For every n the
counts sum to n!; a Fourier coefficient beyond the range was 0 modulo each prime; the first three counts are 1, n − 1
and C(n − 2, 2); second and fourth moments are those of the closed forms; the moments of orders 6 to 12 lie on polynomials
in n with n to spare, and at n = 28, 29, 30, which had no part in finding those polynomials, all orders to 12 agree.
Two far tails each at n = 21 and 22 agree with a third programme to 3 parts in 10^16.
The tests of this module repeat what can be repeated in a minute.
"""

from collections.abc import Iterator
from contextlib import contextmanager
from functools import cache
from importlib.resources import files
from math import factorial
from typing import Final

import numpy as np
from numpy.lib.npyio import NpzFile

from rankdocket.errors import ComputeError
from rankdocket.stats.null import ExactNull

COUNTS: Final = "spearman_counts.npz"
"""Per n the lower 64 bits of the counts (``lo…``) and, where a count needs more, the upper ones (``hi…``)."""

BY_HAND: Final = {1: (1,), 2: (1,)}
"""n → counts for s from 0 to the middle, where nothing needs to be looked up."""


@cache
def reach() -> int:
    """Return the largest n whose counts come with the program."""
    with _held() as held:
        return max(int(name.removeprefix("lo")) for name in held.files if name.startswith("lo"))


def untied_null(n: int) -> ExactNull:
    """Return the exact null of rho’s numerator for ``n`` rows without ties.

    Raises
    ------
    ComputeError
        If ``n`` is not between 1 and :func:`reach`.
    """
    if n not in range(1, reach() + 1):
        raise ComputeError(f"The untied null is tabulated for 1 to {reach()} rows, not for {n}.")
    largest = (n**3 - n) // 3
    counts = counts_by_half_sum(n)
    # From perfect disagreement up; the same counts read from either end.
    statistics = np.arange(-largest, largest + 1, 4, dtype=np.int64)
    occurs = np.fromiter((count > 0 for count in counts), dtype=np.bool_, count=len(counts))
    return ExactNull("exact, no ties", statistics[occurs], tuple(count for count in counts if count), factorial(n))


def counts_by_half_sum(n: int) -> tuple[int, ...]:
    """Return the orders of ``n`` rows, from 1 to :func:`reach`, by s = 0 … n(n² − 1)/6, half the sum of squares."""
    span = (n**3 - n) // 6
    half = BY_HAND[n] if n in BY_HAND else _half(n)
    # An odd number of values has a middle one, which the mirror must not repeat.
    return half + tuple(reversed(half if span % 2 else half[:-1]))


def _half(n: int) -> tuple[int, ...]:
    with _held() as held:
        low: list[int] = held[f"lo{n}"].tolist()
        high: list[int] = held[f"hi{n}"].tolist() if f"hi{n}" in held.files else [0] * len(low)
    return tuple(upper << 64 | lower for lower, upper in zip(low, high, strict=True))


@contextmanager
def _held() -> Iterator[NpzFile]:
    with files(__package__).joinpath(COUNTS).open("rb") as file, np.load(file, allow_pickle=False) as held:
        yield held
