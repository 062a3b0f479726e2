"""One cell's text to an exact number, by a strict grammar: sign, digits, declared marks, exponent; nothing else."""

import re
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from typing import Final

from rankdocket.study.form import DECIMAL_MARKS, THOUSANDS_MARKS

MINUS_SIGN: Final = "\u2212"

LONGEST_NUMBER: Final = 60
"""Characters of a number; no instrument writes so many, a lost separator does."""

LARGEST_EXPONENT: Final = 308
"""Decimal exponent up to which every part of the report can also hold a value as a double (IEEE 754 binary64)."""

_NUMBER_LIKE: Final = re.compile(r"[-+\u2212]?[0-9][0-9.,'\u2019 \u00a0\u202f]*([eE][-+\u2212]?[0-9]+)?")


@dataclass(frozen=True, slots=True)
class NumberFormat:
    """Which mark stands before the decimals, and which, if any, between groups of three digits."""

    decimal_mark: str
    thousands_mark: str | None

    def spec_lines(self) -> str:
        """Return the lines of a spec that say this."""
        lines = f'decimal_mark: "{self.decimal_mark}"'
        if self.thousands_mark is None:
            return lines
        mark = self.thousands_mark
        written = mark if mark.isprintable() else f"\\u{ord(mark):04X}"
        return f'{lines} and thousands_mark: "{written}"'


ALL_FORMATS: Final = tuple(
    NumberFormat(decimal, thousands)
    for decimal in DECIMAL_MARKS
    for thousands in (None, *THOUSANDS_MARKS)
    if thousands != decimal
)
"""Every way of writing numbers that a spec can declare, the plain ones first for each decimal mark."""


def read_number(text: str, form: NumberFormat) -> Decimal | None:
    """Return the number that ``text`` is, exactly, or ``None`` when it is none.

    Blanks around the number are dropped; decimals stay as many as written (1.00 equals 1.0).  A thousands mark may be missing throughout; where it stands, every
    group after the first has three digits.
    """
    text = text.strip()
    if len(text) > LONGEST_NUMBER:
        return None
    found = _pattern(form).fullmatch(text)
    if found is None:
        return None
    whole = found["whole"].replace(form.thousands_mark, "") if form.thousands_mark else found["whole"]
    decimals = "" if found["decimals"] is None else f".{found['decimals']}"
    exponent = "" if found["exponent"] is None else f"E{found['exponent'].replace(MINUS_SIGN, '-')}"
    number = Decimal(f"{whole or '0'}{decimals}{exponent}")
    if number == 0:
        # A zero has no sign and no exponent: −0 and 0E3 are the same measurement.
        return Decimal(0)
    if abs(number.adjusted()) > LARGEST_EXPONENT:
        return None
    return number.copy_negate() if found["sign"] in ("-", MINUS_SIGN) else number


def plain_digits(number: Decimal) -> str:
    """Return the digits of a number without an exponent and without zeros at the end of its decimals."""
    text = f"{number:f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def is_number_like(text: str) -> bool:
    """Say whether a person would take ``text`` for a number, whatever its marks mean."""
    return _NUMBER_LIKE.fullmatch(text.strip()) is not None


@cache
def _pattern(form: NumberFormat) -> re.Pattern[str]:
    digits = "[0-9]+"
    if form.thousands_mark is not None:
        digits = f"[0-9]{{1,3}}(?:{re.escape(form.thousands_mark)}[0-9]{{3}})+|{digits}"
    decimals = f"{re.escape(form.decimal_mark)}(?P<decimals>[0-9]+)"
    return re.compile(
        rf"(?P<sign>[-+{MINUS_SIGN}]?)(?=[0-9]|{decimals.replace('?P<decimals>', '')})"
        rf"(?P<whole>(?:{digits})?)(?:{decimals})?(?:[eE](?P<exponent>[-+{MINUS_SIGN}]?[0-9]{{1,4}}))?"
    )
