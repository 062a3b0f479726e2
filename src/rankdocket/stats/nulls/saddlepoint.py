"""Saddlepoint tails of Spearman rho, with or without ties: from the middle to the farthest end, never below 0.

The cumulant function of rho's numerator A is that of a permanent,

    K(t) = log E exp(tA) = log( per[exp(t a_i b_j)] / n! ).

The matrix is scaled to one whose rows and columns sum to 1, and the permanent of that one is near
n! n^(−n) det(I − BᵀB + J/n)^(−1/2) when its entries are about even (mccullagh2014); the scaling itself is exact.  The
tail follows from K by the formula of lugannani1980, in its form for a lattice.  At the largest value of all the tail is
known exactly, and no other one is put below it.

Equal rows and equal columns are kept once, with a weight, so that c and d distinct values cost as much as a c × d matrix.
More than GAUSS_NODES distinct values are replaced by that many nodes and weights which give the same moments up to order
2 GAUSS_NODES − 1: a Gauss quadrature of the discrete distribution of the ranks itself, so nothing is lost as long as
the scaled matrix is smooth between neighbouring nodes.
"""

from dataclasses import dataclass
from functools import lru_cache
from math import copysign, exp, frexp, ldexp, pi, sinh, sqrt, trunc
from sys import float_info
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt
from numpy.linalg import LinAlgError
from scipy.linalg import cho_factor, cho_solve, eigh, eigh_tridiagonal
from scipy.special import gammaln, ndtr

from rankdocket.errors import ComputeError
from rankdocket.stats.matrix_product import product
from rankdocket.stats.ranks import TieGroups, centred_ranks, exact_dot, lattice_step

Reals: TypeAlias = npt.NDArray[np.float64]

GAUSS_NODES: Final = 48
"""Up to so many distinct values the matrix is taken as it is, with more of them at this many nodes.  Against the whole
matrix of 60 to 400 rows without ties no kept bit of a tail changes up to rho = 0.99; nearer to 1, where tails are below
1e-45, they come out too large.  Matrices of this size are also too small for a linear algebra library to share out
among threads, which costs more than it gains on a machine that has other things to do."""

MOST_DISTINCT: Final = 20_000
"""With more distinct values and ties among them, the nodes would cost more than a cross-check is worth."""

NEAR_MIDDLE: Final = 0.05
"""Standard deviations within which the formula, 0/0 in the middle, is bridged by a straight line."""

BITS: Final = 24
"""Leading bits that are kept of a tail: the rest lies far below the error and may differ from machine to machine."""

RIDGE: Final = 1e-13
"""Added to the diagonals of matrices that become singular at the ends of the null, where rounding would decide their sign."""


CLOSE: Final = 1e-12
"""How near K' must come to the point, and a scaling to its sums, in shares of them."""

MOST_STEPS: Final = 60
"""Steps after which a search that should need ten is given up."""

MOST_TILT: Final = 100.0
"""A tilt of neighbouring values by e to this power belongs to a point that no order attains."""


@dataclass(frozen=True, slots=True, eq=False)
class Margin:
    """One variable as nodes and weights.

    Attributes
    ----------
    nodes
        Centred ranks over n, increasing, from about −1 to 1, shape (c,).
    weights
        How many rows stand at each, above 0; they sum to n.
    """

    nodes: Reals
    weights: Reals

    @property
    def n(self) -> float:
        """Rows."""
        return float(self.weights.sum())


def saddlepoint_tail(x: TieGroups, y: TieGroups, observed: int) -> float | None:
    """Return about P(A ≥ observed) for variables with these tie groups, equally many rows each.

    Parameters
    ----------
    x, y
        Tie groups in increasing order of value.  Groups of ``y`` in reversed order give the other tail, at −observed.
    observed
        A value of rho's numerator; between two attainable values the upper one is meant.

    Returns
    -------
    float or None
        0 to 1, and 0 only above the largest attainable value; ``None`` where a variable has ties and more than
        MOST_DISTINCT distinct values.

    Raises
    ------
    ComputeError
        If a variable does not vary, or the rows are not equally many.
    """
    if x.is_constant or y.is_constant or x.n != y.n:
        raise ComputeError("A saddlepoint needs two variables that vary, with equally many rows.")
    if any(groups.has_ties and groups.distinct > MOST_DISTINCT for groups in (x, y)):
        return None
    x_ranks, y_ranks = centred_ranks(x.codes()), centred_ranks(y.codes())
    highest, lowest = exact_dot(x_ranks, y_ranks), exact_dot(x_ranks, y_ranks[::-1])
    # Any two orders differ by exchanges, and an exchange moves the sum by a product of two differences.
    step = lattice_step(x_ranks.tolist()) * lattice_step(y_ranks.tolist())
    attainable = observed + (highest - observed) % step
    if attainable <= lowest:
        return 1.0
    if attainable > highest:
        return 0.0
    perfect = max(float_info.min, perfect_order(x, y))
    if attainable == highest:
        return perfect
    # Half a step down is where the smooth formula is read.
    square = x.n**2
    tail = lattice_tail(CumulantFunction(margin(x), margin(y)), (2 * attainable - step) / (2 * square), step / square)
    if tail is None:
        return perfect if attainable > 0 else 1.0
    return max(perfect, tail)


def perfect_order(x: TieGroups, y: TieGroups) -> float:
    """Return the share of all orders that give the largest numerator, 0 where it is too small for a double.

    They are those in which both variables rise together: the members of a group may change places, except
    that an exchange of rows alike in both is none.
    """
    alike = np.diff(np.union1d(np.cumsum(x.sizes), np.cumsum(y.sizes)), prepend=0)
    exponent = sum(float(gammaln(np.asarray(sizes) + 1.0).sum()) for sizes in (x.sizes, y.sizes))
    return exp(exponent - float(gammaln(alike + 1.0).sum()) - float(gammaln(x.n + 1.0)))


@lru_cache(maxsize=16)
def margin(groups: TieGroups) -> Margin:
    """Return the nodes and weights of a variable that varies."""
    n = groups.n
    if not groups.has_ties:
        return untied_margin(n)
    ranks, sizes = np.unique(centred_ranks(groups.codes())) / n, np.asarray(groups.sizes, dtype=np.float64)
    return Margin(ranks, sizes) if len(sizes) <= GAUSS_NODES else _gauss(n, *_recurrence(ranks, sizes / n))


@lru_cache(maxsize=16)
def untied_margin(n: int) -> Margin:
    """Return the nodes and weights of ``n`` rows without ties, at least 2."""
    if n <= GAUSS_NODES:
        return Margin(np.arange(1 - n, n, 2) / n, np.ones(n))
    # The orthogonal polynomials of evenly spaced points have a recurrence in closed form.
    k = np.arange(1, GAUSS_NODES, dtype=np.float64)
    return _gauss(n, np.zeros(GAUSS_NODES), k * np.sqrt((1 - (k / n) ** 2) / (4 * k**2 - 1)))


def _gauss(n: int, diagonal: Reals, beside: Reals) -> Margin:
    """Return the Gauss quadrature of the orthogonal polynomials with this recurrence, for ``n`` rows."""
    nodes, vectors = eigh_tridiagonal(diagonal, beside)
    return Margin(nodes, n * vectors[0] ** 2)


def _recurrence(values: Reals, shares: Reals) -> tuple[Reals, Reals]:
    """Return both diagonals of the matrix whose eigenvalues are the Gauss nodes of ``shares`` at ``values``."""
    basis = np.empty((GAUSS_NODES, len(values)))
    basis[0] = np.sqrt(shares)
    diagonal, beside = np.empty(GAUSS_NODES), np.empty(GAUSS_NODES)
    for k in range(GAUSS_NODES):
        longer = values * basis[k]
        diagonal[k] = product(longer, basis[k])
        # Twice, since one pass leaves what rounding put back in.
        for _ in range(2):
            longer -= product(basis[: k + 1].T, product(basis[: k + 1], longer))
        beside[k] = np.sqrt(product(longer, longer))
        if k + 1 < GAUSS_NODES:
            basis[k + 1] = longer / beside[k]
    return diagonal, beside[:-1]


@dataclass(frozen=True, slots=True, eq=False)
class _Found:
    """The last scaling, and how fast it changes with t."""

    t: float
    scaling: Reals
    slope: Reals


class CumulantFunction:
    """K and its first derivative for two margins; each t starts from the scaling found for the one before.

    Attributes
    ----------
    spread
        Standard deviation of the numerator over n², exact for margins taken as they are.
    """

    def __init__(self, x: Margin, y: Margin) -> None:
        self._x, self._y = x, y
        self._products = np.outer(x.nodes, y.nodes)
        self._found = _Found(0.0, np.zeros(len(y.nodes)), np.zeros(len(y.nodes)))
        n = x.n
        variances = (product(side.weights, side.nodes**2) for side in (x, y))
        self.spread = sqrt(float(next(variances) * next(variances)) / (n - 1))

    def __call__(self, t: float) -> tuple[float, float]:
        """Return K(t) and K'(t), t in units of 1/n²."""
        x, y = self._x, self._y
        n, roots = x.n, np.sqrt(y.weights)
        scaling, logarithm, rows, inner = self._scaled(t)
        # What the determinant needs: I − MᵀM + J/n with equal columns taken together.
        m = np.sqrt(x.weights)[:, None] * rows / roots
        latent, directions = eigh(np.eye(len(roots)) - product(m.T, m) + np.outer(roots, roots) / n)
        latent = np.maximum(latent, RIDGE)
        value = logarithm - float(np.log(latent).sum()) / 2
        # How rows move with t while every column keeps its sum.
        moved = x.weights[:, None] * rows
        means = (rows * self._products).sum(axis=1)
        slope = float(product(x.weights, means))
        push = (moved * (self._products - means[:, None])).sum(axis=0)
        follows = -cho_solve(inner, push)
        self._found = _Found(t, scaling, follows)
        change = self._products + follows
        drift = rows * (change - (rows * change).sum(axis=1)[:, None])
        changed = np.sqrt(x.weights)[:, None] * drift / roots
        return value, slope + float((product(m, directions) / latent * product(changed, directions)).sum())

    def _scaled(self, t: float) -> tuple[Reals, float, Reals, tuple[Reals, bool]]:
        """Return the scaling, its part of K, each row's shares of the columns, and the last factored Hessian.

        The scaling is the lowest point of a convex function of one number per column, found by Newton's steps, halved
        while they lead up.
        """
        x, y = self._x, self._y
        shares, n = np.log(y.weights / x.n), x.n
        tilted = t * self._products
        # The scaling becomes a straight line in t toward the ends, so the tangent is a good start for any t.
        scaling = self._found.scaling + (t - self._found.t) * self._found.slope
        height, rows = _height(tilted, shares, scaling, x, y)
        for _ in range(MOST_STEPS):
            columns = product(x.weights, rows)
            residual = columns - y.weights
            hessian = (
                np.diag(columns + RIDGE * y.weights)
                - product(rows.T, x.weights[:, None] * rows)
                + np.outer(y.weights, y.weights) / n
            )
            factor = cho_factor(hessian)
            step = cho_solve(factor, residual)
            if np.abs(residual / y.weights).max() < CLOSE or np.abs(step).max() < 1e-14:
                break
            share = 1.0
            while share > 1e-6:
                lower, changed = _height(tilted, shares, scaling - share * step, x, y)
                if lower <= height + 1e-13 * (1 + abs(height)):
                    break
                share /= 2
            scaling, height, rows = scaling - share * step, lower, changed
        return scaling, height, rows, factor


def _height(tilted: Reals, shares: Reals, scaling: Reals, x: Margin, y: Margin) -> tuple[float, Reals]:
    """Return the convex function of the scaling, and each row's shares of the columns."""
    exponents = tilted + shares + scaling
    most = exponents.max(axis=1)
    rows = np.exp(exponents - most[:, None])
    totals = rows.sum(axis=1)
    rows /= totals[:, None]
    return float(product(x.weights, most + np.log(totals)) - product(y.weights, scaling)), rows


@dataclass(frozen=True, slots=True)
class _Bent:
    """A tail's formula at one point.

    Attributes
    ----------
    w
        Signed root of the deviance: the normal deviate to first order.
    correction
        1/u − 1/w, smooth where both parts are infinite.
    """

    w: float
    correction: float

    def tail(self) -> float:
        """Return the upper tail."""
        return float(ndtr(-self.w)) + exp(-self.w * self.w / 2) / sqrt(2 * pi) * self.correction

    def toward(self, other: "_Bent", share: float) -> "_Bent":
        """Return the formula at a ``share`` of the way to another point nearby."""
        return _Bent(
            self.w + share * (other.w - self.w), self.correction + share * (other.correction - self.correction)
        )


def lattice_tail(cumulants: CumulantFunction, point: float, step: float) -> float | None:
    """Return the upper tail of a lattice variable, above 0 to 1.

    Parameters
    ----------
    cumulants
        Of the variable, whose mean is 0.
    point
        Half a step below the value from which on the tail counts, in units of n².
    step
        Distance between neighbouring values, in the same units.

    Returns
    -------
    float or None
        ``None`` so near an end that rounding leaves nothing of the formula.
    """
    bridge = NEAR_MIDDLE * cumulants.spread
    if abs(point) >= bridge:
        bent = _bent(cumulants, point, step)
    else:
        low, high = (_bent(cumulants, side * bridge, step) for side in (-1, 1))
        bent = None if low is None or high is None else low.toward(high, (point / bridge + 1) / 2)
    return None if bent is None else min(1.0, max(float_info.min, _leading_bits(bent.tail())))


def _leading_bits(value: float) -> float:
    fraction, exponent = frexp(value)
    return ldexp(trunc(ldexp(fraction, BITS)), exponent - BITS)


def _bent(cumulants: CumulantFunction, point: float, step: float) -> _Bent | None:
    try:
        t = _saddle(cumulants, point)
        if t is None:
            return None
        apart = 1e-3 * max(1 / cumulants.spread, abs(t))
        curvature = (cumulants(t + apart)[1] - cumulants(t - apart)[1]) / (2 * apart)
        deviance = 2 * (t * point - cumulants(t)[0])
    except LinAlgError:
        return None
    if curvature <= 0 or deviance <= 0 or abs(t * step) > MOST_TILT:
        return None
    w = copysign(sqrt(deviance), t)
    return _Bent(w, step / (2 * sinh(t * step / 2) * sqrt(curvature)) - 1 / w)


def _saddle(cumulants: CumulantFunction, point: float) -> float | None:
    """Return the t at which K' is ``point``, not 0; ``None`` where K' does not get there.

    False position, with the weight of an end that stays put halved each time.
    """
    near, below = 0.0, -abs(point)
    far, sign = point / cumulants.spread**2, copysign(1.0, point)
    for _ in range(MOST_STEPS):
        above = sign * (cumulants(far)[1] - point)
        if above >= 0:
            break
        near, below, far = far, above, 1.5 * far
    else:
        return None
    for _ in range(MOST_STEPS):
        t = near - below * (far - near) / (above - below)
        off = sign * (cumulants(t)[1] - point)
        if abs(off) <= CLOSE * abs(point) or abs(far - near) <= CLOSE * abs(far):
            return t
        if off < 0:
            near, below, above = t, off, above / 2
        else:
            far, above, below = t, off, below / 2
    return None
