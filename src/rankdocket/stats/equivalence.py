"""Tests of a value other than nought, of a minimum effect and of equivalence, on the z scale; the verdict about size."""

from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from math import atanh, sqrt
from typing import Final, Literal, TypeAlias, get_args

from rankdocket.references import Description
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.z_interval import textbook_limits
from rankdocket.stats.z_scale import NullVariance, ZTest, null_factor, obstacle
from rankdocket.vocabulary import Direction

NULL_VALUE: Final = Description(
    "The coefficient was tested against the value of the plan on the inverse hyperbolic tangent scale with the "
    "variance factor {factor}; the p-value is approximate and holds near normal-type dependence.",
    ("bonett2000",),
)
MINIMUM_EFFECT: Final = Description(
    "Whether rho lies beyond the smallest size that matters, as the plan states it, was tested on the inverse "
    "hyperbolic tangent scale with the variance factor {factor}; the p-value is approximate and holds near normal-type "
    "dependence.",
    ("murphy1999", "bonett2000"),
)
EQUIVALENCE: Final = Description(
    "Whether rho lies within the smallest size that matters, as the plan states it, was tested by two one-sided tests "
    "on the inverse hyperbolic tangent scale with the variance factor {factor}; the larger of their p-values counts. It "
    "is approximate and holds near normal-type dependence.",
    ("schuirmann1987", "goertzen2010", "bonett2000"),
)

SizeVerdict: TypeAlias = Literal[
    "size above delta shown",
    "size below delta shown",
    "independence rejected, size above delta not shown",
    "undecided",
]
SIZE_VERDICTS: Final = get_args(SizeVerdict)
"""In the order in which they are looked for: the first that applies holds."""


@dataclass(frozen=True, slots=True)
class MinimumEffect:
    """A test of the null hypothesis that rho is no larger than ``delta``.

    Attributes
    ----------
    delta
        Above 0, below 1.
    factor
        k of the variance k/(n − 3).
    above, below
        z of rho against +delta and against −delta.
    """

    delta: float
    factor: float
    above: ZTest
    below: ZTest

    def p(self, direction: Direction) -> float:
        """Return the approximate p-value, 0 to 1.

        "two-sided" is of |rho| ≤ delta and counts both tails; "greater" is of rho ≤ delta, "less" of rho ≥ −delta.
        """
        match direction:
            case "greater":
                return self.above.p("greater")
            case "less":
                return self.below.p("less")
            case "two-sided":
                nearer = ZTest(max(self.above.z, -self.below.z))
                farther = ZTest(max(-self.above.z, self.below.z))
                return nearer.p("greater") + farther.p("greater")


@dataclass(frozen=True, slots=True)
class Equivalence:
    """Two one-sided tests of the null hypothesis that |rho| is ``delta`` or more (schuirmann1987).

    Attributes
    ----------
    r, n
        Coefficient and complete rows.
    delta
        Above 0, below 1.
    factor
        k of the variance k/(n − 3).
    lower
        z against −delta; a large one speaks for rho > −delta.
    upper
        z against +delta; a small one speaks for rho < delta.
    """

    r: float
    n: int
    delta: float
    factor: float
    lower: ZTest
    upper: ZTest

    @property
    def p_lower(self) -> float:
        """The approximate p-value of rho ≤ −delta."""
        return self.lower.p("greater")

    @property
    def p_upper(self) -> float:
        """The approximate p-value of rho ≥ delta."""
        return self.upper.p("less")

    @property
    def p(self) -> float:
        """The larger of the two p-values: of |rho| ≥ delta."""
        return max(self.p_lower, self.p_upper)

    def limits(self, alpha: Decimal) -> tuple[float, float]:
        """Return the interval of level 1 − 2·alpha from the same variance factor; alpha above 0 and below ½.

        It lies within ±delta exactly when :attr:`p` is below alpha, but for rounding.
        """
        textbook = textbook_limits(self.r, self.factor / (self.n - 3), 1 - 2 * alpha)
        return textbook.low, textbook.high


def value_test(r: float, n: int, rho: float, *, variance: NullVariance) -> ZTest | NoAnswer:
    """Return √(n − 3)·(atanh r − atanh rho)/√k, the test of the value ``rho`` (bonett2000), or why there is none.

    Parameters
    ----------
    r, n
        Coefficient and complete rows.
    rho
        The value of the null hypothesis, above −1, below 1.
    variance
        Of atanh r when the null hypothesis holds.

    Raises
    ------
    ValueError
        If ``r`` or ``rho`` is out of its range.
    """
    if not -1 < rho < 1:
        raise ValueError(f"the value to be tested must lie between -1 and 1 and reach neither, not {rho}")
    reason = obstacle(r, n)
    if reason is not None:
        return NoAnswer(reason)
    return ZTest((atanh(r) - atanh(rho)) * sqrt((n - 3) / null_factor(variance, r, rho)))


def minimum_effect(r: float, n: int, delta: float, *, variance: NullVariance) -> MinimumEffect | NoAnswer:
    """Return the test of a minimum effect (murphy1999, on the z scale), or why there is none.

    A coefficient of ±1 has no place on the z scale; a caller who holds a cap for it asks with the cap.

    Raises
    ------
    ValueError
        If ``r`` or ``delta`` is out of its range.
    """
    tests = _against_both(r, n, delta, variance)
    return tests if isinstance(tests, NoAnswer) else MinimumEffect(delta, null_factor(variance, r, delta), *tests)


def tost_z(r: float, n: int, delta: float, *, variance: NullVariance) -> Equivalence | NoAnswer:
    """Return the two one-sided tests of equivalence on the z scale (schuirmann1987, goertzen2010), or why none.

    Raises
    ------
    ValueError
        If ``r`` or ``delta`` is out of its range.
    """
    tests = _against_both(r, n, delta, variance)
    if isinstance(tests, NoAnswer):
        return tests
    above, below = tests
    return Equivalence(r, n, delta, null_factor(variance, r, delta), below, above)


def size_verdict(
    *, p_above: Fraction | None, p_below: Fraction | None, p_independence: Fraction | None, alpha: Fraction
) -> SizeVerdict:
    """Return the first of the four verdicts about size that applies.

    Parameters
    ----------
    p_above
        Of the minimum-effect test, p-value of |rho| ≤ delta (or of the one side that the plan names).
    p_below
        Of the equivalence test, p-value of |rho| ≥ delta.
    p_independence
        Of the test of independence.
    alpha
        Above 0, below 1; a p-value equal to it is enough.  A p-value that is ``None`` shows nothing.
    """
    if _is_reached(p_above, alpha):
        return "size above delta shown"
    if _is_reached(p_below, alpha):
        return "size below delta shown"
    if _is_reached(p_independence, alpha):
        return "independence rejected, size above delta not shown"
    return "undecided"


def is_within(low: float, high: float, delta: float) -> bool:
    """Return whether an interval lies within (−delta, delta): for the caveat when the test says otherwise."""
    return -delta < low and high < delta


def _against_both(r: float, n: int, delta: float, variance: NullVariance) -> tuple[ZTest, ZTest] | NoAnswer:
    """Return the tests of +delta and of −delta."""
    if not 0 < delta < 1:
        raise ValueError(f"delta must lie between 0 and 1 and reach neither, not {delta}")
    above, below = (value_test(r, n, bound, variance=variance) for bound in (delta, -delta))
    if isinstance(above, NoAnswer) or isinstance(below, NoAnswer):
        return NoAnswer(next(test.reason for test in (above, below) if isinstance(test, NoAnswer)))
    return above, below


def _is_reached(p: Fraction | None, alpha: Fraction) -> bool:
    return p is not None and p <= alpha
