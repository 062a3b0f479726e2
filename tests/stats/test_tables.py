"""Tables for data without ties."""

from decimal import Decimal
from fractions import Fraction
from math import factorial

import pytest

from rankdocket.errors import ComputeError
from rankdocket.stats.tables import NMAX_UNTIED, critical_value, null_counts


@pytest.mark.parametrize("n", [3, 6, 9, 12])
def test_the_first_counts_and_the_variance_are_those_of_the_closed_forms(n: int) -> None:
    """Counts of 0, 2, 4 are 1, n − 1, C(n − 2, 2); the variance is n²(n + 1)²(n − 1)/36 (Kendall et al. 1939)."""
    table = null_counts(n)
    counts = dict(table.counts)
    assert sum(counts.values()) == table.total == factorial(n)
    assert (counts[0], counts[2], counts.get(4, 0)) == (1, n - 1, (n - 2) * (n - 3) // 2)
    mean = Fraction(n**3 - n, 6)
    variance = sum(count * (value - mean) ** 2 for value, count in table.counts) / table.total
    assert variance == Fraction(n**2 * (n + 1) ** 2 * (n - 1), 36)


def test_the_fourth_moment_is_that_of_the_closed_form() -> None:
    """The fourth moment of rho is 3(25n³ − 38n² − 35n + 72)/(25n(n + 1)(n − 1)³) (Kendall et al. 1939)."""
    n = 11
    table = null_counts(n)
    moment = sum(count * (1 - Fraction(6 * value, n**3 - n)) ** 4 for value, count in table.counts) / table.total
    assert moment == Fraction(3 * (25 * n**3 - 38 * n**2 - 35 * n + 72), 25 * n * (n + 1) * (n - 1) ** 3)


def test_alpha_is_read_as_written() -> None:
    """0.05 as a float, a decimal and a fraction asks for the same critical value."""
    values = {critical_value(10, alpha, sidedness="two-sided") for alpha in (0.05, Decimal("0.05"), Fraction(1, 20))}
    assert len(values) == 1
    assert round(float(next(iter(values)).rho or 0), 3) == 0.648


def test_alpha_equal_to_a_p_value_is_attained() -> None:
    """With five rows perfect order has a one-sided p-value of 1/120 exactly: alpha 1/120 reaches it, less does not."""
    assert critical_value(5, Fraction(1, 120), sidedness="one-sided").attained_p == Fraction(1, 120)
    assert not critical_value(5, Fraction(1, 121), sidedness="one-sided").attainable


@pytest.mark.parametrize("n", [0, NMAX_UNTIED + 1])
def test_a_table_out_of_reach_is_refused(n: int) -> None:
    """No row and too many rows are refused with the range."""
    with pytest.raises(ComputeError, match=f"for 1 to {NMAX_UNTIED} rows, not for {n}"):
        null_counts(n)
