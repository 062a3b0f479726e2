"""Coefficients as integers and as text."""

from decimal import Decimal, localcontext
from fractions import Fraction

import numpy as np
import pytest

from rankdocket.errors import ComputeError
from rankdocket.stats.coefficient import Coefficient, root_ratio_text
from rankdocket.stats.ranks import dense_codes
from rankdocket.stats.rho import rho, short_form, squared_differences, tie_corrected_rho
from rankdocket.stats.tau import tau_b

X = np.array([1, 2, 3, 4, 5, 6, 7])
Y = np.array([1, 3, 6, 2, 7, 4, 6])


def test_rho_with_a_tie_is_not_the_short_form() -> None:
    """x = 1 … 7 against 1, 3, 6, 2, 7, 4, 6: 0.612637, where the short form gives 0.616071 (worked by hand)."""
    assert round(rho(X, Y).value, 6) == 0.612637
    assert round(float(short_form(7, squared_differences(X, Y))), 6) == 0.616071
    form = tie_corrected_rho(X, Y)
    assert (form.x_term, form.y_term, form.squared_differences) == (Fraction(28), Fraction(55, 2), Fraction(43, 2))
    assert form.decimal_text == rho(X, Y).decimal_text()


def test_tau_b_with_a_tie_in_one_variable() -> None:
    """1, 2, 2, 3 against 1, 3, 2, 4: 5/√30 = 0.912871 (worked by hand)."""
    coefficient = tau_b(np.array([1, 2, 2, 3]), np.array([1, 3, 2, 4]))
    assert (coefficient.numerator, coefficient.x_square, coefficient.y_square) == (5, 5, 6)
    assert round(coefficient.value, 6) == 0.912871


@pytest.mark.parametrize("n", [1_291, 65_537, 2_000_000])
def test_many_rows_do_not_overflow(n: int) -> None:
    """The sums of squares of many untied rows are those of the closed form, and reversal gives −1."""
    x = np.arange(n)
    coefficient = rho(x, x[::-1])
    assert coefficient.x_square == coefficient.y_square == (n**3 - n) // 3
    assert coefficient.numerator == -coefficient.x_square
    assert squared_differences(x, x[::-1]) == Fraction(n**3 - n, 3)
    assert coefficient.decimal_text() == "-1.00000000000"


def test_tau_counts_pairs_of_many_rows() -> None:
    """65,537 rows in two interleaved blocks: the discordant pairs are those counted by hand."""
    n, block = 65_537, 32_768
    order = np.concatenate([np.arange(block, n), np.arange(block)])
    discordant = block * (n - block)
    assert tau_b(np.arange(n), order).numerator == n * (n - 1) // 2 - 2 * discordant


def test_one_row_and_no_row_have_no_coefficient() -> None:
    """Fewer than two rows are undefined, not an error."""
    for codes in (np.array([], dtype=np.int64), np.array([4])):
        assert not rho(codes, codes).is_defined
        assert not tau_b(codes, codes).is_defined


def test_an_undefined_coefficient_has_no_value() -> None:
    """Asking a constant variable for its coefficient is an error of the caller."""
    with pytest.raises(ComputeError, match="does not vary"):
        rho(np.array([1, 1, 1]), X[:3]).decimal_text()


def test_integers_that_do_not_belong_together_are_refused() -> None:
    """A coefficient beyond 1 is a broken law, not a number."""
    with pytest.raises(ComputeError, match="outside"):
        _ = Coefficient("Spearman rho", 3, 9, 8, 8).value


@pytest.mark.parametrize(
    ("numerator", "square", "digits", "text"),
    [
        (1, 1, 12, "1.00000000000"),
        (-1, 4, 3, "-0.500"),
        (0, 7, 12, "0"),
        (1, 3, 12, "0.577350269190"),
        (5, 10_000, 1, "0.05"),
        (125, 10**6, 2, "0.12"),
        (135, 10**6, 2, "0.14"),
        (9999, 10**8, 3, "1.00"),
        (1, 10**20, 4, "0.0000000001000"),
    ],
)
def test_text_is_rounded_half_to_even_from_the_integers(numerator: int, square: int, digits: int, text: str) -> None:
    """Exact halves go to the even digit, carries are kept, small values are written out (worked by hand)."""
    assert root_ratio_text(Fraction(numerator), Fraction(square), digits) == text


def test_text_agrees_with_sixty_digit_arithmetic() -> None:
    """Thirty digits of an irrational coefficient agree with the decimal library's square root."""
    coefficient = rho(X, Y)
    with localcontext() as context:
        context.prec = 60
        expected = coefficient.numerator / Decimal(coefficient.x_square * coefficient.y_square).sqrt()
        context.prec = 30
        assert Decimal(coefficient.decimal_text(30)) == +expected


def test_a_coefficient_depends_on_order_only() -> None:
    """Values as decimals and their codes give the same coefficient."""
    values = [Decimal("0.30"), Decimal("1e3"), Decimal("0.3"), Decimal(-1)]
    codes = dense_codes(values)
    assert rho(codes, np.arange(4)) == rho(codes * 10 - 4, np.arange(4))
