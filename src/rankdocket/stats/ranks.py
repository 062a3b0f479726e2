"""Ranks and tie groups, as integers.

``codes`` stands everywhere in this room for a one-dimensional int64 array whose order is the order of the
values: a smaller code is a smaller value, equal codes are a tie.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from itertools import pairwise
from math import gcd
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.errors import ComputeError

Codes: TypeAlias = npt.NDArray[np.int64]
"""One-dimensional; order is the order of the values, equal codes are a tie."""

SAFE_SUM: Final = 2**62
"""Sums that stay below it in absolute value cannot overflow an int64."""


@dataclass(frozen=True, slots=True)
class TieGroups:
    """How often each distinct value occurs.

    Attributes
    ----------
    sizes
        Rows with each distinct value, in increasing order of value; 1 for a value that stands alone.
    """

    sizes: tuple[int, ...]

    @property
    def n(self) -> int:
        """Rows."""
        return sum(self.sizes)

    @property
    def distinct(self) -> int:
        """Distinct values."""
        return len(self.sizes)

    @property
    def largest(self) -> int:
        """Rows that share the most frequent value; 0 without rows."""
        return max(self.sizes, default=0)

    @property
    def groups(self) -> int:
        """Values shared by two or more rows."""
        return sum(size > 1 for size in self.sizes)

    @property
    def tied_rows(self) -> int:
        """Rows that share their value with another row."""
        return sum(size for size in self.sizes if size > 1)

    @property
    def tied_share(self) -> Fraction:
        """Tied rows as a share of all rows, 0 to 1; 0 without rows."""
        return Fraction(self.tied_rows, self.n) if self.sizes else Fraction(0)

    @property
    def has_ties(self) -> bool:
        """Whether two rows share a value."""
        return self.groups > 0

    @property
    def is_constant(self) -> bool:
        """Whether fewer than two distinct values occur."""
        return self.distinct < 2

    @property
    def cube_sum(self) -> int:
        """The sum of t³ − t over the tie groups (kendall1945)."""
        return sum(size**3 - size for size in self.sizes)

    @property
    def pairs(self) -> int:
        """Pairs of rows tied with each other: the sum of t(t − 1)/2."""
        return sum(size * (size - 1) // 2 for size in self.sizes)

    def codes(self) -> Codes:
        """Return the codes 0, 1, … of rows with these groups, in increasing order."""
        return np.repeat(np.arange(self.distinct, dtype=np.int64), np.asarray(self.sizes, dtype=np.int64))


def tie_groups(codes: Codes) -> TieGroups:
    """Return the tie groups of ``codes``."""
    _, sizes = np.unique(codes, return_counts=True)
    return TieGroups(tuple(int(size) for size in sizes))


def doubled_midranks(codes: Codes) -> Codes:
    """Return 2R for each row, R its midrank from 1 to n: whole numbers, since a midrank ends in .0 or .5."""
    _, place, sizes = np.unique(codes, return_inverse=True, return_counts=True)
    last = np.cumsum(sizes, dtype=np.int64)
    doubled: Codes = (2 * last - sizes + 1)[place.reshape(-1)]
    return doubled


def centred_ranks(codes: Codes) -> Codes:
    """Return 2R − (n + 1) for each row: twice the midrank less its mean; they sum to 0."""
    return doubled_midranks(codes) - (len(codes) + 1)


def lattice_step(values: Sequence[int]) -> int:
    """Return the greatest common divisor of the gaps between increasing values; 1 for a single one."""
    return gcd(*(high - low for low, high in pairwise(values))) or 1


def exact_dot(left: Codes, right: Codes) -> int:
    """Return the sum of products as a Python integer, right for any length.

    Raises
    ------
    ComputeError
        If one single product could exceed an int64.
    """
    if len(left) == 0:
        return 0
    largest = int(np.abs(left).max()) * int(np.abs(right).max())
    if largest >= SAFE_SUM:
        raise ComputeError("The ranks are too large for exact sums: there are too many rows.")
    stretch = max(1, SAFE_SUM // max(1, largest))
    return sum(
        int(np.dot(left[start : start + stretch], right[start : start + stretch]))
        for start in range(0, len(left), stretch)
    )


def dense_codes(values: Sequence[Decimal | Fraction | int]) -> Codes:
    """Return codes 0, 1, … in the exact order of ``values``: 1.0 and 1.00 are a tie, no float is involved.

    Raises
    ------
    ValueError
        If a value is not a finite number.
    """
    kinds = {type(value) for value in values}
    for position, value in enumerate(values):
        if isinstance(value, Decimal) and not value.is_finite():
            raise ValueError(f"the value at position {position} is not a finite number")
    # Decimals and fractions refuse to be compared with each other, so mixed input goes through fractions.
    exact = [Fraction(value) for value in values] if Fraction in kinds and Decimal in kinds else list(values)
    place = {value: code for code, value in enumerate(sorted(set(exact)))}
    return np.fromiter((place[value] for value in exact), dtype=np.int64, count=len(exact))
