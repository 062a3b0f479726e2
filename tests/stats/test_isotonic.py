"""The monotone step curve: against an outside program, by hand, and against other monotone curves."""

from fractions import Fraction

import numpy as np
import pytest
from scipy.optimize import isotonic_regression

from rankdocket.stats.isotonic import IsotonicFit, Trend, isotonic_fit, monotone_fit
from rankdocket.stats.no_answer import NoAnswer


def _fit(x: object, y: object, trend: Trend = "rising", weights: object = None) -> IsotonicFit:
    lists = [None if each is None else np.asarray(each).tolist() for each in (y, weights)]
    found = isotonic_fit(np.asarray(x), lists[0], trend=trend, weights=lists[1])
    assert isinstance(found, IsotonicFit)
    return found


def test_neighbours_in_the_wrong_order_share_their_mean() -> None:
    """1, 3, 2, 4 becomes 1, 2.5, 2.5, 4; half a square of the sum of squares 5 is left over (by hand)."""
    found = _fit(range(4), [1, 3, 2, 4])
    assert found.at(np.arange(4)) == (1, Fraction(5, 2), Fraction(5, 2), 4)
    assert [(step.first, step.last, step.weight) for step in found.steps] == [(0, 0, 1), (1, 2, 2), (3, 3, 1)]
    assert (found.left_over, found.whole, found.explained) == (Fraction(1, 2), 5, Fraction(9, 10))


@pytest.mark.parametrize("trend", ["rising", "falling"])
@pytest.mark.parametrize("levels", [4, 1000])
def test_an_outside_program_agrees(trend: Trend, levels: int) -> None:
    """scipy.optimize.isotonic_regression with weights, either way."""
    rng = np.random.default_rng(levels)
    y, weights = rng.integers(0, levels, 80), rng.integers(1, 9, 80) / 4
    y = y + np.arange(80) * (levels // 100)
    expected = isotonic_regression(y, weights=weights, increasing=trend == "rising").x
    found = _fit(range(80), y, trend, weights)
    assert [float(value) for value in found.at(np.arange(80))] == pytest.approx(expected, rel=1e-12)
    left_over = float(np.sum(weights * (y - expected) ** 2))
    assert float(found.left_over) == pytest.approx(left_over, rel=1e-12)


def test_tied_rows_share_one_value_and_weigh_together() -> None:
    """The same as scipy’s fit of the weighted means of the tie groups, in whatever order the rows come."""
    rng = np.random.default_rng(5)
    x, y, weights = rng.integers(0, 12, 60), rng.normal(size=60), rng.integers(1, 5, 60)
    codes = np.unique(x)
    masses = np.array([weights[x == code].sum() for code in codes])
    means = np.array([np.average(y[x == code], weights=weights[x == code]) for code in codes])
    expected = isotonic_regression(means, weights=masses).x
    found = _fit(x, y, "rising", weights)
    assert [float(value) for value in found.at(codes)] == pytest.approx(expected, rel=1e-12)
    order = rng.permutation(60)
    assert _fit(x[order], y[order], "rising", weights[order]) == found


def test_a_weight_of_two_is_two_rows() -> None:
    """Whole weights and repeated rows are the same."""
    x, y, weights = [0, 1, 2, 3, 4], [3, 1, 2, 5, 4], [1, 3, 2, 1, 2]
    assert _fit(x, y, "rising", weights).steps == _fit(np.repeat(x, weights), np.repeat(y, weights)).steps


def test_no_other_monotone_curve_comes_closer() -> None:
    """Two thousand random rising curves, and the fit moved a little, all leave more over."""
    rng = np.random.default_rng(6)
    y = rng.normal(size=12) + np.arange(12) / 6
    found = _fit(range(12), y)
    best = np.array([float(value) for value in found.at(np.arange(12))])
    for _ in range(2000):
        other = np.sort(rng.normal(size=12)) if rng.random() < 0.5 else np.sort(best + rng.normal(0, 0.02, 12))
        assert float(found.left_over) < np.sum((y - other) ** 2)


def test_falling_is_rising_turned_over() -> None:
    """With y negated the steps are negated, and as much is left over."""
    y = np.random.default_rng(7).integers(0, 30, 40)
    rising, falling = _fit(range(40), y), _fit(range(40), -y, "falling")
    assert [step.value for step in falling.steps] == [-step.value for step in rising.steps]
    assert falling.left_over == rising.left_over


@pytest.mark.parametrize(("y", "trend"), [([1, 2, 4, 3], "rising"), ([4, 2, 3, 1], "falling"), ([1, 2, 1], "rising")])
def test_the_way_that_leaves_less_over_is_taken(y: list[int], trend: str) -> None:
    """Rising when both leave the same."""
    found = monotone_fit(np.arange(len(y)), y)
    assert isinstance(found, IsotonicFit)
    assert found.trend == trend


def test_a_level_column_is_one_step() -> None:
    """Nothing varies, so no share of anything is explained."""
    found = _fit(range(3), [2, 2, 2])
    assert (len(found.steps), found.explained) == (1, None)


def test_no_rows_and_wrong_weights() -> None:
    """Without rows there is a reason; weights of nought and columns of different length are refused."""
    none = np.zeros(0, dtype=np.int64)
    assert isotonic_fit(none, [], trend="rising") == monotone_fit(none, []) == NoAnswer("there are no complete rows")
    with pytest.raises(ValueError, match="weight"):
        _fit([0, 1], [1, 2], "rising", [1, 0])
    with pytest.raises(ValueError, match="differ in length"):
        _fit([0, 1], [1, 2, 3])
    with pytest.raises(ValueError, match="finite"):
        _fit([0, 1], [1, float("inf")])
