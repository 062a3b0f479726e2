"""Kendall tau-b: concordant less discordant pairs, counted in n log n steps, in integers."""

from typing import Final

import numpy as np

from rankdocket.references import Description
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.ranks import Codes, tie_groups

TAU_B: Final = Description(
    "Kendall tau-b was computed as concordant less discordant pairs of rows over the geometric mean of the numbers "
    "of pairs not tied in the one and in the other variable.",
    ("kendall1938", "kendall1945"),
)


def tau_b(x_codes: Codes, y_codes: Codes) -> Coefficient:
    """Return Kendall tau-b of two equally long code arrays (kendall1938; ties: kendall1945)."""
    n = len(x_codes)
    pairs = n * (n - 1) // 2
    order = np.argsort(x_codes, kind="stable")
    difference = concordance_difference(x_codes[order], y_codes[order][np.newaxis, :])
    return Coefficient(
        "Kendall tau-b",
        n,
        int(difference[0]),
        pairs - tie_groups(x_codes).pairs,
        pairs - tie_groups(y_codes).pairs,
    )


def concordance_difference(x_sorted: Codes, y_rows: Codes) -> Codes:
    """Return concordant less discordant pairs of x with each row of y.

    Parameters
    ----------
    x_sorted
        Shape (n,), not decreasing.
    y_rows
        Shape (rows, n): in each row the codes of y in the order of ``x_sorted``; every row holds the same values.

    Returns
    -------
    Codes
        Shape (rows,).
    """
    rows, n = y_rows.shape
    if n < 2:
        return np.zeros(rows, dtype=np.int64)
    x = np.unique(x_sorted, return_inverse=True)[1].reshape(-1)
    levels, dense = np.unique(y_rows, return_inverse=True)
    y = dense.reshape(rows, n)
    # Ordered by y within each tie group of x, no pair inside such a group looks discordant.
    both = np.sort(x * len(levels) + y, axis=1)
    place = np.arange(n, dtype=np.int64)
    # Equal y in order of place: the places in the order of y are a permutation with as many inversions.
    by_y = np.sort((both % len(levels)) * n + place, axis=1) % n
    not_discordant = n * (n - 1) // 2 - tie_groups(x_sorted).pairs - tie_groups(y_rows[0]).pairs
    difference: Codes = not_discordant + _pairs_within_runs(both) - 2 * inversions(by_y)
    return difference


def inversions(permutations: Codes) -> Codes:
    """Return how many pairs stand in falling order in each row; each row is a permutation of 0 … n − 1.

    From the highest binary digit down, values are parted stably into those without and those with the digit:
    every pair is decided at the digit where it first differs.
    """
    rows, n = permutations.shape
    depth = max(1, (n - 1).bit_length())
    width = 1 << depth
    filled = np.broadcast_to(np.arange(width, dtype=np.int64), (rows, width)).copy()
    filled[:, :n] = permutations
    found = np.zeros(rows, dtype=np.int64)
    for digit in range(depth - 1, -1, -1):
        size = 2 << digit
        blocks = filled.reshape(rows, width // size, size)
        ones = (blocks >> digit) & 1
        ones_so_far = np.cumsum(ones, axis=2)
        found += np.sum(ones_so_far * (1 - ones), axis=(1, 2))
        zeros_so_far = np.arange(1, size + 1, dtype=np.int64) - ones_so_far
        target = np.where(ones == 1, size // 2 + ones_so_far, zeros_so_far) - 1
        parted = np.empty_like(blocks)
        np.put_along_axis(parted, target, blocks, axis=2)
        filled = parted.reshape(rows, width)
    return found


def _pairs_within_runs(sorted_rows: Codes) -> Codes:
    """Return the number of equal pairs in each row of a row-wise sorted array."""
    rows, n = sorted_rows.shape
    place = np.arange(n, dtype=np.int64)
    starts = np.zeros((rows, n), dtype=np.int64)
    starts[:, 1:] = np.where(sorted_rows[:, 1:] != sorted_rows[:, :-1], place[1:], 0)
    equal_pairs: Codes = np.sum(place - np.maximum.accumulate(starts, axis=1), axis=1)
    return equal_pairs
