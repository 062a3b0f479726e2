"""Numbers from cells: exact, by a strict grammar, never by guess."""

from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rankdocket.study.cells import ALL_FORMATS, NumberFormat, is_number_like, plain_digits, read_number

POINT = NumberFormat(".", None)
COMMA = NumberFormat(",", None)


@pytest.mark.parametrize(
    ("text", "form", "number"),
    [
        ("0", POINT, "0"),
        ("-0", POINT, "0"),
        ("007", POINT, "7"),
        ("+1.50", POINT, "1.50"),
        ("\u22122", POINT, "-2"),
        (".5", POINT, "0.5"),
        (" 4\u00a0", POINT, "4"),
        ("1e5", POINT, "100000"),
        ("1.5E\u22123", POINT, "0.0015"),
        ("1,25", COMMA, "1.25"),
        ("0.1000000000000000055511151231257827", POINT, "0.1000000000000000055511151231257827"),
        ("1,234,567.8", NumberFormat(".", ","), "1234567.8"),
        ("1234567.8", NumberFormat(".", ","), "1234567.8"),
        ("1.234", NumberFormat(",", "."), "1234"),
        ("12 345,6", NumberFormat(",", " "), "12345.6"),
        ("1\u202f234", NumberFormat(",", "\u202f"), "1234"),
        ("1'234", NumberFormat(".", "'"), "1234"),
    ],
)
def test_numbers_are_read_exactly(text: str, form: NumberFormat, number: str) -> None:
    """A number is the decimal that stands there, under the declared marks."""
    assert read_number(text, form) == Decimal(number)


@pytest.mark.parametrize(
    ("text", "form"),
    [
        ("", POINT),
        (".", POINT),
        ("5.", POINT),
        ("1,25", POINT),
        ("1.25", COMMA),
        ("1.2.3", POINT),
        ("1 234", POINT),
        ("1_000", POINT),
        ("0x1F", POINT),
        ("1e", POINT),
        ("e5", POINT),
        ("1e5.0", POINT),
        ("--1", POINT),
        ("1-", POINT),
        ("inf", POINT),
        ("nan", POINT),
        ("1e999", POINT),
        ("\u0661", POINT),
        ("½", POINT),
        ("12,34", NumberFormat(".", ",")),
        ("1,2345", NumberFormat(".", ",")),
        ("1234,567", NumberFormat(".", ",")),
        (",234", NumberFormat(".", ",")),
        ("1,234,56", NumberFormat(".", ",")),
        ("1" * 61, POINT),
        ("<0.05", POINT),
        ("0.05 J", POINT),
        ("3=", POINT),
        ("1/2", POINT),
        ("12:30", POINT),
        ("2024-05-14", POINT),
    ],
)
def test_anything_else_is_no_number(text: str, form: NumberFormat) -> None:
    """What is not wholly a number under the declared marks is not a number at all."""
    assert read_number(text, form) is None


@given(st.decimals(allow_nan=False, allow_infinity=False, min_value=-(10**12), max_value=10**12, places=6))
def test_every_decimal_comes_back_in_every_format(number: Decimal) -> None:
    """A number written with any declared marks, groups of three included, is read back exactly."""
    for form in ALL_FORMATS:
        grouped = f"{number:,f}".translate({ord(","): form.thousands_mark or "", ord("."): form.decimal_mark})
        assert read_number(grouped, form) == number
        assert is_number_like(grouped)


@given(st.text(max_size=12))
def test_no_text_is_read_as_infinity_or_not_a_number(text: str) -> None:
    """Whatever stands in a cell, the outcome is a finite number or none."""
    for form in ALL_FORMATS:
        number = read_number(text, form)
        assert number is None or number.is_finite()


def test_equal_measurements_are_equal_numbers() -> None:
    """1.0, 1.00 and 1e0 are one value, and so are 0.1 + 0.2 written out and 0.3."""
    assert len({read_number(text, POINT) for text in ("1", "1.0", "1.00", "1e0", "+1")}) == 1
    assert read_number("0.30", POINT) == Decimal("0.1") + Decimal("0.2")


def test_plain_digits_drop_what_says_nothing() -> None:
    """Zeros at the end of decimals and exponents are written out of a number."""
    assert [plain_digits(Decimal(text)) for text in ("1.250", "3E+2", "100", "-0.50")] == ["1.25", "300", "100", "-0.5"]
