"""The best monotone step curve through the rows, by pooling neighbours that go the wrong way (ayer1955)."""

from bisect import bisect_right
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Final, Literal, TypeAlias

from rankdocket.references import Description
from rankdocket.stats.exact_values import Given, equally_long, exact_values
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes

ISOTONIC: Final = Description(
    "A monotone step curve was fitted by least squares; neighbouring rows whose order contradicted it were pooled, and "
    "rows tied in the first variable shared one value.",
    ("ayer1955",),
)

Trend: TypeAlias = Literal["rising", "falling"]


@dataclass(frozen=True, slots=True)
class Step:
    """A stretch of x on which the curve is level.

    Attributes
    ----------
    first, last
        Codes of x at which it begins and ends.
    weight
        Of its rows together, above 0.
    value
        Weighted mean of y over its rows.
    """

    first: int
    last: int
    weight: Fraction
    value: Fraction


@dataclass(frozen=True, slots=True)
class IsotonicFit:
    """A monotone step curve.

    Attributes
    ----------
    steps
        In increasing order of x; strictly rising or strictly falling in value.
    left_over
        Weighted sum of squares of y about the curve.
    whole
        Weighted sum of squares of y about its mean.
    """

    trend: Trend
    steps: tuple[Step, ...]
    left_over: Fraction
    whole: Fraction

    @property
    def explained(self) -> Fraction | None:
        """The share of the sum of squares that the curve takes away, 0 to 1; ``None`` when y does not vary."""
        return None if self.whole == 0 else 1 - self.left_over / self.whole

    def at(self, x_codes: Codes) -> tuple[Fraction, ...]:
        """Return the curve at codes of x that the fit has seen."""
        starts = [step.first for step in self.steps]
        return tuple(self.steps[bisect_right(starts, int(code)) - 1].value for code in x_codes)


def isotonic_fit(
    x_codes: Codes, y: Sequence[Given], *, trend: Trend, weights: Sequence[Given] | None = None
) -> IsotonicFit | NoAnswer:
    """Return the monotone curve with the least weighted sum of squares (ayer1955), in fractions; or why there is none.

    Parameters
    ----------
    x_codes, y
        Shape (n,): the order of x, and the values of y.
    trend
        Which way the curve goes.
    weights
        One for each row, above 0; 1 for each when there are none.

    Raises
    ------
    ValueError
        If the columns differ in length, hold anything but finite numbers, or a weight is not above 0.
    """
    values = exact_values(y)
    masses = (Fraction(1),) * len(values) if weights is None else exact_values(weights)
    if equally_long(x_codes, values, masses) == 0:
        return NoAnswer("there are no complete rows")
    if min(masses) <= 0:
        raise ValueError("every weight must be above 0")
    sign = 1 if trend == "rising" else -1
    steps: list[Step] = []
    for single in _tied_means(x_codes, values, masses):
        pooled = single
        while steps and sign * steps[-1].value >= sign * pooled.value:
            pooled = _pooled(steps.pop(), pooled)
        steps.append(pooled)
    squares = sum((mass * value**2 for mass, value in zip(masses, values, strict=True)), Fraction(0))
    weight = sum(masses, Fraction(0))
    total = sum((mass * value for mass, value in zip(masses, values, strict=True)), Fraction(0))
    left_over = squares - sum((step.weight * step.value**2 for step in steps), Fraction(0))
    return IsotonicFit(trend, tuple(steps), left_over, squares - total**2 / weight)


def monotone_fit(
    x_codes: Codes, y: Sequence[Given], *, weights: Sequence[Given] | None = None
) -> IsotonicFit | NoAnswer:
    """Return the rising or the falling curve, whichever leaves less over; the rising one when they leave the same.

    Raises
    ------
    ValueError
        As :func:`isotonic_fit`.
    """
    rising = isotonic_fit(x_codes, y, trend="rising", weights=weights)
    falling = isotonic_fit(x_codes, y, trend="falling", weights=weights)
    if isinstance(rising, NoAnswer) or isinstance(falling, NoAnswer):
        return rising
    return rising if rising.left_over <= falling.left_over else falling


def _tied_means(x_codes: Codes, values: tuple[Fraction, ...], masses: tuple[Fraction, ...]) -> list[Step]:
    """Return one step for each distinct x, in increasing order."""
    sums: dict[int, tuple[Fraction, Fraction]] = {}
    for code, value, mass in zip(x_codes.tolist(), values, masses, strict=True):
        weight, total = sums.get(code, (Fraction(0), Fraction(0)))
        sums[code] = (weight + mass, total + mass * value)
    return [Step(code, code, weight, total / weight) for code, (weight, total) in sorted(sums.items())]


def _pooled(left: Step, right: Step) -> Step:
    weight = left.weight + right.weight
    value = (left.weight * left.value + right.weight * right.value) / weight
    return Step(left.first, right.last, weight, value)
