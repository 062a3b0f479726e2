"""The exact null of tau-b against other people's counts, and what it is forecast to cost."""

from collections import Counter
from fractions import Fraction
from itertools import pairwise, permutations, product
from math import factorial

import numpy as np
import pytest
from scipy import stats

from rankdocket.stats.null import ExactNull
from rankdocket.stats.nulls.tau_exact import forecast_tau, tau_null
from rankdocket.stats.ranks import TieGroups


def _pairs(x: tuple[int, ...], y: tuple[int, ...]) -> int:
    """Concordant less discordant pairs, one pair after the other."""
    return sum(
        ((x[i] > x[j]) - (x[i] < x[j])) * ((y[i] > y[j]) - (y[i] < y[j])) for i in range(len(x)) for j in range(i)
    )


def _values(sizes: tuple[int, ...]) -> tuple[int, ...]:
    return tuple(value for value, size in enumerate(sizes) for _ in range(size))


def _by_numerator(null: ExactNull) -> dict[int, int]:
    return dict(zip(null.statistics.tolist(), null.counts, strict=True))


@pytest.mark.parametrize("n", [2, 5, 8, 13, 21, 34, 60])
def test_without_ties_the_p_values_are_those_of_scipy(n: int) -> None:
    """scipy.stats.kendalltau with method exact gives the same two-sided and upper p-values, small ones and middling."""
    untied = TieGroups((1,) * n)
    null = tau_null(untied, untied)
    pairs = n * (n - 1) // 2
    rng = np.random.default_rng(n)
    orders = [np.arange(n), np.arange(n)[::-1], *(rng.permutation(n) for _ in range(4))]
    for swaps in (1, n // 2, n):
        nearly = np.arange(n)
        for _ in range(swaps):
            first = int(rng.integers(0, n - 1))
            nearly[[first, first + 1]] = nearly[[first + 1, first]]
        orders.append(nearly)
    for order in orders:
        numerator = _pairs(tuple(range(n)), tuple(order.tolist()))
        tails = null.tails(numerator)
        for direction in ("two-sided", "greater", "less"):
            other = stats.kendalltau(np.arange(n), order, method="exact", alternative=direction)
            assert other.statistic == pytest.approx(numerator / pairs, abs=1e-12)
            assert float(tails.p(direction)) == pytest.approx(other.pvalue, rel=1e-9)


@pytest.mark.parametrize("n", [1, 2, 7, 30, 150])
def test_without_ties_the_counts_are_the_mahonian_numbers(n: int) -> None:
    """They sum to n!, are the same from either end, begin 1, n − 1, (n − 2)(n + 1)/2 (Netto 1901; OEIS A008302)."""
    untied = TieGroups((1,) * n)
    null = tau_null(untied, untied)
    assert sum(null.counts) == factorial(n)
    assert null.counts == null.counts[::-1]
    beginning = (1, n - 1, (n - 2) * (n + 1) // 2)[: len(null.counts)]
    assert n < 3 or null.counts[: len(beginning)] == beginning
    assert null.statistics.tolist() == list(range(-n * (n - 1) // 2, n * (n - 1) // 2 + 1, 2))
    square_sum = sum(count * value**2 for value, count in _by_numerator(null).items())
    # The variance of tau without ties is 2(2n + 5)/(9n(n − 1)) (Kendall 1938).
    assert Fraction(square_sum, null.of) == Fraction(n * (n - 1) * (2 * n + 5), 18)


@pytest.mark.parametrize(
    ("x", "y"),
    [
        ((1, 1, 1, 1, 1, 1), (2, 1, 3)),
        ((1, 1, 1, 1, 1, 1, 1), (1, 5, 1)),
        ((2, 4), (3, 3)),
        ((3, 2, 1), (2, 2, 2)),
        ((1, 2, 1, 3), (2, 1, 4)),
        ((7,), (2, 5)),
        ((1, 6), (1, 1, 1, 2, 2)),
        ((2, 2, 2, 1), (1, 1, 1, 1, 3)),
        ((6,), (6,)),
    ],
)
def test_with_ties_the_counts_are_those_of_all_orders_one_by_one(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """Up to seven rows all n! orders are walked through."""
    rows = _values(x)
    walked = Counter(_pairs(rows, order) for order in permutations(_values(y)))
    assert _by_numerator(tau_null(TieGroups(x), TieGroups(y))) == dict(walked)
    assert _by_numerator(tau_null(TieGroups(y), TieGroups(x))) == dict(walked)


@pytest.mark.parametrize(
    ("x", "y"),
    [((0, 0, 1, 2, 2, 3), (0, 1, 1, 2, 0, 3)), ((0, 1, 2, 3, 4, 5), (0, 0, 1, 0, 1, 1))],
)
def test_with_ties_the_p_values_are_those_of_a_permutation_test(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """scipy.stats.permutation_test over all pairings, with scipy's own tau-b as its statistic."""

    def tau(values: np.ndarray) -> float:
        return float(stats.kendalltau(values, y, method="asymptotic").statistic)

    groups = [TieGroups(tuple(Counter(values)[value] for value in sorted(set(values)))) for values in (x, y)]
    tails = tau_null(groups[0], groups[1]).tails(_pairs(x, y))
    for direction in ("greater", "less"):
        other = stats.permutation_test(
            (np.array(x),), tau, permutation_type="pairings", alternative=direction, n_resamples=np.inf
        )
        assert float(tails.p(direction)) == pytest.approx(other.pvalue, rel=1e-12)


@pytest.mark.parametrize(("first", "second"), [(1, 4), (3, 4), (8, 8), (12, 25), (30, 30)])
def test_beside_a_two_valued_variable_it_is_the_null_of_two_samples(first: int, second: int) -> None:
    """The discordant pairs are the U of Mann and Whitney, whose exact p-values scipy.stats.mannwhitneyu gives."""
    null = tau_null(TieGroups((1,) * (first + second)), TieGroups((first, second)))
    rng = np.random.default_rng(first)
    for order in (np.arange(first + second), *(rng.permutation(first + second) for _ in range(4))):
        low, high = order[:first], order[first:]
        other = stats.mannwhitneyu(high, low, method="exact", alternative="greater")
        tails = null.tails(round(2 * float(other.statistic)) - first * second)
        assert float(tails.p("greater")) == pytest.approx(other.pvalue, rel=1e-9)


@pytest.mark.parametrize(("low_x", "low_y", "n"), [(3, 4, 9), (200, 90, 400), (500, 500, 1_000)])
def test_two_two_valued_variables_are_a_fourfold_table(low_x: int, low_y: int, n: int) -> None:
    """The tails are those of Fisher's exact test, from scipy.stats.hypergeom."""
    null = tau_null(TieGroups((low_x, n - low_x)), TieGroups((low_y, n - low_y)))
    both_low = low_x * low_y // n + 2
    expected = stats.hypergeom(n, low_x, low_y).sf(both_low - 1)
    assert float(null.tails(both_low * n - low_x * low_y).p("greater")) == pytest.approx(expected, rel=1e-9)


def test_a_wider_table_has_the_variance_of_kendall() -> None:
    """With ties in both variables the variance of the numerator is that of Kendall (1945), whatever the sizes."""
    x, y = (3, 5, 4, 6), (7, 2, 9)
    null = tau_null(TieGroups(x), TieGroups(y))
    n = sum(x)
    squares = sum(count * value**2 for value, count in _by_numerator(null).items())

    def first(sizes: tuple[int, ...]) -> int:
        return sum(size * (size - 1) * (2 * size + 5) for size in sizes)

    def second(sizes: tuple[int, ...]) -> int:
        return sum(size * (size - 1) * (size - 2) for size in sizes)

    def third(sizes: tuple[int, ...]) -> int:
        return sum(size * (size - 1) for size in sizes)

    variance = (
        Fraction(n * (n - 1) * (2 * n + 5) - first(x) - first(y), 18)
        + Fraction(second(x) * second(y), 9 * n * (n - 1) * (n - 2))
        + Fraction(third(x) * third(y), 2 * n * (n - 1))
    )
    assert Fraction(squares, null.of) == variance
    assert sum(null.counts) == factorial(n)


PATTERNS = (
    ((1,) * 60, (1,) * 60),
    ((1,) * 40, (20, 20)),
    ((3, 3, 3), (2, 3, 4)),
    ((5,) * 9, (4,) * 10 + (5,)),
    ((2,) * 500, (2,) * 500),
    ((1,) * 65_537, (30_000, 35_537)),
    ((1, 500_000), (2, 499_999)),
    ((2,) * 2_000, (3, 3_997)),
)


@pytest.mark.parametrize(("x", "y"), PATTERNS)
def test_a_forecast_is_whole_numbers_and_the_same_for_either_variable(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """However large the count, there is a forecast, above 0 and of Python integers."""
    forecast = forecast_tau(TieGroups(x), TieGroups(y))
    assert forecast_tau(TieGroups(y), TieGroups(x)) == forecast
    for number in (forecast.states, forecast.nanoseconds, forecast.bytes):
        assert type(number) is int
        assert number > 0


def test_a_forecast_grows_with_the_rows() -> None:
    """More rows of the same kind never cost less, also where counting in detail ends."""
    kinds = (
        lambda size: ((1,) * size, (1,) * size),
        lambda size: ((1,) * size, (size - size // 2, size // 2)),
        lambda size: ((2,) * size, (2,) * size),
        lambda size: ((size,) * 3, (size,) * 3),
    )
    for kind in kinds:
        costs = [forecast_tau(*map(TieGroups, kind(size))) for size in (4, 8, 16, 22, 23, 30, 60, 400, 700, 900)]
        for before, after in pairwise(costs):
            assert before.nanoseconds < after.nanoseconds
            assert before.states < after.states


def _partial_dealings(dealt: tuple[int, ...], rows: tuple[int, ...]) -> int:
    """Everything that is told apart on the way, found by walking through all ways to use tie groups in part."""
    found, before = 0, 0
    for members in rows:
        ways = [
            (used, given)
            for used in product(*(range(size + 1) for size in dealt))
            if sum(used) == before
            for given in product(*(range(size - part + 1) for size, part in zip(dealt, used, strict=True)))
            if sum(given) == members
        ]
        for place in range(len(dealt)):
            found += len(
                {
                    (tuple(map(sum, zip(used[:place], given[:place], strict=True))), used[place:], sum(given[:place]))
                    for used, given in ways
                }
            )
        before += members
    return found


@pytest.mark.parametrize(("x", "y"), [((2, 3, 1), (2, 2, 2)), ((1, 1, 2, 1), (3, 2)), ((4, 4), (1, 1, 2, 1, 3))])
def test_the_states_of_a_forecast_are_counted_to_the_last_one(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """Walking through all partial dealings of one variable to the rows of the other finds as many."""
    states = forecast_tau(TieGroups(x), TieGroups(y)).states
    assert states in {_partial_dealings(x, y), _partial_dealings(y, x)}
