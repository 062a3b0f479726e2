"""How each row stands to the others in both variables at once: in n log n steps, in integers."""

from dataclasses import dataclass

import numpy as np

from rankdocket.stats.ranks import Codes


@dataclass(frozen=True, slots=True, eq=False)
class Standing:
    """Where each row stands in one variable.

    Attributes
    ----------
    order
        Shape (n,): rows in increasing order of value.
    below, upto
        Shape (n,): rows with a smaller value; with a smaller or the same value, the row itself among them.
    """

    order: Codes
    below: Codes
    upto: Codes

    @property
    def centred(self) -> Codes:
        """Twice the midrank less its mean, as :func:`rankdocket.stats.ranks.centred_ranks`."""
        centred: Codes = self.below + self.upto - len(self.order)
        return centred

    @property
    def tied(self) -> Codes:
        """Rows with the same value, the row itself among them."""
        tied: Codes = self.upto - self.below
        return tied

    def balance(self, values: Codes) -> Codes:
        """Return for each row the sum of ``values`` over the rows below it less that over the rows above it."""
        sums = np.concatenate(([0], np.cumsum(values[self.order], dtype=np.int64)))
        balance: Codes = sums[self.below] + sums[self.upto] - sums[-1]
        return balance


def standing(codes: Codes) -> Standing:
    """Return where each row stands in the order of ``codes``."""
    _, place, sizes = np.unique(codes, return_inverse=True, return_counts=True)
    ends = np.cumsum(sizes, dtype=np.int64)
    return Standing(np.argsort(codes, kind="stable"), (ends - sizes)[place], ends[place])


def concordance_of_rows(x: Standing, y: Standing) -> Codes:
    """Return for each row the rows concordant with it less those discordant with it.

    Half of their sum is the numerator of tau-b.
    """
    n = len(x.order)
    # Rows below-or-level in both, counted four ways, add up to what midranks of the pair would say.
    counts = counts_below(
        y.below[x.order],
        np.concatenate((x.below, x.below, x.upto, x.upto)),
        np.concatenate((y.below, y.upto, y.below, y.upto)),
    )
    concordance: Codes = counts.reshape(4, n).sum(axis=0) - x.centred - y.centred - n
    return concordance


def counts_below(values: Codes, lengths: Codes, limits: Codes) -> Codes:
    """Return how many of the first ``lengths[q]`` values lie below ``limits[q]``, for every q.

    From the highest binary digit down, values are parted stably into those without and those with the digit; a
    stretch of values stays a stretch within each part, and where the limit has the digit and a value has not, the
    value is below.

    Parameters
    ----------
    values
        Shape (n,), each from 0 to n − 1.
    lengths, limits
        Of one shape, each from 0 to n.
    """
    n = len(values)
    current = values
    first, last = np.zeros_like(lengths), lengths
    found = np.zeros_like(lengths)
    for digit in range(n.bit_length() - 1, -1, -1):
        lacking = ((current >> digit) & 1) == 0
        lacking_so_far = np.concatenate(([0], np.cumsum(lacking, dtype=np.int64)))
        lacking_first, lacking_last = lacking_so_far[first], lacking_so_far[last]
        has_digit = ((limits >> digit) & 1) == 1
        found += np.where(has_digit, lacking_last - lacking_first, 0)
        first = np.where(has_digit, lacking_so_far[-1] + first - lacking_first, lacking_first)
        last = np.where(has_digit, lacking_so_far[-1] + last - lacking_last, lacking_last)
        current = np.concatenate((current[lacking], current[~lacking]))
    return found
