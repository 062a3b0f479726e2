"""Drawn permutations: the null when counting all of them would take too long (dwass1957)."""

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final

import numpy as np

from rankdocket.errors import ComputeError
from rankdocket.stats.null import TailCounts
from rankdocket.stats.ranks import SAFE_SUM, Codes, centred_ranks
from rankdocket.stats.tau import concordance_difference
from rankdocket.vocabulary import CoefficientName

KEYS_AT_ONCE: Final = 2**20
"""Random keys held at a time: 8 MiB of them."""


@dataclass(frozen=True, slots=True, eq=False)
class Draws:
    """How many permutations are drawn, and from which stream."""

    permutations: int
    generator: np.random.Generator


def drawn_tails(name: CoefficientName, x_codes: Codes, y_codes: Codes, *, observed: int, draws: Draws) -> TailCounts:
    """Return how many drawn permutations of y have a numerator at least as extreme as ``observed``.

    Numerators are compared as integers.

    Raises
    ------
    ComputeError
        If there are so many rows that sums of rank products could exceed an int64.
    """
    # Sorted by both, so that the draws meet the same pairs whatever order the rows of the file have.
    order = np.lexsort((y_codes, x_codes))
    x, y = x_codes[order], y_codes[order]
    x_ranks, y_ranks = centred_ranks(x), centred_ranks(y)
    if len(x) ** 3 >= SAFE_SUM:
        raise ComputeError("There are too many rows for drawn permutations in exact integers.")
    greater = less = two_sided = 0
    for permutations in permutations_of(len(x), draws):
        match name:
            case "Spearman rho":
                numerators = y_ranks[permutations] @ x_ranks
            case "Kendall tau-b":
                numerators = concordance_difference(x, y[permutations])
        greater += int(np.count_nonzero(numerators >= observed))
        less += int(np.count_nonzero(numerators <= observed))
        two_sided += int(np.count_nonzero(np.abs(numerators) >= abs(observed)))
    return TailCounts("drawn permutations", greater, less, two_sided, draws.permutations)


def permutations_of(n: int, draws: Draws) -> Iterator[Codes]:
    """Yield blocks of permutations of 0 … n − 1, shape (rows, n), as many rows in all as are drawn.

    Each row is the order of n raw 64-bit keys.  The lowest bits of a key are given up to its own place, so no
    two keys are equal, and sorting the keys sorts the places: the same permutation on every processor.
    """
    place_bits = max(1, (n - 1).bit_length())
    mask = np.uint64((1 << place_bits) - 1)
    places = np.arange(n, dtype=np.uint64)
    at_once = max(1, KEYS_AT_ONCE // max(1, n))
    for start in range(0, draws.permutations, at_once):
        rows = min(at_once, draws.permutations - start)
        keys = draws.generator.bit_generator.random_raw(rows * n).reshape(rows, n)
        keys = (keys & ~mask) | places
        keys.sort(axis=1)
        yield (keys & mask).astype(np.int64)
