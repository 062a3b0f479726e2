"""What each row does to a coefficient: influence values, the coefficient without it, and the jackknife.

Removing row i lowers the doubled midranks of the rows above it by 2 and of those level with it by 1, so that the
centred doubled midrank of row j becomes a_j + sign(x_i − x_j): every sum without row i follows from sums over all rows.
"""

from dataclasses import dataclass
from math import sqrt
from typing import Final

import numpy as np
import numpy.typing as npt

from rankdocket.errors import ComputeError
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.joint_counts import Standing, concordance_of_rows, standing
from rankdocket.stats.ranks import SAFE_SUM, Codes, exact_dot

Floats = npt.NDArray[np.float64]

MOST_ROWS: Final = 2_000_000
"""Up to here the sums of products of doubled midranks, below n³/2, stay below 2⁶²."""

LEAST_FREEDOM: Final = 3.0
NORMAL_KURTOSIS: Final = 3.0


@dataclass(frozen=True, slots=True, eq=False)
class WithoutEach:
    """A coefficient without each row in turn, as integers: numerator / sqrt(x_square · y_square).

    Attributes
    ----------
    numerator, x_square, y_square
        Shape (n,), each as the attribute of that name of a :class:`~rankdocket.stats.coefficient.Coefficient`.
    """

    numerator: Codes
    x_square: Codes
    y_square: Codes

    @property
    def is_defined(self) -> npt.NDArray[np.bool_]:
        """Shape (n,): whether both variables still vary without the row."""
        defined: npt.NDArray[np.bool_] = (self.x_square > 0) & (self.y_square > 0)
        return defined

    @property
    def values(self) -> Floats:
        """Shape (n,): the coefficients, −1 to 1.

        Raises
        ------
        ComputeError
            If one of them is undefined.
        """
        if not self.is_defined.all():
            raise ComputeError("Without one of its rows a variable does not vary: there is no coefficient without it.")
        root = np.sqrt(self.x_square.astype(np.float64) * self.y_square.astype(np.float64))
        values: Floats = np.clip(self.numerator / root, -1, 1)
        return values


def rho_without_each(x_codes: Codes, y_codes: Codes) -> WithoutEach:
    """Return Spearman rho of the remaining rows, ranked anew, without each row in turn: n log n steps.

    Raises
    ------
    ComputeError
        If the sums could exceed an int64: above about two million rows.
    """
    x, y = standing(x_codes), standing(y_codes)
    a, b = x.centred, y.centred
    return WithoutEach(
        _safe_dot(a, b) - a * b + y.balance(a) + x.balance(b) + concordance_of_rows(x, y),
        _square_without_each(x),
        _square_without_each(y),
    )


def tau_without_each(x_codes: Codes, y_codes: Codes) -> WithoutEach:
    """Return Kendall tau-b of the remaining rows without each row in turn: n log n steps."""
    x, y = standing(x_codes), standing(y_codes)
    concordance = concordance_of_rows(x, y)
    untied_x, untied_y = len(x_codes) - x.tied, len(y_codes) - y.tied
    return WithoutEach(
        int(concordance.sum()) // 2 - concordance,
        int(untied_x.sum()) // 2 - untied_x,
        int(untied_y.sum()) // 2 - untied_y,
    )


def rho_influence(x_codes: Codes, y_codes: Codes) -> Floats:
    """Return the influence value of each row on Spearman rho, ties included (croux2010); both variables must vary.

    Shape (n,); they sum to 0 but for rounding, are all exactly 0 at |rho| = 1, and Σψ²/n² estimates the variance.

    Raises
    ------
    ComputeError
        If the sums could exceed an int64: above about two million rows.
    """
    x, y = standing(x_codes), standing(y_codes)
    a, b = x.centred, y.centred
    x_square, y_square = float(_safe_dot(a, a)), float(_safe_dot(b, b))
    root = sqrt(x_square * y_square)
    half = _safe_dot(a, b) / root / 2
    of_x, of_y = (a * a - 2 * x.balance(a)) / x_square, (b * b - 2 * y.balance(b)) / y_square
    influence: Floats = len(a) * ((a * b - x.balance(b) - y.balance(a)) / root - half * of_x - half * of_y)
    return influence


def tau_influence(x_codes: Codes, y_codes: Codes) -> Floats:
    """Return the influence value of each row on Kendall tau-b, ties included (croux2010); both variables must vary.

    Shape (n,); they sum to 0 but for rounding.
    """
    x, y = standing(x_codes), standing(y_codes)
    n = len(x_codes)
    concordance, untied_x, untied_y = concordance_of_rows(x, y), n - x.tied, n - y.tied
    x_sum, y_sum = float(untied_x.sum()), float(untied_y.sum())
    root = sqrt(x_sum * y_sum)
    tau = float(concordance.sum()) / root
    influence: Floats = n * (2 * concordance / root - tau * untied_x / x_sum - tau * untied_y / y_sum)
    return influence


def z_jackknife_variance(without_each: WithoutEach, nearest: float) -> float | None:
    """Return the jackknife variance of atanh of a coefficient (tukey1958): (n − 1)/n · Σ(z₍ᵢ₎ − mean)².

    Parameters
    ----------
    without_each
        The coefficient without each row in turn.
    nearest
        Below 1; coefficients nearer to ±1 count as ±``nearest``.

    Returns
    -------
    float or None
        ``None`` when a variable does not vary without one of the rows.
    """
    if not without_each.is_defined.all():
        return None
    z = np.arctanh(np.clip(without_each.values, -nearest, nearest))
    n = len(z)
    return (n - 1) / n * float(np.sum((z - z.mean()) ** 2))


def influence_variance(influence: Floats) -> float:
    """Return Σψ²/n²."""
    return float(np.sum(influence**2)) / len(influence) ** 2


def freedom_of(influence: Floats) -> float:
    """Return the degrees of freedom 2n/(k − 1), at least 3, k the kurtosis of influence values (satterthwaite1946).

    k is 3 when all values are 0; the result is infinite when all have one size.
    """
    n = len(influence)
    squares = influence**2
    whole = float(np.sum(squares))
    kurtosis = n * float(np.sum(squares**2)) / whole**2 if whole > 0 else NORMAL_KURTOSIS
    return max(LEAST_FREEDOM, 2 * n / (kurtosis - 1)) if kurtosis > 1 else float("inf")


def is_perfect(coefficient: Coefficient) -> bool:
    """Whether a defined coefficient is exactly 1 or −1."""
    return coefficient.numerator**2 == coefficient.x_square * coefficient.y_square


def _square_without_each(own: Standing) -> Codes:
    """Return the sum of squares of the centred doubled midranks without each row in turn."""
    a = own.centred
    squares: Codes = _safe_dot(a, a) - a * a + 2 * own.balance(a) + len(a) - own.tied
    return squares


def _safe_dot(left: Codes, right: Codes) -> int:
    dot = exact_dot(left, right)
    if abs(dot) >= SAFE_SUM:
        raise ComputeError("The ranks are too large for exact sums: there are too many rows.")
    return dot
