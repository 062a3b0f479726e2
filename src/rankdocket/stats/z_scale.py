"""Tests on the inverse hyperbolic tangent scale: variances of a coefficient on it, and normal tails.

All of it holds approximately, and near normal-type dependence only.
"""

from dataclasses import dataclass
from typing import Final, Literal, TypeAlias

from scipy.special import ndtr

from rankdocket.stats.intervals.bonett_wright import bonett_wright_factor
from rankdocket.stats.intervals.fieller import RHO_FACTOR
from rankdocket.vocabulary import Direction

EstimateVariance: TypeAlias = Literal["Fisher", "Fieller", "Bonett-Wright at the estimate"]
"""The k of the variance k/(n − 3): 1 (fisher1921), 1.06 (fieller1957), 1 + r²/2 (bonett2000)."""

NullVariance: TypeAlias = EstimateVariance | Literal["Bonett-Wright at the null"]
"""With a null value there is one more: 1 + ρ₀²/2 (bonett2000)."""

FEWEST_ROWS: Final = 4
"""The variance has n − 3 in its denominator."""

PERFECT: Final = "the coefficient is one in size, which has no place on the inverse hyperbolic tangent scale"
TOO_FEW: Final = "the variance on the inverse hyperbolic tangent scale needs four or more complete rows"


@dataclass(frozen=True, slots=True)
class ZTest:
    """A statistic that is standard normal, approximately, when its null hypothesis holds."""

    z: float

    def p(self, direction: Direction) -> float:
        """Return the approximate p-value, 0 to 1."""
        match direction:
            case "two-sided":
                return min(1.0, 2 * float(ndtr(-abs(self.z))))
            case "greater":
                return float(ndtr(-self.z))
            case "less":
                return float(ndtr(self.z))


def obstacle(r: float, n: int) -> str | None:
    """Return why a coefficient of ``n`` rows cannot be taken to the z scale; ``None`` when it can.

    Raises
    ------
    ValueError
        If ``r`` is not between −1 and 1.
    """
    require_coefficients(r)
    if n < FEWEST_ROWS:
        return TOO_FEW
    return PERFECT if abs(r) == 1 else None


def require_coefficients(*coefficients: float) -> None:
    """Refuse what can be no coefficient.

    Raises
    ------
    ValueError
        If one of them is not between −1 and 1.
    """
    for r in coefficients:
        if not -1 <= r <= 1:
            raise ValueError(f"a coefficient lies between -1 and 1; {r} does not")


def estimate_factor(variance: EstimateVariance, r: float) -> float:
    """Return k of the variance k/(n − 3) at the coefficient ``r``."""
    match variance:
        case "Fisher":
            return 1.0
        case "Fieller":
            return RHO_FACTOR
        case "Bonett-Wright at the estimate":
            return bonett_wright_factor(r)


def null_factor(variance: NullVariance, r: float, null: float) -> float:
    """Return k of the variance k/(n − 3) for a test of the value ``null``."""
    if variance == "Bonett-Wright at the null":
        return bonett_wright_factor(null)
    return estimate_factor(variance, r)
