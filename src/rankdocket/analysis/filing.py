"""How values are filed: integers and fractions as they are, everything else as 12 significant digits of text."""

from decimal import ROUND_HALF_EVEN, Context, Decimal
from fractions import Fraction
from typing import Final

DIGITS: Final = 12
_ROUND: Final = Context(prec=DIGITS, rounding=ROUND_HALF_EVEN)


def filed(value: Fraction | Decimal | float) -> str:
    """Return ``value`` as decimal text of at most 12 significant digits, half to even, never in exponent form.

    A float is taken at its exact binary value.
    """
    if isinstance(value, Fraction):
        rounded = _ROUND.divide(Decimal(value.numerator), Decimal(value.denominator))
    else:
        rounded = _ROUND.create_decimal(Decimal(value))
    text = f"{rounded:f}"
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text == "-0" else text


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
