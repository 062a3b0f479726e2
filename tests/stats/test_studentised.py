"""The studentised permutation test: against influence values, all orders of a few rows, and in simulation."""

from collections.abc import Callable
from fractions import Fraction
from itertools import permutations
from math import atanh, inf, sqrt

import numpy as np
import pytest

from rankdocket.stats.influence import influence_variance, is_perfect, rho_influence
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes
from rankdocket.stats.rho import rho
from rankdocket.stats.studentised import StudentisedTest, studentised_of_all_orders, studentised_test
from rankdocket.vocabulary import Direction

DIRECTIONS: tuple[Direction, ...] = ("greater", "less", "two-sided")


def _asked(x: Codes, y: Codes, draws: int = 999, seed: int = 1) -> StudentisedTest:
    found = studentised_test(x, y, draws=draws, generator=np.random.default_rng(seed))
    assert isinstance(found, StudentisedTest)
    return found


def _plain(x: Codes, y: Codes) -> float:
    """atanh(r)/(SE/(1 − r²)) from the influence values of stats/influence.py."""
    coefficient = rho(x, y)
    if is_perfect(coefficient):
        return inf if coefficient.numerator > 0 else -inf
    error = sqrt(influence_variance(rho_influence(x, y)))
    if error == 0:
        return inf * coefficient.numerator if coefficient.numerator else 0.0
    return atanh(coefficient.value) * (1 - coefficient.value**2) / error


@pytest.mark.parametrize("levels", [3, 6, 400])
@pytest.mark.parametrize("n", [4, 5, 21, 150])
def test_the_statistic_is_that_of_the_influence_values(levels: int, n: int) -> None:
    """atanh(r)/(SE/(1 − r²)) with ψ from another routine, ties and all."""
    rng = np.random.default_rng([levels, n])
    x, y = rng.integers(0, levels, (2, n))
    x[:2], y[:2] = (0, 1), (1, 0)
    found = _asked(x, y, draws=1)
    assert found.statistic == pytest.approx(_plain(x, y), rel=1e-11, abs=1e-13)
    assert found.standard_error == pytest.approx(sqrt(influence_variance(rho_influence(x, y))), rel=1e-11)


@pytest.mark.parametrize(
    ("x", "y"),
    [
        ((0, 1, 2, 3, 4, 5), (1, 0, 2, 4, 5, 3)),
        ((0, 0, 1, 1, 2, 3), (0, 1, 0, 2, 1, 2)),
        ((0, 1, 2, 3, 4, 5), (2, 0, 4, 1, 5, 3)),
    ],
)
def test_drawn_p_values_are_near_those_of_all_orders(x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """All 720 orders, one by one through the other routine; 20 000 draws come within five standard errors."""
    x_codes, y_codes = np.array(x), np.array(y)
    every = np.array([_plain(x_codes, y_codes[list(order)]) for order in permutations(range(6))])
    observed = _plain(x_codes, y_codes)
    near = 1e-9
    shares = {
        "greater": np.mean(every >= observed - near),
        "less": np.mean(every <= observed + near),
        "two-sided": np.mean(np.abs(every) >= abs(observed) - near),
    }
    found = _asked(x_codes, y_codes, draws=20_000)
    for direction in DIRECTIONS:
        share = shares[direction]
        assert float(found.tails.p(direction)) == pytest.approx(
            share, abs=5 * sqrt(share * (1 - share) / 20_000) + 1e-4
        )
    counted = studentised_of_all_orders(x_codes, y_codes)
    assert isinstance(counted, StudentisedTest)
    assert counted.statistic == found.statistic
    assert {way: counted.tails.p(way) for way in DIRECTIONS} == {
        way: Fraction(round(720 * shares[way]), 720) for way in DIRECTIONS
    }


def test_the_data_count_as_one_more_permutation() -> None:
    """p is (b + 1)/(B + 1); equal seeds give equal draws, and the number of draws is kept to."""
    rng = np.random.default_rng(8)
    x, y = rng.permutation(15), rng.permutation(15)
    found = _asked(x, y, draws=777)
    assert found.tails.of == 777
    assert found.tails.p("greater") == Fraction(found.tails.greater + 1, 778)
    assert _asked(x, y, draws=777) == found
    assert _asked(x, y, draws=777, seed=2) != found


def test_neither_the_order_of_the_rows_nor_the_scale_matters() -> None:
    """The same draws meet the same pairs, ties and all."""
    rng = np.random.default_rng(9)
    x, y = rng.integers(0, 6, (2, 30))
    order = rng.permutation(30)
    assert _asked(x[order], y[order]) == _asked(x, y) == _asked(3 * x - 50, y**3)


def test_a_variable_turned_over_changes_the_sign() -> None:
    """The statistic is negated and the tails change places, but for the draws."""
    rng = np.random.default_rng(10)
    x = rng.permutation(25)
    y = x + rng.integers(-15, 15, 25)
    found, turned = _asked(x, y, draws=4000), _asked(x, -y, draws=4000)
    assert found.statistic is not None
    assert turned.statistic == pytest.approx(-found.statistic, rel=1e-12)
    assert float(turned.tails.p("less")) == pytest.approx(float(found.tails.p("greater")), abs=0.02)
    assert found.tails.p("greater") < Fraction(1, 10) < found.tails.p("less")


@pytest.mark.parametrize("sign", [1, -1])
def test_perfect_order_is_beyond_every_bound(sign: int) -> None:
    """There is no finite statistic, and no order of ten rows in a thousand draws comes as far."""
    found = _asked(np.arange(10), sign * np.arange(10))
    assert (found.statistic, found.standard_error) == (None, 0)
    assert found.tails.p("two-sided") == Fraction(1, 1000)
    assert found.tails.p("greater" if sign > 0 else "less") == Fraction(1, 1000)
    assert found.tails.p("less" if sign > 0 else "greater") == 1


def test_a_rho_of_nought_is_as_far_as_nothing() -> None:
    """Every order is at least as far from 0."""
    found = _asked(np.arange(5), np.array([0, 2, 4, 2, 0]))
    assert found.statistic == 0
    assert found.tails.p("two-sided") == 1


def test_where_there_is_no_test_there_is_a_reason() -> None:
    """A constant variable, too few rows; no draws at all are refused."""
    generator = np.random.default_rng(0)
    level, three = np.zeros(6, dtype=np.int64), np.arange(3)
    assert studentised_test(np.arange(6), level, draws=9, generator=generator) == NoAnswer("a variable does not vary")
    assert studentised_of_all_orders(np.arange(9), np.arange(9)) == NoAnswer(
        "there are too many rows to go through all orders"
    )
    assert studentised_of_all_orders(np.arange(6), level) == NoAnswer("a variable does not vary")
    assert studentised_test(three, three, draws=9, generator=generator) == NoAnswer(
        "the test needs four or more complete rows"
    )
    with pytest.raises(ValueError, match="at least one permutation"):
        studentised_test(np.arange(6), np.arange(6), draws=0, generator=generator)


def _butterfly(x: np.ndarray, e: np.ndarray) -> np.ndarray:
    return (0.2 + np.abs(x) ** 1.5) * e


def _v_shape(x: np.ndarray, e: np.ndarray) -> np.ndarray:
    return np.abs(x) + 0.3 * e


@pytest.mark.slow
@pytest.mark.simulation
@pytest.mark.parametrize("shape", [_butterfly, _v_shape])
@pytest.mark.parametrize("n", [20, 50])
def test_the_level_is_kept_where_rho_is_nought_and_the_variables_depend(
    shape: Callable[[np.ndarray, np.ndarray], np.ndarray], n: int
) -> None:
    """Size 3.6 to 5.7 % at nominal 5 % (an independent simulation), within three standard errors of 4000 samples.

    The permutation test of rho itself, here with two null standard deviations, is well above its level on the same
    samples.
    """
    rng = np.random.default_rng([n, 17])
    samples = 4000
    rejected = plain = 0
    for _ in range(samples):
        x, e = rng.standard_normal((2, n))
        x_codes, y_codes = (np.argsort(np.argsort(column)) for column in (x, shape(x, e)))
        found = studentised_test(x_codes, y_codes, draws=399, generator=rng)
        assert isinstance(found, StudentisedTest)
        rejected += found.tails.p("two-sided") <= Fraction(1, 20)
        plain += abs(rho(x_codes, y_codes).value) * sqrt(n - 1) >= 1.96
    error = 3 * sqrt(0.05 * 0.95 / samples)
    assert 0.036 - error < rejected / samples < 0.057 + error
    assert plain / samples > 0.08
