"""What tests of size found for one association, as frozen values.

A p-value of these tests is its twelve digits: it is rounded once, before it is adjusted or compared, so that a second
person comes to the same side of alpha from the filed one.
"""

from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction

from rankdocket.stats.equivalence import SizeVerdict
from rankdocket.stats.interval import Interval, NoInterval


@dataclass(frozen=True, slots=True)
class ValueTest:
    """The test of one value of rho.

    Attributes
    ----------
    null
        The value, above −1, below 1.
    factor
        k of the variance k/(n − 3) that holds at it.
    """

    null: Decimal
    factor: float
    z: float
    p: Fraction


@dataclass(frozen=True, slots=True)
class SizeTests:
    """Both tests of the smallest size of interest, and what follows from them.

    Attributes
    ----------
    delta
        The smallest size of interest, above 0, below 1.
    factor
        k of the variance k/(n − 3) that holds at it.
    z_upper, z_lower
        z of rho against +delta and against −delta.
    p_above
        Of |rho| ≤ delta, or of the one side that the plan expects.
    p_within
        Of |rho| ≥ delta: the larger of the two one-sided p-values.
    level
        At which the verdict is taken: alpha, shared among the members of an adjusted family.
    interval
        Two-sided, of level 1 − 2·``level``, by the rule of the association’s own interval.
    """

    delta: Decimal
    factor: float
    z_upper: float
    z_lower: float
    p_above: Fraction
    p_within: Fraction
    level: Fraction
    interval: Interval | NoInterval
    verdict: SizeVerdict


@dataclass(frozen=True, slots=True)
class SizeAnalysis:
    """What was found about the size of one rho.

    Attributes
    ----------
    coefficient
        rho as these tests took it, above −1, below 1.
    is_capped
        Whether the cap that the tie steps set stands in for the estimate, as it does for the interval.
    value
        ``None`` where the plan names no null value.
    size
        ``None`` where the plan names no smallest size of interest.
    """

    coefficient: float
    is_capped: bool
    value: ValueTest | None
    size: SizeTests | None
