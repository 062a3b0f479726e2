"""Approximations and other coefficients that stand beside ours for comparison; no finding rests on them."""

from fractions import Fraction
from math import fsum, sqrt

import numpy as np
import numpy.typing as npt
from scipy.special import betainc

from rankdocket.stats.coefficient import Coefficient
from rankdocket.vocabulary import Direction


def t_value_p(coefficient: Coefficient, direction: Direction) -> float | None:
    """Return the p-value of r√((n − 2)/(1 − r²)) taken as Student’s t with n − 2 degrees of freedom.

    ``None`` when the coefficient is undefined or there are fewer than three rows.  1 − r² is formed from the
    integers, so that nothing is lost near ±1.
    """
    if not coefficient.is_defined or coefficient.n <= 2:
        return None
    square = coefficient.x_square * coefficient.y_square
    unexplained = float(Fraction(square - coefficient.numerator**2, square))
    both_tails = float(betainc((coefficient.n - 2) / 2, 0.5, unexplained))
    if direction == "two-sided":
        return both_tails
    if (coefficient.numerator > 0) == (direction == "greater"):
        return both_tails / 2
    return 1 - both_tails / 2


def pearson_r(x: npt.NDArray[np.float64], y: npt.NDArray[np.float64]) -> float | None:
    """Return the product-moment correlation of the values, −1 to 1, or ``None`` when a variable does not vary.

    Sums are rounded once each, and the rounding of the means is corrected for.
    """
    if len(x) == 0 or x.min() == x.max() or y.min() == y.max():
        return None
    n = len(x)
    x_off, y_off = (column - fsum(column.tolist()) / n for column in (_scaled(x), _scaled(y)))
    x_rest, y_rest = fsum(x_off.tolist()), fsum(y_off.tolist())
    products = fsum((x_off * y_off).tolist()) - x_rest * y_rest / n
    x_square = fsum((x_off * x_off).tolist()) - x_rest * x_rest / n
    y_square = fsum((y_off * y_off).tolist()) - y_rest * y_rest / n
    if x_square <= 0 or y_square <= 0:
        return None
    return min(1.0, max(-1.0, products / (sqrt(x_square) * sqrt(y_square))))


def _scaled(column: npt.NDArray[np.float64]) -> npt.NDArray[np.float64]:
    """Return the column divided by a power of 2, which changes no digit, so that no square overflows or vanishes."""
    _, exponent = np.frexp(np.abs(column).max())
    scaled: npt.NDArray[np.float64] = np.ldexp(column, -int(exponent))
    return scaled
