"""The saddlepoint with and without ties, against the exact null and against a whole matrix."""

from itertools import accumulate

import numpy as np
import pytest

from rankdocket.errors import ComputeError
from rankdocket.stats.nulls import saddlepoint
from rankdocket.stats.nulls.rho_exact import rho_null
from rankdocket.stats.nulls.saddlepoint import CumulantFunction, Margin, margin, saddlepoint_tail, untied_margin
from rankdocket.stats.ranks import TieGroups, centred_ranks

CASES = (
    ((1,) * 12, (3, 2, 1, 2, 4), 0.10),
    ((3, 3, 3, 3), (1,) * 12, 0.06),
    ((2,) * 5, (1,) * 8 + (2,), 0.12),
    ((2, 1, 3, 4, 5, 5), (4, 4, 4, 4, 4), 0.04),
    ((10, 8), (9, 9), 0.03),
    ((5, 6, 7), (8, 4, 6), 0.70),
)
"""Tie groups of x and y, and the largest relative error seen where p is 1e-4 or more: coarse supports have large ones."""


@pytest.mark.parametrize(("x", "y", "most"), CASES)
def test_tied_tails_are_near_the_exact_ones(x: tuple[int, ...], y: tuple[int, ...], most: float) -> None:
    """Over the whole support the saddlepoint stays above 0, within 1, falls, and keeps near the exact tail."""
    null = rho_null(TieGroups(x), TieGroups(y))
    exact = [count / null.of for count in accumulate(reversed(null.counts))][::-1]
    places = range(0, len(exact), max(1, len(exact) // 60))
    found = [saddlepoint_tail(TieGroups(x), TieGroups(y), int(null.statistics[place])) for place in places]
    assert all(value is not None and 0 < value <= 1 for value in found)
    values = [value for value in found if value is not None]
    assert values == sorted(values, reverse=True)
    for place, value in zip(places, values, strict=True):
        if exact[place] >= 1e-4:
            assert value == pytest.approx(exact[place], rel=most)


def test_the_other_tail_is_had_by_turning_one_variable_round() -> None:
    """P(A ≤ a) is the upper tail at −a with the groups of y reversed; the two sides and the point between make 1."""
    x, y = TieGroups((2, 1, 3, 4, 5, 5)), TieGroups((4, 4, 1, 4, 7))
    null = rho_null(x, y)
    numerator = int(null.statistics[len(null.statistics) // 3])
    upper = saddlepoint_tail(x, y, numerator)
    lower = saddlepoint_tail(x, TieGroups(y.sizes[::-1]), -numerator)
    exact = null.tails(numerator)
    assert upper == pytest.approx(exact.greater / exact.of, abs=0.01)
    assert lower == pytest.approx(exact.less / exact.of, abs=0.01)


def test_the_ends_are_certain() -> None:
    """Every order reaches the smallest value, none goes beyond the largest; between two values the upper one is meant."""
    x, y = TieGroups((1,) * 10), TieGroups((2, 3, 5))
    statistics = rho_null(x, y).statistics.tolist()
    assert saddlepoint_tail(x, y, statistics[0]) == saddlepoint_tail(x, y, -(10**9)) == 1
    assert saddlepoint_tail(x, y, statistics[-1] + 1) == 0
    assert saddlepoint_tail(x, y, statistics[40] - 1) == saddlepoint_tail(x, y, statistics[40])


@pytest.mark.parametrize(("x", "y", "most"), CASES)
def test_perfect_order_has_its_exact_share(x: tuple[int, ...], y: tuple[int, ...], most: float) -> None:
    """The largest value of all is not approximated, in either direction."""
    for groups in (TieGroups(y), TieGroups(y[::-1])):
        null = rho_null(TieGroups(x), groups)
        found = saddlepoint_tail(TieGroups(x), groups, int(null.statistics[-1]))
        assert found == pytest.approx(null.counts[-1] / null.of, rel=1e-12)


def test_next_to_the_ends_of_a_lopsided_null_there_still_is_an_answer() -> None:
    """Where rounding leaves nothing of the formula, no tail falls below the share of perfect order or rises above 1."""
    x, y = TieGroups((40, *(1,) * 11)), TieGroups((1, 1, 3, *(1,) * 36, 10))
    ranks = centred_ranks(x.codes()), centred_ranks(y.codes())
    highest, lowest = int(ranks[0] @ ranks[1]), int(ranks[0] @ ranks[1][::-1])
    tails = [saddlepoint_tail(x, y, numerator) for numerator in (lowest + 1, lowest + 2, highest - 1, highest)]
    assert tails[0] is not None
    assert tails[3] is not None
    assert tails[0] == pytest.approx(1, abs=1e-6)
    assert 0 < tails[3] == min(tail for tail in tails if tail is not None) < 1e-11


@pytest.mark.parametrize("n", [20, 26, 30])
def test_the_middle_is_bridged_without_a_jump(n: int) -> None:
    """Across the middle, where the formula is 0/0, neighbouring tails differ by about the middle's own weight."""
    groups = TieGroups((1,) * n)
    middle = (n**3 - n) // 3 % 4
    tails = [saddlepoint_tail(groups, groups, middle + 4 * step) or 0.0 for step in range(-60, 61, 4)]
    falls = -np.diff(tails)
    assert (falls > 0).all()
    assert falls.max() < 1.1 * falls.min()


@pytest.mark.parametrize("n", [60, 200])
def test_the_nodes_stand_for_the_whole_matrix(n: int) -> None:
    """At 1, 5 and 10 deviations K and its slope from the nodes are those of all n rows and columns."""
    grid = Margin(np.arange(1 - n, n, 2) / n, np.ones(n))
    whole, nodes = CumulantFunction(grid, grid), CumulantFunction(untied_margin(n), untied_margin(n))
    assert len(untied_margin(n).nodes) == saddlepoint.GAUSS_NODES < n
    assert nodes.spread == pytest.approx(whole.spread, rel=1e-12)
    for deviations in (1.0, 5.0, 10.0):
        assert nodes(deviations / whole.spread) == pytest.approx(whole(deviations / whole.spread), rel=1e-10)


def test_nodes_of_tied_values_keep_their_moments() -> None:
    """Two hundred distinct values with ties and their nodes have the same moments to order 40, and n rows."""
    sizes = tuple(1 + place % 3 for place in range(200))
    nodes = margin(TieGroups(sizes))
    n = sum(sizes)
    values = np.cumsum(sizes) * 2 - np.array(sizes) - n
    assert len(nodes.nodes) == saddlepoint.GAUSS_NODES
    for order in range(41):
        assert nodes.weights @ nodes.nodes**order == pytest.approx(np.array(sizes) @ (values / n) ** order, abs=1e-10)


def test_the_slope_is_that_of_the_function() -> None:
    """K' agrees with differences of K, from the middle far out."""
    function = CumulantFunction(margin(TieGroups((1,) * 12)), margin(TieGroups((3, 2, 1, 2, 4))))
    assert function(0.0) == pytest.approx((0.0, 0.0), abs=1e-12)
    for t in (-8.0, 0.5, 3.0, 20.0):
        apart = 1e-4 * abs(t)
        assert (function(t + apart)[0] - function(t - apart)[0]) / (2 * apart) == pytest.approx(
            function(t)[1], rel=1e-6
        )


def test_too_many_distinct_values_with_ties_have_no_saddlepoint() -> None:
    """Above the bound there is no answer, for rows without ties there is one at any size."""
    many = TieGroups((2,) + (1,) * saddlepoint.MOST_DISTINCT)
    assert saddlepoint_tail(many, many, 0) is None
    untied = TieGroups((1,) * (saddlepoint.MOST_DISTINCT + 1))
    assert saddlepoint_tail(untied, untied, 0) == pytest.approx(0.5, abs=1e-3)


def test_a_variable_that_does_not_vary_is_refused() -> None:
    """As are variables with different numbers of rows."""
    for y in (TieGroups((5,)), TieGroups((1, 1))):
        with pytest.raises(ComputeError, match="two variables that vary"):
            saddlepoint_tail(TieGroups((2, 3)), y, 0)
