"""Critical values: the coefficient nearest to 0 that reaches alpha with these rows and ties, and what a rule of thumb is worth."""

from collections.abc import Iterable
from dataclasses import dataclass, replace
from fractions import Fraction
from math import isqrt, sqrt

from scipy.special import ndtri

from rankdocket.references import Description
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.null import NullMethod, toward
from rankdocket.stats.outline import NullOutline, Weight
from rankdocket.vocabulary import Direction


@dataclass(frozen=True, slots=True)
class Critical:
    """The attainable coefficient nearest to 0 whose p-value is alpha or less, in one direction.

    Attributes
    ----------
    numerator
        Of the coefficient; its size where the direction is two-sided.
    p
        Its p-value, above 0, alpha at most.
    count
        Permutations at least as extreme, counted or drawn; ``None`` where shares are known only.
    error
        The true p-value lies within ``p`` ± ``error``, by the statement of its method; 0 where it was counted.
    opposite
        In the two-sided direction the numerator below 0 nearest to 0 that is at least as far from it; ``None`` where
        there is none, and in the other directions.
    """

    numerator: int
    p: Fraction
    count: int | None
    error: Fraction = Fraction(0)
    opposite: int | None = None


@dataclass(frozen=True, slots=True)
class CriticalValues:
    """Critical values in each direction; ``None`` where no coefficient of these rows and ties reaches alpha.

    Attributes
    ----------
    method
        Where the null comes from that they were read from.
    of
        The permutations that counts are held against; ``None`` where shares are known only.
    """

    method: NullMethod
    of: int | None
    greater: Critical | None
    less: Critical | None
    two_sided: Critical | None

    def toward(self, direction: Direction) -> Critical | None:
        """Return the critical value in ``direction``."""
        return toward(direction, greater=self.greater, less=self.less, two_sided=self.two_sided)


@dataclass(frozen=True, slots=True)
class LargeSample:
    """What the large-sample rule z/√(n − 1) says, and its true size with these rows and ties.

    Attributes
    ----------
    z
        The normal quantile.
    value
        z/√(n − 1), above 0; it may exceed 1.
    size
        The share of all orderings whose rho reaches it: 0 to 1, alpha if the rule were right.
    """

    z: float
    value: float
    size: Fraction


CRITICAL_VALUES = Description(
    "A critical value is the attainable coefficient nearest to zero whose p-value is alpha or less with these rows and "
    "ties; it was read from the null laid out whole, is printed rounded and filed in full, and is not adjusted for several "
    "tests.",
    (),
)


def critical_values(outline: NullOutline, alpha: Fraction) -> CriticalValues:
    """Return the critical values at ``alpha`` (above 0, below 1) of a null that is laid out whole."""
    statistics, weights = outline.statistics.tolist(), outline.weights
    together: dict[int, Weight] = {}
    for statistic, weight in zip(statistics, weights, strict=True):
        together[abs(statistic)] = together.get(abs(statistic), 0) + weight
    counted = outline.method != "exact algorithm, 12 digits"
    return CriticalValues(
        outline.method,
        outline.of if counted else None,
        greater=_nearest_to_zero(zip(reversed(statistics), reversed(weights), strict=True), outline, alpha),
        less=_nearest_to_zero(
            ((-statistic, weight) for statistic, weight in zip(statistics, weights, strict=True)),
            outline,
            alpha,
            sign=-1,
        ),
        two_sided=_with_opposite(
            _nearest_to_zero(sorted(together.items(), reverse=True), outline, alpha), statistics, weights
        ),
    )


def large_sample_value(n: int, alpha: Fraction, direction: Direction) -> tuple[float, float]:
    """Return z and z/√(n − 1) for ``n`` of at least 2 rows: common practice above about thirty rows, no source."""
    z = -float(ndtri(float(alpha) / (2 if direction == "two-sided" else 1)))
    return z, z / sqrt(n - 1)


def large_sample(outline: NullOutline, observed: Coefficient, alpha: Fraction, direction: Direction) -> LargeSample:
    """Return the large-sample rule for Spearman's rho with its true size under ``outline``."""
    z, value = large_sample_value(observed.n, alpha, direction)
    least = _least_root(Fraction(value) ** 2 * observed.x_square * observed.y_square)
    reached: Weight = 0
    for statistic, weight in zip(outline.statistics.tolist(), outline.weights, strict=True):
        on_side = direction == "two-sided" or (statistic > 0) == (direction == "greater")
        if on_side and abs(statistic) >= least:
            reached += weight
    return LargeSample(z, value, Fraction(reached) / outline.of)


def _with_opposite(found: Critical | None, statistics: list[int], weights: tuple[Weight, ...]) -> Critical | None:
    if found is None:
        return None
    beyond = (
        statistic
        for statistic, weight in zip(statistics, weights, strict=True)
        if weight and statistic <= -found.numerator
    )
    return replace(found, opposite=max(beyond, default=None))


def _least_root(square: Fraction) -> int:
    """Return the least whole number whose square is at least ``square``."""
    root = isqrt(square.numerator // square.denominator)
    return root if root * root >= square else root + 1


def _nearest_to_zero(
    from_the_end: Iterable[tuple[int, Weight]], outline: NullOutline, alpha: Fraction, sign: int = 1
) -> Critical | None:
    """Return the last value above 0 whose tail stays within alpha; values fall from the end of the null."""
    last: tuple[int, Weight] | None = None
    tail: Weight = 0
    for statistic, weight in from_the_end:
        tail += weight
        # At 0 and beyond, a tail says nothing against unrelated rows.
        if statistic <= 0 or not outline.is_within(tail, alpha):
            break
        if weight:
            last = statistic, tail
    if last is None:
        return None
    statistic, tail = last
    return Critical(sign * statistic, outline.p(tail), tail if isinstance(tail, int) else None)
