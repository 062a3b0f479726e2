"""Laws of the null distributions, and their agreement with going through every permutation."""

from decimal import Decimal
from fractions import Fraction
from math import factorial

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from properties.oracles import enumerated_null, numerator
from rankdocket.stats.attainable import attainable_range, smallest_attainable_p, tails_at_limit
from rankdocket.stats.choose_null import exact_null_of
from rankdocket.stats.draws import stream
from rankdocket.stats.null import TailCounts
from rankdocket.stats.nulls.monte_carlo import DrawingPlan
from rankdocket.stats.ranks import tie_groups
from rankdocket.stats.rho import rho
from rankdocket.vocabulary import COEFFICIENTS, CoefficientName, Direction
from stats.asked import answer_of

few_rows = st.integers(2, 6).flatmap(
    lambda n: st.tuples(
        st.lists(st.integers(0, 4), min_size=n, max_size=n), st.lists(st.integers(0, 4), min_size=n, max_size=n)
    )
)
more_rows = st.integers(4, 11).flatmap(
    lambda n: st.tuples(
        st.lists(st.integers(0, 6), min_size=n, max_size=n), st.lists(st.integers(0, 6), min_size=n, max_size=n)
    )
)
names = st.sampled_from(COEFFICIENTS)


def _codes(values: list[int]) -> np.ndarray[tuple[int], np.dtype[np.int64]]:
    return np.array(values, dtype=np.int64)


def _tails_by_enumeration(name: CoefficientName, x: list[int], y: list[int]) -> tuple[int, int, int]:
    observed, null = numerator(name, x, y), enumerated_null(name, x, y)
    return (
        sum(count for value, count in null.items() if value >= observed),
        sum(count for value, count in null.items() if value <= observed),
        sum(count for value, count in null.items() if abs(value) >= abs(observed)),
    )


def _exact(name: CoefficientName, x: list[int], y: list[int]) -> TailCounts:
    tails = answer_of(x, y, name).tails
    assert isinstance(tails, TailCounts)
    return tails


@given(names, few_rows)
def test_the_null_is_that_of_all_permutations(name: CoefficientName, data: tuple[list[int], list[int]]) -> None:
    """Every value and every count of the exact null is what enumeration finds, with ties and without."""
    x, y = data
    null = exact_null_of(name, tie_groups(_codes(x)), tie_groups(_codes(y)))
    assert dict(zip(null.statistics.tolist(), null.counts, strict=True)) == dict(enumerated_null(name, x, y))


SEVEN = (
    ([1, 2, 3, 4, 5, 6, 7], [2, 1, 4, 3, 7, 5, 6]),
    ([1, 1, 2, 3, 4, 5, 6], [1, 2, 2, 3, 5, 4, 6]),
    ([1, 1, 1, 2, 2, 3, 4], [3, 1, 2, 2, 2, 1, 1]),
    ([1, 1, 1, 1, 2, 2, 2], [1, 1, 2, 1, 2, 2, 2]),
    ([1, 1, 1, 1, 1, 1, 2], [7, 6, 5, 4, 3, 2, 1]),
    ([1, 1, 1, 1, 1, 1, 1], [1, 2, 3, 4, 4, 4, 4]),
)


@pytest.mark.parametrize("name", COEFFICIENTS)
@pytest.mark.parametrize("data", SEVEN)
def test_tails_and_limits_of_seven_rows_are_those_of_all_permutations(
    name: CoefficientName, data: tuple[list[int], list[int]]
) -> None:
    """Tails, range and smallest p-values are what going through 5,040 permutations finds."""
    x, y = data
    tails = _exact(name, x, y)
    assert (tails.greater, tails.less, tails.two_sided) == _tails_by_enumeration(name, x, y)
    _limits_are_those_of_enumeration(name, x, y)


@settings(max_examples=60)
@given(names, few_rows)
def test_limits_are_those_of_all_permutations(name: CoefficientName, data: tuple[list[int], list[int]]) -> None:
    """The closed form of the smallest p-value and the attainable range hold for any ties."""
    _limits_are_those_of_enumeration(name, *data)


def _limits_are_those_of_enumeration(name: CoefficientName, x: list[int], y: list[int]) -> None:
    null = enumerated_null(name, x, y)
    of, high, low = factorial(len(x)), max(null), min(null)
    farthest = max(high, -low)
    x_groups, y_groups = tie_groups(_codes(x)), tie_groups(_codes(y))
    limits = attainable_range(name, x_groups, y_groups)
    assert (limits.lowest.numerator, limits.highest.numerator) == (low, high)
    expected: dict[Direction, int] = {
        "greater": null[high],
        "less": null[low],
        "two-sided": sum(count for value, count in null.items() if abs(value) == farthest),
    }
    for direction, count in expected.items():
        assert smallest_attainable_p(name, x_groups, y_groups, direction) == Fraction(count, of)


@settings(max_examples=60)
@given(names, few_rows)
def test_tails_in_closed_form_are_those_of_the_whole_null(
    name: CoefficientName, data: tuple[list[int], list[int]]
) -> None:
    """Where the closed form answers, it gives the tails of the enumerated null; it answers at the farther limit."""
    x, y = data
    x_groups, y_groups = tie_groups(_codes(x)), tie_groups(_codes(y))
    null = exact_null_of(name, x_groups, y_groups)
    limits = attainable_range(name, x_groups, y_groups)
    high, low = limits.highest.numerator, limits.lowest.numerator
    varies = not (x_groups.is_constant or y_groups.is_constant)
    for observed in (limits.highest, limits.lowest):
        tails = tails_at_limit(x_groups, y_groups, observed)
        assert (tails is not None) == (varies and abs(observed.numerator) == max(high, -low))
        if tails is not None:
            assert tails == null.tails(observed.numerator)


@settings(max_examples=40)
@given(names, more_rows)
def test_a_null_sums_to_all_permutations_and_has_mean_zero(
    name: CoefficientName, data: tuple[list[int], list[int]]
) -> None:
    """Counts sum to n! as integers; the mean numerator is 0; for rho the variance of the value is 1/(n − 1)."""
    x, y = data
    n = len(x)
    null = exact_null_of(name, tie_groups(_codes(x)), tie_groups(_codes(y)))
    pairs = list(zip(null.statistics.tolist(), null.counts, strict=True))
    assert sum(count for _, count in pairs) == null.of == factorial(n)
    assert sum(value * count for value, count in pairs) == 0
    if name == "Spearman rho":
        coefficient = rho(_codes(x), _codes(y))
        square = coefficient.x_square * coefficient.y_square
        assert (n - 1) * sum(value * value * count for value, count in pairs) == square * null.of


@settings(max_examples=40)
@given(names, more_rows)
def test_tails_overlap_in_the_observed_value_only(name: CoefficientName, data: tuple[list[int], list[int]]) -> None:
    """p greater plus p less less the probability of the observed value is 1; exchanging x and y changes nothing."""
    x, y = data
    tails = _exact(name, x, y)
    null = exact_null_of(name, tie_groups(_codes(x)), tie_groups(_codes(y)))
    observed = numerator(name, x, y)
    equal = dict(zip(null.statistics.tolist(), null.counts, strict=True))[observed]
    assert tails.p("greater") + tails.p("less") - Fraction(equal, null.of) == 1
    assert max(tails.greater, tails.less) <= tails.of
    assert tails.two_sided >= min(tails.greater, tails.less)
    exchanged = _exact(name, y, x)
    assert exchanged == tails
    reversed_y = _exact(name, x, [-value for value in y])
    assert (reversed_y.greater, reversed_y.less, reversed_y.two_sided) == (tails.less, tails.greater, tails.two_sided)


DRAWN = (
    ([1, 2, 3, 4, 5, 6, 7, 8], [2, 1, 4, 3, 7, 5, 8, 6]),
    ([1, 1, 2, 3, 3, 3, 4, 5, 6], [1, 3, 2, 2, 2, 5, 4, 4, 1]),
    ([0, 0, 0, 0, 0, 1, 1, 2, 3], [0, 1, 0, 0, 2, 0, 3, 3, 4]),
    ([1, 2, 3, 4, 5, 6, 7, 8, 9, 10], [0, 0, 1, 0, 1, 0, 1, 1, 0, 1]),
)


@pytest.mark.parametrize("name", COEFFICIENTS)
@pytest.mark.parametrize("data", DRAWN)
def test_drawn_permutations_agree_with_the_exact_null_within_their_stated_error(
    name: CoefficientName, data: tuple[list[int], list[int]]
) -> None:
    """The exact p-values lie in the intervals that the drawn counts state, at a level of 0.9999."""
    x, y = data
    drawn = answer_of(x, y, name, drawing=DrawingPlan(20_000, 20_000, stream(11, "test", name))).tails
    assert isinstance(drawn, TailCounts)
    exact = _exact(name, x, y)
    assert drawn.of == 20_000
    for direction in ("greater", "less", "two-sided"):
        limits = drawn.interval(direction, Decimal("0.9999"))
        assert limits is not None
        assert limits[0] <= exact.p(direction) <= limits[1]
        assert limits[0] <= drawn.p(direction) <= limits[1] + 1e-4


@pytest.mark.parametrize("name", COEFFICIENTS)
@pytest.mark.parametrize("data", DRAWN)
def test_drawn_permutations_do_not_depend_on_the_order_of_the_rows(
    name: CoefficientName, data: tuple[list[int], list[int]]
) -> None:
    """The same rows in another order meet the same draws and give the same counts."""
    pairs = list(zip(*data, strict=True))
    counts = set()
    for rows in (pairs, pairs[::-1], sorted(pairs), sorted(pairs, key=lambda row: (row[1], -row[0]))):
        x, y = (_codes(list(column)) for column in zip(*rows, strict=True))
        counts.add(answer_of(x, y, name, drawing=DrawingPlan(500, 500, stream(3, "order"))).tails)
    assert len(counts) == 1
