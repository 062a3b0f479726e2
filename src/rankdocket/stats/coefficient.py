"""A rank correlation coefficient as three integers, and its value in as many digits as asked for."""

from dataclasses import dataclass
from fractions import Fraction
from math import isqrt
from typing import Final

from rankdocket.errors import ComputeError
from rankdocket.vocabulary import CoefficientName

FEWEST_ROWS: Final = 3
"""With fewer rows every untied pairing agrees or disagrees perfectly: a coefficient says nothing."""

FILED_DIGITS: Final = 12
"""Significant digits with which a coefficient is filed."""

FLOAT_DIGITS: Final = 40
"""Digits from which the float is taken: far beyond a double’s 17, so that it is the nearest one."""


@dataclass(frozen=True, slots=True)
class Coefficient:
    """A coefficient: ``numerator / sqrt(x_square * y_square)``.

    Attributes
    ----------
    n
        Complete rows.
    numerator
        For rho the sum of products of the doubled centred midranks; for tau concordant less discordant pairs.
    x_square, y_square
        For rho the sums of squares of the doubled centred midranks; for tau the pairs not tied in x, in y.
    """

    name: CoefficientName
    n: int
    numerator: int
    x_square: int
    y_square: int

    @property
    def is_defined(self) -> bool:
        """Whether both variables vary."""
        return self.x_square > 0 and self.y_square > 0

    @property
    def value(self) -> float:
        """The coefficient, −1 to 1, as the nearest double.

        Raises
        ------
        ComputeError
            If it is undefined, or the integers do not belong together.
        """
        return float(self.decimal_text(FLOAT_DIGITS))

    def decimal_text(self, digits: int = FILED_DIGITS) -> str:
        """Return the coefficient with ``digits`` significant digits, half to even, from the integers.

        Raises
        ------
        ComputeError
            If it is undefined, or the integers do not belong together.
        """
        if not self.is_defined:
            raise ComputeError(f"{self.name} is undefined: a variable does not vary.")
        square = self.x_square * self.y_square
        if self.numerator**2 > square:
            raise ComputeError(f"{self.name} would lie outside −1 to 1: its integers do not belong together.")
        return root_ratio_text(Fraction(self.numerator), Fraction(square), digits)


def root_ratio_text(numerator: Fraction, square: Fraction, digits: int) -> str:
    """Return ``numerator / sqrt(square)`` as plain decimal text with ``digits`` significant digits, half to even.

    The decision which way to round is made on integers, so the text is right to the last digit.
    """
    if numerator == 0:
        return "0"
    ratio = numerator**2 / square
    places = digits
    quotient = _rounded_root(ratio, places)
    while len(str(quotient)) != digits or quotient == 0:
        # A carry (0.9999… becomes 1.000…) asks for one place fewer, a value rounded away for more.
        places += digits - len(str(quotient)) if quotient else digits
        quotient = _rounded_root(ratio, places)
    sign = "-" if numerator < 0 else ""
    text = str(quotient)
    if places <= 0:
        return sign + text + "0" * -places
    text = text.rjust(places + 1, "0")
    return f"{sign}{text[:-places]}.{text[-places:]}"


def _rounded_root(ratio: Fraction, places: int) -> int:
    """Return sqrt(ratio) times 10**places as the nearest integer, half to even."""
    scaled = ratio * Fraction(10) ** (2 * places)
    floor = isqrt(scaled.numerator // scaled.denominator)
    middle = Fraction(2 * floor + 1, 2) ** 2
    if scaled > middle or (scaled == middle and floor % 2 == 1):
        return floor + 1
    return floor
