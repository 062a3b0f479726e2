"""A diagnostic, no verdict: rho near nought while the rows are visibly related in another way."""

from fractions import Fraction
from typing import Final

from rankdocket.stats.chatterjee import Xi
from rankdocket.stats.coefficient import Coefficient

NEAR_NOUGHT: Final = Fraction(1, 5)
"""A rho of this size or less counts as near 0: at most one twenty-fifth of the variance of the ranks goes with it.  It is
a size, not a test: in many rows a rho of 0.1 may be far beyond chance, and a curve may still be what matters."""

VISIBLE_SPREADS: Final = 3
"""Null standard deviations of xi from which a relation counts as visible: unrelated rows without ties, 20 to 200
of them, come so far about once in 700 times (ten rows once in 2000), so that a reader is seldom sent to a plot for
nothing."""


def has_hidden_shape(rho: Coefficient, xi: Xi) -> bool:
    """Return whether rho is near 0 while xi, of either variable on the other, is clearly above 0: look at the plot.

    Both are compared with their thresholds exactly.  An undefined rho is near nothing, and a null of one value has no
    spread to be beyond.
    """
    if not rho.is_defined or xi.null_variance == 0:
        return False
    is_near = Fraction(rho.numerator**2, rho.x_square * rho.y_square) <= NEAR_NOUGHT**2
    is_visible = xi.coefficient > 0 and xi.coefficient**2 >= VISIBLE_SPREADS**2 * xi.null_variance
    return is_near and is_visible
