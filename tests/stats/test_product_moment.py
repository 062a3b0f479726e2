"""The product-moment coefficient of the values and its permutation test."""

from collections.abc import Sequence
from decimal import Decimal
from fractions import Fraction
from itertools import permutations
from math import factorial

import numpy as np
import pytest
from scipy import stats

from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.null import TailCounts
from rankdocket.stats.nulls.monte_carlo import DrawingPlan
from rankdocket.stats.product_moment import ProductMoment, product_moment, product_moment_tails

NO_DRAWS = NoAnswer("nothing is drawn here")


def decimals(*texts: str) -> list[Decimal]:
    return [Decimal(text) for text in texts]


def coefficient(x: Sequence[Decimal], y: Sequence[Decimal]) -> ProductMoment:
    found = product_moment(x, y)
    assert isinstance(found, ProductMoment)
    return found


def tails(x: Sequence[Decimal], y: Sequence[Decimal], drawing: DrawingPlan | NoAnswer = NO_DRAWS) -> TailCounts:
    found = product_moment_tails(coefficient(x, y), drawing)
    assert isinstance(found, TailCounts)
    return found


def test_the_coefficient_is_that_of_the_values() -> None:
    """As scipy computes it; the twelve digits come from whole numbers."""
    rng = np.random.default_rng(2)
    x = [Decimal(f"{value:.4f}") for value in rng.lognormal(size=40)]
    y = [Decimal(f"{value:.2f}") for value in rng.normal(size=40)]
    expected = stats.pearsonr([float(value) for value in x], [float(value) for value in y]).statistic
    assert float(coefficient(x, y).decimal_text) == pytest.approx(expected, rel=1e-11)


@pytest.mark.parametrize("seed", range(4))
def test_all_orders_are_counted_as_fractions_count_them(seed: int) -> None:
    """Tenths, of which many sums are equal and few are so in doubles, against sums of fractions one by one."""
    rng = np.random.default_rng(seed)
    x = [Decimal(int(value)) / 10 for value in rng.integers(0, 12, 6)]
    y = [Decimal(int(value)) / 10 for value in rng.integers(0, 7, 6)]
    means = [Fraction(sum(column)) / 6 for column in (x, y)]

    def total(order: Sequence[Decimal]) -> Fraction:
        return sum(
            ((Fraction(a) - means[0]) * (Fraction(b) - means[1]) for a, b in zip(x, order, strict=True)), Fraction(0)
        )

    observed, sums = total(y), [total(order) for order in permutations(y)]
    found = tails(x, y)
    assert (found.greater, found.less, found.two_sided, found.of) == (
        sum(value >= observed for value in sums),
        sum(value <= observed for value in sums),
        sum(abs(value) >= abs(observed) for value in sums),
        factorial(6),
    )
    assert found.is_exact


def test_scipy_counts_the_same_share() -> None:
    """Seven rows of powers, whose sums are all different and far apart: the exact permutation test of scipy."""
    x, y = [1, 2, 4, 8, 16, 32, 64], [9, 1, 81, 27, 3, 243, 729]
    every = stats.PermutationMethod(n_resamples=10_000)
    found = tails([Decimal(v) for v in x], [Decimal(v) for v in y])
    for direction in ("greater", "less"):
        expected = stats.pearsonr(x, y, alternative=direction, method=every).pvalue
        assert float(found.p(direction)) == pytest.approx(expected)


def test_more_rows_are_drawn_and_equal_sums_count_against_the_data() -> None:
    """In values of two kinds most orders tie with others; the hypergeometric law says how often (Fisher 1922)."""
    x = [Decimal("0.1")] * 10 + [Decimal("0.7")] * 10
    y = [Decimal("0.2")] * 7 + [Decimal("0.9")] * 6 + [Decimal("0.2")] * 3 + [Decimal("0.9")] * 4
    found = tails(x, y, DrawingPlan(40_000, 40_000, np.random.default_rng(4)))
    together = 7
    law = stats.hypergeom(20, 10, 10)
    assert found.method == "drawn permutations"
    assert float(found.p("greater")) == pytest.approx(law.sf(together - 1), abs=0.01)
    assert float(found.p("less")) == pytest.approx(law.cdf(together), abs=0.01)


def test_the_order_of_the_rows_does_not_matter() -> None:
    """The same draws meet the same pairs."""
    rng = np.random.default_rng(7)
    x, y = ([Decimal(int(value)) for value in rng.integers(0, 50, 15)] for _ in "xy")
    turned = tails(x[::-1], y[::-1], DrawingPlan(999, 999, np.random.default_rng(1)))
    assert turned == tails(x, y, DrawingPlan(999, 999, np.random.default_rng(1)))


def test_far_apart_sizes_are_compared_exactly() -> None:
    """A value beyond every double beside small ones: the order of the small ones still decides."""
    x = decimals("1e400", "1", "2", "3", "4")
    assert coefficient(x, x).decimal_text == "1.00000000000"
    found = tails(x, x)
    assert found.greater == 1


def test_what_does_not_vary_has_none() -> None:
    """Nor are orders drawn without being provided for."""
    assert product_moment(decimals("1", "1.0"), decimals("1", "2")) == NoAnswer("a variable does not vary")
    many = [Decimal(value) for value in range(9)]
    assert product_moment_tails(coefficient(many, many), NO_DRAWS) is NO_DRAWS
