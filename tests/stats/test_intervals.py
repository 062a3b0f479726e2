"""Intervals: the textbook form against printed values, the house form on examples."""

from decimal import Decimal
from math import atanh, sqrt, tanh

import numpy as np
import pytest

from rankdocket.stats.interval import Interval, IntervalQuestion, NoInterval
from rankdocket.stats.intervals import INTERVAL_METHODS, interval_of
from rankdocket.stats.intervals.bonett_wright import bonett_wright_limits, tie_cap
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.vocabulary import Direction

BONETT_X = np.array([67, 28, 30, 28, 52, 40, 25, 37, 44, 10, 14, 20, 28, 40, 51])
BONETT_Y = np.array([21, 4, 9, 12, 35, 18, 10, 22, 24, 1, 6, 8, 13, 16, 19])


def _interval(x: list[int], y: list[int], direction: Direction = "two-sided") -> Interval | NoInterval:
    x_codes, y_codes = np.array(x), np.array(y)
    return interval_of(IntervalQuestion(rho(x_codes, y_codes), x_codes, y_codes, Decimal("0.95"), direction))


def test_the_house_form_is_the_textbook_form_away_from_one() -> None:
    """D. G. Bonett's published example with n = 15 prints 0.5840951 and 0.9638297."""
    found = _interval(BONETT_X.tolist(), BONETT_Y.tolist())
    assert isinstance(found, Interval)
    assert (round(found.low, 7), round(found.high, 7), found.cap_binds) == (0.5840951, 0.9638297, False)
    textbook = bonett_wright_limits(rho(BONETT_X, BONETT_Y).value, 15, level="0.95")
    assert (textbook.low, textbook.high) == (found.low, found.high)


@pytest.mark.parametrize("n", [4, 7, 20])
def test_the_cap_without_ties_is_half_of_one_adjacent_swap(n: int) -> None:
    """Without ties the cap is 1 − 6/(n(n² − 1)); one swap of neighbours costs twice that."""
    assert tie_cap(np.arange(n), np.arange(n)) == pytest.approx(1 - 6 / (n * (n * n - 1)), rel=1e-14)


def test_the_cap_is_lower_when_the_ties_are_coarse() -> None:
    """Two halves against themselves: midranks 1.5 and 3.5 apart by 2, squares 4, so 1 − 2·2/(2·4) = 0.5."""
    assert tie_cap(np.array([0, 0, 1, 1]), np.array([0, 0, 1, 1])) == pytest.approx(0.5, rel=1e-15)


def test_the_cap_rests_on_the_widest_step_of_unequal_tie_groups() -> None:
    """Groups of 1, 1 and 6 have midranks 1, 2 and 5.5: the widest step is 3.5, the squares sum to 24.5 (by hand).

    So the cap against itself is 1 − 3.5²/(2·24.5) = 0.75; against eight untied rows, whose step is 1 and whose
    squares sum to 42, it is 1 − 3.5/(2√(24.5·42)).
    """
    grouped, untied = np.array([0, 1, 2, 2, 2, 2, 2, 2]), np.arange(8)
    assert tie_cap(grouped, grouped) == pytest.approx(0.75, rel=1e-15)
    assert tie_cap(grouped[::-1], grouped) == pytest.approx(0.75, rel=1e-15)
    mixed = 1 - 3.5 / (2 * sqrt(24.5 * 42))
    assert tie_cap(grouped, untied) == tie_cap(untied, grouped) == pytest.approx(mixed, rel=1e-15)


def test_the_cap_of_one_lone_row_and_of_two_rows() -> None:
    """Ten ties and a lone row: midranks 5.5 and 11, squares 27.5, so 1 − 5.5²/55 = 0.45; two rows leave 0 (by hand)."""
    lone = np.array([0] * 10 + [1])
    assert tie_cap(lone, lone) == pytest.approx(0.45, rel=1e-15)
    assert tie_cap(np.array([0, 1]), np.array([0, 1])) == pytest.approx(0, abs=1e-15)


def test_perfect_order_still_has_an_interval_with_width() -> None:
    """At rho = 1 the interval ends at 1 and begins where the cap less its half-width lies; −1 mirrors it."""
    cap = 1 - 6 / (10 * 99)
    half = 1.959963984540054 * sqrt((1 + cap * cap / 2) / 7)
    rising, falling = _interval(list(range(10)), list(range(10))), _interval(list(range(10)), list(range(10, 0, -1)))
    assert isinstance(rising, Interval)
    assert isinstance(falling, Interval)
    assert rising.low == pytest.approx(tanh(atanh(cap) - half), rel=1e-12)
    assert (rising.high, rising.cap_binds) == (1.0, True)
    assert (falling.low, falling.high, falling.cap_binds) == (-1.0, -rising.low, True)


def test_a_one_sided_bound_has_its_whole_error_on_one_side() -> None:
    """The lower bound at level 0.95 is the lower limit at level 0.90; the other end is 1, and the reverse."""
    x, y = BONETT_X.tolist(), BONETT_Y.tolist()
    greater, less = _interval(x, y, "greater"), _interval(x, y, "less")
    assert isinstance(greater, Interval)
    assert isinstance(less, Interval)
    both = bonett_wright_limits(rho(BONETT_X, BONETT_Y).value, 15, level="0.90")
    assert greater.low == pytest.approx(both.low, rel=1e-14)
    assert less.high == pytest.approx(both.high, rel=1e-14)
    assert (greater.high, less.low) == (1, -1)


@pytest.mark.parametrize(
    ("x", "y", "reason"),
    [
        ([1, 2, 3], [1, 3, 2], "fewer than four complete rows"),
        ([1, 1, 1, 1, 1], [1, 2, 3, 4, 5], "undefined"),
    ],
)
def test_there_is_not_always_an_interval(x: list[int], y: list[int], reason: str) -> None:
    """Too few rows or a constant variable give a reason instead."""
    found = _interval(x, y)
    assert isinstance(found, NoInterval)
    assert reason in found.reason


def test_tau_b_has_no_interval_yet() -> None:
    """For tau-b the absence of a rule is said."""
    x = np.arange(6)
    question = IntervalQuestion(tau_b(x, x), x, x, Decimal("0.95"), "two-sided")
    assert interval_of(question) == NoInterval("no interval is offered for tau-b yet")


@pytest.mark.parametrize(("r", "n", "level"), [(1.0, 10, "0.95"), (0.5, 3, "0.95"), (0.5, 10, "1")])
def test_the_textbook_form_refuses_what_it_cannot_answer(r: float, n: int, level: str) -> None:
    """A perfect coefficient, three rows or a level of 1 are refused."""
    with pytest.raises(ValueError, match=r"must lie|needs at least"):
        bonett_wright_limits(r, n, level=level)


def test_each_interval_rule_has_its_own_key() -> None:
    """Keys in the catalogue are distinct."""
    assert len({method.key for method in INTERVAL_METHODS}) == len(INTERVAL_METHODS)
