"""The exact null of rho with ties: in whole numbers, in doubles, whole and as tails."""

from collections import Counter
from fractions import Fraction
from itertools import permutations
from math import comb, factorial

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.stats import hypergeom, mannwhitneyu, permutation_test

from properties.oracles import enumerated_null, surpluses
from rankdocket.errors import ComputeError
from rankdocket.stats.null import TailCounts
from rankdocket.stats.nulls.rho_exact import rho_null
from rankdocket.stats.nulls.tied_cost import cheaper_whole
from rankdocket.stats.nulls.tied_doubles import rho_shares, rho_tails_doubles
from rankdocket.stats.nulls.tied_integers import rho_tails_integers
from rankdocket.stats.ranks import TieGroups, centred_ranks, exact_dot, tie_groups
from rankdocket.vocabulary import Direction

DIRECTIONS: tuple[Direction, ...] = ("greater", "less", "two-sided")

rows = (
    st.integers(2, 7)
    .flatmap(
        lambda n: st.tuples(
            st.lists(st.integers(0, 5), min_size=n, max_size=n), st.lists(st.integers(0, 5), min_size=n, max_size=n)
        )
    )
    .filter(lambda data: all(len(set(values)) > 1 for values in data))
)

EIGHT = (
    ((1, 1, 1, 1, 1, 1, 2, 3), (1, 1, 1, 1, 1, 2, 2, 3)),
    ((1, 1, 2, 2, 3, 3, 4, 4), (4, 4, 1, 1, 3, 3, 2, 2)),
    ((1, 2, 3, 4, 5, 6, 7, 8), (8, 8, 1, 2, 3, 3, 3, 4)),
    ((0, 0, 0, 0, 0, 2, 5, 9), (0, 0, 0, 0, 3, 0, 1, 1)),
    ((1, 1, 1, 1, 2, 2, 2, 2), (3, 1, 2, 1, 4, 5, 5, 5)),
)
"""Rows in which ties of many kinds occur; the oracle goes through all 40,320 permutations."""

MIDDLING = (
    ((2, *[1] * 10), (1,) * 12),
    ((1,) * 11, (4, 3, 4)),
    ((7, 2, 1, 1, 1), (8, 2, 1, 1)),
    ((3, 1, 5, 4), (2, 6, 3, 2)),
    ((2,) * 6, (2,) * 6),
    ((5, 4, 3, 2), (3, 3, 4, 4)),
    ((6, 8), (9, 5)),
    ((1, 1, 1, 1, 10), (10, 1, 1, 1, 1)),
)
"""Tie groups of 11 to 14 rows."""


def _groups(values: tuple[int, ...]) -> TieGroups:
    return tie_groups(np.array(values))


def _numerator(x: tuple[int, ...], y: tuple[int, ...]) -> int:
    return exact_dot(centred_ranks(np.array(x)), centred_ranks(np.array(y)))


def _counted(null: dict[int, int], observed: int) -> tuple[int, int, int]:
    return (
        sum(count for value, count in null.items() if value >= observed),
        sum(count for value, count in null.items() if value <= observed),
        sum(count for value, count in null.items() if abs(value) >= abs(observed)),
    )


def _three(tails: TailCounts) -> tuple[int, int, int]:
    return tails.greater, tails.less, tails.two_sided


@settings(max_examples=25, deadline=None)
@given(rows)
def test_the_whole_null_and_every_tail_are_what_all_permutations_give(data: tuple[list[int], list[int]]) -> None:
    """Whole numbers and doubles, at every numerator that occurs and at the numbers beside it."""
    x, y = data
    null = enumerated_null("Spearman rho", x, y)
    groups = tie_groups(np.array(x)), tie_groups(np.array(y))
    whole = rho_null(*groups)
    assert dict(zip(whole.statistics.tolist(), whole.counts, strict=True)) == dict(null)
    for observed in {*null, min(null) + 1, max(null) - 1}:
        tails = rho_tails_integers(*groups, observed)
        assert _three(tails) == _counted(null, observed)
        assert tails.of == factorial(len(x))
    for observed in null:
        shares, tails = rho_tails_doubles(*groups, observed), rho_tails_integers(*groups, observed)
        for direction in DIRECTIONS:
            share = shares.share(direction)
            assert abs(share.value - tails.p(direction)) <= share.error / 10


@pytest.mark.parametrize(("x", "y"), EIGHT)
def test_tails_of_eight_rows_are_what_all_permutations_give(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """40,320 permutations, three tails at every numerator."""
    a = surpluses(x)
    arrangements = Counter(permutations(surpluses(y)))
    null: Counter[int] = Counter()
    for order, times in arrangements.items():
        null[sum(p * q for p, q in zip(a, order, strict=True))] += times
    for observed in null:
        assert _three(rho_tails_integers(_groups(x), _groups(y), observed)) == _counted(null, observed)


@pytest.mark.parametrize(("x", "y"), EIGHT[:3])
def test_p_values_equal_those_of_a_general_permutation_test(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """scipy.stats.permutation_test goes through all pairings of the same numerators."""
    a, b = centred_ranks(np.array(x)), centred_ranks(np.array(y))
    tails = rho_tails_integers(_groups(x), _groups(y), int(a @ b))
    for direction in ("greater", "less"):
        outside = permutation_test(
            (a.astype(float),),
            lambda order, axis: np.sum(order * b, axis=axis),
            permutation_type="pairings",
            n_resamples=np.inf,
            alternative=direction,
            vectorized=True,
        )
        assert float(tails.p(direction)) == pytest.approx(outside.pvalue, rel=1e-12)


def test_a_skewed_null_is_counted_on_both_sides() -> None:
    """No permutation is as far below 0 as these rows are above: 0.03571 on one side and on both, 0.07143 doubled."""
    x, y = EIGHT[0]
    tails = rho_tails_integers(_groups(x), _groups(y), _numerator(x, y))
    assert tails.p("greater") == tails.p("two-sided") == Fraction(1, 28)
    assert tails.doubled == Fraction(1, 14)
    shares = rho_tails_doubles(_groups(x), _groups(y), _numerator(x, y))
    assert shares.method == "exact algorithm, 12 digits"
    assert float(shares.p("two-sided")) == pytest.approx(1 / 28, rel=1e-14)


@pytest.mark.parametrize(("x", "y"), MIDDLING)
def test_tails_are_sums_over_the_whole_null(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """The walks that drop what cannot reach a limit lose nothing: equal at the numerators that occur."""
    groups = TieGroups(x), TieGroups(y)
    null = rho_null(*groups)
    for observed in null.statistics[:: max(1, len(null.statistics) // 40)].tolist():
        assert _three(rho_tails_integers(*groups, observed)) == _three(null.tails(observed))


@pytest.mark.parametrize(("x", "y"), MIDDLING)
def test_the_whole_null_does_not_depend_on_which_variable_is_dealt(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """x against y, y against x, and both reversed are one null; a single reversal mirrors it."""
    null, turned = rho_null(TieGroups(x), TieGroups(y)), rho_null(TieGroups(y), TieGroups(x))
    both, mirrored = rho_null(TieGroups(x[::-1]), TieGroups(y[::-1])), rho_null(TieGroups(x[::-1]), TieGroups(y))
    for other in (turned, both):
        assert other.statistics.tolist() == null.statistics.tolist()
        assert other.counts == null.counts
    assert mirrored.statistics.tolist() == (-null.statistics[::-1]).tolist()
    assert mirrored.counts == null.counts[::-1]


@pytest.mark.parametrize(("x", "y"), MIDDLING)
def test_shares_are_counts_over_all_permutations(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """The whole null in doubles has the same numerators, and each share to 13 digits; they sum to 1."""
    null = rho_null(TieGroups(x), TieGroups(y))
    numerators, shares = rho_shares(TieGroups(x), TieGroups(y))
    assert numerators.tolist() == null.statistics.tolist()
    assert shares.tolist() == pytest.approx([count / null.of for count in null.counts], rel=1e-13)
    assert abs(shares.sum() - 1) < 1e-12


@pytest.mark.parametrize(
    ("x", "y"),
    [
        ((2, *[1] * 11), (1,) * 13),
        ((12, 9, 9), (10, 11, 9)),
        ((30, 6, 3, 1), (25, 9, 4, 2)),
        ((6, 7, 5, 6), (4, 8, 7, 5)),
        ((20, 20), (1,) * 40),
    ],
)
def test_doubles_agree_with_whole_numbers_far_into_the_tail(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """From the middle to p-values of 1e-8 and less the relative difference stays below 1e-13."""
    groups = TieGroups(x), TieGroups(y)
    whole = rho_null(*groups)
    statistics = whole.statistics
    smallest = 1.0
    for observed in statistics[:: -max(1, len(statistics) // 12)].tolist():
        tails, shares = rho_tails_integers(*groups, observed), rho_tails_doubles(*groups, observed)
        for direction in DIRECTIONS:
            p = tails.p(direction)
            assert abs(shares.p(direction) / p - 1) < Fraction(1, 10**13)
            assert 0 < shares.p(direction) <= 1
            smallest = min(smallest, float(p))
    assert smallest < 1e-8


def test_doubles_tell_the_count_while_permutations_are_few() -> None:
    """Up to 18 rows the share times n! lies within a thousandth of its whole number for p-values below a tenth."""
    generator = np.random.default_rng(20)
    for _ in range(12):
        n = int(generator.integers(6, 15))
        x, y = generator.integers(0, 4, n), np.sort(generator.integers(0, 5, n))
        observed = exact_dot(centred_ranks(np.sort(x)), centred_ranks(y)) * 2 // 3
        if len(set(x.tolist())) < 2 or len(set(y.tolist())) < 2:
            continue
        tails = rho_tails_integers(tie_groups(x), tie_groups(y), observed)
        share = rho_tails_doubles(tie_groups(x), tie_groups(y), observed).p("greater")
        assert abs(share * factorial(n) - tails.greater) < Fraction(1, 1000)


@pytest.mark.parametrize(("zeros", "ones", "both"), [((60, 40), (70, 30), 20), ((150, 50), (120, 80), 30)])
def test_two_binary_variables_have_a_hypergeometric_null(
    zeros: tuple[int, int], ones: tuple[int, int], both: int
) -> None:
    """scipy.stats.hypergeom gives the tail of the rows in which both are 1; n is 100 and 200."""
    n = sum(zeros)
    x = np.repeat([0, 1], zeros)
    y = np.concatenate(
        (np.repeat([0, 1], (zeros[0] - ones[1] + both, ones[1] - both)), np.repeat([0, 1], (zeros[1] - both, both)))
    )
    observed = exact_dot(centred_ranks(x), centred_ranks(y))
    tails = rho_tails_integers(tie_groups(x), tie_groups(y), observed)
    assert float(tails.p("greater")) == pytest.approx(hypergeom.sf(both - 1, n, zeros[1], ones[1]), rel=1e-10)
    ways = sum(
        comb(zeros[1], k) * comb(zeros[0], ones[1] - k) for k in range(both, ones[1] + 1) if ones[1] - k <= zeros[0]
    )
    assert tails.p("greater") == Fraction(ways, comb(n, ones[1]))
    assert rho_tails_doubles(tie_groups(x), tie_groups(y), observed).p("greater") == pytest.approx(
        float(tails.p("greater")), rel=1e-13
    )


def test_a_binary_against_an_untied_variable_is_the_rank_sum_test() -> None:
    """scipy.stats.mannwhitneyu, exact, has the same p-values on every side."""
    generator = np.random.default_rng(4)
    y = generator.permutation(40)
    x = (y + generator.integers(0, 50, 40) > 45).astype(np.int64)
    observed = exact_dot(centred_ranks(x), centred_ranks(y))
    tails = rho_tails_integers(tie_groups(x), tie_groups(y), observed)
    for direction in DIRECTIONS:
        outside = mannwhitneyu(y[x == 1], y[x == 0], alternative=direction, method="exact").pvalue
        assert float(tails.p(direction)) == pytest.approx(outside, rel=1e-10)


def test_a_p_value_below_every_double_is_not_zero() -> None:
    """The best of 1,000 rows in two halves: p = 1/C(1000, 500) from whole numbers and from doubles."""
    halves = TieGroups((500, 500))
    observed = exact_dot(centred_ranks(halves.codes()), centred_ranks(halves.codes()))
    assert rho_tails_integers(halves, halves, observed).p("greater") == Fraction(1, comb(1000, 500))
    share = rho_tails_doubles(halves, halves, observed).p("greater")
    assert abs(share * comb(1000, 500) - 1) < Fraction(1, 10**12)


def test_counts_beyond_any_double_stay_exact() -> None:
    """120 rows in three classes: each tail from its own walk, and together all 120! permutations once more."""
    x, y = TieGroups((38, 44, 38)), TieGroups((35, 45, 40))
    observed = exact_dot(centred_ranks(x.codes()), centred_ranks(y.codes())) // 5
    tails = rho_tails_integers(x, y, observed)
    beyond = rho_tails_integers(x, y, observed + 1)
    assert tails.less + beyond.greater == tails.of == factorial(120)


def test_too_many_states_are_refused() -> None:
    """70 untied rows have more states than can be numbered."""
    untied = TieGroups((1,) * 70)
    with pytest.raises(ComputeError, match="too many"):
        rho_tails_integers(untied, untied, 1_000)
    with pytest.raises(ComputeError, match="too many"):
        cheaper_whole(untied, untied)
