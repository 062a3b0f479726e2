"""Rows left out: the range of rho without one row, and the smallest set on which a finding hangs."""

from collections.abc import Hashable
from fractions import Fraction
from itertools import combinations

import numpy as np
import numpy.typing as npt
import pytest
from scipy import stats

from rankdocket.stats.leave_one_out import LeaveOneOut, leave_one_out
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes
from rankdocket.stats.removals import NoRemoval, Removal, SearchBounds, single_rows_that_change, smallest_removal
from rankdocket.stats.rho import rho

AMPLE = SearchBounds(most_rows=10, most_findings=20_000)


def _left_out(x: Codes, y: Codes) -> LeaveOneOut:
    found = leave_one_out(x, y)
    assert isinstance(found, LeaveOneOut)
    return found


def _is_half(x: Codes, y: Codes) -> bool:
    """A finding for tests: rho is at least one half."""
    found = rho(x, y)
    return found.is_defined and found.value >= 0.5


@pytest.mark.parametrize("levels", [3, 12, 500])
def test_each_coefficient_is_that_of_the_rows_that_remain(levels: int) -> None:
    """Ranked anew by scipy; lowest and highest are theirs."""
    rng = np.random.default_rng(levels)
    x, y = rng.integers(0, levels, (2, 30))
    found = _left_out(x, y)
    expected = [stats.spearmanr(np.delete(x, row), np.delete(y, row)).statistic for row in range(30)]
    assert [left.coefficient.value for left in found.without] == pytest.approx(expected, rel=1e-12)
    assert (found.lowest.row, found.highest.row) == (int(np.argmin(expected)), int(np.argmax(expected)))
    assert found.undefined == ()


def test_a_joint_maximum_lifts_a_coefficient_of_nought() -> None:
    """Nine rows with Σd² = 120 (rho = 0) and a joint maximum: 1 − 720/990 with it, 0 without it (by hand)."""
    x, y = np.arange(10), np.array([7, 5, 0, 3, 1, 8, 4, 2, 6, 9])
    assert rho(x, y).value == pytest.approx(1 - 720 / 990, rel=1e-14)
    found = _left_out(x, y)
    assert found.without[9].coefficient.numerator == 0
    assert found.lowest.coefficient.value <= 0 < found.highest.coefficient.value


def test_of_equal_coefficients_the_first_row_is_named() -> None:
    """In perfect order every row leaves the same."""
    found = _left_out(np.arange(6), np.arange(6))
    assert (found.lowest.row, found.highest.row, found.lowest.order_key) == (0, 0, Fraction(1))


def test_a_row_that_carries_all_variation_is_named() -> None:
    """Without it rho does not exist; without any row that does not, there is a reason instead."""
    lone = np.array([0, 0, 0, 0, 1])
    assert _left_out(lone, np.arange(5)).undefined == (4,)
    assert leave_one_out(np.array([0, 1]), np.array([0, 1])) == NoAnswer("without any one row a variable does not vary")
    assert leave_one_out(lone[:0], lone[:0]) == NoAnswer("there are no complete rows")


def _planted() -> tuple[Codes, Codes]:
    """Twenty rows in zigzag without order, and two rows far above all in both variables that make rho one half."""
    rng = np.random.default_rng(3)
    while True:
        x, y = np.arange(20), rng.permutation(20)
        x, y = np.append(x, [40, 41]), np.append(y, [40, 41])
        if _is_half(x, y) and not single_rows_that_change(x, y, _is_half):
            return x, y


def test_a_planted_pair_of_rows_is_found() -> None:
    """No single row changes the finding, two do; they are as few as the search of all sets says."""
    x, y = _planted()
    found = smallest_removal(x, y, _is_half, AMPLE)
    assert isinstance(found, Removal)
    assert (len(found.rows), found.how_sure, found.before, found.after) == (2, "exhaustive", True, False)
    assert not _is_half(np.delete(x, found.rows), np.delete(y, found.rows))
    changing = [rows for rows in combinations(range(22), 2) if not _is_half(np.delete(x, rows), np.delete(y, rows))]
    assert found.rows == changing[0]
    assert (20, 21) in changing


def test_step_by_step_finds_a_planted_pair_too() -> None:
    """Where only single rows may all be tried, two rows are still known to be the fewest; with nothing tried they are not."""
    x, y = _planted()
    after_singles = smallest_removal(x, y, _is_half, SearchBounds(most_rows=10, most_findings=22))
    assert isinstance(after_singles, Removal)
    assert (len(after_singles.rows), after_singles.how_sure, after_singles.tried) == (2, "exhaustive", 1)
    at_once = smallest_removal(x, y, _is_half, SearchBounds(most_rows=10, most_findings=0))
    assert isinstance(at_once, Removal)
    assert (len(at_once.rows), at_once.how_sure, at_once.tried) == (2, "upper bound", 0)


def test_rows_that_are_not_needed_come_back() -> None:
    """Whatever the path, every row of the set is needed: with any one of them back the finding is as before."""
    rng = np.random.default_rng(12)
    x = rng.permutation(60)
    y = x + rng.integers(-35, 35, 60)
    assert _is_half(x, y)
    found = smallest_removal(x, y, _is_half, SearchBounds(most_rows=40, most_findings=0))
    assert isinstance(found, Removal)
    assert len(found.rows) > 2
    for row in found.rows:
        others = tuple(other for other in found.rows if other != row)
        assert _is_half(np.delete(x, others), np.delete(y, others))


def test_a_finding_that_hangs_on_a_row_of_no_weight_is_brought_back_to_it() -> None:
    """The steps leave out weightier rows before the one that matters; all of those come back."""
    x = np.arange(12)
    y = np.array([4, 9, 0, 7, 2, 6, 5, 1, 8, 3, 11, 10])

    def least(x: Codes, y: Codes) -> Hashable:
        return int(np.abs(y - 6).min())

    left_out = _left_out(x, y)
    assert 5 not in (left_out.lowest.row, left_out.highest.row)
    found = smallest_removal(x, y, least, SearchBounds(most_rows=8, most_findings=0))
    assert found == Removal((5,), 0, 1, "exhaustive", 0)


def test_a_finding_may_change_upwards() -> None:
    """Rows that hide an association are found as well: a rising line and three rows against it."""
    x, y = np.arange(15), np.append(np.arange(2, 14), [-3, -2, -1])
    assert not _is_half(x, y)
    found = smallest_removal(x, y, _is_half, AMPLE)
    assert isinstance(found, Removal)
    assert (found.before, found.after, found.how_sure) == (False, True, "exhaustive")
    assert set(found.rows) <= {12, 13, 14}


def test_any_kind_of_finding_can_be_asked() -> None:
    """A finding is whatever can be told apart, such as a word."""

    def word(x: Codes, y: Codes) -> Hashable:
        return "rising" if rho(x, y).numerator > 0 else "not rising"

    x, y = np.arange(8), np.array([3, 2, 1, 0, -1, -2, 50, 60])
    assert single_rows_that_change(x, y, word) == (6, 7)
    assert smallest_removal(x, y, word, AMPLE) == Removal((6,), "rising", "not rising", "exhaustive", 0)


def test_a_finding_that_hangs_on_no_row_says_how_far_was_looked() -> None:
    """Perfect order stays perfect; the search keeps four rows at least."""
    x = np.arange(9)
    assert smallest_removal(x, x, _is_half, AMPLE) == NoRemoval(True, 3, 5)
    assert smallest_removal(x, x, _is_half, SearchBounds(2, 1000)) == NoRemoval(True, 2, 2)
    assert smallest_removal(x, x, _is_half, SearchBounds(9, 10)) == NoRemoval(True, 1, 5)


def test_more_than_forty_rows_try_all_single_rows_only() -> None:
    """Two and three at a time are left to the steps."""
    x = np.arange(41)
    assert smallest_removal(x, x, _is_half, AMPLE) == NoRemoval(True, 1, 10)


def test_too_few_rows_and_bounds_that_are_none() -> None:
    """Four rows leave nothing to search; bounds below their range are refused."""
    x = np.arange(4)
    assert smallest_removal(x, x, _is_half, AMPLE) == NoAnswer("the search leaves 4 rows or more, and there are only 4")
    for bounds in (SearchBounds(0, 10), SearchBounds(1, -1)):
        with pytest.raises(ValueError, match="bounds"):
            smallest_removal(np.arange(9), np.arange(9), _is_half, bounds)
    with pytest.raises(ValueError, match="differ in length"):
        smallest_removal(np.arange(9), np.arange(8), _is_half, AMPLE)


def test_the_finding_is_asked_for_candidates_only() -> None:
    """Sets that are known not to change it are passed over; what is found stays the same."""
    x, y = _planted()
    asked: list[int] = []

    def finding(x_left: Codes, y_left: Codes) -> bool:
        asked.append(len(x_left))
        return _is_half(x_left, y_left)

    def pairs_with_a_planted_row(sets: Codes) -> npt.NDArray[np.bool_]:
        return (sets == len(x) - 2).any(axis=1) & (sets.shape[1] == 2)

    found = smallest_removal(x, y, finding, AMPLE, pairs_with_a_planted_row)
    assert isinstance(found, Removal)
    assert found == smallest_removal(x, y, _is_half, AMPLE)
    assert len(asked) <= len(x) + 1


def test_tau_without_each_row_is_that_of_the_rows_that_remain() -> None:
    """Ranked anew by scipy."""
    rng = np.random.default_rng(6)
    x, y = rng.integers(0, 6, (2, 15))
    found = leave_one_out(x, y, "Kendall tau-b")
    assert isinstance(found, LeaveOneOut)
    expected = [stats.kendalltau(np.delete(x, row), np.delete(y, row)).statistic for row in range(15)]
    assert [left.coefficient.value for left in found.without] == pytest.approx(expected, rel=1e-12)
