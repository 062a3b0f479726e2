"""Numbers handed over by a caller, at their exact value."""

from collections.abc import Sequence
from decimal import Decimal
from fractions import Fraction
from math import isfinite
from typing import TypeAlias

from rankdocket.stats.ranks import Codes, dense_codes

Given: TypeAlias = int | float | Decimal | Fraction


def exact_values(values: Sequence[Given]) -> tuple[Fraction, ...]:
    """Return the values as fractions; a float is taken at its exact value.

    Raises
    ------
    ValueError
        If a value is not a finite number.
    """
    for position, value in enumerate(values):
        if not isfinite(value):
            raise ValueError(f"the value at position {position} is not a finite number")
    return tuple(Fraction(value) for value in values)


def exact_codes(values: Sequence[Given]) -> Codes:
    """Return the codes 0, 1, … of the values in their exact order.

    Raises
    ------
    ValueError
        If a value is not a finite number.
    """
    return dense_codes(exact_values(values))


def equally_long(*columns: Sequence[object] | Codes) -> int:
    """Return the number of rows that the columns share.

    Raises
    ------
    ValueError
        If the columns differ in length.
    """
    lengths = {len(column) for column in columns}
    if len(lengths) != 1:
        raise ValueError(f"the columns differ in length: {', '.join(str(length) for length in sorted(lengths))}")
    return lengths.pop()
