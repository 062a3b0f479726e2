"""Laws that every interval rule keeps, on samples with ties of every kind."""

from decimal import Decimal
from typing import get_args

import numpy as np
import pytest

from rankdocket.stats.interval import Interval, IntervalMethod, NoInterval
from rankdocket.stats.intervals import INTERVAL_METHODS
from rankdocket.vocabulary import Direction
from stats.interval_questions import BONETT, JACKKNIFE, Y12, Asked, by, given

DIRECTIONS: tuple[Direction, ...] = get_args(Direction)


def _hard_samples() -> list[tuple[list[int], list[int]]]:
    """Small samples with ties of every kind, perfect order and lone rows among them."""
    rng = np.random.default_rng(12)
    samples = []
    for _ in range(150):
        n, levels = int(rng.integers(2, 15)), int(rng.integers(2, 16))
        x = rng.integers(0, levels, n)
        samples += [(x.tolist(), y.tolist()) for y in (rng.integers(0, levels, n), x + rng.integers(0, 2, n), x, -x)]
    return samples


@pytest.mark.parametrize("method", INTERVAL_METHODS, ids=lambda method: method.key)
def test_every_rule_answers_every_sample(method: IntervalMethod) -> None:
    """An interval within −1 to 1, of some width, around the coefficient or its cap, or a reason; never a NaN."""
    count = 0
    for x, y in _hard_samples():
        for direction in DIRECTIONS:
            for name in method.coefficients:
                found = by(method.key, x, y, Asked("0.95", direction, name))
                if isinstance(found, NoInterval):
                    assert found.reason
                    continue
                count += 1
                assert len(x) >= 4
                assert -1 <= found.low < found.high <= 1
                assert (found.method, found.direction, found.level) == (method.key, direction, Decimal("0.95"))
                assert found.low == -1 or direction != "less"
                assert found.high == 1 or direction != "greater"
    assert count > 400


@pytest.mark.parametrize("key", [method.key for method in INTERVAL_METHODS if method.key != "BCa bootstrap"])
def test_turning_a_variable_round_mirrors_the_interval(key: str) -> None:
    """The interval of x and −y is that of x and y with its ends exchanged and negated; x and y may change places."""
    name = next(method.coefficients[0] for method in INTERVAL_METHODS if method.key == key)
    for x, y in _hard_samples()[::5]:
        found = by(key, x, y, Asked(coefficient=name))
        mirrored = by(key, x, [-value for value in y], Asked(coefficient=name))
        exchanged = by(key, y, x, Asked(coefficient=name))
        if isinstance(found, NoInterval):
            assert found == mirrored == exchanged
            continue
        assert isinstance(mirrored, Interval)
        assert isinstance(exchanged, Interval)
        assert (-mirrored.high, -mirrored.low) == pytest.approx((found.low, found.high), abs=1e-12)
        assert (exchanged.low, exchanged.high) == pytest.approx((found.low, found.high), abs=1e-12)


@pytest.mark.parametrize("key", [method.key for method in INTERVAL_METHODS if method.key != "BCa bootstrap"])
def test_a_bound_is_a_limit_of_the_interval_that_leaves_twice_the_error(key: str) -> None:
    """The lower bound at 0.95 is the lower limit at 0.90, guard and all, by every rule."""
    name = next(method.coefficients[0] for method in INTERVAL_METHODS if method.key == key)
    for y in (Y12, list(range(12))):
        both = given(key, range(12), y, Asked("0.90", "two-sided", name))
        greater = given(key, range(12), y, Asked("0.95", "greater", name))
        less = given(key, range(12), y, Asked("0.95", "less", name))
        assert (greater.low, greater.high) == (pytest.approx(both.low, rel=1e-12), 1)
        assert (less.low, less.high) == (-1, pytest.approx(both.high, rel=1e-12))


def test_the_guarded_jackknife_is_never_narrower_than_bonett_wright() -> None:
    """Its limits lie at those of Bonett and Wright or further out, for ties of every kind."""
    compared = 0
    for x, y in _hard_samples():
        own, other = by(JACKKNIFE, x, y), by(BONETT, x, y)
        if isinstance(other, NoInterval):
            assert own == other
            continue
        assert isinstance(own, Interval)
        assert own.low <= other.low
        assert own.high >= other.high
        compared += 1
    assert compared > 200


def test_a_level_of_many_nines_still_gives_numbers() -> None:
    """So little error is left that every limit is −1 or 1, or a double next to it; none is a NaN."""
    level = "0." + "9" * 400
    for method in INTERVAL_METHODS:
        found = by(method.key, range(12), Y12, Asked(level, "two-sided", method.coefficients[0]))
        assert isinstance(found, NoInterval) or -1 <= found.low < found.high <= 1
