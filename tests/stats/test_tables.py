"""Tables for data without ties."""

from decimal import Decimal
from fractions import Fraction
from math import factorial

import pytest

from rankdocket.errors import ComputeError
from rankdocket.stats.nulls.untied import reach
from rankdocket.stats.tables import (
    critical_value,
    critical_value_approximate,
    critical_value_large_sample,
    null_counts,
)
from rankdocket.vocabulary import Sidedness


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


@pytest.mark.parametrize("n", [0, reach() + 1])
def test_a_table_out_of_reach_is_refused(n: int) -> None:
    """No row and too many rows are refused with the range, by counts and by critical values."""
    with pytest.raises(ComputeError, match=f"for 1 to {reach()} rows, not for {n}"):
        null_counts(n)
    with pytest.raises(ComputeError, match=f"for 1 to {reach()} rows, not for {n}"):
        critical_value(n, 0.05, sidedness="two-sided")


def test_one_and_two_rows_have_a_table() -> None:
    """One row agrees with itself; two rows agree or disagree."""
    assert null_counts(1).counts == ((0, 1),)
    assert null_counts(2).counts == ((0, 1), (2, 1))


@pytest.mark.parametrize("sidedness", ["one-sided", "two-sided"])
def test_as_far_as_the_counts_reach_every_critical_value_is_exact(sidedness: Sidedness) -> None:
    """The critical value for any number of rows is the exact one where counts exist, with its numerator."""
    for n in (3, 7, 19, reach()):
        exact, found = (
            critical_value(n, 0.05, sidedness=sidedness),
            critical_value_approximate(n, 0.05, sidedness=sidedness),
        )
        assert found.method == "exact, no ties"
        assert (found.attainable, found.rho, found.sum_d2, found.attained_p) == (
            exact.attainable,
            exact.rho,
            exact.sum_d2,
            exact.attained_p,
        )
        if found.rho is not None and found.numerator is not None:
            assert found.rho == Fraction(3 * found.numerator, n**3 - n)


@pytest.mark.parametrize("sidedness", ["one-sided", "two-sided"])
@pytest.mark.parametrize("n", [reach() + 1, 45, 300, 5000])
def test_above_the_counts_the_critical_value_is_the_last_within_alpha(n: int, sidedness: Sidedness) -> None:
    """It is attainable, keeps to alpha, and nearly uses it up: the next value down would not keep to it."""
    for alpha in (Fraction(1, 20), Fraction(1, 100)):
        found = critical_value_approximate(n, alpha, sidedness=sidedness)
        assert found.attainable
        assert found.method == "Edgeworth series"
        assert found.sum_d2 is not None
        assert found.rho == 1 - Fraction(6 * found.sum_d2, n**3 - n)
        assert found.sum_d2 % 2 == 0
        assert found.attained_p is not None
        assert Fraction(99, 100) * alpha < found.attained_p <= alpha


def test_a_level_that_no_order_reaches_has_no_critical_value() -> None:
    """With 31 rows perfect order has a p-value of about 1e-34."""
    found = critical_value_approximate(reach() + 1, 1e-40, sidedness="one-sided")
    assert not found.attainable
    assert found.rho is found.numerator is found.sum_d2 is found.attained_p is None


LARGE_SAMPLE_SIZES = (
    (20, "0.04737", "0.00704"),
    (26, "0.04848", "0.00780"),
    (31, "0.04864", "0.00815"),
    (36, "0.04879", "0.00844"),
    (40, "0.04903", "0.00861"),
    (60, "0.04936", "0.00910"),
    (100, "0.04962", "0.00947"),
)
"""n, true two-sided size of z/√(n − 1) at 0.05 and 0.01: as an independent prototype printed it (exact, then series to n⁻⁴ and n⁻⁵)."""


@pytest.mark.parametrize(("n", "at_5", "at_1"), LARGE_SAMPLE_SIZES)
def test_the_large_sample_rule_is_given_with_its_true_size(n: int, at_5: str, at_1: str) -> None:
    """The rule keeps to alpha with something to spare, less with more rows."""
    for alpha, size in ((0.05, at_5), (0.01, at_1)):
        assert f"{float(critical_value_large_sample(n, alpha, sidedness='two-sided').size):.5f}" == size


def test_the_normal_quantiles_are_those_of_every_table() -> None:
    """1.960 and 2.576 two-sided at 0.05 and 0.01 (any table of the normal distribution), 1.645 one-sided."""
    printed = [
        f"{critical_value_large_sample(31, alpha, sidedness=sidedness).z:.3f}"
        for alpha, sidedness in ((0.05, "two-sided"), (0.01, "two-sided"), (0.05, "one-sided"))
    ]
    assert printed == ["1.960", "2.576", "1.645"]


def test_from_31_rows_on_common_practice_takes_the_large_sample_rule() -> None:
    """Common practice, no source: the table up to 30 pairs, z/√(n − 1) above; at n = 31 it lies above the true critical value."""
    rule = critical_value_large_sample(31, 0.05, sidedness="two-sided")
    assert rule.value == pytest.approx(rule.z / 30**0.5)
    found = critical_value_approximate(31, 0.05, sidedness="two-sided")
    assert found.rho is not None
    assert found.rho < rule.value


def test_a_large_sample_value_above_one_has_no_size() -> None:
    """With three rows 2.576/√2 exceeds 1, which no coefficient reaches."""
    assert critical_value_large_sample(3, 0.01, sidedness="two-sided").size == 0


def test_two_rows_have_no_critical_value() -> None:
    """Neither by a series nor by the large-sample rule."""
    for ask in (critical_value_approximate, critical_value_large_sample):
        with pytest.raises(ComputeError, match="at least 3 rows, not 2"):
            ask(2, 0.05, sidedness="two-sided")


@pytest.mark.parametrize("alpha", [0, 1, -1, 1.5, float("nan"), float("inf")])
def test_a_level_that_is_none_is_refused(alpha: float) -> None:
    """Alpha lies between 0 and 1."""
    for function in (critical_value, critical_value_approximate, critical_value_large_sample):
        with pytest.raises(ComputeError, match="alpha must lie between 0 and 1"):
            function(10, alpha, sidedness="two-sided")


def test_a_side_that_is_none_and_half_a_row_are_refused() -> None:
    """Nothing is taken for something else."""
    for function in (critical_value, critical_value_approximate, critical_value_large_sample):
        with pytest.raises(ComputeError, match="sidedness must be one of"):
            function(10, 0.05, sidedness="both")
    with pytest.raises(ComputeError, match="sidedness must be one of"):
        critical_value_approximate(31, 0.05, sidedness="both")
    with pytest.raises(ComputeError, match="not for 2"):
        null_counts(2.5)
