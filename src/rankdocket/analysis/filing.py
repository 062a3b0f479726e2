"""How values are filed: integers and fractions as they are, everything else as 12 significant digits of text."""

from decimal import ROUND_FLOOR, ROUND_HALF_EVEN, Context, Decimal
from fractions import Fraction
from typing import Final

DIGITS: Final = 12
MOST_DIGITS: Final = 400
"""Enough to part any two fractions that a study can bring together."""

_ROUND: Final = Context(prec=DIGITS, rounding=ROUND_HALF_EVEN)


def filed(value: Fraction | Decimal | float) -> str:
    """Return ``value`` as decimal text of at most 12 significant digits, half to even, never in exponent form.

    A float is taken at its exact binary value.
    """
    if isinstance(value, Fraction):
        rounded = _ROUND.divide(Decimal(value.numerator), Decimal(value.denominator))
    else:
        rounded = _ROUND.create_decimal(Decimal(value))
    return _trimmed(f"{rounded:f}")


def filed_beside(value: Fraction, level: Decimal) -> str:
    """Return a p-value as filed, with as many more digits as it takes to keep it on its own side of ``level``.

    Twelve digits of a p just above alpha may read as alpha itself; whoever compares the filed text must come to the
    finding that the fractions gave.
    """
    if value == Fraction(level):
        return str(level)
    for digits in range(DIGITS, MOST_DIGITS + 1):
        text = f"{Context(prec=digits, rounding=ROUND_HALF_EVEN).divide(Decimal(value.numerator), Decimal(value.denominator)):f}"
        if Decimal(text) != level and (Decimal(text) < level) == (value < Fraction(level)):
            return _trimmed(text)
    raise ValueError(f"{value} and {level} cannot be told apart in {MOST_DIGITS} digits")


def filed_value(value: Decimal) -> str:
    """Return an exact value in full, never in exponent form, as a stranger's program reads it."""
    return f"{value:f}"


def rounded_down(value: Fraction, digits: int) -> Decimal:
    """Return a number of 0 or more with at most so many significant digits, never above ``value``."""
    return Context(prec=digits, rounding=ROUND_FLOOR).divide(Decimal(value.numerator), Decimal(value.denominator))


def half(doubled: int) -> str:
    """Return half of a whole number as text: a midrank from its double."""
    whole, odd = divmod(abs(doubled), 2)
    sign = "-" if doubled < 0 else ""
    return f"{sign}{whole}.5" if odd else f"{sign}{whole}"


def exact_decimal(value: Fraction) -> str:
    """Return a fraction with a finite decimal expansion (quarters of squared rank differences) in full.

    Raises
    ------
    ValueError
        If the expansion does not end within 12 places.
    """
    for places in range(DIGITS + 1):
        scaled = value * 10**places
        if scaled.denominator == 1:
            return f"{Decimal(scaled.numerator).scaleb(-places):f}"
    raise ValueError(f"{value} has no finite decimal form")


def _trimmed(text: str) -> str:
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text == "-0" else text
