"""Slow and obvious: every permutation, every pair, signs of differences."""

from collections import Counter
from collections.abc import Sequence
from itertools import combinations, permutations

from rankdocket.vocabulary import CoefficientName


def numerator(name: CoefficientName, x: Sequence[int], y: Sequence[int]) -> int:
    """Return the numerator from its definition.

    Smaller less larger values is twice the midrank less its mean, so that no ranks need to be formed.
    """
    if name == "Kendall tau-b":
        return sum(_sign(x[i] - x[j]) * _sign(y[i] - y[j]) for i, j in combinations(range(len(x)), 2))
    return sum(a * b for a, b in zip(surpluses(x), surpluses(y), strict=True))


def surpluses(values: Sequence[int]) -> list[int]:
    """Return for each value how many are smaller less how many are larger."""
    return [sum(_sign(value - other) for other in values) for value in values]


def enumerated_null(name: CoefficientName, x: Sequence[int], y: Sequence[int]) -> Counter[int]:
    """Return numerator → permutations of y that give it, by going through all of them."""
    if name == "Kendall tau-b":
        return Counter(numerator(name, x, order) for order in permutations(y))
    a = surpluses(x)
    return Counter(sum(p * q for p, q in zip(a, order, strict=True)) for order in permutations(surpluses(y)))


def _sign(difference: int) -> int:
    return (difference > 0) - (difference < 0)
