"""Critical values at any tie pattern, and what the large-sample rule is worth."""

from decimal import Decimal
from fractions import Fraction
from itertools import permutations
from math import factorial

import numpy as np
import pytest

from rankdocket.stats.choose_null import exact_null_of
from rankdocket.stats.critical import critical_values, large_sample, large_sample_value
from rankdocket.stats.outline import NullOutline, outline_of
from rankdocket.stats.ranks import TieGroups, centred_ranks
from rankdocket.stats.rho import rho

ALPHA = Fraction(1, 20)
PATTERNS = [
    (TieGroups((1,) * 7), TieGroups((1,) * 7)),
    (TieGroups((6, 1, 1)), TieGroups((5, 2, 1))),
    (TieGroups((2, 1, 3, 1)), TieGroups((1, 1, 2, 3))),
    (TieGroups((3, 3)), TieGroups((1, 2, 3))),
]


def every_numerator(x: TieGroups, y: TieGroups) -> list[int]:
    a, b = centred_ranks(x.codes()), centred_ranks(y.codes())
    return [int(a @ b[list(order)]) for order in permutations(range(x.n))]


@pytest.mark.parametrize(("x", "y"), PATTERNS)
@pytest.mark.parametrize("alpha", [ALPHA, Fraction(1, 5), Fraction(1, 1000)])
def test_critical_values_are_those_of_all_orderings_written_out(x: TieGroups, y: TieGroups, alpha: Fraction) -> None:
    """In each direction no value nearer to 0 reaches alpha, and the count is that of all orderings as extreme."""
    found = critical_values(outline_of(exact_null_of("Spearman rho", x, y)), alpha)
    numerators = every_numerator(x, y)
    reach = {
        "greater": lambda end: sum(value >= end for value in numerators),
        "less": lambda end: sum(value <= end for value in numerators),
        "two-sided": lambda end: sum(abs(value) >= abs(end) for value in numerators),
    }
    ends = {
        "greater": sorted({value for value in numerators if value > 0}),
        "less": sorted({value for value in numerators if value < 0}, reverse=True),
        "two-sided": sorted({abs(value) for value in numerators if value}),
    }
    for direction, count in reach.items():
        wanted = next((end for end in ends[direction] if Fraction(count(end), len(numerators)) <= alpha), None)
        critical = found.toward(direction)
        assert (critical and critical.numerator) == wanted
        if critical is not None:
            assert critical.count == count(critical.numerator)
            assert critical.p == Fraction(critical.count, factorial(x.n))


def test_what_cannot_be_reached_has_no_critical_value() -> None:
    """Four untied rows reach no two-sided 5% (two in twenty-four orderings), and one side just does."""
    untied = TieGroups((1,) * 4)
    found = critical_values(outline_of(exact_null_of("Spearman rho", untied, untied)), ALPHA)
    assert found.two_sided is None
    assert found.greater is not None
    assert found.greater.p == Fraction(1, 24)


def test_the_other_side_has_a_value_of_its_own_or_none() -> None:
    """A lopsided null reaches as far on one side only; where both sides do, the other one begins at its own value."""
    alone = critical_values(outline_of(exact_null_of("Spearman rho", *PATTERNS[1])), ALPHA).two_sided
    both = critical_values(outline_of(exact_null_of("Spearman rho", *PATTERNS[0])), ALPHA).two_sided
    assert alone is not None
    assert both is not None
    assert alone.opposite is None
    assert both.opposite == -both.numerator


def test_a_value_that_no_ordering_gives_is_no_critical_value() -> None:
    """Weights of 0 stand for values that do not occur: the critical value is one that does."""
    outline = NullOutline("exact, no ties", np.array([-8, 0, 4, 8], dtype=np.int64), (1, 98, 0, 1), 100)
    found = critical_values(outline, ALPHA)
    assert found.greater is not None
    assert found.greater.numerator == 8


def test_drawn_permutations_count_the_data_as_one_more() -> None:
    """From draws the p-value of a critical value is (b + 1)/(B + 1)."""
    outline = NullOutline("drawn permutations", np.array([-4, 0, 4], dtype=np.int64), (1, 96, 2), 99)
    found = critical_values(outline, ALPHA)
    assert found.greater is not None
    assert found.greater.p == Fraction(3, 100)


def test_shares_give_critical_values_without_counts() -> None:
    """A null in floating-point numbers gives the same values and no counts."""
    x, y = PATTERNS[2]
    null = exact_null_of("Spearman rho", x, y)
    shares = tuple(count / null.of for count in null.counts)
    inexact = critical_values(NullOutline("exact algorithm, 12 digits", null.statistics, shares, 1), ALPHA)
    exact = critical_values(outline_of(null), ALPHA)
    assert inexact.of is None
    for direction in ("greater", "less", "two-sided"):
        left, right = inexact.toward(direction), exact.toward(direction)
        assert left is not None
        assert right is not None
        assert (left.numerator, left.count) == (right.numerator, None)
        assert abs(left.p / right.p - 1) < Fraction(1, 10**13)


def test_the_normal_quantiles_are_the_familiar_ones() -> None:
    """1.960 and 2.576 (any table of the normal distribution)."""
    assert round(large_sample_value(40, ALPHA, "two-sided")[0], 3) == 1.960
    assert round(large_sample_value(40, Fraction(1, 100), "two-sided")[0], 3) == 2.576


@pytest.mark.parametrize(
    ("n", "alpha", "size"),
    [(20, "0.05", "0.04737"), (20, "0.01", "0.00704"), (26, "0.05", "0.04848"), (26, "0.01", "0.0078")],
)
def test_the_large_sample_rule_has_the_size_that_was_measured(n: int, alpha: str, size: str) -> None:
    """Sizes of z/√(n − 1) as an independent calculation gave them, printed with five decimals."""
    groups = TieGroups((1,) * n)
    codes = groups.codes()
    found = large_sample(
        outline_of(exact_null_of("Spearman rho", groups, groups)), rho(codes, codes), Fraction(alpha), "two-sided"
    )
    assert abs(Decimal(size) - Decimal(found.size.numerator) / found.size.denominator) <= Decimal("0.000005")
