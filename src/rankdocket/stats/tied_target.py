"""What expected ties leave of rho: the value to plan with when a variable will take few distinct values."""

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from itertools import accumulate, pairwise
from math import asin, pi, sin, sqrt
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt
from scipy.special import ndtri

from rankdocket.references import Description
from rankdocket.stats.matrix_product import product

Shares: TypeAlias = Sequence[Fraction | Decimal | int | float]
"""How often each value is expected, in increasing order of value: shares or counts, only their ratios matter."""

NODES: Final = 64
"""Of the quadrature rule: the integrand is smooth, and twelve digits are met well before."""

TIED_TARGET: Final = Description(
    "The rho planned with was reduced for the ties expected: variables that follow the bivariate normal law were cut "
    "into the values expected, and rho was taken between the midranks that remain.",
    ("plackett1954", "neslehova2007"),
)


def rho_under_ties(rho: float, x_shares: Shares | None, y_shares: Shares | None) -> float:
    """Return the population’s rho between midranks after a bivariate normal pair was cut into few values.

    Parameters
    ----------
    rho
        Between the variables before they are cut, above −1, below 1.
    x_shares, y_shares
        Two or more numbers above 0; ``None`` for a variable without ties.

    Returns
    -------
    float
        Above −1, below 1, with the sign of ``rho``.

    Raises
    ------
    ValueError
        If ``rho`` is out of its range, or there are fewer than two shares or one that is not above 0.

    Notes
    -----
    The covariance of two step functions is the sum, over pairs of steps, of the step heights times
    P(X > h, Y > k) − P(X > h) P(Y > k), and that is the integral of the bivariate normal density at (h, k) over its
    correlation (plackett1954).  The uncut scale of a normal variable is the mean of one step at a second, independent
    normal place, which comes to a step at 0 with the correlation divided by √2.
    """
    if not -1 < rho < 1:
        raise ValueError(f"rho must lie between -1 and 1 and reach neither, not be {rho}")
    x, y = (_UNCUT if shares is None else _cut(shares) for shares in (x_shares, y_shares))
    correlation = 2 * sin(pi * rho / 6) * x.loading * y.loading
    return _covariance(x, y, correlation) / sqrt(x.variance * y.variance)


@dataclass(frozen=True, slots=True, eq=False)
class _Scale:
    """The mid-distribution function of a normal variable as a sum of steps.

    Attributes
    ----------
    places, heights
        Where it steps and by how much, shape (k,).
    loading
        Correlation of what steps with the variable.
    variance
        Of the sum, above 0, at most 1/12.
    """

    places: npt.NDArray[np.float64]
    heights: npt.NDArray[np.float64]
    loading: float
    variance: float


_UNCUT: Final = _Scale(np.zeros(1), np.ones(1), sqrt(0.5), 1 / 12)


def _cut(shares: Shares) -> _Scale:
    exact = [Fraction(str(share)) for share in shares]
    if len(exact) < 2 or min(exact) <= 0:
        raise ValueError("expected ties are stated as two or more numbers above 0, one for each value")
    whole = sum(exact)
    parts = [share / whole for share in exact]
    below = list(accumulate(parts))[:-1]
    return _Scale(
        ndtri(np.array([float(share) for share in below])),
        np.array([float((one + other) / 2) for one, other in pairwise(parts)]),
        1.0,
        float((1 - sum(part**3 for part in parts)) / 12),
    )


def _covariance(x: _Scale, y: _Scale, correlation: float) -> float:
    """Return the covariance of the two sums of steps; the integral runs over the angle whose sine is the correlation."""
    nodes, weights = np.polynomial.legendre.leggauss(NODES)
    half = asin(correlation) / 2
    angle = (half * (nodes + 1))[:, None, None]
    h, k = x.places[None, :, None], y.places[None, None, :]
    density = np.exp(-(h * h + k * k - 2 * h * k * np.sin(angle)) / (2 * np.cos(angle) ** 2)) / (2 * pi)
    integrals = half * np.tensordot(weights, density, axes=1)
    return float(product(product(x.heights, integrals), y.heights))
