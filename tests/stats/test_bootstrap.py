"""Resamples of rho: against ranking anew, and their limits against a general library’s on the same resamples."""

from decimal import Decimal

import numpy as np
import pytest
from scipy import stats

from rankdocket.errors import ComputeError
from rankdocket.stats.bootstrap import NoLimits, bca_limits, resampled_rho, rho_of_counts, row_kinds
from rankdocket.stats.influence import rho_without_each
from rankdocket.stats.interval import Interval, IntervalQuestion, NoInterval, Resampled, Resampling
from rankdocket.stats.intervals import interval_by
from rankdocket.stats.rho import rho
from rankdocket.vocabulary import Direction


def _sample(n: int, *, tied: bool) -> tuple[np.ndarray, np.ndarray]:
    rng = np.random.default_rng(n)
    x = rng.standard_normal(n)
    y = 0.6 * x + 0.8 * rng.standard_normal(n)
    if tied:
        x, y = np.round(x), np.round(y)
    return tuple(np.unique(values, return_inverse=True)[1] for values in (x, y))


def _bootstrap(
    x: np.ndarray, y: np.ndarray, *, seed: int = 1, resamples: int = 999, direction: Direction = "two-sided"
) -> Interval | NoInterval:
    plan = Resampling(resamples, np.random.default_rng(seed))
    return interval_by("BCa bootstrap", IntervalQuestion(rho(x, y), x, y, Decimal("0.95"), direction, plan))


def _counts(x: np.ndarray, y: np.ndarray, drawn: np.ndarray) -> np.ndarray:
    """How often rows of each kind stand in each row of ``drawn``, in columns."""
    kinds = row_kinds(x, y)
    return np.array([np.bincount(kinds.kind[rows], minlength=kinds.number) for rows in drawn], dtype=np.int64).T


@pytest.mark.parametrize("tied", [False, True])
def test_rho_of_counts_is_rho_of_the_repeated_rows(tied: bool) -> None:
    """Ranking every resample anew, in integers, gives the same coefficient to the last digits.

    The one resample of a single row is left out.
    """
    x, y = _sample(25, tied=tied)
    drawn = np.random.default_rng(0).integers(0, 25, (200, 25))
    drawn[7] = 3
    found = rho_of_counts(row_kinds(x, y), _counts(x, y, drawn))
    drawn = np.delete(drawn, 7, axis=0)
    assert found == pytest.approx([rho(x[rows], y[rows]).value for rows in drawn], abs=4e-16)


@pytest.mark.parametrize("tied", [False, True])
def test_narrow_integers_hold_every_sum_as_far_as_they_are_used(tied: bool) -> None:
    """At 1290 rows 32 bits give the same coefficients as 64, one row drawn 1289 times and one 645 times included."""
    x, y = _sample(1_290, tied=tied)
    drawn = np.random.default_rng(4).integers(0, 1_290, (20, 1_290))
    far = int(np.argmax(x))
    drawn[0] = [int(np.argmin(x))] * 1_289 + [far]
    drawn[1] = [int(np.argmin(x))] * 645 + [far] * 645
    counts, kinds = _counts(x, y, drawn), row_kinds(x, y)
    wide = rho_of_counts(kinds, counts)
    assert len(wide) == 20
    assert np.array_equal(rho_of_counts(kinds, counts.astype(np.int32)), wide)


def test_rows_of_one_kind_have_equal_values_of_both_variables() -> None:
    """Kinds are numbered in the order of x and then of y."""
    kinds = row_kinds(np.array([5, 3, 5, 3, 5]), np.array([1, 2, 1, 0, 0]))
    assert (kinds.kind.tolist(), kinds.number) == ([3, 1, 3, 0, 2], 4)


@pytest.mark.parametrize("n", [20, 300])
def test_resamples_draw_every_row_alike(n: int) -> None:
    """Over resamples rho spreads as it does when rows are drawn and ranked anew: mean and spread within 5 errors."""
    x, y = _sample(n, tied=True)
    found = resampled_rho(x, y, Resampling(4_000, np.random.default_rng(9))).values
    drawn = np.random.default_rng(10).integers(0, n, (4_000, n))
    anew = rho_of_counts(row_kinds(x, y), _counts(x, y, drawn))
    assert found.mean() == pytest.approx(anew.mean(), abs=5 * anew.std() * np.sqrt(2 / 4_000))
    assert found.std() == pytest.approx(anew.std(), rel=5 / np.sqrt(4_000))


def test_equal_seeds_give_equal_resamples() -> None:
    """The generator decides everything; another one gives other resamples."""
    x, y = _sample(300, tied=True)
    first, second, other = (resampled_rho(x, y, Resampling(500, np.random.default_rng(seed))) for seed in (3, 3, 4))
    assert np.array_equal(first.values, second.values)
    assert not np.array_equal(first.values, other.values)
    assert (first.drawn, first.undefined, len(first.values)) == (500, 0, 500)


def test_resamples_in_which_a_variable_does_not_vary_are_left_out_and_counted() -> None:
    """A lone row among ten is never or always drawn with probability .9¹⁰ + .1¹⁰ = .3487: within 4 standard errors."""
    x, y = np.array([0] * 9 + [1]), np.arange(10)
    found = resampled_rho(x, y, Resampling(10_000, np.random.default_rng(5)))
    assert not np.isnan(found.values).any()
    assert found.undefined / 10_000 == pytest.approx(0.9**10 + 0.1**10, abs=4 * np.sqrt(0.35 * 0.65 / 10_000))
    assert len(found.values) + found.undefined == found.drawn


@pytest.mark.parametrize("tied", [False, True])
@pytest.mark.parametrize("n", [12, 30])
def test_limits_agree_with_a_general_library_on_the_same_resamples(n: int, tied: bool) -> None:
    """scipy.stats.bootstrap (BCa), given our resamples, sets the same limits; its jackknife ranks anew."""
    x, y = _sample(n, tied=tied)
    values = resampled_rho(x, y, Resampling(1_999, np.random.default_rng(6))).values

    def statistic(one: np.ndarray, other: np.ndarray) -> float:
        return float(stats.spearmanr(one, other).statistic)

    ready = stats._resampling.BootstrapResult(None, values, None)
    theirs = stats.bootstrap(
        (x, y), statistic, paired=True, vectorized=False, n_resamples=0, bootstrap_result=ready, method="BCa"
    ).confidence_interval
    ours = bca_limits(values, rho(x, y).value, rho_without_each(x, y).values, 0.025)
    assert ours == pytest.approx((theirs.low, theirs.high), abs=1e-9)


@pytest.mark.parametrize(("tied", "limits"), [(False, (0.2454, 0.8158)), (True, (0.1937, 0.7385))])
def test_limits_lie_where_others_found_them(tied: bool, limits: tuple[float, float]) -> None:
    """Means over 12 seeds measured by an independent prototype; one seed to the next they differ by .002 to .006."""
    found = _bootstrap(*_sample(30, tied=tied), resamples=9_999)
    assert isinstance(found, Interval)
    assert (found.low, found.high) == pytest.approx(limits, abs=0.018)
    assert found.resampled == Resampled(9_999, 0)


def test_a_bootstrap_bound_is_a_limit_that_leaves_twice_the_error() -> None:
    """The lower bound at 0.95 is the lower limit at 0.90 of the same resamples; the interval ends at 1."""
    x, y = _sample(30, tied=False)
    plan = Resampling(999, np.random.default_rng(1))
    both = interval_by("BCa bootstrap", IntervalQuestion(rho(x, y), x, y, Decimal("0.90"), "two-sided", plan))
    greater, less = _bootstrap(x, y, direction="greater"), _bootstrap(x, y, direction="less")
    assert isinstance(both, Interval)
    assert isinstance(greater, Interval)
    assert isinstance(less, Interval)
    assert (greater.low, greater.high) == (both.low, 1)
    assert (less.low, less.high) == (-1, both.high)


def test_perfect_order_has_no_bootstrap_interval() -> None:
    """Every resample in which both vary has rho = 1, so nothing can be said; the same for −1."""
    reason = "no bootstrap interval exists because all resamples give the same coefficient"
    assert _bootstrap(np.arange(8), np.arange(8)) == NoInterval(reason)
    assert _bootstrap(np.arange(8), -np.arange(8)) == NoInterval(reason)


def test_a_bootstrap_interval_needs_planned_resamples_and_rows_that_share_the_variation() -> None:
    """Without a plan nothing is drawn; a lone row leaves no acceleration."""
    x, y = _sample(12, tied=False)
    unplanned = interval_by("BCa bootstrap", IntervalQuestion(rho(x, y), x, y, Decimal("0.95"), "two-sided"))
    assert unplanned == NoInterval("no bootstrap interval exists because no resamples are planned")
    lone = _bootstrap(np.array([0, 0, 0, 0, 0, 1]), np.arange(6))
    assert lone == NoInterval("no bootstrap interval exists because one row carries all variation of a variable")


@pytest.mark.parametrize(
    ("values", "r", "without", "reason"),
    [
        ([0.1] * 20 + [0.2] * 19, 0.1, [0.1, 0.2], "too few resamples"),
        ([0.1] * 50, 0.1, [0.1, 0.2], "all resamples give the same coefficient"),
        ([0.1] * 25 + [0.2] * 25, 0.3, [0.1, 0.2], "on one side"),
        ([0.1] * 998 + [0.2] * 2, 0.1, [0.1, 0.2], "nearly all"),
        ([0.1] * 99_999 + [0.9], 0.5, [-0.9] + [0.5] * 999, "acceleration is too large"),
    ],
)
def test_resamples_that_set_no_limits_say_why(values: list[float], r: float, without: list[float], reason: str) -> None:
    """Too few, all alike, all on one side, alike between the limits, or a correction that has no value."""
    found = bca_limits(np.array(values), r, np.array(without), 0.025)
    assert isinstance(found, NoLimits)
    assert reason in found.reason


def test_resamples_of_two_values_have_them_as_limits() -> None:
    """Without bias and acceleration the limits are plain shares of the resamples."""
    assert bca_limits(np.array([0.1, 0.3] * 30), 0.2, np.array([0.1, 0.3]), 0.025) == (0.1, 0.3)


def test_more_rows_than_exact_sums_allow_are_refused() -> None:
    """Above two million rows n³ could exceed an int64."""
    x = np.arange(2_000_001)
    with pytest.raises(ComputeError, match="too many rows"):
        resampled_rho(x, x, Resampling(1, np.random.default_rng(1)))
