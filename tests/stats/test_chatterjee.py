"""Chatterjee’s xi: against its definition, an outside program, and all orders of a few rows."""

from fractions import Fraction
from itertools import permutations

import numpy as np
import pytest
from scipy import stats

from rankdocket.stats.chatterjee import Xi, chatterjee_xi, xi_of_codes
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.hidden_shape import has_hidden_shape
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.rho import rho


def _xi(x: object, y: object) -> Xi:
    found = xi_of_codes(np.asarray(x), np.asarray(y))
    assert isinstance(found, Xi)
    return found


def test_rising_and_falling_rows_have_the_same_xi() -> None:
    """Ten rows in perfect order either way: 1 − 3·9/99 = 8/11 (by hand)."""
    assert _xi(range(10), range(10)).coefficient == Fraction(8, 11)
    assert _xi(range(10), range(10, 0, -1)).coefficient == Fraction(8, 11)


@pytest.mark.parametrize(("n", "variance"), [(4, "1/25"), (5, "13/320"), (6, "34/875"), (7, "7/192")])
def test_the_null_variance_without_ties_is_the_published_one(n: int, variance: str) -> None:
    """(n − 2)(4n − 7)/(10(n + 1)(n − 1)²), known by enumeration for 4 to 7 rows, and exact for many more."""
    assert _xi(range(n), range(n)).null_variance == Fraction(variance)
    for rows in (3, 12, 50, 301):
        formula = Fraction((rows - 2) * (4 * rows - 7), 10 * (rows + 1) * (rows - 1) ** 2)
        assert _xi(range(rows), np.arange(rows)[::-1]).null_variance == formula


@pytest.mark.parametrize(
    ("x", "y"),
    [
        ((0, 0, 1, 2, 2), (0, 1, 1, 2, 3)),
        ((0, 0, 0, 1, 1, 2), (0, 0, 1, 1, 2, 2)),
        ((0, 1, 2, 3, 4, 5), (0, 0, 0, 0, 1, 2)),
        ((0, 0, 1, 1, 1, 1), (0, 1, 2, 3, 4, 5)),
        ((0, 1, 2), (0, 0, 1)),
    ],
)
def test_mean_and_variance_over_all_orders_are_those_stated(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """Every order of y against x is gone through: the mean is 0 and the variance the one stated, as fractions."""
    values = [_xi(x, order).coefficient for order in permutations(y)]
    assert sum(values) == 0
    assert sum(value**2 for value in values) / len(values) == _xi(x, y).null_variance


def test_rows_tied_in_x_enter_as_the_mean_over_their_orders() -> None:
    """Six ways to order three and two tied rows, each an xi without ties in x."""
    y = (1, 3, 2, 0, 5, 1)
    orders = [(*first, *second, 5) for first in permutations(range(3)) for second in permutations((3, 4))]
    values = [_xi(range(6), [y[row] for row in order]).coefficient for order in orders]
    assert len(set(values)) > 1
    assert _xi((0, 0, 0, 1, 1, 2), y).coefficient == sum(values) / len(values)


def test_an_outside_program_agrees_where_x_has_no_ties() -> None:
    """scipy.stats.chatterjeexi, with and without ties in y."""
    rng = np.random.default_rng(2)
    for levels in (3, 10, 10_000):
        x, y = rng.permutation(60), rng.integers(0, levels, 60)
        assert _xi(x, y).value == pytest.approx(float(stats.chatterjeexi(x, y).statistic), rel=1e-13)


def test_only_the_order_of_values_matters_and_no_order_of_rows() -> None:
    """Rows may come in any order, values may be stretched; which variable depends on which does matter."""
    rng = np.random.default_rng(3)
    x, y = rng.integers(0, 9, 40), rng.integers(0, 7, 40)
    order = rng.permutation(40)
    whole = _xi(x, y)
    assert _xi(x[order], y[order]) == _xi(x**3, np.exp(y).astype(np.int64)) == whole
    assert chatterjee_xi((x / 4).tolist(), y.tolist()) == whole
    assert _xi(y, x) != whole


def test_the_p_value_is_that_of_the_upper_tail() -> None:
    """A parabola is found, unrelated rows are not; their p-values come from scipy’s normal distribution."""
    x = np.arange(-10, 11)
    curve, noise = _xi(x, x**2), _xi(x, np.random.default_rng(1).permutation(21))
    for found in (curve, noise):
        assert found.spreads is not None
        assert found.p == pytest.approx(stats.norm.sf(float(found.coefficient) / float(found.null_variance) ** 0.5))
    assert curve.p is not None
    assert noise.p is not None
    assert curve.p < 1e-4
    assert noise.p > 0.05


def test_a_null_of_one_value_has_no_spread() -> None:
    """Two tied pairs in x and one lone row in y: every order has the same xi, so there is nothing to measure it by."""
    x, y = (0, 0, 1, 1), (0, 0, 0, 1)
    found = _xi(x, y)
    assert {_xi(x, order).coefficient for order in permutations(y)} == {found.coefficient}
    assert (found.null_variance, found.spreads, found.p) == (0, None, None)


@pytest.mark.parametrize(
    ("x", "y", "reason"),
    [
        ([1, 2], [2, 1], "the coefficient needs three or more complete rows"),
        ([1, 1, 1], [1, 2, 3], "the first variable does not vary"),
        ([1, 2, 3], [4, 4, 4], "the second variable does not vary"),
    ],
)
def test_where_there_is_no_xi_there_is_a_reason(x: list[int], y: list[int], reason: str) -> None:
    """Too few rows, or a variable that does not vary."""
    assert chatterjee_xi(x, y) == NoAnswer(reason)


def test_columns_of_different_length_are_refused() -> None:
    """It is the caller’s error."""
    with pytest.raises(ValueError, match="differ in length"):
        chatterjee_xi([1, 2, 3], [1, 2])


def test_a_curve_that_rho_does_not_see_is_pointed_out() -> None:
    """A parabola is; a rising line, unrelated rows, a rho just beyond and an undefined one are not."""
    x = np.arange(-15, 16)
    curve = _xi(x, x**2)
    assert has_hidden_shape(rho(x, x**2), curve)
    assert not has_hidden_shape(rho(x, x), _xi(x, x))
    noise = np.random.default_rng(4).permutation(31)
    assert not has_hidden_shape(rho(x, noise), _xi(x, noise))
    assert has_hidden_shape(Coefficient("Spearman rho", 31, 2, 10, 10), curve)
    assert not has_hidden_shape(Coefficient("Spearman rho", 31, 21, 100, 100), curve)
    assert not has_hidden_shape(Coefficient("Spearman rho", 31, 0, 0, 10), curve)


def test_xi_counts_as_visible_from_three_null_spreads() -> None:
    """At exactly three it does, just below it does not."""
    nought = Coefficient("Spearman rho", 31, 0, 10, 10)
    assert has_hidden_shape(nought, Xi(31, Fraction(3, 10), Fraction(1, 100)))
    assert not has_hidden_shape(nought, Xi(31, Fraction(299, 1000), Fraction(1, 100)))
    assert not has_hidden_shape(nought, Xi(31, Fraction(3, 10), Fraction(0)))


def test_many_rows_do_not_overflow_the_null_variance() -> None:
    """At 40,000 rows sums of squares pass what an int64 holds; without ties the published variance still comes out."""
    n = 40_000
    places = np.arange(n, dtype=np.int64)
    xi = xi_of_codes(places, places)
    assert isinstance(xi, Xi)
    assert xi.null_variance == Fraction((n - 2) * (4 * n - 7), 10 * (n + 1) * (n - 1) ** 2)
