"""Runs, successive differences and W: over all orders of a few values, by hand, and where there is no answer."""

from fractions import Fraction
from itertools import permutations

import pytest

from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.sequence_tests import RunsTest, SuccessiveDifferences, runs_test_median, von_neumann
from rankdocket.stats.shapiro_wilk import NormalityTest, shapiro_wilk


def _runs(values: list[float]) -> RunsTest:
    found = runs_test_median(values)
    assert isinstance(found, RunsTest)
    return found


def _successive(values: list[float]) -> SuccessiveDifferences:
    found = von_neumann(values)
    assert isinstance(found, SuccessiveDifferences)
    return found


def test_runs_are_counted_about_the_median() -> None:
    """− − + + (5 left out) − + with median 5: three below, three above, four runs, as many as expected (by hand)."""
    found = _runs([1, 2, 8, 9, 5, 3, 7])
    assert (found.above, found.below, found.runs) == (3, 3, 4)
    assert (found.test.z, found.test.p("two-sided"), found.corrected.z) == (0, 1, 0)


@pytest.mark.parametrize("values", [[1, 2, 3, 4, 5, 6], [1, 2, 3, 4, 5, 6, 7], [1, 1, 2, 2, 2, 3]])
def test_runs_in_random_order_have_the_mean_and_spread_used(values: list[int]) -> None:
    """Over all orders z has mean 0 and mean square 1."""
    found = [_runs(list(order)).test.z for order in permutations(values)]
    assert sum(found) / len(found) == pytest.approx(0, abs=1e-12)
    assert sum(z * z for z in found) / len(found) == pytest.approx(1, rel=1e-12)


def test_the_correction_takes_half_a_run_away_from_the_distance() -> None:
    """Alternating values have most runs, sorted ones fewest: z of opposite sign, corrected ones alike."""
    alternating, ordered = _runs([1, 10, 2, 11, 3, 12]), _runs([1, 2, 3, 10, 11, 12])
    assert (alternating.runs, ordered.runs) == (6, 2)
    assert alternating.test.z == -ordered.test.z > 0
    assert alternating.corrected.z == ordered.corrected.z == pytest.approx(alternating.test.z * 1.5 / 2, rel=1e-14)


@pytest.mark.parametrize(
    ("values", "reason"),
    [
        ([], "there are no values"),
        ([3, 3, 3], "no values lie on one side of the median"),
        ([1, 1, 1, 2], "no values lie on one side of the median"),
        ([1, 2], "two values that differ always make two runs"),
        ([1, 5, 9], "two values that differ always make two runs"),
    ],
)
def test_without_two_sides_there_is_no_runs_test(values: list[float], reason: str) -> None:
    """Nor where no order gives another number of runs."""
    assert runs_test_median(values) == NoAnswer(reason)


def test_the_ratio_of_values_is_exact() -> None:
    """1, 4, 2: (9 + 4)/(14/3) = 39/14; ranks 1, 3, 2: (4 + 1)/2 = 5/2 (by hand); floats at their exact value."""
    found = _successive([1, 4, 2])
    assert (found.ratio, found.rank_ratio) == (Fraction(39, 14), Fraction(5, 2))
    assert _successive([0.25, 1, 0.5]) == found


@pytest.mark.parametrize("n", [3, 5, 6])
def test_the_ratio_of_ranks_in_random_order_has_the_mean_and_spread_used(n: int) -> None:
    """Over all orders z has mean 0 and mean square 1 (bartels1982 gives both in closed form)."""
    found = [_successive(list(order)).test.z for order in permutations(range(n))]
    assert sum(found) / len(found) == pytest.approx(0, abs=1e-12)
    assert sum(z * z for z in found) / len(found) == pytest.approx(1, rel=1e-12)


def test_a_trend_makes_neighbours_alike() -> None:
    """Sorted values have a small ratio and a small p-value of "less"; zigzag values the reverse."""
    trend, zigzag = _successive(list(range(20))), _successive([(-1) ** k * k for k in range(20)])
    assert trend.test.p("less") < 0.001
    assert zigzag.test.p("less") > 0.999


@pytest.mark.parametrize(
    ("values", "reason"),
    [([1, 2], "the ratio needs three or more values"), ([2, 2, 2], "the values do not vary")],
)
def test_without_variation_there_is_no_ratio(values: list[float], reason: str) -> None:
    """Nor with two values, whose ratio of ranks is always the same."""
    assert von_neumann(values) == NoAnswer(reason)


def test_what_is_no_number_is_refused() -> None:
    """By all three."""
    for function in (runs_test_median, von_neumann, shapiro_wilk):
        with pytest.raises(ValueError, match="position 2 is not a finite number"):
            function([1, 2, float("nan"), 4])


def test_the_example_of_shapiro_and_wilk() -> None:
    """Weights of eleven men; Shapiro & Wilk 1965 print W = 0.79 (from memory)."""
    found = shapiro_wilk([148, 154, 158, 160, 161, 162, 166, 170, 182, 195, 236])
    assert isinstance(found, NormalityTest)
    assert round(found.w, 2) == 0.79
    assert 0 < found.p_value < 0.05


@pytest.mark.parametrize(
    ("values", "reason"),
    [
        ([1, 2], "W is known for 3 to 5000 values"),
        (list(range(5001)), "W is known for 3 to 5000 values"),
        ([7, 7, 7, 7], "the values do not vary"),
    ],
)
def test_where_w_is_not_known_there_is_a_reason(values: list[int], reason: str) -> None:
    """Too few, too many, or all the same."""
    assert shapiro_wilk(values) == NoAnswer(reason)
