"""Ranks, tie groups and codes on examples worked by hand."""

from decimal import Decimal
from fractions import Fraction

import numpy as np
import pytest

from rankdocket.errors import ComputeError
from rankdocket.stats.ranks import TieGroups, centred_ranks, dense_codes, doubled_midranks, exact_dot, tie_groups


def test_tied_values_share_the_mean_of_their_ranks() -> None:
    """Of 10, 20, 20, 30 the two in the middle share rank 2.5 (worked by hand)."""
    codes = np.array([30, 10, 20, 20])
    assert doubled_midranks(codes).tolist() == [8, 2, 5, 5]
    assert centred_ranks(codes).tolist() == [3, -3, 0, 0]


def test_tie_groups_stand_in_the_order_of_the_values() -> None:
    """Sizes, tied rows, tied pairs and tie terms of 1, 3, 3, 3, 7, 9, 9 (worked by hand)."""
    groups = tie_groups(np.array([9, 3, 1, 3, 7, 9, 3]))
    assert groups.sizes == (1, 3, 1, 2)
    assert (groups.n, groups.distinct, groups.largest, groups.groups, groups.tied_rows) == (7, 4, 3, 2, 5)
    assert groups.tied_share == Fraction(5, 7)
    assert (groups.cube_sum, groups.pairs) == (30, 4)
    assert groups.codes().tolist() == [0, 1, 1, 1, 2, 3, 3]


def test_no_rows_have_no_ties() -> None:
    """An empty column has an empty tie structure rather than an error."""
    groups = tie_groups(np.array([], dtype=np.int64))
    assert groups == TieGroups(())
    assert (groups.n, groups.largest, groups.tied_share, groups.is_constant) == (0, 0, Fraction(0), True)


def test_sums_of_products_are_exact_beyond_64_bits() -> None:
    """A sum far above the largest int64 is the sum that Python integers give."""
    left = np.full(10_000, 3_000_000_019, dtype=np.int64)
    right = np.arange(10_000, dtype=np.int64) + 400_000_000
    expected = sum(3_000_000_019 * (place + 400_000_000) for place in range(10_000))
    assert expected > 2**63
    assert exact_dot(left, right) == expected


def test_a_product_that_could_overflow_is_refused() -> None:
    """Rather than wrap around, a sum is refused."""
    with pytest.raises(ComputeError, match="too many rows"):
        exact_dot(np.array([2**40]), np.array([2**40]))


def test_codes_follow_the_decimal_value_not_its_spelling() -> None:
    """1.0 and 1.00 are a tie, and 0.1 + 0.2 is 0.3."""
    values = [Decimal("1.00"), Decimal("0.1") + Decimal("0.2"), Decimal("1.0"), Decimal("0.3"), Decimal(-2)]
    assert dense_codes(values).tolist() == [2, 1, 2, 1, 0]


def test_decimals_fractions_and_integers_can_be_ordered_together() -> None:
    """One third lies between 0.333 and 0.334."""
    assert dense_codes([Decimal("0.334"), Fraction(1, 3), Decimal("0.333"), 1]).tolist() == [2, 1, 0, 3]


def test_a_value_without_a_place_in_the_order_is_refused() -> None:
    """Not-a-number and infinity are refused with their position."""
    with pytest.raises(ValueError, match="position 1 is not a finite number"):
        dense_codes([Decimal(1), Decimal("NaN")])
