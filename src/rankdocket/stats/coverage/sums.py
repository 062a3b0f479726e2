"""What interval rules need of many samples of one size at once, from the signs of all pairs of rows.

The rules themselves take n log n steps for one sample; here n² steps are taken for thousands of small ones together. The
formulas are those of :mod:`rankdocket.stats.influence`, and the tests hold every limit that comes of them against the rule.
"""

from dataclasses import dataclass
from typing import Final

import numpy as np
import numpy.typing as npt

from rankdocket.stats.coverage.families import Floats
from rankdocket.stats.influence import LEAST_FREEDOM, NORMAL_KURTOSIS
from rankdocket.stats.matrix_product import product
from rankdocket.stats.z_interval import BELOW_ONE, untied_cap, untied_tau_cap
from rankdocket.vocabulary import CoefficientName

PAIRS_AT_ONCE: Final = 2**19
"""Signs of pairs held at a time: few enough to stay near the processor."""

MOST_ROWS: Final = 200
"""Up to here every sum is a whole number below 2²⁴ and exact in single precision."""


@dataclass(frozen=True, slots=True, eq=False)
class SampleSums:
    """Of many samples of ``n`` rows in which both variables vary, each attribute of shape (samples,).

    Attributes
    ----------
    n
        Rows of each sample.
    r
        The coefficient.
    cap
        Beyond it a rule replaces the coefficient.
    jackknife
        The jackknife variance of its atanh; −1 where a variable does not vary without one of the rows.
    influence
        Σψ²/n².
    freedom
        Degrees of freedom that follow from the influence values; infinite when all have one size.
    """

    n: int
    r: Floats
    cap: Floats
    jackknife: Floats
    influence: Floats
    freedom: Floats


@dataclass(frozen=True, slots=True, eq=False)
class _Pairs:
    """Of some samples: centred doubled midranks, rows tied with each row, balances and concordance, (samples, n)."""

    a: Floats
    b: Floats
    x_tied: Floats
    y_tied: Floats
    x_of_a: Floats
    x_of_b: Floats
    y_of_a: Floats
    y_of_b: Floats
    concordance: Floats


def sums_of(coefficient: CoefficientName, x: Floats, y: Floats) -> SampleSums:
    """Return the sums of those samples in which both variables vary.

    Parameters
    ----------
    coefficient
        Of which the sums are asked.
    x, y
        Shape (samples, n), 3 ≤ n ≤ 200.
    """
    vary = (np.ptp(x, axis=1) > 0) & (np.ptp(y, axis=1) > 0)
    x, y = x[vary], y[vary]
    samples, n = x.shape
    if n > MOST_ROWS:
        raise ValueError(f"samples have at most {MOST_ROWS} rows, not {n}")
    step = max(1, PAIRS_AT_ONCE // n**2)
    of_pairs = _of_rho if coefficient == "Spearman rho" else _of_tau
    parts = [of_pairs(n, _pairs(x[start : start + step], y[start : start + step])) for start in range(0, samples, step)]
    whole = [np.concatenate(each) for each in zip(*parts, strict=True)] or [np.empty(0)] * 5
    return SampleSums(n, *whole)


def _pairs(x: Floats, y: Floats) -> _Pairs:
    n = x.shape[1]
    of_x, of_y = _signs(x), _signs(y)
    a, b = of_x.sum(axis=2), of_y.sum(axis=2)
    ranks = np.stack((a, b), axis=2)
    x_balance, y_balance = product(of_x, ranks), product(of_y, ranks)
    # The signs are −1, 0 and 1: the sum of squares counts the rows that differ.
    x_tied, y_tied = (n - np.einsum("sij,sij->si", signs, signs) for signs in (of_x, of_y))
    concordance = np.einsum("sij,sij->si", of_x, of_y)
    balances = (balance[:, :, side] for balance in (x_balance, y_balance) for side in (0, 1))
    return _Pairs(*(part.astype(np.float64) for part in (a, b, x_tied, y_tied, *balances, concordance)))


def _signs(values: Floats) -> npt.NDArray[np.float32]:
    """Return the sign of the first row’s value less the second’s for all pairs of rows, (samples, n, n)."""
    order = np.argsort(values, axis=1, kind="stable")
    ordered = np.take_along_axis(values, order, axis=1)
    steps = np.zeros(values.shape, dtype=np.float32)
    steps[:, 1:] = np.cumsum(ordered[:, 1:] != ordered[:, :-1], axis=1)
    codes = np.empty_like(steps)
    np.put_along_axis(codes, order, steps, axis=1)
    gaps = codes[:, :, np.newaxis] - codes[:, np.newaxis, :]
    return np.clip(gaps, -1, 1, out=gaps)


def _of_rho(n: int, pairs: _Pairs) -> tuple[Floats, ...]:
    a, b = pairs.a, pairs.b
    cross, x_square, y_square = _over(a * b), _over(a * a), _over(b * b)
    root = np.sqrt(x_square * y_square)
    r = cross / root
    of_x, of_y = (a * a - 2 * pairs.x_of_a) / x_square, (b * b - 2 * pairs.y_of_b) / y_square
    psi = n * ((a * b - pairs.x_of_b - pairs.y_of_a) / root - r / 2 * (of_x + of_y))
    # At perfect order influence values are 0; what is left of them here is rounding.
    psi[np.abs(r[:, 0]) >= BELOW_ONE] = 0
    numerator = cross - a * b + pairs.y_of_a + pairs.x_of_b + pairs.concordance
    x_without = x_square - a * a + 2 * pairs.x_of_a + n - pairs.x_tied
    y_without = y_square - b * b + 2 * pairs.y_of_b + n - pairs.y_tied
    cap = 1 - _widest_step(a) * _widest_step(b) / (2 * root[:, 0])
    jackknife = _jackknife(numerator, x_without, y_without, untied_cap(n - 1))
    return r[:, 0], np.clip(cap, 0, BELOW_ONE), jackknife, np.sum(psi**2, axis=1) / n**2, _freedom(psi)


def _of_tau(n: int, pairs: _Pairs) -> tuple[Floats, ...]:
    untied_x, untied_y = n - pairs.x_tied, n - pairs.y_tied
    concordance = pairs.concordance
    whole, x_whole, y_whole = _over(concordance), _over(untied_x), _over(untied_y)
    root = np.sqrt(x_whole * y_whole)
    tau = whole / root
    psi = n * (2 * concordance / root - tau * untied_x / x_whole - tau * untied_y / y_whole)
    step = np.minimum(_widest_step(pairs.a), _widest_step(pairs.b))
    # Both squares count each pair once, the sums over rows twice.
    cap = 1 - step / root[:, 0]
    jackknife = _jackknife(
        whole / 2 - concordance, x_whole / 2 - untied_x, y_whole / 2 - untied_y, untied_tau_cap(n - 1)
    )
    return tau[:, 0], np.clip(cap, 0, BELOW_ONE), jackknife, np.sum(psi**2, axis=1) / n**2, _freedom(psi)


def _over(rows: Floats) -> Floats:
    summed: Floats = rows.sum(axis=1, keepdims=True)
    return summed


def _widest_step(centred: Floats) -> Floats:
    steps: Floats = np.diff(np.sort(centred, axis=1), axis=1).max(axis=1)
    return steps


def _jackknife(numerator: Floats, x_square: Floats, y_square: Floats, nearest: float) -> Floats:
    square = x_square * y_square
    defined = np.all(square > 0, axis=1)
    values = numerator / np.sqrt(np.where(square > 0, square, 1))
    z = np.arctanh(np.clip(values, -nearest, nearest))
    n = z.shape[1]
    variance: Floats = np.where(defined, (n - 1) * z.var(axis=1), -1.0)
    return variance


def _freedom(psi: Floats) -> Floats:
    n = psi.shape[1]
    squares = psi**2
    whole = squares.sum(axis=1)
    some = whole > 0
    kurtosis = np.where(some, n * np.sum(squares**2, axis=1) / np.where(some, whole, 1) ** 2, NORMAL_KURTOSIS)
    above = kurtosis > 1
    return np.where(above, np.maximum(LEAST_FREEDOM, 2 * n / np.where(above, kurtosis - 1, 1)), np.inf)
