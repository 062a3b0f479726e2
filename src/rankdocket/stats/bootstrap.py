"""Spearman rho of rows drawn with replacement: from how often each row was drawn, never by ranking anew (efron1987).

In a resample of N rows the doubled centred midrank of a value is the rows drawn up to it plus those drawn below it less
N, and twelve times the sum of squares of midranks is N³ − Σc³ over the counts c of distinct values: all sums are taken
in integers, so that no result depends on their order.
"""

from dataclasses import dataclass
from itertools import pairwise
from typing import Any, Final

import numpy as np
import numpy.typing as npt
from scipy.special import ndtr, ndtri

from rankdocket.errors import ComputeError
from rankdocket.stats.influence import Floats
from rankdocket.stats.interval import Resampling
from rankdocket.stats.ranks import Codes

Counts = npt.NDArray[np.signedinteger[Any]]

COUNTS_AT_ONCE: Final = 2**15
"""Counts held at a time: few enough to stay in a processor’s cache."""

LEAST_WIDTH: Final = 512
"""Resamples held at a time, at least, so that each step of a running sum adds many numbers at once …"""

MOST_COUNTS: Final = 2**22
"""… unless more counts than these had to be held for it."""

NARROW_ROWS: Final = 1_290
"""Up to here n³, which no sum exceeds, is below 2³¹."""

MOST_ROWS: Final = 2_000_000
"""Up to here n³ is below 2⁶³."""

LEVEL_WITH: Final = 1e-12
"""Coefficients nearer to each other are one value: each is rounded twice, and distinct ones lie further apart."""


@dataclass(frozen=True, slots=True, eq=False)
class ResampledRho:
    """Spearman rho of the resamples.

    Attributes
    ----------
    values
        In the order drawn, without the undefined ones.
    drawn
        Resamples drawn.
    """

    values: Floats
    drawn: int

    @property
    def undefined(self) -> int:
        """Resamples in which a variable did not vary."""
        return self.drawn - len(self.values)


@dataclass(frozen=True, slots=True, eq=False)
class _Runs:
    """Where the runs of equal values begin in a sorted variable, and the run of each place."""

    starts: Codes
    run: Codes

    @property
    def are_single(self) -> bool:
        return len(self.starts) == len(self.run)


@dataclass(frozen=True, slots=True, eq=False)
class RowKinds:
    """The kinds of rows, prepared for counts: rows with the same x and the same y are of one kind.

    Attributes
    ----------
    kind
        Shape (n,): the kind of each row, 0, 1, … in the order of x and, within equal x, of y.
    x_runs, y_runs
        Runs of equal values of each variable among the kinds, in its own order.
    y_order
        Kinds in the order of y.
    """

    kind: Codes
    x_runs: _Runs
    y_runs: _Runs
    y_order: Codes

    @property
    def number(self) -> int:
        """How many kinds there are."""
        return len(self.y_order)


def row_kinds(x_codes: Codes, y_codes: Codes) -> RowKinds:
    """Return the kinds of the rows, prepared for :func:`rho_of_counts`."""
    x, y = (np.unique(codes, return_inverse=True)[1] for codes in (x_codes, y_codes))
    levels = int(y.max()) + 1
    both, kind = np.unique(x * levels + y, return_inverse=True)
    y_order = np.argsort(both % levels, kind="stable")
    return RowKinds(kind, _runs(both // levels), _runs((both % levels)[y_order]), y_order)


def rho_of_counts(kinds: RowKinds, counts: Counts) -> Floats:
    """Return Spearman rho of each resample in which both variables vary; the others are left out.

    Parameters
    ----------
    kinds
        As prepared.
    counts
        Shape (kinds, resamples): how often rows of each kind were drawn; each column has the same sum N, and the type
        holds N³.
    """
    whole = counts[:, 0].sum(dtype=counts.dtype)
    a, x_cubes = _midranks(counts, kinds.x_runs, whole)
    y_counts = counts[kinds.y_order]
    b, y_cubes = _midranks(y_counts, kinds.y_runs, whole)
    b *= y_counts
    b *= a[kinds.y_order]
    cube = float(whole) ** 3
    root = np.sqrt((cube - x_cubes) * (cube - y_cubes))
    vary = root > 0
    coefficients: Floats = 3 * b.sum(axis=0, dtype=counts.dtype)[vary].astype(np.float64) / root[vary]
    return coefficients


def resampled_rho(x_codes: Codes, y_codes: Codes, resampling: Resampling) -> ResampledRho:
    """Return Spearman rho of resamples of the rows, each as many rows as there are, drawn with replacement.

    Raises
    ------
    ComputeError
        If there are more than two million rows.
    """
    n, resamples = len(x_codes), resampling.resamples
    if n > MOST_ROWS:
        raise ComputeError("There are too many rows for exact sums over resamples.")
    kinds = row_kinds(x_codes, y_codes)
    width = max(1, COUNTS_AT_ONCE // n, min(LEAST_WIDTH, MOST_COUNTS // n))
    found = [
        rho_of_counts(kinds, _drawn_counts(kinds, min(width, resamples - start), resampling.generator))
        for start in range(0, resamples, width)
    ]
    return ResampledRho(np.concatenate(found), resamples)


@dataclass(frozen=True, slots=True)
class NoLimits:
    """That the resamples set no limits, and why, as the end of a sentence without its full stop."""

    reason: str


def bca_limits(values: Floats, r: float, without_each: Floats, tail: float) -> tuple[float, float] | NoLimits:
    """Return the bias-corrected and accelerated limits that leave ``tail`` on either side (efron1987).

    Parameters
    ----------
    values
        Coefficients of the resamples.
    r
        The coefficient of the rows themselves.
    without_each
        Shape (n,): the coefficient without each row in turn; sets the acceleration.
    tail
        Above 0, below 0.5.
    """
    if len(values) * tail < 1:
        return NoLimits("too few resamples in which both variables vary reach beyond its limits")
    if values.max() - values.min() <= LEVEL_WITH:
        return NoLimits("all resamples give the same coefficient")
    below = np.count_nonzero(values < r - LEVEL_WITH)
    level_with = np.count_nonzero(values <= r + LEVEL_WITH) - below
    share = (below + level_with / 2) / len(values)
    if not 0 < share < 1:
        return NoLimits("all resamples lie on one side of the coefficient")
    pulls = without_each.mean() - without_each
    spread = float(np.sum(pulls**2))
    acceleration = float(np.sum(pulls**3)) / (6 * spread**1.5) if spread > 0 else 0.0
    bias = float(ndtri(share))
    shifted = [bias + float(ndtri(probability)) for probability in (tail, 1 - tail)]
    stretch = [1 - acceleration * each for each in shifted]
    if min(stretch) <= 0:
        return NoLimits("the acceleration is too large for the correction to exist")
    probabilities = [float(ndtr(bias + each / by)) for each, by in zip(shifted, stretch, strict=True)]
    low, high = (float(limit) for limit in np.quantile(values, probabilities))
    if high - low <= LEVEL_WITH:
        return NoLimits("nearly all resamples give the same coefficient")
    return low, high


def _runs(ordered: Codes) -> _Runs:
    starts_anew = np.concatenate(([True], ordered[1:] != ordered[:-1]))
    return _Runs(np.flatnonzero(starts_anew), np.cumsum(starts_anew) - 1)


def _midranks(counts: Counts, runs: _Runs, whole: np.signedinteger[Any]) -> tuple[Counts, Floats]:
    """Return the doubled centred midrank of each place, shape (kinds, resamples), and Σc³ over distinct values."""
    sizes = counts if runs.are_single else np.add.reduceat(counts, runs.starts, axis=0, dtype=counts.dtype)
    cubes = np.einsum("ib,ib,ib->b", sizes, sizes, sizes).astype(np.float64)
    midranks = sizes.copy()
    rows = list(midranks)
    # Row by row, the sums of many resamples are taken in one step; along a column they would be taken one by one.
    for before, row in pairwise(rows):
        np.add(before, row, out=row)
    midranks *= 2
    midranks -= sizes
    midranks -= whole
    return (midranks if runs.are_single else midranks[runs.run]), cubes


def _drawn_counts(kinds: RowKinds, resamples: int, generator: np.random.Generator) -> Counts:
    """Return how often rows of each kind are drawn in each resample: shape (kinds, resamples)."""
    n, number = len(kinds.kind), kinds.number
    # Sixteen bits are drawn faster than eight; where every row is its own kind, kinds are drawn like rows.
    narrowest = np.promote_types(np.min_scalar_type(n - 1), np.uint16)
    drawn = generator.integers(0, n, (resamples, n), dtype=narrowest)
    placed = (drawn if number == n else kinds.kind.take(drawn)) + number * np.arange(resamples)[:, np.newaxis]
    counts = np.bincount(placed.reshape(-1), minlength=number * resamples).reshape(resamples, number)
    return np.ascontiguousarray(counts.T, dtype=np.int32 if n <= NARROW_ROWS else np.int64)
