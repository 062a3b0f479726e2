"""Every order of a few rows, for tests whose statistic has no shorter way to its null."""

from itertools import permutations
from typing import Final

import numpy as np

from rankdocket.stats.null import NullMethod
from rankdocket.stats.ranks import Codes

MOST_ENUMERATED: Final = 8
"""Rows up to which all orders are gone through: 40 320 of them."""


def all_orders(n: int) -> Codes:
    """Return every order of 0 … n − 1, shape (n!, n); for MOST_ENUMERATED rows at most."""
    if n > MOST_ENUMERATED:
        raise ValueError(f"all orders of {n} rows are too many")
    return np.array(list(permutations(range(n))), dtype=np.int64)


def enumerated_method(*, has_ties: bool) -> NullMethod:
    """Return the name of a null that was counted over all orders."""
    return "exact, conditional on the ties" if has_ties else "exact, no ties"
